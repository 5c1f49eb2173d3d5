//! What to write where a value of one of the library's types is wanted and another was given.

/// What to do about a label of the compiler, "expected `Pressure`, found floating-point number", at a piece of a
/// cell; `None` where the compiler's own words say enough.
pub(crate) fn advice(label: &str, code: &str) -> Option<String> {
    let (wanted, found) = sides(label)?;
    let code = code.trim();
    let value = code.strip_prefix('&').unwrap_or(code).trim();
    if is_number(&found) {
        return number(&wanted, value);
    }
    Some(match (wanted.as_str(), found.as_str()) {
        ("Azimuth", "Angle") => format!(
            "an azimuth says from which north it counts; write `Azimuth::from_true_north({value})`, or from_grid_north, \
             or from_magnetic_north"
        ),
        ("Angle", "Azimuth") => format!(
            "`{value}` is an azimuth, which counts from a north; `{}.true_north()?` is its angle from true north",
            operand(value)
        ),
        ("Depth", "Length") => format!(
            "a depth says below which level it counts; write `Depth::below_rotary_table({value})`, or \
             below_mean_sea_level, below_ground, below_mudline"
        ),
        ("Length", "Depth") => format!(
            "`{0}` is a depth below a level of its own; `tie.convert({value}, Datum::RotaryTable)?.tvd` is its length below \
             the rotary table, `{0}.tvd` that below its own level",
            operand(value)
        ),
        ("EffectiveStress", stress) if stress.starts_with("Stress") => format!(
            "strength is judged on effective stress; write `&{}.effective(pore)?`, with the pore pressure",
            operand(value)
        ),
        (wanted, found) if wanted.starts_with("Stress") && found.starts_with("Stress") => stress(wanted, found, value)?,
        ("f64", quantity) => {
            let reads = unit_of(quantity)?.replace('.', ".in_");
            format!(
                "a number without a unit is wanted here, such as a ratio; `{value}` carries a unit, and `{}{reads}` is its \
                 number in that unit",
                operand(value)
            )
        }
        (wanted, found) if unit_of(found).is_some() => {
            let (_, unit, others) = UNITS.iter().find(|(known, ..)| *known == wanted)?;
            let or = if others.is_empty() { String::new() } else { format!(" (or {others})") };
            let [wanted, found] = [wanted, found].map(|kind| with_article(&kind.to_lowercase()));
            format!("{wanted} is wanted here, and `{value}` is {found}; write a value with `{unit}`{or}")
        }
        _ => return None,
    })
}

/// What to do about a sum of a quantity and a plain number, "cannot add `Pressure` to `{float}`".
pub(crate) fn sum(message: &str) -> Option<String> {
    let parts: Vec<&str> = message.split('`').collect();
    let ["cannot add " | "cannot subtract ", one, " to " | " from ", other, ..] = parts.as_slice() else { return None };
    let (one, other) = (crate::ledger::short(one), crate::ledger::short(other));
    let quantity = if is_number(&one) { &other } else { &one };
    let unit = unit_of(quantity).filter(|_| is_number(&one) != is_number(&other))?;
    Some(format!(
        "a number has no unit, and only like is added to like; write the unit of the number too, with `{unit}`"
    ))
}

/// How a value of a type of the library is made, where one is wanted: by its functions, else by its fields.
pub(crate) fn made_so(wanted: &str, makers: &[String], fields: &[(String, String)]) -> Option<String> {
    let ways: Vec<String> = makers.iter().take(MOST_WAYS).map(|maker| format!("`{wanted}::{maker}`")).collect();
    let write = match ways.split_last() {
        Some((only, [])) => only.clone(),
        Some((last, before)) => format!("{} or {last}", before.join(", ")),
        None if fields.is_empty() => return None,
        None => {
            let fields: Vec<String> = fields.iter().map(|(name, _)| format!("{name}: …")).collect();
            format!("`{wanted} {{ {} }}`", fields.join(", "))
        }
    };
    Some(format!("{} is wanted here; write {write}", with_article(&format!("`{wanted}`"))))
}

/// "an angle", "a `Source`".
fn with_article(noun: &str) -> String {
    let vowel = noun.trim_start_matches('`').starts_with(['a', 'e', 'i', 'o', 'A', 'E', 'I', 'O']);
    format!("{} {noun}", if vowel { "an" } else { "a" })
}

/// Ways to make a value that are named at most.
const MOST_WAYS: usize = 6;

/// The types of "expected `A`, found `B`", without paths and references.
pub(crate) fn sides(label: &str) -> Option<(String, String)> {
    let (wanted, found) = label.strip_prefix("expected ")?.split_once(", found ")?;
    let plain = |side: &str| {
        let side = side.trim().trim_matches('`').trim_start_matches('&').trim_start_matches("mut ");
        crate::ledger::short(side)
    };
    Some((plain(wanted), plain(found)))
}

