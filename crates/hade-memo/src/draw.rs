//! Figures as SVG.

use hade::card::Figure;
use hade::show::{Theme, svg};

/// The figure, drawn for print.
pub(crate) fn for_print(figure: &Figure) -> String {
    svg(figure, Theme::Print)
}
