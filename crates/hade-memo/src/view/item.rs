//! A calculation item: what went in and from where, the method, the work, what came out.

use std::collections::BTreeMap;

use hade::card::{Card, Formula, Item, Method, Standing, Step};
use hade::sheet::Origin;
use serde::Serialize;

use super::Sources;
use super::references::{ReferenceView, References};
use super::table::{MatrixView, TableView, matrix, tables};
use super::text::{Run, Symbol, first_sentence, plain, rich, symbol};
use crate::draw;
use crate::formula::lint;
use crate::replay::CheckLine;

/// An input.
#[derive(Serialize)]
struct InputView {
    symbol: Symbol,
    name: Vec<Run>,
    value: Vec<Run>,
    origin: Vec<Run>,
    known: bool,
}

/// A result.
#[derive(Serialize)]
struct ResultView {
    symbol: Symbol,
    name: Vec<Run>,
    value: Vec<Run>,
}

/// A formula: mathematics of `formulas.json`, or words.
#[derive(Serialize)]
struct FormulaView {
    math: Option<usize>,
    words: String,
}

/// What a symbol is.
#[derive(Serialize)]
struct SymbolView {
    /// One, or several that are explained together.
    symbols: Vec<Symbol>,
    meaning: Vec<Run>,
}

/// A step of the work.
#[derive(Serialize)]
#[serde(tag = "step", rename_all = "snake_case")]
enum StepView {
    Words { words: Vec<Run> },
    Worked { words: Vec<Run> },
    Matrix(MatrixView),
    Tables { tables: Vec<TableView> },
}

/// A figure.
#[derive(Serialize)]
struct FigureView {
    file: String,
    caption: Vec<Run>,
    /// The caption in a list of figures.
    short: Vec<Run>,
    alt: String,
}

/// A check.
#[derive(Clone, Serialize)]
pub(crate) struct CheckRow {
    what: Vec<Run>,
    difference: String,
    allowed: String,
    passed: bool,
}

/// A calculation item.
#[derive(Serialize)]
pub(crate) struct ItemView {
    number: usize,
    title: Vec<Run>,
    kind: String,
    headline: Vec<Run>,
    inputs: Vec<InputView>,
    method: Vec<Run>,
    references: Vec<usize>,
    formulas: Vec<FormulaView>,
    /// Which equations of earlier items apply too, as words; empty for none.
    repeated: String,
    symbols: Vec<SymbolView>,
    assumptions: Vec<Vec<Run>>,
    steps: Vec<StepView>,
    results: Vec<ResultView>,
    figures: Vec<FigureView>,
    checks: Vec<CheckRow>,
    notes: Vec<Vec<Run>>,
    /// What came out against the plan or the observations.
    warnings: Vec<Vec<Run>>,
    passed: bool,
    trusted: bool,
}

/// A check as it is printed.
pub(crate) fn check(line: &CheckLine) -> CheckRow {
    CheckRow {
        what: rich(&line.what),
        difference: plain(&line.difference),
        allowed: plain(&line.allowed),
        passed: line.passed,
    }
}

/// Makes items, and collects what they share.
pub(crate) struct Maker<'a> {
    sources: &'a Sources<'a>,
    formulas: Vec<String>,
    figures: BTreeMap<String, String>,
    references: References,
    warnings: Vec<String>,
}

/// What the items share.
pub(crate) struct Made {
    /// The mathematics, by place.
    pub formulas: Vec<String>,
    /// The figures, by file name.
    pub figures: BTreeMap<String, String>,
    /// The references.
    pub references: Vec<ReferenceView>,
    /// What went wrong without harm.
    pub warnings: Vec<String>,
}

impl<'a> Maker<'a> {
    /// For these sources.
    pub(crate) fn new(sources: &'a Sources<'a>) -> Self {
        Maker {
            sources,
            formulas: Vec::new(),
            figures: BTreeMap::new(),
            references: References::default(),
            warnings: Vec::new(),
        }
    }

    /// What was collected.
    pub(crate) fn done(self) -> Made {
        Made {
            formulas: self.formulas,
            figures: self.figures,
            references: self.references.done(),
            warnings: self.warnings,
        }
    }

    /// The item of a number, from 1.
    pub(crate) fn item(&mut self, number: usize) -> Option<ItemView> {
        let sources = self.sources;
        let place = number.checked_sub(1)?;
        let card: &Card = sources.cards.get(place)?;
        let judged = sources.judged.get(place)?;
        let origins = sources.lineage.get(place)?;
        let said = &card.explanation;
        let method: &Method = judged.method.as_ref().unwrap_or(&said.method);
        let trusted = judged.method.is_some();
        let (formulas, repeated) = self.formulas(&method.formulas, trusted, number);
        Some(ItemView {
            number,
            title: rich(card.title()),
            kind: plain(&format!("{} {}", card.kind, card.version)),
            headline: rich(&said.headline),
            inputs: said.inputs.iter().zip(origins).map(|(item, origin)| self.input(item, origin)).collect(),
            method: rich(&method.words),
            references: method.references.iter().map(|r| self.references.cite(&r.citation, number)).collect(),
            formulas,
            repeated: equations(&repeated),
            symbols: method
                .symbols
                .iter()
                .map(|(s, meaning)| SymbolView { symbols: s.split(", ").map(symbol).collect(), meaning: rich(meaning) })
                .collect(),
            assumptions: method.assumptions.iter().map(|a| rich(a)).collect(),
            steps: said.steps.iter().map(step).collect(),
            results: said
                .results
                .iter()
                .map(|r| ResultView { symbol: symbol(&r.symbol), name: rich(&r.name), value: rich(&r.shown) })
                .collect(),
            figures: said.figures.iter().enumerate().map(|(i, f)| self.figure(f, number, i + 1)).collect(),
            checks: judged.checks.iter().map(check).collect(),
            notes: said.notes.iter().map(|n| rich(n)).collect(),
            warnings: card.warnings.iter().map(|w| rich(w)).collect(),
            passed: judged.checks.iter().all(|c| c.passed),
            trusted,
        })
    }