fn is_number(found: &str) -> bool {
    const NUMBERS: [&str; 14] =
        ["f64", "f32", "i8", "i16", "i32", "i64", "u8", "u16", "u32", "u64", "isize", "usize", "{float}", "{integer}"];
    matches!(found, "floating-point number" | "integer") || NUMBERS.contains(&found)
}

/// The unit to write behind a number, and others.
const UNITS: [(&str, &str, &str); 7] = [
    ("Pressure", ".mpa()", ".psi(), .bar()"),
    ("Angle", ".deg()", ".rad()"),
    ("Length", ".m()", ".ft(), .inch()"),
    ("Density", ".sg()", ".kg_m3(), .g_cm3(), .ppg()"),
    ("Gradient", ".mpa_per_km()", ".bar_per_m(), .psi_per_ft()"),
    ("Warming", ".kelvin()", ""),
    ("Expansion", ".per_kelvin()", ""),
];

fn unit_of(quantity: &str) -> Option<&'static str> {
    UNITS.iter().find(|(known, ..)| *known == quantity).map(|(_, unit, _)| *unit)
}

/// A plain number where more is wanted.
fn number(wanted: &str, value: &str) -> Option<String> {
    let value = operand(value);
    match wanted {
        "Azimuth" => Some(format!("write the unit and the north: `Azimuth::from_true_north({value}.deg())`")),
        "Depth" => Some(format!("write the unit and the level: `Depth::below_rotary_table({value}.m())`")),
        _ => {
            let (_, unit, others) = UNITS.iter().find(|(known, ..)| *known == wanted)?;
            let or = if others.is_empty() { String::new() } else { format!(" (or {others})") };
            Some(format!("a number has no unit; write it: `{value}{unit}`{or}"))
        }
    }
}

/// A stress in other axes than are wanted.
fn stress(wanted: &str, found: &str, value: &str) -> Option<String> {
    let axes = |stress: &str| Some(stress.strip_prefix("Stress<")?.strip_suffix('>')?.to_owned());
    let geographic = |axes: &str| axes == "Geographic";
    let (to, from) = (axes(wanted), axes(found));
    let to = to.filter(|axes| !geographic(axes));
    let from = from.filter(|axes| !geographic(axes));
    Some(match (from.as_deref(), to.as_deref()) {
        (None, Some(to)) => format!(
            "this is the stress in north, east, down; a chain takes it into {} axes: `chain.carry(&{value})`, with `chain` \
             from {}",
            words(to),
            made_by(to)
        ),
        (Some(from), None) => format!(
            "this stress is in {} axes; the chain that took it there takes it back to north, east, down: \
             `chain.back().carry(&{value})`",
            words(from)
        ),
        (Some(from), Some(to)) if from != to => format!(
            "this stress is in {} axes; take it back with `chain.back().carry(&{value})`, and from there into {} axes",
            words(from),
            words(to)
        ),
        _ => return None,
    })
}

fn words(axes: &str) -> &str {
    match axes {
        "Borehole" => "borehole",
        "WallAxes" => "wall",
        "FaultAxes" => "fault",
        "Local" => "local",
        other => other,
    }
}

fn made_by(axes: &str) -> &'static str {
    match axes {
        "Borehole" => "the hole's attitude, `hole.chain()?`",
        "WallAxes" => "the hole's attitude, `hole.chain()?.then(&hole.wall_chain(tool_face)?)?`",
        "FaultAxes" => "the fault's plane, `plane.chain()?`",
        _ => "the axes, `axes.chain()?`",
    }
}

