//! What there is in the place of a name that a cell uses and that is not there.

use evcxr::CompilationError;

use crate::hints::{Hint, Known, place_of};
use crate::ledger::short;
use crate::library::Facts;
use crate::{nearest, syntax};

/// Names shown at most.
const MOST: usize = 16;

/// Members that nearly every type has, and that no one looks for.
const COMMON: [&str; 17] = [
    "clone",
    "clone_from",
    "cmp",
    "eq",
    "evcxr_display",
    "fmt",
    "from",
    "ge",
    "gt",
    "into",
    "le",
    "lt",
    "ne",
    "partial_cmp",
    "to_owned",
    "to_string",
    "try_into",
];

/// Types of plain numbers.
const NUMBERS: [&str; 6] = ["{float}", "{integer}", "f64", "f32", "i32", "usize"];

/// What to say about a field, a function or a variable that is not there.
pub(crate) fn hint(error: &CompilationError, known: &mut Known<'_>) -> Option<Hint> {
    let message = error.message();
    let quoted: Vec<&str> = message.split('`').skip(1).step_by(2).collect();
    let words = match (error.code()?, quoted.as_slice()) {
        ("E0599" | "E0609" | "E0616", [name, kind, ..]) => member(error, name, kind, known),
        ("E0560", [kind, name, ..]) => field(name, kind, known),
        ("E0063", [.., kind]) => missing(&message, kind, known),
        ("E0425", [name, ..]) if message.starts_with("cannot find value `") => {
            variable(name, place_of(error, known.cell)?, known)
        }
        ("E0425" | "E0433" | "E0412" | "E0422", [name, ..]) => in_scope(error, name, known),
        _ => None,
    };
    words.map(Hint::first)
}

/// A field, method or function of a type.
fn member(error: &CompilationError, name: &str, kind: &str, known: &mut Known<'_>) -> Option<String> {
    let at = place_of(error, known.cell)?;
    let of = type_name(kind);
    let facts = Facts::of(known.library, &of);
    let names = (known.complete)(known.cell, at).into_iter().filter_map(|code| plain_name(&code).map(str::to_owned));
    let names = names.filter(|found| found != name && !COMMON.contains(&found.as_str()) && !facts.hides(found));
    let mut names = nearest::by_spelling(name, names);
    let owner = if NUMBERS.contains(&of.as_str()) {
        // A number has too many to be listed.
        names.retain(|found| nearest::is_near(name, found));
        "a number".to_owned()
    } else {
        format!("`{of}`")
    };
    Some(format!("{owner} has no `{name}`{}", instead(name, names)))
}

/// A field in the braces of a struct.
fn field(name: &str, kind: &str, known: &Known<'_>) -> Option<String> {
    let of = type_name(kind);
    let fields: Vec<String> = Facts::of(known.library, &of).fields.into_iter().map(|(field, _)| field).collect();
    if fields.is_empty() {
        return None;
    }
    Some(format!("`{of}` has no field `{name}`{}", instead(name, nearest::by_spelling(name, fields))))
}

/// Fields left out between the braces of a struct: "missing fields `to` and `step` in initializer of `LogChoices`".
fn missing(message: &str, kind: &str, known: &Known<'_>) -> Option<String> {
    let names: Vec<&str> = message.split(" in initializer of ").next()?.split('`').skip(1).step_by(2).collect();
    let of = type_name(kind);
    let facts = Facts::of(known.library, &of);
    let more = if message.contains(" other field") { " and others" } else { "" };
    let typed = names.iter().map(|name| match facts.fields.iter().find(|(field, _)| field == name) {
        Some((_, kind)) => format!("`{name}: …` (of type {})", short(kind)),
        None => format!("`{name}: …`"),
    });
    let typed: Vec<String> = typed.collect();
    Some(format!("`{of}` lacks {}{more}; write it between the braces", typed.join(", ")))
}

/// A variable that no cell made, nor this one before the byte offset where it is named.
fn variable(name: &str, at: usize, known: &Known<'_>) -> Option<String> {
    let here = syntax::outline(known.cell).bindings.into_iter().filter(|binding| binding.end <= at);
    let here = here.map(|binding| binding.name);
    let names = known.variables.iter().map(|(name, _)| name.clone()).chain(here).filter(|other| other != name);
    let names = nearest::by_spelling(name, names);
    Some(match names.first() {
        None => format!("there is no variable `{name}`, and none at all so far; run the cell that makes it first"),
        Some(first) if nearest::is_near(name, first) => {
            format!("there is no variable `{name}`{}", instead(name, names))
        }
        Some(_) => format!(
            "there is no variable `{name}`; the variables are {}; run the cell that makes it first",
            listed(&names)
        ),
    })
}