    fn input(&self, item: &Item, origin: &Origin) -> InputView {
        let words = match origin {
            Origin::Given { symbol } if *symbol == item.symbol => format!("given {symbol}"),
            // Only the value and its kind tie the two; the reader judges whether it is the same thing.
            Origin::Given { symbol } => format!("equals given {symbol}"),
            Origin::Outcome { card, result } => format!("item {card}: {result}"),
            Origin::Data { path } => format!("file {path}"),
            Origin::Choice => "choice".to_owned(),
            Origin::Several { candidates } => format!("AMBIGUOUS: {}", candidates.join(" or ")),
            Origin::Unmatched => "NOT ON THE SHEET".to_owned(),
        };
        let value = match item.standing {
            Standing::File => {
                format!("SHA-256 {}\u{2026}", item.sha256.iter().flat_map(|h| h.chars()).take(16).collect::<String>())
            }
            _ => item.shown.clone(),
        };
        InputView {
            symbol: symbol(&item.symbol),
            name: rich(&item.name),
            value: rich(&value),
            origin: rich(&words),
            known: origin.is_known(),
        }
    }

    /// The formulas to print, and the numbers of those that an earlier item has printed already.
    fn formulas(&mut self, formulas: &[Formula], trusted: bool, number: usize) -> (Vec<FormulaView>, Vec<usize>) {
        let known = self.formulas.len();
        let earlier = |f: &Formula, all: &[String]| all.iter().take(known).position(|math| *math == f.math);
        let mut printed = Vec::new();
        let mut repeated = Vec::new();
        for formula in formulas {
            match earlier(formula, &self.formulas).filter(|_| trusted) {
                Some(place) => repeated.push(place + 1),
                None => printed.push(self.formula(formula, trusted, number)),
            }
        }
        (printed, repeated)
    }

    /// Mathematics only of a method that the library itself has just stated, and only past the lint.
    fn formula(&mut self, formula: &Formula, trusted: bool, number: usize) -> FormulaView {
        let words = plain(&formula.text);
        if !trusted {
            return FormulaView { math: None, words };
        }
        match lint(&formula.math) {
            Ok(()) => {
                self.formulas.push(formula.math.clone());
                FormulaView { math: Some(self.formulas.len() - 1), words }
            }
            Err(why) => {
                self.warnings
                    .push(format!("item {number}: the formula \"{}\" is printed as text, because {why}", formula.text));
                FormulaView { math: None, words }
            }
        }
    }

    fn figure(&mut self, figure: &hade::card::Figure, number: usize, place: usize) -> FigureView {
        let file = format!("figures/{number}-{place}.svg");
        self.figures.insert(file.clone(), draw::for_print(figure));
        let alt = if figure.alt.trim().is_empty() { &figure.caption } else { &figure.alt };
        FigureView {
            file,
            caption: rich(&figure.caption),
            short: rich(&first_sentence(&figure.caption)),
            alt: crate::clean::lossy(alt),
        }
    }
}

/// Numbers of equations in words: "(3), (5) to (8)".
fn equations(numbers: &[usize]) -> String {
    let mut ranges: Vec<(usize, usize)> = Vec::new();
    let mut sorted = numbers.to_vec();
    sorted.sort_unstable();
    sorted.dedup();
    for number in sorted {
        match ranges.last_mut() {
            Some((_, last)) if *last + 1 == number => *last = number,
            _ => ranges.push((number, number)),
        }
    }
    let words = |(first, last): &(usize, usize)| match last - first {
        0 => format!("({first})"),
        1 => format!("({first}), ({last})"),
        _ => format!("({first}) to ({last})"),
    };
    ranges.iter().map(words).collect::<Vec<_>>().join(", ")
}

fn step(step: &Step) -> StepView {
    match step {
        Step::Words { text } => StepView::Words { words: rich(text) },
        Step::Worked { text } => StepView::Worked { words: rich(text) },
        Step::Matrix { name, rows, decimals, unit, about } => match matrix(name, rows, *decimals, unit, about) {
            Ok(matrix) => StepView::Matrix(matrix),
            Err(tables) => StepView::Tables { tables },
        },
        Step::Table { table } => StepView::Tables { tables: tables(table) },
    }
}

#[cfg(test)]
mod tests {
    #[test]
    fn equations_are_named_in_ranges() {
        assert_eq!(super::equations(&[]), "");
        assert_eq!(super::equations(&[5, 3, 4, 7, 9, 10]), "(3) to (5), (7), (9), (10)");
    }
}
