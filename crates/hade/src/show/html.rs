//! Cards, sheets and figures as HTML, from the templates beside this file.
//!
//! The HTML keeps to what a notebook shows even when it is not trusted: inline styles, tables,
//! `<details>`, and figures as `<img>` with the picture inside. It sets no text colour, so it reads on light
//! and on dark pages; its lines and grounds are translucent greys.

use std::sync::OnceLock;

use serde::Serialize;
use tera::{Context, Kwargs, State, StringInput, Tera, Value};

use super::base64;
use super::svg::svg;
use super::text;
use super::theme::Theme;
use super::typeset::{escape, runs, runs_html, symbol_runs, true_minus};
use crate::card::{Card, Column, Figure, Item, Method, Step, Table};
use crate::sheet::{Basis, Entry, Record};
use crate::units::fixed;

const TEMPLATES: [(&str, &str); 5] = [
    ("parts.html", include_str!("templates/parts.html")),
    ("card.html", include_str!("templates/card.html")),
    ("sheet.html", include_str!("templates/sheet.html")),
    ("figure.html", include_str!("templates/figure.html")),
    ("table.html", include_str!("templates/table.html")),
];

/// A card as HTML: the answer first and large, then results and figures; inputs, method, steps and
/// checks fold away.
pub fn card_html(card: &Card) -> String {
    render("card.html", &CardView::of(card)).unwrap_or_else(|_| preformatted(&text::card_text(card)))
}

/// A sheet as HTML: what stands against it, its conclusions, its givens, and what is on it in order.
pub fn sheet_html(record: &Record) -> String {
    render("sheet.html", &SheetView::of(record)).unwrap_or_else(|_| preformatted(&text::sheet_text(record)))
}

/// A figure as HTML, with its caption and text alternative.
pub fn figure_html(figure: &Figure) -> String {
    render("figure.html", &FigureView { figure: Picture::of(figure) }).unwrap_or_else(|_| preformatted(&figure.alt))
}

/// A table as HTML.
pub(super) fn table_html(table: &Table) -> String {
    render("table.html", &TableView { table: Grid::of(table) })
        .unwrap_or_else(|_| preformatted(&text::table_text(table)))
}

/// Lines of text as HTML.
pub(super) fn lines_html(lines: &str) -> String {
    lines.lines().map(line_html).collect()
}

/// A line of text as HTML.
pub(super) fn line_html(line: &str) -> String {
    format!("<div style=\"padding:2px 0\">{}</div>", runs_html(&runs(line)))
}

/// A refusal as HTML: a sentence that is marked as an error in words.
pub(super) fn error_html(sentence: &str) -> String {
    format!(
        "<div style=\"border-left:4px solid #d55e00;background-color:rgba(213,94,0,0.12);padding:6px 10px\">\
         <strong>Error:</strong> {}</div>",
        runs_html(&runs(sentence))
    )
}

fn preformatted(text: &str) -> String {
    format!("<pre>{}</pre>", escape(text))
}

/// Renders a template. The templates are this crate's own, so a failure is a defect that a test
/// finds; whoever calls falls back to plain text.
fn render(template: &str, view: &impl Serialize) -> Result<String, String> {
    static TERA: OnceLock<Result<Tera, String>> = OnceLock::new();
    let tera = TERA.get_or_init(|| {
        let mut tera = Tera::new();
        tera.register_filter("typeset", typeset);
        tera.register_filter("symbol", symbol);
        tera.add_raw_templates(TEMPLATES).map_err(|e| e.to_string())?;
        Ok(tera)
    });
    let tera = tera.as_ref().map_err(Clone::clone)?;
    let context = Context::from_serialize(view).map_err(|e| e.to_string())?;
    tera.render(template, &context).map(|html| html.trim().to_owned()).map_err(|e| e.to_string())
}

/// The filter that escapes a text and gives it subscripts and minus signs.
fn typeset(text: StringInput<'_>, _: Kwargs, _: &State<'_>) -> Value {
    Value::safe_string(&runs_html(&runs(text.as_str())))
}

/// The same for a symbol.
fn symbol(text: StringInput<'_>, _: Kwargs, _: &State<'_>) -> Value {
    Value::safe_string(&runs_html(&symbol_runs(text.as_str())))
}

#[derive(Serialize)]
struct Picture {
    caption: String,
    alt: String,
    data: String,
}

