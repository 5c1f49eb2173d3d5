//! What the card of a pressure at a depth says: the depth in the datum of the profile, the two
//! points or the gradient with their numbers, and the mud weight.

use super::about::{ProfileAbout, ProfileSource};
use super::at_depth::{PressureAtDepth, PressureAtDepthInputs};
use super::law::{Law, Start};
use super::pressure_profile::whole_item;
use crate::card::{Axis, Explanation, Figure, Formula, Item, Layer, Mark, Method, Reference, Role, Step};
use crate::frames::{Datum, DatumTie, Depth, LevelSource, level_items, tvd_words};
use crate::units::{GRAVITY, Length, Pressure, Quantity, as_typed, fixed, with_typed_unit};

fn metres(length: Length) -> String {
    fixed(length.si(), 2)
}

fn mpa(pressure: Pressure) -> String {
    fixed(pressure.in_mpa(), 4)
}

/// A number in brackets when it is negative, as in a difference.
fn bracketed(text: String) -> String {
    if text.starts_with('-') { format!("({text})") } else { text }
}

pub(super) fn explain(at: &PressureAtDepth) -> Explanation {
    let record = at.record();
    let about = &record.about;
    let meaning = &about.meaning;
    let depth = record.depth;
    let mut results = vec![Item::computed(&about.symbol, format!("{meaning} at {}", place(depth)), at.pressure)];
    if let (Some(gradient), Some(mud_weight)) = (at.gradient, at.mud_weight) {
        let name = format!("mean gradient of the {meaning} below the rotary table");
        results.push(Item::computed("G", name, gradient));
        let name = format!("equivalent mud weight of the {meaning}, on TVD below the rotary table");
        results.push(Item::computed("ρ_e", name, mud_weight));
    }
    let mut steps = depth_steps(at);
    match &record.law {
        Law::Table(_) => steps.extend(table_steps(at)),
        Law::Gradient { from, start, gradient } => {
            if let (Start::Sea { density }, Some(tie)) = (start, about.tie) {
                let deep = -tie.elevation(Datum::Mudline).unwrap_or_default();
                steps.push(Step::worked(format!(
                    "P₀ = ρ_w g d_w = {} kg/m³ · {GRAVITY} m/s² · {} m = {} MPa",
                    as_typed(density.in_kg_m3()),
                    metres(deep),
                    mpa(density.column(deep))
                )));
            }
            let begin = Law::start_pressure(*start, about.tie).unwrap_or_default();
            steps.push(Step::worked(format!(
                "P = P₀ + G₀ (z − z₀) = {} + {} MPa/km · ({} − {}) m / 1000 = {} MPa",
                mpa(begin),
                as_typed(gradient.in_mpa_per_km()),
                metres(at.law_depth()),
                bracketed(metres(from.tvd)),
                mpa(at.pressure)
            )));
        }
    }
    steps.extend(mud_steps(at));
    Explanation {
        title: title(record),
        headline: match at.mud_weight {
            Some(mud_weight) => format!("{} = {} ({mud_weight} below the rotary table)", about.symbol, at.pressure),
            None => format!("{} = {}", about.symbol, at.pressure),
        },
        inputs: inputs(record),
        results,
        method: method(&record.law),
        steps,
        figures: vec![figure(at)],
        notes: notes(at),
        topics: match at.mud_weight {
            Some(_) => vec!["depth".to_owned()],
            None => vec!["depth".to_owned()],
        },
    }
}

fn title(record: &PressureAtDepthInputs) -> String {
    let hole = record.about.hole.map(|name| format!(" of {name}")).unwrap_or_default();
    format!("{}{hole} at {}", capital(&record.about.meaning), place(record.depth))
}

/// "TVD 2950 m below the rotary table".
fn place(depth: Depth) -> String {
    format!("TVD {} below {}", with_typed_unit(depth.tvd), depth.below.words())
}