/// A type or a function that is spelled like one there is.
fn in_scope(error: &CompilationError, name: &str, known: &mut Known<'_>) -> Option<String> {
    let at = place_of(error, known.cell)?;
    let names = (known.complete)(known.cell, at).into_iter().filter_map(|code| plain_name(&code).map(str::to_owned));
    let names = nearest::by_spelling(name, names.filter(|found| found != name));
    let first = names.first().filter(|first| nearest::is_near(name, first))?;
    Some(format!("there is no `{name}`; did you mean `{first}`?"))
}

/// "; did you mean `bar`? There are also `deg`, `mpa`" or "; there are `deg`, `mpa`".
fn instead(name: &str, names: Vec<String>) -> String {
    match names.split_first() {
        None => String::new(),
        Some((first, [])) if nearest::is_near(name, first) => format!("; did you mean `{first}`?"),
        Some((first, rest)) if nearest::is_near(name, first) => {
            format!("; did you mean `{first}`? There are also {}", listed(rest))
        }
        Some(_) => format!("; there are {}", listed(&names)),
    }
}

fn listed(names: &[String]) -> String {
    let shown = names.len().min(MOST);
    let more = if names.len() > shown { format!(" and {} more", names.len() - shown) } else { String::new() };
    format!("`{}`{more}", names[..shown].join("`, `"))
}

/// `Stress` of `&hade::stress::Stress<Borehole>`.
pub(crate) fn type_name(kind: &str) -> String {
    let kind = kind.trim().trim_start_matches('&').trim_start_matches("mut ");
    short(kind).split('<').next().unwrap_or_default().to_owned()
}

/// The name of what could be written: of a method without its arguments.
fn plain_name(code: &str) -> Option<&str> {
    let end = code.find(|c: char| !(c.is_alphanumeric() || c == '_')).unwrap_or(code.len());
    let (name, rest) = code.split_at(end);
    let named = name.starts_with(|c: char| c.is_alphabetic());
    (named && !rest.contains('.') && (rest.is_empty() || rest.starts_with(['(', ' ', '{', '!']))).then_some(name)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::hints::tests::known;

    #[test]
    fn what_there_is_stands_with_the_nearest_first() {
        let names = |names: &[&str]| names.iter().map(|name| (*name).to_owned()).collect::<Vec<_>>();
        assert_eq!(instead("bars", names(&["bar", "deg", "mpa"])), "; did you mean `bar`? There are also `deg`, `mpa`");
        assert_eq!(instead("zzz", names(&["pore", "sv"])), "; there are `pore`, `sv`");
        assert_eq!(instead("x", Vec::new()), "");
        let many: Vec<String> = (0..20).map(|n| format!("n{n}")).collect();
        assert!(listed(&many).ends_with("`n15` and 4 more"));
    }

    #[test]
    fn a_variable_that_is_not_there_is_told_with_those_that_are() {
        let mut complete = |_: &str, _: usize| Vec::new();
        let known = known("let stat = 1;\nstate + 1", &mut complete);
        let said = variable("state", 14, &known).unwrap_or_default();
        assert_eq!(said, "there is no variable `state`; did you mean `stat`? There are also `pore`");
        let said = variable("depth", 14, &known).unwrap_or_default();
        assert!(said.contains("the variables are `pore`, `stat`; run the cell"), "{said}");
    }

    #[test]
    fn names_are_told_from_what_follows_them() {
        for (code, wanted) in [
            ("chain()", Some("chain")),
            ("along", Some("along")),
            ("measured(words)", Some("measured")),
            ("iter().all(f)", None),
            ("0", None),
            ("", None),
        ] {
            assert_eq!(plain_name(code), wanted, "{code}");
        }
        assert_eq!(type_name("&hade::stress::Stress<hade::frames::Borehole>"), "Stress");
    }

    #[test]
    fn fields_left_out_are_named() {
        let mut complete = |_: &str, _: usize| Vec::new();
        let known = known("", &mut complete);
        let message = "missing fields `to` and `step` in initializer of `hade::along::LogChoices`";
        let said = missing(message, "hade::along::LogChoices", &known).unwrap_or_default();
        assert_eq!(said, "`LogChoices` lacks `to: …`, `step: …`; write it between the braces");
    }
}
