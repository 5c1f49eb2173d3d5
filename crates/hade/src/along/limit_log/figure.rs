//! The figures of a log: mud weights against measured depth, pressures against true vertical depth.

use super::limit_log::LimitLog;
use super::row::LogRow;
use super::section::pressure_of;
use super::steps::stretches_words;
use super::summary::LogOutcome;
use crate::card::{Axis, Figure, Layer, Role};
use crate::units::{Length, Pressure, Quantity, fixed};
use crate::well::MudState;

/// What of a row is drawn as a line.
type Curve = (&'static str, Role, fn(&LogRow) -> Option<Pressure>);

const CURVES: [Curve; 5] = [
    ("pore pressure", Role::First, |row| Some(row.pore)),
    ("lower shear limit", Role::Second, |row| row.lower_shear),
    ("least stress", Role::Third, |row| Some(row.least_stress)),
    ("initiation", Role::Fourth, |row| row.initiation),
    ("overburden", Role::Quiet, |row| Some(row.sv)),
];

/// A hole whose TVD changes by less runs level, metres.
const LEVEL: f64 = 5.0;
/// Initiation far above the overburden is left out of the frame.
const FAR: f64 = 1.35;

pub(super) fn figures(log: &LimitLog, outcome: &LogOutcome) -> Vec<Figure> {
    let (top, bottom) = ends(&outcome.rows, |row| row.tvd);
    let mut figures = vec![against_md(log, outcome)];
    // Along a level hole there is no depth to draw against.
    if bottom - top >= LEVEL {
        figures.push(against_tvd(log, outcome));
    }
    figures
}

/// Mud weights against measured depth, with sections and mud.
pub(super) fn against_md(log: &LimitLog, outcome: &LogOutcome) -> Figure {
    let rows = &outcome.rows;
    let sg = |row: &LogRow, pressure: Pressure| row.mud_weight(pressure).in_sg();
    let (top, bottom) = ends(rows, |row| row.md);
    let mut layers = bands(outcome);
    layers.extend(lines(rows, |row| row.md.si(), sg));
    for section in &log.sections {
        let (from, to) = (section.from.si().max(top), section.to.si().min(bottom));
        let Some(mud) = section.mud else { continue };
        let rows: Vec<&LogRow> = section.rows(rows).collect();
        for (state, label, role) in
            [(MudState::Static, "static mud", Role::Limit), (MudState::Circulating, "circulating mud", Role::Range)]
        {
            let at = |row: &LogRow| pressure_of(&mud, state, row.tvd).map(|p| sg(row, p));
            let Some(weight) = rows.first().and_then(|row| at(row)) else { continue };
            let named = layers.iter().any(|layer| matches!(layer, Layer::Line { label: known, .. } if known == label));
            let label = if named { "" } else { label };
            layers.push(Layer::line(label, role, [[weight, from], [weight, to]]));
        }
    }
    let (low, high) = span(rows.iter().flat_map(|row| drawn(row).map(|p| sg(row, p))));
    for section in &log.sections {
        let (from, to) = (section.from.si(), section.to.si());
        if from > top && from < bottom {
            let label = format!("{} from MD {} m", section.name, fixed(from, 0));
            layers.push(Layer::line(&label, Role::Quiet, [[low, from], [high, from]]));
        }
        if to > top && to < bottom && !log.sections.iter().any(|other| other.from == section.to) {
            layers.push(Layer::line("", Role::Quiet, [[low, to], [high, to]]));
        }
    }
    Figure {
        caption: format!(
            "Pressure limits against depth along {}, as mud weights below the rotary table{}.",
            log.hole(),
            bands_words(outcome)
        ),
        alt: alt(log, outcome),
        x: Axis::new("mud weight (sg)", low, high),
        y: Axis::new("measured depth (m)", top, bottom).downward(),
        equal_scale: false,
        layers,
    }
}

/// Pressures against true vertical depth.
fn against_tvd(log: &LimitLog, outcome: &LogOutcome) -> Figure {
    let rows = &outcome.rows;
    let (top, bottom) = ends(rows, |row| row.tvd);
    let (low, high) = span(rows.iter().flat_map(|row| drawn(row).map(Pressure::in_mpa)));
    Figure {
        caption: format!("Pressure limits against true vertical depth below the rotary table, along {}.", log.hole()),
        alt: alt(log, outcome),
        x: Axis::new("pressure (MPa)", low, high),
        y: Axis::new("TVD (m)", top, bottom).downward(),
        equal_scale: false,
        layers: lines(rows, |row| row.tvd.si(), |_, pressure| pressure.in_mpa()),
    }
}

/// The limits as lines; each breaks where there is none, and is named once.
fn lines(rows: &[LogRow], depth: impl Fn(&LogRow) -> f64, value: impl Fn(&LogRow, Pressure) -> f64) -> Vec<Layer> {
    let mut layers = Vec::new();
    for (label, role, of) in CURVES {
        let mut parts: Vec<Vec<[f64; 2]>> = vec![Vec::new()];
        for row in rows {
            match (of(row), parts.last_mut()) {
                (Some(pressure), Some(part)) => part.push([value(row, pressure), depth(row)]),
                _ => parts.push(Vec::new()),
            }
        }
        parts.retain(|part| part.len() > 1);
        // The longest part bears the name.
        let longest = parts.iter().map(Vec::len).max().unwrap_or(0);
        let mut named = false;
        for part in parts {
            let name = if part.len() == longest && !named { label } else { "" };
            named |= !name.is_empty();
            layers.push(Layer::line(name, role, part));
        }
    }
    layers
}

/// What the bands are, for the caption: words on them would lie over lines.
fn bands_words(outcome: &LogOutcome) -> String {
    let mut words = String::new();
    if outcome.sections.iter().any(|section| section.common().is_none() && !section.conflicts.is_empty()) {
        words.push_str("; hatched: no mud weight at all, or none in common with the rest of its section");
    }
    if outcome.rows.iter().any(|row| row.depleted) {
        words.push_str("; tinted: depleted");
    }
    words
}

/// Where no mud weight serves, hatched; depleted stretches, tinted.
fn bands(outcome: &LogOutcome) -> Vec<Layer> {
    let mut layers = Vec::new();
    let band = |role: Role, [from, to]: [Length; 2]| Layer::RowBand {
        label: String::new(),
        role,
        from: from.si(),
        to: to.si(),
    };
    let all: Vec<&LogRow> = outcome.rows.iter().collect();
    for stretch in super::section::stretches(&all, |row| row.depleted) {
        layers.push(band(Role::Quiet, stretch));
    }
    let conflicts = outcome.sections.iter().filter(|section| section.common().is_none());
    for stretch in conflicts.flat_map(|section| section.conflicts.clone()) {
        layers.push(band(Role::Failing, stretch));
    }
    layers
}

fn ends(rows: &[LogRow], of: impl Fn(&LogRow) -> Length) -> (f64, f64) {
    rows.iter().map(|row| of(row).si()).fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| (l.min(v), h.max(v)))
}

