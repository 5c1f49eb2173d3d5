//! Tables and matrices, with the size in which they fit the page.

use hade::card::{Column, Table};
use serde::Serialize;

use super::number::{Cell, cell, fixed, words};
use super::text::{Run, Symbol, first_sentence, plain, rich, symbol};

/// Width of the text on an upright page, in points, on the narrower of the two papers.
const UPRIGHT: f64 = 465.0;
/// The same on a page turned.
const TURNED: f64 = 640.0;
/// What a column needs besides its text, in points.
const GUTTER: f64 = 9.0;
/// Width of a character against the size of the face, on the wide side.
const CHARACTER: f64 = 0.63;
/// Sizes of the face that are tried on an upright page, then on a turned one.
const SIZES: [(bool, f64); 6] = [(false, 8.0), (false, 7.4), (false, 6.8), (true, 8.0), (true, 7.4), (true, 6.8)];
/// A column of words no wider than this does not share the free width.
const NARROW: usize = 24;
/// Length of text from which a column gets no more of it.
const MOST_SHARE: usize = 60;
/// Most columns of a matrix that is set as one; more are a table.
const MATRIX_COLUMNS: usize = 8;
/// Most rows of the same.
const MATRIX_ROWS: usize = 12;

/// A column.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct ColumnView {
    heading: Vec<Run>,
    unit: String,
    numeric: bool,
    /// Its share of the free width; 0 for a column as wide as its cells.
    share: usize,
}

/// A table.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct TableView {
    caption: Vec<Run>,
    /// The caption in a list of tables.
    short: Vec<Run>,
    columns: Vec<ColumnView>,
    rows: Vec<Vec<Cell>>,
    /// Size of the face, in points.
    size: f64,
    /// Whether it stands on a page of its own, turned.
    turned: bool,
}

/// A table of the record; in parts, each with the first column, when it is too wide even for a
/// turned page.
pub(crate) fn tables(table: &Table) -> Vec<TableView> {
    if table.columns.is_empty() {
        let nothing = Table { columns: vec![Column::text("no columns")], rows: Vec::new(), ..table.clone() };
        return vec![view(&nothing, false, 8.0)];
    }
    if let Some((turned, size)) = fit(table) {
        return vec![view(table, turned, size)];
    }
    let (turned, size) = (true, 6.8);
    let mut parts: Vec<Vec<usize>> = Vec::new();
    let mut part = vec![0];
    for column in 1..table.columns.len() {
        part.push(column);
        if part.len() > 2 && width(&columns_of(table, &part), size) > TURNED {
            part.pop();
            parts.push(std::mem::replace(&mut part, vec![0, column]));
        }
    }
    parts.push(part);
    let count = parts.len();
    parts
        .iter()
        .enumerate()
        .map(|(i, part)| {
            let mut cut = columns_of(table, part);
            cut.caption = format!("{} (part {} of {count})", table.caption, i + 1);
            view(&cut, turned, size)
        })
        .collect()
}

fn columns_of(table: &Table, chosen: &[usize]) -> Table {
    Table {
        caption: table.caption.clone(),
        columns: chosen.iter().filter_map(|i| table.columns.get(*i).cloned()).collect(),
        rows: table
            .rows
            .iter()
            .map(|row| chosen.iter().map(|i| row.get(*i).cloned().unwrap_or_default()).collect())
            .collect(),
    }
}

/// A row that is too short is filled, one that is too long is cut.
fn view(table: &Table, turned: bool, size: f64) -> TableView {
    let rows = table
        .rows
        .iter()
        .map(|row| {
            let texts = row.iter().map(String::as_str).chain(std::iter::repeat(""));
            table
                .columns
                .iter()
                .zip(texts)
                .map(|(column, text)| if column.numeric { cell(text) } else { words(text) })
                .collect()
        })
        .collect();
    let columns = table.columns.iter().enumerate().map(|(i, c)| ColumnView {
        heading: rich(&c.heading),
        unit: plain(&c.unit),
        numeric: c.numeric,
        share: share(table, i, c),
    });
    TableView {
        caption: rich(&table.caption),
        short: rich(&first_sentence(&table.caption)),
        columns: columns.collect(),
        rows,
        size,
        turned,
    }
}

/// The share of the free width of a column: as its longest text, within reason.
fn share(table: &Table, i: usize, column: &Column) -> usize {
    let longest = table.rows.iter().filter_map(|row| row.get(i)).map(|text| text.chars().count()).max().unwrap_or(0);
    if column.numeric || longest <= NARROW { 0 } else { longest.clamp(NARROW, MOST_SHARE) }
}

/// The first size in which a table fits.
fn fit(table: &Table) -> Option<(bool, f64)> {
    SIZES.into_iter().find(|(turned, size)| width(table, *size) <= if *turned { TURNED } else { UPRIGHT })
}

