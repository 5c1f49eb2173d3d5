//! What became of each variable of a session, so that a message can say it.

use std::collections::{BTreeMap, BTreeSet};

use crate::syntax::{self, Outline};

/// A variable of the session: name and type.
pub(crate) type Variable = (String, String);

/// How a cell ended.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum End {
    /// Well.
    Whole,
    /// Early: what it defined was not kept.
    Early,
    /// With the process, and all variables.
    Lost(Loss),
}

/// How the variables were lost.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Loss {
    Crashed,
    Stopped,
}

/// What became of a variable.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Fate {
    There,
    Moved {
        cell: usize,
    },
    Lost {
        cell: usize,
        how: Loss,
    },
    /// The cell that defines it ended early.
    NotKept,
    /// A type it is made of was defined anew.
    Retyped {
        cell: usize,
    },
}

#[derive(Debug, Clone)]
struct Entry {
    kind: String,
    /// The cell that defines it.
    cell: usize,
    /// Cells after it that may have changed it.
    changed: BTreeSet<usize>,
    mutable: bool,
    fate: Fate,
}

impl Entry {
    /// Whether the variable was there before the cell and went with it.
    fn tells(&self, cell: usize) -> bool {
        matches!(self.fate, Fate::Lost { .. }) || self.fate == Fate::Moved { cell }
    }
}

/// The variables of a session and what became of them.
#[derive(Debug, Default)]
pub(crate) struct Ledger {
    entries: BTreeMap<String, Entry>,
}

impl Ledger {
    /// A cell ended. `before` and `after` are the variables then.
    pub(crate) fn note(&mut self, cell: usize, code: &str, before: &[Variable], after: &[Variable], end: End) {
        let outline = syntax::outline(code);
        let kind = |name: &str| after.iter().find(|(known, _)| known == name).map(|(_, kind)| short(kind));
        for (name, _) in before.iter().filter(|(name, _)| kind(name).is_none()) {
            if let Some(entry) = self.entries.get_mut(name) {
                entry.fate = match end {
                    End::Lost(how) => Fate::Lost { cell, how },
                    _ => Fate::Moved { cell },
                };
            }
        }
        if end == End::Whole {
            self.note_changes(cell, code);
        }
        for binding in &outline.bindings {
            let there = kind(&binding.name);
            let fate = match (end, &there) {
                (End::Whole, Some(_)) => Fate::There,
                (End::Whole, None) => Fate::Moved { cell },
                // An earlier variable of that name is still there, or its own story says more.
                (_, Some(_)) => continue,
                _ if self.entries.get(&binding.name).is_some_and(|entry| entry.tells(cell)) => continue,
                _ => Fate::NotKept,
            };
            let entry = Entry {
                kind: there.unwrap_or_default(),
                cell,
                changed: BTreeSet::new(),
                mutable: binding.mutable,
                fate,
            };
            self.entries.insert(binding.name.clone(), entry);
        }
        self.note_unbound(cell, &outline, before, after);
    }

    /// A type was defined anew in a cell, and these variables went with the old one.
    pub(crate) fn note_retyped(&mut self, cell: usize, names: &[String]) {
        for name in names {
            if let Some(entry) = self.entries.get_mut(name) {
                entry.fate = Fate::Retyped { cell };
            }
        }
    }

    /// A cell may change the mutable variables it mentions.
    fn note_changes(&mut self, cell: usize, code: &str) {
        let words: BTreeSet<String> = syntax::words(code);
        for (name, entry) in &mut self.entries {
            if entry.mutable && entry.fate == Fate::There && words.contains(name) {
                entry.changed.insert(cell);
            }
        }
    }

    /// Variables that no `let` at the top of the cell shows, as a macro may make them.
    fn note_unbound(&mut self, cell: usize, outline: &Outline, before: &[Variable], after: &[Variable]) {
        for (name, kind) in after {
            let known = before.iter().any(|(earlier, _)| earlier == name);
            if !known && !outline.bindings.iter().any(|binding| binding.name == *name) {
                let entry =
                    Entry { kind: short(kind), cell, changed: BTreeSet::new(), mutable: false, fate: Fate::There };
                self.entries.insert(name.clone(), entry);
            }
        }
    }

    /// The cells that make again what was lost, in the order to run them.
    fn again(&self) -> BTreeSet<usize> {
        let lost = self.entries.values().filter(|entry| matches!(entry.fate, Fate::Lost { .. }));
        lost.flat_map(|entry| entry.changed.iter().copied().chain([entry.cell])).collect()
    }

    /// Says after a loss which variables went and what to run again; empty if there were none.
    pub(crate) fn loss(&self, cell: usize) -> String {
        let names: Vec<&str> = self
            .entries
            .iter()
            .filter(|(_, entry)| matches!(entry.fate, Fate::Lost { cell: at, .. } if at == cell))
            .map(|(name, _)| name.as_str())
            .collect();
        if names.is_empty() {
            return String::new();
        }
        format!(
            " All variables are lost: {}. Functions, types and imports are kept. Run {} again.",
            names.join(", "),
            cells(&self.again())
        )
    }

    /// The cell that makes a variable that is there.
    pub(crate) fn cell_of(&self, name: &str) -> Option<usize> {
        self.entries.get(name).filter(|entry| entry.fate == Fate::There).map(|entry| entry.cell)
    }