/// A piece of code as it can stand before a point: in brackets, unless it is a name, a number or a call.
pub(crate) fn operand(code: &str) -> String {
    let mut depth = 0_i32;
    let mut plain = !code.starts_with('-');
    for c in code.chars() {
        match c {
            '(' | '[' | '{' => depth += 1,
            ')' | ']' | '}' => depth -= 1,
            _ if depth > 0 || c.is_alphanumeric() || matches!(c, '_' | '.' | ':' | '?') => {}
            _ => plain = false,
        }
    }
    if plain { code.to_owned() } else { format!("({code})") }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The labels are those of rustc 1.95 for cells with these mistakes.
    #[test]
    fn a_number_is_told_its_unit() {
        for (label, code, wanted) in [
            ("expected `Pressure`, found floating-point number", "41.0", "`41.0.mpa()`"),
            ("expected `Pressure`, found `f64`", "x", "`x.mpa()`"),
            ("expected `Pressure`, found `usize`", "list.len()", "`list.len().mpa()`"),
            ("expected `Pressure`, found floating-point number", "1.0 + 2.0", "`(1.0 + 2.0).mpa()`"),
            ("expected `Angle`, found integer", "35", "`35.deg()`"),
            ("expected `Length`, found integer", "2950", "`2950.m()`"),
            ("expected `Density`, found floating-point number", "1.4", "`1.4.sg()`"),
            ("expected `Gradient`, found floating-point number", "22.7", "`22.7.mpa_per_km()`"),
            ("expected `Warming`, found floating-point number", "-20.0", "`(-20.0).kelvin()`"),
            ("expected `Azimuth`, found floating-point number", "120.0", "`Azimuth::from_true_north(120.0.deg())`"),
            ("expected `Depth`, found integer", "2950", "`Depth::below_rotary_table(2950.m())`"),
            ("expected `f64`, found `Pressure`", "p", "`p.in_mpa()`"),
            ("expected `f64`, found `Angle`", "0.25.deg()", "`0.25.deg().in_deg()`"),
        ] {
            let said = advice(label, code).unwrap_or_default();
            assert!(said.contains(wanted), "{label}, {code}: {said}");
        }
    }

    #[test]
    fn a_value_that_lacks_its_reference_is_told_which() {
        let said = |label: &str, code: &str| advice(label, code).unwrap_or_default();
        let azimuth = said("expected `Azimuth`, found `Angle`", "35.deg()");
        assert!(azimuth.contains("`Azimuth::from_true_north(35.deg())`"), "{azimuth}");
        let angle = said("expected `Angle`, found `Azimuth`", "strike");
        assert!(angle.contains("`strike.true_north()?`"), "{angle}");
        let depth = said("expected `Depth`, found `Length`", "2950.m()");
        assert!(depth.contains("`Depth::below_rotary_table(2950.m())`") && depth.contains("below_mudline"), "{depth}");
        let length = said("expected `Length`, found `Depth`", "place");
        assert!(length.contains("`tie.convert(place, Datum::RotaryTable)?.tvd`"), "{length}");
        let effective = said("expected `&EffectiveStress`, found `&Stress`", "&s");
        assert!(effective.contains("`&s.effective(pore)?`"), "{effective}");
    }

    #[test]
    fn a_stress_in_other_axes_is_told_the_way() {
        let said = |label: &str, code: &str| advice(label, code).unwrap_or_default();
        let there = said("expected `Stress<Borehole>`, found `Stress`", "s");
        assert!(there.contains("into borehole axes: `chain.carry(&s)`") && there.contains("hole.chain()?"), "{there}");
        let back = said("expected `&Stress`, found `&Stress<Borehole>`", "&sh");
        assert!(back.contains("`chain.back().carry(&sh)`"), "{back}");
        let across = said("expected `Stress<FaultAxes>`, found `Stress<hade::frames::Borehole>`", "sh");
        assert!(across.contains("in borehole axes") && across.contains("into fault axes"), "{across}");
    }

    #[test]
    fn another_quantity_is_told_apart() {
        let said = advice("expected `Angle`, found `Pressure`", "1.5.mpa()").unwrap_or_default();
        assert_eq!(
            said,
            "an angle is wanted here, and `1.5.mpa()` is a pressure; write a value with `.deg()` (or .rad())"
        );
        let said = advice("expected `Pressure`, found `Density`", "0.05.sg()").unwrap_or_default();
        assert!(said.starts_with("a pressure is wanted here, and `0.05.sg()` is a density"), "{said}");
    }

    #[test]
    fn a_type_is_told_how_it_is_made() {
        let makers = ["measured(\"…\")", "read(path)?"].map(str::to_owned);
        let said = made_so("Source", &makers, &[]).unwrap_or_default();
        assert_eq!(said, "a `Source` is wanted here; write `Source::measured(\"…\")` or `Source::read(path)?`");
        let fields = [("sv".to_owned(), "Pressure".to_owned()), ("sh_max".to_owned(), "Pressure".to_owned())];
        let said = made_so("Horizontals", &[], &fields).unwrap_or_default();
        assert_eq!(said, "a `Horizontals` is wanted here; write `Horizontals { sv: …, sh_max: … }`");
        assert_eq!(made_so("String", &[], &[]), None);
    }

    #[test]
    fn a_sum_with_a_plain_number_is_told_its_unit() {
        let said = sum("cannot add `hade::prelude::Pressure` to `{float}`").unwrap_or_default();
        assert!(said.contains("with `.mpa()`"), "{said}");
        assert!(sum("cannot subtract `Length` from `{integer}`").is_some_and(|said| said.contains("`.m()`")));
        for other in ["cannot add `Pressure` to `Length`", "cannot add `&str` to `{float}`", "cannot find value `p`"] {
            assert_eq!(sum(other), None, "{other}");
        }
    }

    #[test]
    fn other_mismatches_are_left_to_the_compiler() {
        for label in [
            "expected `&str`, found `String`",
            "expected `f64`, found `&str`",
            "expected `f64`, found integer",
            "expected due to this",
            "arguments to this function are incorrect",
            "expected `Stress`, found `Stress`",
        ] {
            assert_eq!(advice(label, "x"), None, "{label}");
        }
    }
}