/// With a capital first letter.
fn capital(words: &str) -> String {
    let mut letters = words.chars();
    let first: String = letters.next().map(|c| c.to_uppercase().collect()).unwrap_or_default();
    format!("{first}{}", letters.as_str())
}

/// The depth asked for, brought to the datum of the profile.
fn depth_steps(at: &PressureAtDepth) -> Vec<Step> {
    let record = at.record();
    let (depth, to) = (record.depth, record.law.datum());
    let (Some(hole), Some(own)) = (record.about.hole_tie(), record.about.tie) else { return Vec::new() };
    if depth.below == to && record.about.other_hole.is_none() {
        return Vec::new();
    }
    let level = |tie: DatumTie, of: Datum| tie.elevation(of).unwrap_or_default();
    let point = level(hole, depth.below) - depth.tvd;
    vec![Step::worked(format!(
        "{} = {} − {} = elevation {} m above mean sea level = TVD {} − {} = {} m below {}",
        place(depth),
        metres(level(hole, depth.below)),
        bracketed(metres(depth.tvd)),
        metres(point),
        metres(level(own, to)),
        bracketed(metres(point)),
        metres(at.law_depth()),
        to.words()
    ))]
}

fn table_steps(at: &PressureAtDepth) -> Vec<Step> {
    let depth = at.law_depth();
    let Law::Table(table) = &at.record().law else { return Vec::new() };
    let Ok(((z1, p1), (z2, p2))) = table.around(depth) else { return Vec::new() };
    if z1 == z2 {
        return vec![Step::words(format!("The table holds the value at TVD {} m: {} MPa.", metres(z1), mpa(p1)))];
    }
    vec![
        Step::words(format!(
            "The depth lies between two points of the table: {} MPa at {} m and {} MPa at {} m.",
            mpa(p1),
            metres(z1),
            mpa(p2),
            metres(z2)
        )),
        Step::worked(format!(
            "P = {p} + ({} − {p}) · ({} − {z}) / ({} − {z}) = {} MPa",
            bracketed(mpa(p2)),
            metres(depth),
            metres(z2),
            mpa(at.pressure),
            p = bracketed(mpa(p1)),
            z = bracketed(metres(z1)),
        )),
    ]
}

fn mud_steps(at: &PressureAtDepth) -> Vec<Step> {
    let (Some(gradient), Some(mud_weight), Some(z)) = (at.gradient, at.mud_weight, at.below_rotary()) else {
        return Vec::new();
    };
    let record = at.record();
    let mut steps = Vec::new();
    if let (Some(tie), false) = (record.about.hole_tie(), record.depth.below == Datum::RotaryTable) {
        steps.push(Step::worked(format!(
            "TVD below the rotary table = {} + {} − {} = {} m",
            metres(record.depth.tvd),
            bracketed(metres(tie.elevation(Datum::RotaryTable).unwrap_or_default())),
            bracketed(metres(tie.elevation(record.depth.below).unwrap_or_default())),
            metres(z)
        )));
    }
    steps.push(Step::worked(format!(
        "G = {} MPa / {} m below the rotary table = {} MPa/km",
        mpa(at.pressure),
        metres(z),
        fixed(gradient.in_mpa_per_km(), 3)
    )));
    steps.push(Step::worked(format!(
        "ρ_e = P / (g z_RT) = {} · 10⁶ Pa / ({GRAVITY} m/s² · {} m) = {} kg/m³ = {} sg",
        mpa(at.pressure),
        metres(z),
        fixed(mud_weight.in_kg_m3(), 1),
        fixed(mud_weight.in_sg(), 4)
    )));
    steps
}

