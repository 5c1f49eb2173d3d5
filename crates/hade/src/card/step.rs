//! The words, formulas and numbers by which a result can be redone by hand.

use serde::{Deserialize, Serialize};

/// A formula, twice: as Typst mathematics for the memo and as plain text for everything else.
/// Both come from the library's source, never from a record.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Formula {
    /// Typst mathematics ("sigma_theta = sigma_x + sigma_y - p"), also usable as is by no one but
    /// the memo's own templates.
    pub math: String,
    /// The same in plain Unicode text; it is also the text alternative.
    pub text: String,
}

impl Formula {
    /// A formula in both spellings.
    pub fn new(math: &str, text: &str) -> Self {
        Formula { math: math.to_owned(), text: text.to_owned() }
    }
}

/// Where a formula or a value was published.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Reference {
    /// Author, year, title, publisher or journal, edition, equation or page.
    pub citation: String,
}

impl Reference {
    /// A citation in one line.
    pub fn new(citation: &str) -> Self {
        Reference { citation: citation.to_owned() }
    }
}

/// The method of a kind of card. It depends on the kind alone (and its choices), so the memo takes
/// it from the library when a record is replayed.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct Method {
    /// One or two sentences: what is done.
    pub words: String,
    /// The formulas.
    pub formulas: Vec<Formula>,
    /// What each symbol of the formulas is, where it is not an input or a result.
    pub symbols: Vec<(String, String)>,
    /// The sources.
    pub references: Vec<Reference>,
    /// What the method assumes.
    pub assumptions: Vec<String>,
}

/// One step of the work, in the order it is done.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "step", rename_all = "snake_case")]
pub enum Step {
    /// A sentence.
    Words {
        /// The sentence.
        text: String,
    },
    /// A line of arithmetic with the numbers put in ("σθ = 54.10 + 48.20 − … = 71.30 MPa").
    Worked {
        /// The line.
        text: String,
    },
    /// A matrix with its name.
    Matrix {
        /// What stands before the equals sign ("Q").
        name: String,
        /// The rows.
        rows: Vec<Vec<f64>>,
        /// Decimals to print.
        decimals: usize,
        /// The unit of every entry, empty for a pure number.
        unit: String,
        /// What the rows are, in words ("rows: top of hole, right, along hole").
        about: String,
    },
    /// A table.
    Table {
        /// The table.
        table: Table,
    },
}

impl Step {
    /// A sentence.
    pub fn words(text: impl Into<String>) -> Self {
        Step::Words { text: text.into() }
    }
    /// A line of arithmetic with the numbers put in.
    pub fn worked(text: impl Into<String>) -> Self {
        Step::Worked { text: text.into() }
    }
    /// A 3 × 3 matrix.
    pub fn matrix(name: &str, rows: &[[f64; 3]; 3], decimals: usize, unit: &str, about: &str) -> Self {
        Step::Matrix {
            name: name.to_owned(),
            rows: rows.iter().map(|r| r.to_vec()).collect(),
            decimals,
            unit: unit.to_owned(),
            about: about.to_owned(),
        }
    }
}

/// A table of texts that were rounded once, here.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Table {
    /// The caption.
    pub caption: String,
    /// The columns; the first is the row's name.
    pub columns: Vec<Column>,
    /// The rows, each as long as the columns.
    pub rows: Vec<Vec<String>>,
}

impl Table {
    /// The first and the last of many rows, `most` of them at most, with a row of dots between.
    pub(crate) fn ends(count: usize, most: usize, row: impl Fn(usize) -> Vec<String>) -> Vec<Vec<String>> {
        if count <= most {
            return (0..count).map(row).collect();
        }
        let (first, last) = (most.div_ceil(2), most / 2);
        let mut rows: Vec<Vec<String>> = (0..first).map(&row).collect();
        let columns = rows.first().map_or(0, Vec::len);
        rows.push(vec!["…".to_owned(); columns]);
        rows.extend((count - last..count).map(row));
        rows
    }
}

/// A column of a table.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Column {
    /// The heading.
    pub heading: String,
    /// The unit of every cell, empty when there is none.
    pub unit: String,
    /// Whether cells are numbers, set with their decimal points in line.
    pub numeric: bool,
}

impl Column {
    /// A column of words.
    pub fn text(heading: &str) -> Self {
        Column { heading: heading.to_owned(), unit: String::new(), numeric: false }
    }
    /// A column of numbers.
    pub fn number(heading: &str, unit: &str) -> Self {
        Column { heading: heading.to_owned(), unit: unit.to_owned(), numeric: true }
    }
}