/// The least width of a table: numbers and short words do not wrap, longer texts do.
fn width(table: &Table, size: f64) -> f64 {
    let longest_word = |text: &str| text.split_whitespace().map(|w| w.chars().count().min(24)).max().unwrap_or(0);
    let characters = |i: usize, column: &Column| {
        let cells = table.rows.iter().filter_map(|row| row.get(i));
        let whole = share(table, i, column) == 0;
        let widest = cells.map(|text| if whole { text.chars().count() } else { longest_word(text) }).max();
        widest.unwrap_or(0).max(longest_word(&column.heading)).max(column.unit.chars().count() + 2)
    };
    let columns = table.columns.iter().enumerate();
    columns.map(|(i, column)| GUTTER + CHARACTER * size * characters(i, column) as f64).sum()
}

/// A matrix.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct MatrixView {
    name: Symbol,
    rows: Vec<Vec<String>>,
    unit: String,
    about: Vec<Run>,
    alt: String,
}

/// A matrix of the record, or tables when it is too large to be set as one.
pub(crate) fn matrix(
    name: &str,
    rows: &[Vec<f64>],
    decimals: usize,
    unit: &str,
    about: &str,
) -> Result<MatrixView, Vec<TableView>> {
    let widest = rows.iter().map(Vec::len).max().unwrap_or(0);
    let texts: Vec<Vec<String>> = rows.iter().map(|row| row.iter().map(|v| fixed(*v, decimals)).collect()).collect();
    let even = !texts.is_empty() && widest > 0 && texts.iter().all(|row| row.len() == widest);
    if even && widest <= MATRIX_COLUMNS && texts.len() <= MATRIX_ROWS {
        let alt = format!(
            "Matrix {name} of {} rows and {widest} columns{}: {}",
            texts.len(),
            if unit.is_empty() { String::new() } else { format!(" in {unit}") },
            texts.iter().map(|row| row.join(", ")).collect::<Vec<_>>().join("; ")
        );
        return Ok(MatrixView {
            name: symbol(name),
            rows: texts,
            unit: plain(unit),
            about: rich(about),
            alt: crate::clean::lossy(&alt),
        });
    }
    let columns = (1..=widest).map(|i| Column::number(&i.to_string(), ""));
    let numbered = |(i, row): (usize, Vec<String>)| std::iter::once((i + 1).to_string()).chain(row).collect();
    let about = if about.is_empty() { String::new() } else { format!(": {about}") };
    let unit = if unit.is_empty() { String::new() } else { format!(" ({unit})") };
    let as_table = Table {
        caption: format!("{name}{unit}{about}"),
        columns: std::iter::once(Column::text("Row")).chain(columns).collect(),
        rows: texts.into_iter().enumerate().map(numbered).collect(),
    };
    Err(tables(&as_table))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(columns: usize) -> Table {
        Table {
            caption: "c".to_owned(),
            columns: (0..columns).map(|_| Column::number("depth", "m")).collect(),
            rows: vec![vec!["-1234.56".to_owned(); columns]],
        }
    }

    #[test]
    fn wide_tables_get_smaller_then_turn_then_are_cut() {
        assert_eq!(fit(&of(6)), Some((false, 8.0)));
        assert_eq!(fit(&of(10)), Some((false, 7.4)));
        assert_eq!(fit(&of(12)), Some((true, 8.0)));
        let parts = tables(&of(40));
        assert!(parts.len() == 3 && parts.iter().all(|p| p.turned));
        assert_eq!(parts.iter().map(|p| p.columns.len() - 1).sum::<usize>(), 39);
    }

    #[test]
    fn rows_are_as_long_as_the_columns() {
        let uneven = Table {
            caption: String::new(),
            columns: vec![Column::text("a"), Column::number("b", "")],
            rows: vec![vec!["x".to_owned()], vec!["x".to_owned(), "1".to_owned(), "2".to_owned()]],
        };
        assert!(tables(&uneven)[0].rows.iter().all(|row| row.len() == 2));
    }

    #[test]
    fn a_table_without_columns_says_so() {
        let none = Table { columns: Vec::new(), ..of(3) };
        let shown = tables(&none);
        assert!(shown.len() == 1 && shown[0].columns.len() == 1 && shown[0].rows.is_empty());
    }

    #[test]
    fn a_large_matrix_is_a_table() {
        assert!(matrix("Q", &[vec![1.0; 3], vec![0.0; 3]], 2, "", "").is_ok());
        assert!(matrix("Q", &[vec![1.0; 9]], 2, "", "").is_err());
        assert!(matrix("Q", &[vec![1.0; 2], vec![1.0; 3]], 2, "", "").is_err());
        assert!(matrix("Q", &[], 2, "", "").is_err());
    }
}