/// The pressures of a row that must be within the frame.
fn drawn(row: &LogRow) -> [Pressure; 5] {
    let or_pore = |pressure: Option<Pressure>| pressure.unwrap_or(row.pore);
    let initiation = row.initiation.filter(|p| *p < row.sv * FAR);
    [row.pore, or_pore(row.lower_shear), row.least_stress, row.sv, or_pore(initiation)]
}

/// What is drawn, with some room on either side.
fn span(values: impl Iterator<Item = f64>) -> (f64, f64) {
    let (low, high) = values.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| (l.min(v), h.max(v)));
    let room = (0.06 * (high - low)).max(1e-3);
    (low - room, high + room)
}

fn alt(log: &LimitLog, outcome: &LogOutcome) -> String {
    let mut words =
        format!("Pore pressure, lower shear limit, least stress, initiation and overburden along {}.", log.hole());
    if let Some(narrowest) = outcome.narrowest {
        words.push_str(&format!(
            " The range is narrowest at MD {} m in {}: {} MPa.",
            fixed(narrowest.md.si(), 1),
            narrowest.layer,
            fixed(narrowest.breadth.in_mpa(), 2)
        ));
    }
    for section in &outcome.sections {
        words.push_str(&match section.common() {
            Some((bottom, top)) => {
                format!(" {}: {} to {} sg in common.", section.name, fixed(bottom.in_sg(), 3), fixed(top.in_sg(), 3))
            }
            None => format!(" {}: no common mud weight ({}).", section.name, stretches_words(&section.conflicts)),
        });
    }
    words
}