impl Picture {
    fn of(figure: &Figure) -> Self {
        Picture {
            caption: figure.caption.clone(),
            alt: figure.alt.clone(),
            data: base64::encode(svg(figure, Theme::Notebook).as_bytes()),
        }
    }
}

#[derive(Serialize)]
struct FigureView {
    figure: Picture,
}

#[derive(Serialize)]
struct Row {
    symbol: String,
    name: String,
    shown: String,
}

impl Row {
    fn of(item: &Item) -> Self {
        Row { symbol: item.symbol.clone(), name: item.name.clone(), shown: item.shown.clone() }
    }
}

#[derive(Serialize)]
struct Cell {
    text: String,
    numeric: bool,
    symbol: bool,
}

#[derive(Serialize)]
struct Grid {
    caption: String,
    columns: Vec<Column>,
    rows: Vec<Vec<Cell>>,
}

impl Grid {
    fn of(table: &Table) -> Self {
        let decimals: Vec<usize> = (0..table.columns.len())
            .map(|i| table.rows.iter().filter_map(|r| r.get(i)).map(|c| decimals(c)).max().unwrap_or(0))
            .collect();
        let rows = table.rows.iter().map(|row| {
            row.iter()
                .zip(&table.columns)
                .zip(&decimals)
                .map(|((cell, column), most)| Cell {
                    text: if column.numeric { in_line(cell, *most) } else { cell.clone() },
                    numeric: column.numeric,
                    symbol: false,
                })
                .collect()
        });
        Grid { caption: table.caption.clone(), columns: table.columns.clone(), rows: rows.collect() }
    }
}

/// How many decimals a cell has.
fn decimals(cell: &str) -> usize {
    let tail = cell.rsplit_once('.').map_or("", |(_, tail)| tail);
    if tail.chars().all(|c| c.is_ascii_digit()) { tail.len() } else { 0 }
}

/// A number followed by as many blank digits as put its decimal point in line with the others of a
/// right-aligned column.
fn in_line(cell: &str, most: usize) -> String {
    let mut out = true_minus(cell);
    if !cell.ends_with(|c: char| c.is_ascii_digit()) {
        return out;
    }
    let own = decimals(cell);
    if own == 0 && most > 0 {
        out.push('\u{2008}');
    }
    out.extend(std::iter::repeat_n('\u{2007}', most.saturating_sub(own)));
    out
}

#[derive(Serialize)]
struct TableView {
    table: Grid,
}

#[derive(Serialize)]
struct MatrixView {
    name: String,
    rows: Vec<Vec<String>>,
    unit: String,
    about: String,
}

#[derive(Serialize, Default)]
struct StepView {
    words: Option<String>,
    worked: Option<String>,
    matrix: Option<MatrixView>,
    table: Option<Grid>,
}

impl StepView {
    fn of(step: &Step) -> Self {
        match step {
            Step::Words { text } => StepView { words: Some(text.clone()), ..StepView::default() },
            Step::Worked { text } => StepView { worked: Some(text.clone()), ..StepView::default() },
            Step::Matrix { name, rows, decimals, unit, about } => {
                let rows =
                    rows.iter().map(|row| row.iter().map(|v| fixed(*v, (*decimals).min(17))).collect()).collect();
                let matrix = MatrixView { name: name.clone(), rows, unit: unit.clone(), about: about.clone() };
                StepView { matrix: Some(matrix), ..StepView::default() }
            }
            Step::Table { table } => StepView { table: Some(Grid::of(table)), ..StepView::default() },
        }
    }
}

#[derive(Serialize)]
struct CheckRow {
    what: String,
    difference: String,
    tolerance: String,
    passed: bool,
}

#[derive(Serialize)]
struct CardView {
    title: String,
    headline: String,
    failed: Vec<String>,
    warnings: Vec<String>,
    results: Vec<Row>,
    notes: Vec<String>,
    figures: Vec<Picture>,
    inputs: Vec<Row>,
    has_method: bool,
    words: String,
    formulas: Vec<String>,
    symbols: Vec<Row>,
    assumptions: Vec<String>,
    references: Vec<String>,
    steps: Vec<StepView>,
    summary: String,
    checks: Vec<CheckRow>,
}

