//! Figures as SVG.

use hade::card::Figure;

/// The figure, drawn for print.
pub(crate) fn svg(figure: &Figure) -> String {
    let label = |text: &str| text.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;");
    format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 400 240\" width=\"400\" height=\"240\">\
         <rect x=\"40\" y=\"10\" width=\"350\" height=\"190\" fill=\"none\" stroke=\"#555\"/>\
         <text x=\"215\" y=\"228\" font-family=\"Inter\" font-size=\"11\" text-anchor=\"middle\">{}</text>\
         <text x=\"44\" y=\"24\" font-family=\"Inter\" font-size=\"11\">{}</text></svg>",
        label(&figure.x.label),
        label(&figure.y.label)
    )
}
