//! What the card of an overburden says: the column, layer by layer, as a table and two figures.

use super::column::SEA_WATER;
use super::density_log::LogSource;
use super::overburden::{Overburden, OverburdenRecord, Top};
use crate::card::{
    Axis, Column, Explanation, Figure, Formula, Item, Layer as Drawn, Mark, Method, Reference, Role, Step, Table,
};
use crate::frames::Datum;
use crate::units::{Density, GRAVITY, Length, Pressure, Quantity, as_typed, fixed};

/// One stretch of the column: name, from, to, density; depths below the log's datum.
struct Stretch {
    what: String,
    from: Length,
    to: Length,
    density: Density,
}

fn column(record: &OverburdenRecord) -> Vec<Stretch> {
    let mut stretches = Vec::new();
    let surface = record.surface().unwrap_or_default();
    let water = record.water().unwrap_or_default();
    if let Top::Sea { .. } = record.top {
        stretches.push(Stretch {
            what: "sea water".to_owned(),
            from: surface - water,
            to: surface,
            density: Density::kg_m3(SEA_WATER),
        });
    }
    stretches.push(Stretch {
        what: "above the log, stated".to_owned(),
        from: surface,
        to: record.first_sample(),
        density: record.top.mean_density(),
    });
    for layer in &record.layers {
        stretches.push(Stretch { what: "log".to_owned(), from: layer.top, to: layer.bottom, density: layer.density });
    }
    stretches
}

fn hole_words(record: &OverburdenRecord) -> &'static str {
    record.about.hole.map_or("the log's hole", |name| name.text())
}

fn grams(density: Density, decimals: usize) -> String {
    fixed(density.in_g_cm3(), decimals)
}

pub(super) fn explain(sv: &Overburden) -> Explanation {
    let record = sv.record();
    let datum = record.about.datum.words();
    let below = record.depth.below.words();
    let mut steps = vec![depth_step(sv)];
    steps.push(Step::words(format!(
        "The {} values of the log down to there are put together to {} layers; each has the mean density of the straight lines between its values, so the layers weigh exactly what the log weighs.",
        record.samples,
        record.layers.len()
    )));
    let mut sum = 0.0;
    let rows = column(record)
        .into_iter()
        .map(|s| {
            let added = s.density.column(s.to - s.from);
            sum += added.si();
            vec![
                s.what,
                fixed(s.from.si(), 1),
                fixed(s.to.si(), 1),
                grams(s.density, 4),
                fixed(added.in_mpa(), 4),
                fixed(sum * 1e-6, 4),
            ]
        })
        .collect();
    steps.push(Step::Table {
        table: Table {
            caption: format!(
                "The column above the depth asked for; depths below {datum} of {}; added = ρ g (to − from)",
                hole_words(record)
            ),
            columns: vec![
                Column::text("stretch"),
                Column::number("from", "m"),
                Column::number("to", "m"),
                Column::number("mean density", "g/cm³"),
                Column::number("added", "MPa"),
                Column::number("S_v at its bottom", "MPa"),
            ],
            rows,
        },
    });
    let rotary = record.below_rotary().unwrap_or_default();
    steps.push(Step::worked(format!(
        "mean gradient = {} MPa / {} m below the rotary table = {} MPa/km",
        fixed(sv.stress.in_mpa(), 4),
        fixed(rotary.si(), 2),
        fixed(sv.gradient.in_mpa_per_km(), 3)
    )));
    Explanation {
        title: format!(
            "Vertical stress at TVD {} m from the density log of {}",
            as_typed(record.depth.tvd.in_m()),
            hole_words(record)
        ),
        headline: format!(
            "S_v = {} at TVD {} m below {below} ({})",
            sv.stress,
            as_typed(record.depth.tvd.in_m()),
            sv.gradient
        ),
        inputs: inputs(record),
        results: vec![
            Item::computed("S_v", "total vertical stress", sv.stress),
            Item::computed("G_v", "mean gradient of S_v below the rotary table", sv.gradient),
            Item::new(
                "ρ_av",
                "mean density of the rock above",
                Density::KIND,
                vec![sv.mean_density.si()],
                format!("{} g/cm³", grams(sv.mean_density, 3)),
            ),
        ],
        method: method(),
        steps,
        figures: vec![densities(sv), stresses(sv)],
        notes: notes(record),
        topics: vec!["overburden".to_owned()],
    }
}

