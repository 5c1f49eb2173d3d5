//! The little typesetting that plain text needs: "S_Hmax" gets its subscript, "-12.3" a true minus
//! sign, and everything is escaped.

/// A piece of text, on the line or below it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Run {
    /// The text, not escaped.
    pub text: String,
    /// Whether it is a subscript.
    pub lowered: bool,
}

/// How small a subscript is beside its letter.
pub(super) const LOWERED: f64 = 0.74;

/// A text in runs. A subscript is what follows an underscore after one or two letters ("S_Hmax",
/// "σ'_1", "Δp_w"); a file name keeps its underscores.
pub(super) fn runs(text: &str) -> Vec<Run> {
    split(text, 2)
}

/// A symbol in runs: the first underscore begins the subscript whatever stands before it.
pub(super) fn symbol_runs(symbol: &str) -> Vec<Run> {
    match symbol.split_once('_') {
        Some((base, below)) if !base.is_empty() && !below.is_empty() => {
            vec![
                Run { text: true_minus(base), lowered: false },
                Run { text: true_minus(&below.replace('_', " ")), lowered: true },
            ]
        }
        _ => vec![Run { text: true_minus(symbol), lowered: false }],
    }
}

fn split(text: &str, longest_base: usize) -> Vec<Run> {
    let chars: Vec<char> = true_minus(text).chars().collect();
    let at = |i: usize| chars.get(i).copied();
    let mut out: Vec<Run> = Vec::new();
    let mut plain = String::new();
    let mut i = 0;
    while let Some(c) = at(i) {
        if c == '_' && base_length(&chars, i).is_some_and(|n| n <= longest_base) {
            let below: String = chars.iter().skip(i + 1).take_while(|c| in_subscript(**c)).collect();
            let end = i + 1 + below.chars().count();
            let goes_on =
                at(end) == Some('_') || (at(end) == Some('.') && at(end + 1).is_some_and(char::is_alphanumeric));
            if !below.is_empty() && !goes_on {
                out.push(Run { text: std::mem::take(&mut plain), lowered: false });
                out.push(Run { text: below, lowered: true });
                i = end;
                continue;
            }
        }
        plain.push(c);
        i += 1;
    }
    if !plain.is_empty() || out.is_empty() {
        out.push(Run { text: plain, lowered: false });
    }
    out.retain(|r| !r.text.is_empty() || !r.lowered);
    out
}

/// Letters and digits belong to a subscript; a raised digit ("σ_n²") does not.
fn in_subscript(c: char) -> bool {
    let raised = matches!(c, '²' | '³' | '¹' | '\u{2070}'..='\u{207f}');
    (c.is_alphanumeric() && !raised) || is_prime(c)
}

fn is_prime(c: char) -> bool {
    matches!(c, '\'' | '′')
}

/// How many letters stand before the underscore at `i`, when they are a word of their own.
fn base_length(chars: &[char], i: usize) -> Option<usize> {
    let before: Vec<char> = chars.iter().take(i).rev().skip_while(|c| is_prime(**c)).copied().collect();
    let letters = before.iter().take_while(|c| c.is_alphabetic()).count();
    let first = letters.checked_sub(1).and_then(|n| before.get(n));
    let stands_free = match before.get(letters) {
        // A ratio of symbols ("S_Hmax/S_v"), not a path ("data/kf_survey").
        Some('/') => first.is_some_and(|c| c.is_uppercase() || !c.is_ascii()),
        Some(c) => !(c.is_alphanumeric() || matches!(c, '_' | '\\' | '.')),
        None => true,
    };
    (letters > 0 && stands_free).then_some(letters)
}

/// Every hyphen that is the sign of a number becomes a minus sign (U+2212); hyphens inside names
/// ("KF-3"), dates and exponents stay.
pub(super) fn true_minus(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut before: Option<char> = None;
    let mut rest = text.chars().peekable();
    while let Some(c) = rest.next() {
        let sign = c == '-'
            && rest.peek().is_some_and(|n| n.is_ascii_digit())
            && before.is_none_or(|b| {
                b.is_whitespace() || matches!(b, '(' | '[' | '=' | '<' | '>' | '≤' | '≥' | '±' | '≈' | '·' | '×')
            });
        out.push(if sign { '−' } else { c });
        before = Some(c);
    }
    out
}