fn inputs(record: &PressureAtDepthInputs) -> Vec<Item> {
    let PressureAtDepthInputs { about, law, depth } = record;
    let mut items = Vec::new();
    match (&about.source, law) {
        (ProfileSource::File { path, sha256, column }, _) => {
            let hole = about.hole.map(|name| format!(" of {name}")).unwrap_or_default();
            items.push(Item::file(
                format!("{}{hole} against depth, column {column}", about.meaning),
                path.clone(),
                sha256.clone(),
            ));
        }
        (ProfileSource::Typed, Law::Gradient { from, start, gradient }) if !about.one_given => {
            let words = &about.meaning;
            items.push(Item::typed("G_0", format!("gradient of the {words} from {} down", from.words()), *gradient));
            match start {
                Start::Stated { pressure } => {
                    let item = Item::typed("P_0", format!("{words} where the gradient begins"), *pressure);
                    // That there is nothing at the surface is stated with the law and needs no source.
                    items.push(if pressure.si() == 0.0 { item.chosen() } else { item });
                }
                Start::Sea { density } => items.push(Item::typed("ρ_w", "density of the sea water", *density)),
            }
            if from.tvd.si() != 0.0 {
                items.push(Item::typed(
                    "z_0",
                    format!("{} where the gradient begins", tvd_words(from.below)),
                    from.tvd,
                ));
            }
        }
        (ProfileSource::Typed, law) => items.push(whole_item(about, law)),
    }
    let under_sea = matches!(law, Law::Gradient { start: Start::Sea { .. }, .. });
    items.push(Item::typed(depth.below.symbols().0, format!("{} asked for", tvd_words(depth.below)), depth.tvd));
    items.extend(levels(about, *depth, vec![law.datum()], under_sea));
    items
}

/// The elevations that were used, of the profile's own hole and of another one asked about.
fn levels(about: &ProfileAbout, depth: Depth, mut used: Vec<Datum>, under_sea: bool) -> Vec<Item> {
    let own_levels = match &about.source {
        ProfileSource::File { path, sha256, .. } if about.tie_in_file => {
            LevelSource::File { path: path.clone(), sha256: sha256.clone() }
        }
        _ => LevelSource::Typed,
    };
    let mut items = Vec::new();
    match (about.other_hole, about.tie) {
        (None, Some(tie)) => {
            let with_mud = about.below_rotary(depth).is_some() && depth.below != Datum::RotaryTable;
            used.extend(with_mud.then_some(Datum::RotaryTable));
            used.push(depth.below);
            // One level alone is not used, except the mudline under a sea.
            if under_sea || used.iter().any(|d| *d != depth.below) {
                items.extend(level_items(tie, "", &own_levels, &used));
            }
        }
        (Some(hole), own) => {
            if let Some(own) = own {
                items.extend(level_items(own, " of the profile's hole", &own_levels, &used));
            }
            let asked = [depth.below, Datum::RotaryTable];
            items.extend(level_items(hole, " of the hole asked about", &LevelSource::Typed, &asked));
        }
        (None, None) => {}
    }
    items
}