impl CardView {
    fn of(card: &Card) -> Self {
        let e = &card.explanation;
        let Method { words, formulas, symbols, references, assumptions } = &e.method;
        let checks: Vec<CheckRow> = card
            .checks
            .iter()
            .map(|c| CheckRow {
                what: c.what.clone(),
                difference: text::difference(c),
                tolerance: text::tolerance(c),
                passed: c.passed,
            })
            .collect();
        CardView {
            title: e.title.clone(),
            headline: e.headline.clone(),
            failed: checks.iter().filter(|c| !c.passed).map(|c| c.what.clone()).collect(),
            warnings: card.warnings.clone(),
            results: e.results.iter().map(Row::of).collect(),
            notes: e.notes.clone(),
            figures: e.figures.iter().map(Picture::of).collect(),
            inputs: e.inputs.iter().map(Row::of).collect(),
            has_method: e.method != Method::default(),
            words: words.clone(),
            formulas: formulas.iter().map(|f| f.text.clone()).collect(),
            symbols: symbols
                .iter()
                .map(|(s, n)| Row { symbol: s.clone(), name: n.clone(), shown: String::new() })
                .collect(),
            assumptions: assumptions.clone(),
            references: references.iter().map(|r| r.citation.clone()).collect(),
            steps: e.steps.iter().map(StepView::of).collect(),
            summary: text::check_summary(&card.checks),
            checks,
        }
    }
}

#[derive(Serialize)]
struct EntryView {
    number: Option<usize>,
    title: String,
    words: String,
    checks: String,
}

#[derive(Serialize)]
struct SheetView {
    title: String,
    counts: String,
    failed: Vec<String>,
    no_numbers: Vec<String>,
    unmatched: Vec<String>,
    conclusions: Vec<String>,
    givens: Option<Grid>,
    data: Option<Grid>,
    assumptions: Vec<String>,
    entries: Vec<EntryView>,
}

impl SheetView {
    fn of(record: &Record) -> Self {
        let mut number = 0;
        let entries = record.entries.iter().map(|entry| match entry {
            Entry::Card { card, .. } => {
                number += 1;
                EntryView {
                    number: Some(number),
                    title: card.title().to_owned(),
                    words: card.explanation.headline.clone(),
                    checks: format!("Checks: {}", text::check_summary(&card.checks)),
                }
            }
            Entry::Note { words } => {
                EntryView { number: None, title: String::new(), words: words.clone(), checks: String::new() }
            }
        });
        let assumptions = record.assumptions.iter().map(|a| match &a.basis {
            Basis::Verified { words } => format!("{} (verified: {words})", a.words),
            Basis::Unverified { words, owner, how } => {
                let who = if owner.is_empty() { "nobody is named to verify it" } else { owner.as_str() };
                let how = if how.is_empty() { String::new() } else { format!(", by {how}") };
                format!("{} (not verified: {words}; to verify: {who}{how})", a.words)
            }
        });
        SheetView {
            title: record.title.clone(),
            counts: text::counts(record),
            failed: text::failed(record),
            no_numbers: record.no_numbers.iter().map(|said| format!("{said}.")).collect(),
            unmatched: text::unmatched(record),
            conclusions: record.conclusions.clone(),
            givens: (!record.givens.is_empty()).then(|| givens(record)),
            data: (!record.data.is_empty()).then(|| data(record)),
            assumptions: assumptions.collect(),
            entries: entries.collect(),
        }
    }
}

fn word(text: &str) -> Cell {
    Cell { text: text.to_owned(), numeric: false, symbol: false }
}

fn givens(record: &Record) -> Grid {
    let rows = record.givens.iter().map(|g| {
        let sd = if g.give_or_take.is_empty() { "not stated" } else { g.give_or_take.as_str() };
        vec![
            Cell { symbol: true, ..word(&g.item.symbol) },
            word(&g.item.name),
            Cell { text: true_minus(&g.item.shown), numeric: true, symbol: false },
            Cell { text: sd.to_owned(), numeric: true, symbol: false },
            word(&g.source.words),
            word(g.source.grade.word()),
        ]
    });
    let right = |heading| Column { numeric: true, ..Column::text(heading) };
    Grid {
        caption: "Givens".to_owned(),
        columns: vec![
            Column::text("symbol"),
            Column::text("meaning"),
            right("value"),
            right("± one sd"),
            Column::text("source"),
            Column::text("grade"),
        ],
        rows: rows.collect(),
    }
}