fn depth_step(sv: &Overburden) -> Step {
    let record = sv.record();
    let point = record.hole.elevation(record.depth.below).unwrap_or_default() - record.depth.tvd;
    Step::worked(format!(
        "{} m below {} of the hole asked about (its {}) = elevation {} m = {} m below {} of {} (stated with its log: {})",
        as_typed(record.depth.tvd.in_m()),
        record.depth.below.words(),
        record.hole.words(),
        fixed(point.si(), 2),
        fixed(sv.log_depth().si(), 2),
        record.about.datum.words(),
        hole_words(record),
        record.log_tie.words()
    ))
}

fn inputs(record: &OverburdenRecord) -> Vec<Item> {
    let mut items = Vec::new();
    match &record.about.source {
        LogSource::File { path, sha256, curve } => {
            items.push(Item::file(
                format!("density log of {}, curve {curve}", hole_words(record)),
                path.clone(),
                sha256.clone(),
            ));
        }
        LogSource::Typed => items.push(Item::new(
            "",
            "density column",
            "density column",
            record.layers.iter().flat_map(|l| [l.top.si(), l.bottom.si(), l.density.si()]).collect(),
            format!("{} values, put together to {} layers", record.samples, record.layers.len()),
        )),
    }
    let level = |of: Datum, tie: crate::frames::DatumTie| tie.elevation(of).ok();
    if !record.about.tie_in_file {
        for (symbol, of) in [("e_RL", Datum::RotaryTable), ("e_G", Datum::Ground), ("e_M", Datum::Mudline)] {
            if let Some(elevation) = level(of, record.log_tie) {
                let name = format!("{} of the log's hole, above mean sea level", of.words().trim_start_matches("the "));
                items.push(Item::typed(symbol, name, elevation));
            }
        }
    }
    items.push(Item::typed(
        "z",
        format!("true vertical depth asked for, below {}", record.depth.below.words()),
        record.depth.tvd,
    ));
    let of = if record.depth.below == Datum::MeanSeaLevel { Datum::RotaryTable } else { record.depth.below };
    if let (false, Some(elevation)) = (record.hole == record.log_tie, level(of, record.hole)) {
        let symbol = if of == Datum::RotaryTable { "e_RT" } else { "e_s" };
        let name = format!("{} of the hole asked about, above mean sea level", of.words().trim_start_matches("the "));
        items.push(Item::typed(symbol, name, elevation));
    }
    let density = record.top.mean_density();
    items.push(Item::new(
        "ρ_top",
        format!(
            "mean density from {} to the first value of the log, {}",
            record.top.surface().words(),
            record.first_sample()
        ),
        Density::KIND,
        vec![density.si()],
        format!("{} g/cm³", as_typed(density.in_g_cm3())),
    ));
    if let Some(length) = record.bridged {
        items.push(Item::choice("", "gaps of the log bridged by straight lines", format!("up to {length} long")));
    }
    items
}

fn notes(record: &OverburdenRecord) -> Vec<String> {
    let mut notes = Vec::new();
    if !record.gaps.is_empty() {
        let gaps: Vec<String> = record
            .gaps
            .iter()
            .take(10)
            .map(|g| format!("{}–{} m", fixed(g.top.si(), 1), fixed(g.bottom.si(), 1)))
            .collect();
        notes.push(format!(
            "The log has no values at {}{}; straight lines were put across.",
            gaps.join(", "),
            if record.gaps.len() > 10 { " and more" } else { "" }
        ));
    }
    if record.hole != record.log_tie {
        notes
            .push("The depth belongs to another hole than the log and was carried over at equal elevation.".to_owned());
    }
    notes
}