fn method(law: &Law) -> Method {
    let (words, formulas, symbols, assumption) = match law {
        Law::Table(_) => (
            "A straight line between the two points of the table around the depth. Nothing is extrapolated. The mud weight is that of a static column from the rotary table down.",
            vec![Formula::new("P = P_1 + (P_2 - P_1) (z - z_1) / (z_2 - z_1)", "P = P₁ + (P₂ − P₁)(z − z₁)/(z₂ − z₁)")],
            vec![("z₁, P₁, z₂, P₂".to_owned(), "the points of the table above and below the depth".to_owned())],
            "Between the points of the table the pressure runs straight with depth.",
        ),
        Law::Gradient { .. } => (
            "The pressure where the gradient begins, plus the gradient times the depth below there; under the sea it begins with the weight of the water on the mudline. The mud weight is that of a static column from the rotary table down.",
            vec![
                Formula::new("P = P_0 + G_0 (z - z_0)", "P = P₀ + G₀ (z − z₀)"),
                Formula::new("P_0 = rho_upright(w) g d_upright(w)", "P₀ = ρ_w g d_w under the sea"),
            ],
            vec![
                ("z₀, P₀".to_owned(), "depth and pressure where the gradient begins".to_owned()),
                ("d_w".to_owned(), "depth of the sea".to_owned()),
            ],
            "The gradient is the same from where it begins down to the depth asked for.",
        ),
    };
    let mut method = Method {
        words: words.to_owned(),
        formulas,
        symbols,
        references: vec![
            Reference::new(
                "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, ch. 1–2 (stress and pore pressure against depth; cited from memory)",
            ),
            Reference::new("NIST Special Publication 811 (2008), appendix B.8 (units and standard gravity)"),
        ],
        assumptions: vec![assumption.to_owned()],
    };
    method.formulas.push(Formula::new("rho_upright(e) = P / (g z_upright(\"RT\"))", "ρ_e = P / (g z_RT)"));
    method.symbols.extend([
        ("z".to_owned(), "true vertical depth in the datum of the profile".to_owned()),
        ("z_RT".to_owned(), "true vertical depth below the rotary table".to_owned()),
        ("g".to_owned(), format!("standard gravity, {GRAVITY} m/s²")),
    ]);
    method
}

fn notes(at: &PressureAtDepth) -> Vec<String> {
    let about = &at.record().about;
    let mut notes = Vec::new();
    if about.other_hole.is_some() {
        notes.push(format!(
            "The {} belongs to another hole and was carried over at equal elevation above mean sea level.",
            about.meaning
        ));
    }
    match at.below_rotary() {
        None => notes.push(
            "Neither mud weight nor mean gradient: they refer to the rotary table, and its height is not stated (add .tied(…))."
                .to_owned(),
        ),
        Some(z) if z.si() <= 0.0 => {
            notes.push("Neither mud weight nor mean gradient: the point does not lie below the rotary table.".to_owned());
        }
        _ => {}
    }
    notes
}

fn figure(at: &PressureAtDepth) -> Figure {
    let record = at.record();
    let here = [at.pressure.in_mpa(), at.law_depth().si()];
    let points: Vec<[f64; 2]> = match &record.law {
        Law::Table(table) => table.points.iter().map(|(z, p)| [p.in_mpa(), z.si()]).collect(),
        Law::Gradient { from, start, .. } => {
            let begin = Law::start_pressure(*start, record.about.tie).unwrap_or_default();
            vec![[begin.in_mpa(), from.tvd.si()], here]
        }
    };
    let span = |axis: usize, least: f64| {
        let values = points.iter().chain([&here]).filter_map(|p| p.get(axis).copied());
        let (low, high) = values.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| (l.min(v), h.max(v)));
        let room = (0.08 * (high - low)).max(least);
        (low - room, high + room)
    };
    let ((left, right), (top, bottom)) = (span(0, 0.5), span(1, 5.0));
    let below = record.law.datum().words();
    let mut layers = vec![Layer::line(&record.about.symbol, Role::First, points.iter().copied())];
    if matches!(record.law, Law::Table(_)) && points.len() <= 60 {
        layers.push(Layer::Points { label: String::new(), role: Role::Quiet, mark: Mark::Cross, points });
    }
    layers.push(Layer::Points {
        label: at.pressure.to_string(),
        role: Role::Limit,
        mark: Mark::Dot,
        points: vec![here],
    });
    Figure {
        caption: format!("{} against depth; the dot is the depth asked for.", capital(&record.about.meaning)),
        alt: format!(
            "The {} against depth below {below}; at {} m it is {} MPa.",
            record.about.meaning,
            metres(at.law_depth()),
            fixed(at.pressure.in_mpa(), 2)
        ),
        x: Axis::new(&format!("{} {} (MPa)", record.about.meaning, record.about.symbol), left, right),
        y: Axis::new(&format!("TVD below {below} (m)"), top, bottom).downward(),
        equal_scale: false,
        layers,
    }
}
