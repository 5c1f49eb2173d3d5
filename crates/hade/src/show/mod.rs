//! Draws what results say: a card or a sheet as plain text and as HTML, a figure as SVG, for a
//! notebook on a light or a dark ground and for paper.
//!
//! Nothing here computes. Everything shown is in the [`Card`](crate::card::Card) or the
//! [`Record`](crate::sheet::Record) already, so the notebook and the memo cannot differ. Every text
//! of a card is escaped on its way into HTML or SVG; there are no scripts, style sheets, ids or
//! classes in the HTML, because a notebook that is not trusted removes them.
//!
//! It does not typeset mathematics (formulas appear as their plain text) and reads no fonts (the
//! width of a label is estimated, on the wide side).

mod base64;
mod cividis;
mod html;
mod lists;
mod notebook;
mod quantities;
mod results;
#[cfg(test)]
mod sample;
mod svg;
mod text;
mod theme;
mod typeset;
mod values;

pub use html::{card_html, figure_html, sheet_html};
pub use notebook::{NotebookDisplay, Show};
pub use svg::svg;
pub use text::{card_text, sheet_text};
pub use theme::Theme;