fn method() -> Method {
    Method {
        words: "The weight of everything above the depth: a stated mean density from the surface to the first value of the log, then the log, density running straight between its values (trapezoids). Air between rotary table and ground weighs nothing; the sea is counted with 1025 kg/m³.".to_owned(),
        formulas: vec![
            Formula::new(
                "S_v = g (rho_w d_w + rho_\"top\" h_\"top\" + integral rho d z)",
                "S_v = g (ρ_w d_w + ρ_top h_top + ∫ ρ dz)",
            ),
            Formula::new("integral rho d z = sum rho_k (z_(k+1) - z_k)", "∫ ρ dz = Σ ρ_k (z_(k+1) − z_k), ρ_k the mean density of a layer"),
        ],
        symbols: vec![
            ("ρ_w".to_owned(), "density of sea water".to_owned()),
            ("d_w".to_owned(), "depth of the sea, none on land".to_owned()),
            ("ρ_top".to_owned(), "mean density above the first value of the log".to_owned()),
            ("h_top".to_owned(), "height of the rock above the first value of the log".to_owned()),
            ("ρ_k".to_owned(), "density at the depth z_k of the log".to_owned()),
            ("g".to_owned(), format!("standard gravity, {GRAVITY} m/s²")),
        ],
        references: vec![Reference::new(
            "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, ch. 1 (vertical stress by integrating density; cited from memory)",
        )],
        assumptions: vec![
            "The log's hole is vertical: its measured depth is true vertical depth.".to_owned(),
            "The vertical stress is the weight of the overburden (no arching, level ground and layers).".to_owned(),
            "Between the log's hole and the hole asked about, ground and layers lie level.".to_owned(),
            "The log reads the bulk density of undisturbed rock.".to_owned(),
        ],
    }
}

fn depth_axis(record: &OverburdenRecord, to: Length) -> Axis {
    let label = format!("depth below {} of {} (m)", record.about.datum.words(), hole_words(record));
    let top = column(record).first().map_or(0.0, |s| s.from.si()).min(0.0);
    Axis::new(&label, top, 1.03 * to.si()).downward()
}

fn densities(sv: &Overburden) -> Figure {
    let record = sv.record();
    let stretches = column(record);
    let mut stated = Vec::new();
    let mut logged = Vec::new();
    for s in &stretches {
        let list = if s.what == "log" { &mut logged } else { &mut stated };
        list.push([s.density.in_g_cm3(), s.from.si()]);
        list.push([s.density.in_g_cm3(), s.to.si()]);
    }
    let values = stretches.iter().map(|s| s.density.in_g_cm3());
    let (least, most) = values.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, m), v| (l.min(v), m.max(v)));
    Figure {
        caption: "Density of the column: the log, put together to layers, and what was stated above it.".to_owned(),
        alt: format!(
            "Density against depth, between {} and {} g/cm³, mean {} g/cm³ over the rock above {} m.",
            fixed(least, 2),
            fixed(most, 2),
            grams(sv.mean_density, 3),
            fixed(sv.log_depth().si(), 1)
        ),
        x: Axis::new("density (g/cm³)", (least - 0.1).max(0.0), most + 0.1),
        y: depth_axis(record, sv.log_depth()),
        equal_scale: false,
        layers: vec![Drawn::line("stated", Role::Second, stated), Drawn::line("log", Role::First, logged)],
    }
}

fn stresses(sv: &Overburden) -> Figure {
    let record = sv.record();
    let mut sum = Pressure::default();
    let mut points = Vec::new();
    for s in column(record) {
        if points.is_empty() {
            points.push([0.0, s.from.si()]);
        }
        sum = sum + s.density.column(s.to - s.from);
        points.push([sum.in_mpa(), s.to.si()]);
    }
    Figure {
        caption: "Total vertical stress against depth; the dot is the depth asked for.".to_owned(),
        alt: format!(
            "Vertical stress rises from {} MPa at the first value of the log to {} MPa at {} m below the log's datum.",
            fixed(sv.top_stress().in_mpa(), 2),
            fixed(sv.stress.in_mpa(), 2),
            fixed(sv.log_depth().si(), 1)
        ),
        x: Axis::new("total vertical stress S_v (MPa)", 0.0, 1.15 * sv.stress.in_mpa()),
        y: depth_axis(record, sv.log_depth()),
        equal_scale: false,
        layers: vec![
            Drawn::line("S_v", Role::First, points),
            Drawn::Points {
                label: format!("{}", sv.stress),
                role: Role::Limit,
                mark: Mark::Dot,
                points: vec![[sv.stress.in_mpa(), sv.log_depth().si()]],
            },
        ],
    }
}
