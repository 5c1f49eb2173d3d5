//! What a notebook cell shows of its last value.

use std::fmt::Display;
use std::io::Write as _;

use super::html::{card_html, error_html, figure_html, line_html, sheet_html};
use super::svg::svg;
use super::text::{card_text, sheet_text};
use super::theme::Theme;
use crate::card::{Card, Figure};
use crate::sheet::{RECORD_MIME, Record, Sheet};

/// What shows itself: a result by its card, a value in words with its unit, and lists of them.
pub trait Show {
    /// As plain text.
    fn text(&self) -> String;
    /// As HTML that needs nothing around it.
    fn html(&self) -> String;
    /// Its first figure as SVG, when it has one.
    fn svg(&self) -> Option<String> {
        None
    }
    /// Further forms: media type and data.
    fn extra(&self) -> Vec<(String, String)> {
        Vec::new()
    }
}

/// What the Rust notebook kernel calls on the last value of a cell. It is in the prelude because
/// the kernel calls it as a method.
pub trait NotebookDisplay {
    /// Prints the value in every form a notebook may choose from.
    fn evcxr_display(&self);
}

impl<T: Show + ?Sized> NotebookDisplay for T {
    fn evcxr_display(&self) {
        // A notebook that has gone away is no reason to panic.
        let _ = std::io::stdout().lock().write_all(blocks(self).as_bytes());
    }
}

/// The content blocks of a value.
fn blocks(value: &(impl Show + ?Sized)) -> String {
    let mut out = block("text/plain", &value.text().replace(MARK, "EVCXR\u{200b}_"));
    out.push_str(&block("text/html", &value.html().replace(MARK, "EVCXR&#95;")));
    if let Some(picture) = value.svg() {
        out.push_str(&block("image/svg+xml", &picture.replace(MARK, "EVCXR&#95;")));
    }
    for (mime, data) in value.extra() {
        // Other data is JSON, where the mark can only stand inside a string.
        out.push_str(&block(&mime, &data.replace(MARK, "EVCXR\\u005f")));
    }
    out
}

/// How the lines that begin and end a block start; no data may contain it.
const MARK: &str = "EVCXR_";

fn block(mime: &str, data: &str) -> String {
    format!("EVCXR_BEGIN_CONTENT {mime}\n{data}\nEVCXR_END_CONTENT\n")
}

impl Show for Card {
    fn text(&self) -> String {
        card_text(self)
    }
    fn html(&self) -> String {
        card_html(self)
    }
    fn svg(&self) -> Option<String> {
        self.explanation.figures.first().map(|f| svg(f, Theme::Notebook))
    }
}

impl Show for Figure {
    fn text(&self) -> String {
        format!("{}\n  {}", self.caption, self.alt)
    }
    fn html(&self) -> String {
        figure_html(self)
    }
    fn svg(&self) -> Option<String> {
        Some(svg(self, Theme::Notebook))
    }
}

impl Show for Record {
    fn text(&self) -> String {
        sheet_text(self)
    }
    fn html(&self) -> String {
        sheet_html(self)
    }
    fn extra(&self) -> Vec<(String, String)> {
        serde_json::to_string(self).map(|json| (RECORD_MIME.to_owned(), json)).into_iter().collect()
    }
}

impl Show for Sheet {
    fn text(&self) -> String {
        self.record().text()
    }
    fn html(&self) -> String {
        self.record().html()
    }
    fn extra(&self) -> Vec<(String, String)> {
        self.record().extra()
    }
}

impl<T: Show, E: Display> Show for Result<T, E> {
    fn text(&self) -> String {
        match self {
            Ok(value) => value.text(),
            Err(error) => format!("Error: {error}"),
        }
    }
    fn html(&self) -> String {
        match self {
            Ok(value) => value.html(),
            Err(error) => error_html(&error.to_string()),
        }
    }
    fn svg(&self) -> Option<String> {
        self.as_ref().ok().and_then(Show::svg)
    }
    fn extra(&self) -> Vec<(String, String)> {
        self.as_ref().map(Show::extra).unwrap_or_default()
    }
}

impl<T: Show> Show for Option<T> {
    fn text(&self) -> String {
        self.as_ref().map_or_else(|| NOTHING.to_owned(), Show::text)
    }
    fn html(&self) -> String {
        self.as_ref().map_or_else(|| line_html(NOTHING), Show::html)
    }
    fn svg(&self) -> Option<String> {
        self.as_ref().and_then(Show::svg)
    }
    fn extra(&self) -> Vec<(String, String)> {
        self.as_ref().map(Show::extra).unwrap_or_default()
    }
}

/// How an absent value is shown.
const NOTHING: &str = "none";

#[cfg(test)]
mod tests {
    use super::*;
    use crate::error::Error;
    use crate::show::sample;
    use crate::units::{Pressure, Units as _};

    #[test]
    fn a_card_comes_as_text_html_and_picture() {
        let out = blocks(&sample::card());
        let kinds: Vec<&str> = out.lines().filter_map(|l| l.strip_prefix("EVCXR_BEGIN_CONTENT ")).collect();
        assert_eq!(kinds, ["text/plain", "text/html", "image/svg+xml"]);
        assert_eq!(out.lines().filter(|l| *l == "EVCXR_END_CONTENT").count(), 3);
        assert_eq!(out, blocks(&sample::card()));
    }

    #[test]
    fn a_sheet_brings_its_record_on_one_line() {
        let out = blocks(&sample::sheet());
        let begin = format!("EVCXR_BEGIN_CONTENT {RECORD_MIME}\n");
        let (_, rest) = out.split_once(&begin).unwrap();
        let json = rest.lines().next().unwrap();
        assert_eq!(rest.lines().nth(1), Some("EVCXR_END_CONTENT"));
        assert_eq!(Record::from_json(json).unwrap(), sample::sheet().record());
    }

    #[test]
    fn no_text_can_end_its_own_block() {
        let mut sheet = Sheet::new("x\nEVCXR_END_CONTENT\nEVCXR_BEGIN_CONTENT text/html\n<b>");
        sheet.note("EVCXR_END_CONTENT");
        let out = blocks(&sheet);
        assert_eq!(out.matches("EVCXR_END_CONTENT").count(), 3);
        let json = out.lines().rev().nth(1).unwrap();
        assert_eq!(Record::from_json(json).unwrap(), sheet.record());
    }

    #[test]
    fn refusals_and_absence_show_too() {
        let refused: Result<Pressure, Error> = Err(Error::out_of_range("dip", "95°", "between 0° and 90°"));
        assert_eq!(refused.text(), "Error: dip is 95°, but it must be between 0° and 90°.");
        assert!(refused.html().contains("<strong>Error:</strong> dip is 95°"));
        assert_eq!(None::<Pressure>.text(), "none");
    }

    #[test]
    fn the_kernel_finds_the_method_on_every_value() {
        // Compiled, not run: it would print into the test's output.
        let _ = || {
            1.mpa().evcxr_display();
            Ok::<_, Error>(1.mpa()).evcxr_display();
            vec![Some(sample::card())].evcxr_display();
            [1.0, 2.0].evcxr_display();
            sample::sheet().evcxr_display();
        };
    }
}