fn data(record: &Record) -> Grid {
    let rows = record.data.iter().map(|f| {
        let begin: String = f.sha256.chars().take(12).collect();
        vec![word(&f.path), word(&f.about), word(&format!("{begin}…"))]
    });
    Grid {
        caption: "Data files".to_owned(),
        columns: vec![Column::text("file"), Column::text("what it is"), Column::text("SHA-256 begins")],
        rows: rows.collect(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::show::sample;

    #[test]
    fn templates_render() {
        render("card.html", &CardView::of(&sample::card())).unwrap();
        render("sheet.html", &SheetView::of(&sample::sheet().record())).unwrap();
        render("figure.html", &FigureView { figure: Picture::of(&sample::figure()) }).unwrap();
        render("table.html", &TableView { table: Grid::of(&sample::table()) }).unwrap();
    }

    #[test]
    fn the_answer_comes_first_and_nothing_a_notebook_removes_is_used() {
        for html in [card_html(&sample::card()), sheet_html(&sample::sheet().record())] {
            for word in ["<style", "<script", " id=", " class=", "<svg", "color:inherit", "onload"] {
                assert!(!html.contains(word), "{word}");
            }
            assert_eq!(html.matches("<div").count(), html.matches("</div>").count());
            assert_eq!(html.matches("<table").count(), html.matches("</table>").count());
            assert_eq!(html.matches("<details").count(), html.matches("</details>").count());
        }
        let html = card_html(&sample::card());
        let place = |what: &str| html.find(what).unwrap_or_else(|| panic!("{what} is missing"));
        assert!(place("41.3 MPa") < place("Results"));
        assert!(place("Results") < place("data:image/svg+xml;base64,"));
        assert!(place("<img alt=\"") < place("<summary style=\"cursor:pointer\">Inputs"));
        assert!(place("S<sub>v</sub>") > 0);
        assert!(html.contains("✗ FAILED") && html.contains("✓ passed"));
        assert!(html.contains("1 of 2 FAILED"));
    }

    #[test]
    fn markup_in_a_record_is_shown_not_run() {
        let evil = "<script>alert(\"x\")</script>";
        let mut card = sample::card();
        let e = &mut card.explanation;
        for text in [&mut e.title, &mut e.headline] {
            evil.clone_into(text);
        }
        e.notes = vec![evil.to_owned()];
        card.warnings = vec![evil.to_owned()];
        let e = &mut card.explanation;
        e.inputs = vec![Item::new(evil, evil, evil, vec![1.0], evil)];
        e.results = e.inputs.clone();
        e.steps = vec![
            Step::words(evil),
            Step::worked(evil),
            Step::matrix(evil, &[[1.0; 3]; 3], 2, evil, evil),
            Step::Table {
                table: Table {
                    caption: evil.to_owned(),
                    columns: vec![Column::number(evil, evil)],
                    rows: vec![vec![evil.to_owned()]],
                },
            },
        ];
        e.method.words = evil.to_owned();
        e.method.formulas = vec![crate::card::Formula::new(evil, evil)];
        e.method.references = vec![crate::card::Reference::new(evil)];
        e.method.assumptions = vec![evil.to_owned()];
        e.method.symbols = vec![(evil.to_owned(), evil.to_owned())];
        for figure in &mut e.figures {
            figure.alt = format!("\" onerror=\"x\" {evil}");
            evil.clone_into(&mut figure.caption);
        }
        for check in &mut card.checks {
            evil.clone_into(&mut check.what);
            evil.clone_into(&mut check.unit);
        }
        let html = card_html(&card);
        assert!(!html.contains("<script") && !html.contains("\" onerror"));
        assert!(html.contains("&lt;script&gt;"));

        let mut record = sample::sheet().record();
        evil.clone_into(&mut record.title);
        record.conclusions = vec![evil.to_owned()];
        record.entries.push(Entry::Note { words: evil.to_owned() });
        let html = sheet_html(&record);
        assert!(!html.contains("<script") && html.contains("&lt;script&gt;"));
        assert!(!error_html(evil).contains("<script") && !line_html(evil).contains("<script"));
    }

    #[test]
    fn decimal_points_stand_in_line() {
        assert_eq!(in_line("-1.5", 3), "−1.5\u{2007}\u{2007}");
        assert_eq!(in_line("12", 1), "12\u{2008}\u{2007}");
        assert_eq!(in_line("none", 2), "none");
    }

    #[test]
    fn the_sheet_names_what_stands_against_it() {
        let html = sheet_html(&sample::sheet().record());
        assert!(html.contains("Inputs that came from nowhere on this sheet"));
        assert!(html.contains("Failed checks"));
        assert!(html.contains("S<sub>v</sub>") && html.contains("1.3 MPa") && html.contains("measured"));
    }
}