/// Escaped for HTML and XML, in text and in attributes. Characters that XML 1.0 does not allow are
/// left out.
pub(super) fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '&' => out.push_str("&amp;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            '\t' | '\n' | '\r' => out.push(c),
            c if c.is_control() || matches!(c, '\u{fffe}' | '\u{ffff}') => {}
            c => out.push(c),
        }
    }
    out
}

/// Runs as HTML with `<sub>`, escaped.
pub(super) fn runs_html(runs: &[Run]) -> String {
    runs.iter().map(|r| if r.lowered { format!("<sub>{}</sub>", escape(&r.text)) } else { escape(&r.text) }).collect()
}

/// An estimate of how wide a text is, in em of its size, on the wide side of the sans serifs that
/// may be found to draw it.
pub(super) fn ems(text: &str) -> f64 {
    text.chars()
        .map(|c| match c {
            'i' | 'j' | 'l' | 'I' | '.' | ',' | ':' | ';' | '\'' | '|' | '!' | '′' => 0.29,
            'f' | 't' | 'r' | '(' | ')' | '[' | ']' | '-' | '°' | '/' | ' ' => 0.38,
            'm' | 'w' | 'M' | 'W' | '—' | '…' | '½' => 0.95,
            c if c.is_ascii_digit() => 0.63,
            c if c.is_uppercase() => 0.72,
            c if (c as u32) >= 0x2e80 => 1.05,
            _ => 0.61,
        })
        .sum()
}

/// The same for runs.
pub(super) fn runs_ems(runs: &[Run]) -> f64 {
    runs.iter().map(|r| ems(&r.text) * if r.lowered { LOWERED } else { 1.0 }).sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn html(text: &str) -> String {
        runs_html(&runs(text))
    }

    #[test]
    fn lowers_what_follows_a_symbol_and_nothing_else() {
        assert_eq!(html("S_v = 66.9 MPa"), "S<sub>v</sub> = 66.9 MPa");
        assert_eq!(html("S_Hmax, σ_θ and Δp_w."), "S<sub>Hmax</sub>, σ<sub>θ</sub> and Δp<sub>w</sub>.");
        assert_eq!(html("τ² = t² − σ_n²"), "τ² = t² − σ<sub>n</sub>²");
        assert_eq!(html("S_Hmax/S_v"), "S<sub>Hmax</sub>/S<sub>v</sub>");
        assert_eq!(html("σ'_1 ≥ σ'_3"), "σ&#39;<sub>1</sub> ≥ σ&#39;<sub>3</sub>");
        for name in [
            "data/kf_survey.csv",
            "data/kf_survey",
            "kf3_survey",
            "density_log",
            "a_b_c",
            "ab_cd.csv",
            "_x",
            "S_ v",
            "x_",
        ] {
            assert!(!html(name).contains("<sub>"), "{name}");
        }
        assert_eq!(runs_html(&symbol_runs("UCS_lab_2")), "UCS<sub>lab 2</sub>");
        assert_eq!(runs(""), vec![Run { text: String::new(), lowered: false }]);
    }

    #[test]
    fn only_signs_of_numbers_become_minus_signs() {
        assert_eq!(true_minus("-12.3 MPa, (-4) and x = -5"), "−12.3 MPa, (−4) and x = −5");
        assert_eq!(true_minus("KF-3, 2026-05-01, 1e-9, 10-20"), "KF-3, 2026-05-01, 1e-9, 10-20");
    }

    #[test]
    fn escapes_markup_and_drops_what_xml_forbids() {
        assert_eq!(
            escape("<script>\"a\" & 'b'\u{0}\u{7}</script>"),
            "&lt;script&gt;&quot;a&quot; &amp; &#39;b&#39;&lt;/script&gt;"
        );
        assert_eq!(html("S_<b"), "S_&lt;b");
    }
}