    /// Why a variable that a cell names is not there, if the session knows.
    pub(crate) fn explain(&self, name: &str) -> Option<String> {
        let entry = self.entries.get(name)?;
        let defined = entry.cell;
        let kind = if entry.kind.is_empty() { String::new() } else { format!(" ({})", entry.kind) };
        Some(match entry.fate {
            Fate::There => return None,
            Fate::Moved { cell } if cell == defined => format!(
                "`{name}` was moved in cell {cell}, which also defines it, so it was not kept; \
                 write `&{name}` or `{name}.clone()` where that cell gives it away, and run it again"
            ),
            Fate::Moved { cell } => format!(
                "`{name}`{kind} was moved in cell {cell}, which took it by value, so it is gone; \
                 write `&{name}` or `{name}.clone()` there, and run {} again",
                cells(&BTreeSet::from([defined, cell]))
            ),
            Fate::Lost { cell, how } => {
                let how = match how {
                    Loss::Crashed => "crashed",
                    Loss::Stopped => "was stopped",
                };
                format!("`{name}` was lost when cell {cell} {how}; run {} again", cells(&self.again()))
            }
            Fate::NotKept => format!(
                "cell {defined}, which defines `{name}`, did not run to its end, so `{name}` was not kept; \
                 correct that cell and run it again"
            ),
            Fate::Retyped { cell } => format!(
                "`{name}` was lost when cell {cell} defined its type anew; run {} again",
                cells(&BTreeSet::from([defined]))
            ),
        })
    }
}

/// "cell 2", "cells 1, 2 and 4".
fn cells(numbers: &BTreeSet<usize>) -> String {
    let numbers: Vec<String> = numbers.iter().map(usize::to_string).collect();
    match numbers.split_last() {
        None => "the cells".to_owned(),
        Some((only, [])) => format!("cell {only}"),
        Some((last, before)) => format!("cells {} and {last}", before.join(", ")),
    }
}

/// A type without the paths of its names.
pub(crate) fn short(kind: &str) -> String {
    let mut out = String::new();
    let mut word = 0;
    let mut rest = kind;
    while let Some(c) = rest.chars().next() {
        if rest.starts_with("::") {
            out.truncate(word);
            rest = &rest[2..];
            continue;
        }
        out.push(c);
        if !(c.is_alphanumeric() || c == '_') {
            word = out.len();
        }
        rest = &rest[c.len_utf8()..];
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn variables(names: &[&str]) -> Vec<Variable> {
        names.iter().map(|name| ((*name).to_owned(), "hade::stress::Stress".to_owned())).collect()
    }

    fn told(ledger: &Ledger, name: &str) -> String {
        ledger.explain(name).unwrap_or_default()
    }

    #[test]
    fn a_moved_variable_is_followed_to_its_cell() {
        let mut ledger = Ledger::default();
        ledger.note(2, "let s = f();", &[], &variables(&["s"]), End::Whole);
        assert_eq!(ledger.explain("s"), None);
        ledger.note(3, "let t = s;", &variables(&["s"]), &variables(&["t"]), End::Whole);
        assert_eq!(
            told(&ledger, "s"),
            "`s` (Stress) was moved in cell 3, which took it by value, so it is gone; write `&s` or `s.clone()` \
             there, and run cells 2 and 3 again"
        );
        ledger.note(4, "let a = 1; let b = a;", &[], &variables(&["b"]), End::Whole);
        assert!(told(&ledger, "a").contains("moved in cell 4, which also defines it"));
        ledger.note(5, "let s = f();", &variables(&["t"]), &variables(&["s", "t"]), End::Whole);
        assert_eq!(ledger.explain("s"), None);
    }

    #[test]
    fn lost_variables_name_the_cells_to_run_again() {
        let mut ledger = Ledger::default();
        ledger.note(1, "let a = 1;", &[], &variables(&["a"]), End::Whole);
        ledger.note(2, "let mut v = vec![a];", &variables(&["a"]), &variables(&["a", "v"]), End::Whole);
        ledger.note(3, "println!(\"{a}\");", &variables(&["a", "v"]), &variables(&["a", "v"]), End::Whole);
        ledger.note(4, "v.push(2);", &variables(&["a", "v"]), &variables(&["a", "v"]), End::Whole);
        ledger.note(5, "let c = crash();", &variables(&["a", "v"]), &[], End::Lost(Loss::Crashed));
        assert!(ledger.loss(5).contains("lost: a, v.") && ledger.loss(5).ends_with("Run cells 1, 2 and 4 again."));
        assert_eq!(told(&ledger, "v"), "`v` was lost when cell 5 crashed; run cells 1, 2 and 4 again");
        assert!(told(&ledger, "c").starts_with("cell 5, which defines `c`"));
        ledger.note(6, "let a = 1;", &[], &variables(&["a"]), End::Whole);
        assert_eq!(told(&ledger, "v"), "`v` was lost when cell 5 crashed; run cells 2 and 4 again");
    }

    #[test]
    fn what_a_failed_cell_defines_is_not_there() {
        let mut ledger = Ledger::default();
        ledger.note(1, "let a = f()?;", &[], &[], End::Early);
        assert!(told(&ledger, "a").starts_with("cell 1, which defines `a`, did not run to its end"));
        ledger.note(2, "let a = 1;", &[], &variables(&["a"]), End::Whole);
        ledger.note(3, "let a = f()?;", &variables(&["a"]), &variables(&["a"]), End::Early);
        assert_eq!(ledger.explain("a"), None);
    }

    #[test]
    fn types_are_short() {
        assert_eq!(short("std::vec::Vec<hade::stress::Stress>"), "Vec<Stress>");
        assert_eq!(short("(f64, &'static str)"), "(f64, &'static str)");
    }
}
