//! The card of a hindcast.

use super::check::check;
use super::event::EventKind;
use super::hindcast::{Hindcast, HindcastInputs, HindcastOutcome, HindcastRow};
use crate::along::limit_log::LimitLog;
use crate::card::{
    Card, Check, Column, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Method, Role, Step, Table,
};
use crate::error::Result;
use crate::units::{GRAVITY, Length, Quantity, as_typed, fixed};

impl Explain for Hindcast {
    const KIND: &'static str = "hindcast";
    /// The limits rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = HindcastInputs;
    type Outcome = HindcastOutcome;

    fn compute(inputs: HindcastInputs) -> Result<Self> {
        LimitLog::compute(inputs.log)?.hindcast(&inputs.events, inputs.within)
    }
    fn inputs(&self) -> HindcastInputs {
        HindcastInputs { log: self.log.inputs(), events: self.events.clone(), within: self.within }
    }
    fn outcome(&self) -> HindcastOutcome {
        HindcastOutcome { rows: self.rows.clone() }
    }
    fn check(inputs: &HindcastInputs, outcome: &HindcastOutcome) -> Vec<Check> {
        check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let (hits, misses) = self.count();
        let mut inputs = self.log.input_items();
        inputs.push(match &self.events.file {
            Some((path, sha256)) => Item::file("drilling events", path, sha256),
            None => self.events.item("", "drilling events"),
        });
        inputs.push(Item::typed("", "tolerance of the hindcast", self.within).chosen());
        Explanation {
            title: format!("Drilling events of {} held against the limits", self.log.hole()),
            headline: format!("{hits} of {} events are told by the limits, {misses} not", hits + misses),
            inputs,
            results: self.rows.iter().filter_map(beyond_item).collect(),
            method: method(),
            steps: self.steps(),
            figures: vec![self.figure()],
            notes: self.notes(),
            topics: ["mud-weight", "limits", "wall", "elastic", "hindcast"].map(str::to_owned).to_vec(),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let mut said = Vec::new();
        let holes = self.events.hole.zip(self.log.survey().hole());
        if let Some((theirs, ours)) = holes.filter(|(theirs, ours)| theirs != ours) {
            said.push(format!(
                "The events are of {theirs} and are placed here at their measured depths in {ours}: the same measured depth of another hole lies at another depth and in another direction. Put them at the measured depths of {ours} where the same rock lies, or hold them against a log of {theirs}."
            ));
        }
        let missed: Vec<String> = self.rows.iter().filter(|row| !row.hit).map(named).collect();
        if missed.is_empty() {
            return said;
        }
        let shown = missed.iter().take(NAMED).cloned().collect::<Vec<_>>().join(", ");
        let more = if missed.len() > NAMED { format!(" and {} more", missed.len() - NAMED) } else { String::new() };
        said.push(format!("{} of {} events are not told by the limits: {shown}{more}.", missed.len(), self.rows.len()));
        said
    }

    fn upstream(&self) -> Vec<Card> {
        self.log.upstream()
    }
}

/// Misses that a warning names.
const NAMED: usize = 6;

/// "tight hole at MD 2560.0 m".
fn named(row: &HindcastRow) -> String {
    format!("{} at MD {} m", row.event.kind.words(), fixed(row.event.md.si(), 1))
}

fn beyond_item(row: &HindcastRow) -> Option<Item> {
    let name = format!(
        "{} at MD {}: distance to the {}, on the event's side",
        row.event.kind.words(),
        row.event.md,
        row.against.words()
    );
    Some(Item::computed("Δp_e", name, row.beyond?))
}

fn method() -> Method {
    Method {
        words: "Each event is held against the limit that speaks of it, worked out at its own measured depth: losses (circulating) against the least stress, a gain (at rest) against the pore pressure, tight hole, pack-off, cavings and an enlarged caliper (at rest) against the lower shear limit at the allowed width; a caliper in gauge is told where the mud is above that limit. A leak-off test is told between least stress and initiation; a formation-integrity test did not leak and is a lower bound: it is told where it lies below the higher of the two.".to_owned(),
        formulas: vec![Formula::new("p = rho g \"TVD\"", "p = ρ g TVD")],
        symbols: vec![("g".to_owned(), format!("standard gravity, {GRAVITY} m/s²"))],
        references: Vec::new(),
        assumptions: vec![
            "Mud weights and depths are as reported; an event shows where it was noticed, not always where it began.".to_owned(),
            "A hit shows that the limits do not contradict the event, not that they explain it (common practice, no source).".to_owned(),
        ],
    }
}

impl Hindcast {
    fn steps(&self) -> Vec<Step> {
        let mut steps = Vec::new();
        if let Some(row) = self.rows.first() {
            let density = match (row.event.kind, row.event.circulating_density) {
                (EventKind::Losses, Some(circulating)) => circulating,
                _ => row.event.mud_weight,
            };
            steps.push(Step::worked(format!(
                "the first event: p = {} kg/m³ · {GRAVITY} m/s² · {} m = {} MPa{}; every other goes the same way",
                as_typed(density.in_kg_m3()),
                fixed(row.tvd.si(), 3),
                fixed(row.pressure.in_mpa(), 4),
                row.limit.map_or_else(String::new, |limit| format!(
                    ", against the {} {} MPa",
                    row.against.words(),
                    fixed(limit.in_mpa(), 4)
                ))
            )));
        }
        steps.push(Step::Table { table: self.table() });
        steps
    }

    fn table(&self) -> Table {
        let row = |row: &HindcastRow| {
            vec![
                fixed(row.event.md.si(), 1),
                row.event.kind.words().to_owned(),
                row.layer().to_owned(),
                fixed(row.event.mud_weight.in_sg(), 3),
                row.event.circulating_density.map_or_else(|| "–".to_owned(), |density| fixed(density.in_sg(), 3)),
                if row.hit { "hit" } else { "miss" }.to_owned(),
                row.reason(),
            ]
        };
        Table {
            caption: "Every event, and whether the limits tell it".to_owned(),
            columns: vec![
                Column::number("MD", "m"),
                Column::text("event"),
                Column::text("layer"),
                Column::number("mud weight", "sg"),
                Column::number("ECD", "sg"),
                Column::text("told"),
                Column::text("reason"),
            ],
            rows: self.rows.iter().map(row).collect(),
        }
    }

    fn notes(&self) -> Vec<String> {
        let mut notes: Vec<String> = Vec::new();
        let missed = self
            .rows
            .iter()
            .filter(|row| !row.hit)
            .map(|row| format!("Not told: {}. {}.", named(row), row.reason()))
            .take(12);
        notes.extend(missed);
        if !self.rows.iter().any(|row| row.event.kind == EventKind::InGauge) {
            notes.push(
                "No depth without trouble is among the events: limits that call everything unstable would do as well."
                    .to_owned(),
            );
        }
        notes
    }

    /// The log with the events on it.
    fn figure(&self) -> Figure {
        let mut figure = self.log.figure();
        let (low, high) = (figure.x.min, figure.x.max);
        let at = |row: &HindcastRow| {
            let density = match (row.event.kind, row.event.circulating_density) {
                (EventKind::Losses, Some(circulating)) => circulating,
                _ => row.event.mud_weight,
            };
            [density.in_sg(), row.event.md.si()]
        };
        for (kind, mark, role) in MARKS {
            let points: Vec<[f64; 2]> = self.rows.iter().filter(|row| row.event.kind == kind).map(at).collect();
            for point in &points {
                figure.x.min = figure.x.min.min(point[0] - 0.02 * (high - low));
                figure.x.max = figure.x.max.max(point[0] + 0.02 * (high - low));
            }
            if points.is_empty() {
                continue;
            }
            if kind == EventKind::FormationIntegrity {
                // A lower bound: the strength lies somewhere to the right.
                for (k, [x, y]) in points.iter().enumerate() {
                    figure.layers.push(Layer::Arrow {
                        label: if k == 0 { "integrity test, a lower bound" } else { "" }.to_owned(),
                        role,
                        from: [*x, *y],
                        to: [x + 0.06 * (high - low), *y],
                    });
                }
            }
            let label = if kind == EventKind::FormationIntegrity { "" } else { kind.words() };
            figure.layers.push(Layer::Points { label: label.to_owned(), role, mark, points });
        }
        let (hits, misses) = self.count();
        figure.caption = format!(
            "Drilling events of {} on the pressure limits against depth; losses at the circulating density, the others at rest.",
            self.log.hole()
        );
        let mut spread: Vec<Length> = self.rows.iter().map(|row| row.event.md).collect();
        spread.sort_by(|a, b| a.si().total_cmp(&b.si()));
        if let (Some(first), Some(last)) = (spread.first(), spread.last()) {
            figure.alt.push_str(&format!(
                " {} events between MD {} and {} m: {hits} told by the limits, {misses} not.",
                self.rows.len(),
                fixed(first.si(), 1),
                fixed(last.si(), 1)
            ));
        }
        figure
    }
}

/// How each kind is marked.
const MARKS: [(EventKind, Mark, Role); 9] = [
    (EventKind::Losses, Mark::Triangle, Role::Third),
    (EventKind::Gain, Mark::Triangle, Role::First),
    (EventKind::TightHole, Mark::Square, Role::Second),
    (EventKind::PackOff, Mark::Square, Role::Limit),
    (EventKind::Cavings, Mark::Diamond, Role::Second),
    (EventKind::Enlarged, Mark::Cross, Role::Second),
    (EventKind::InGauge, Mark::Ring, Role::Quiet),
    (EventKind::LeakOff, Mark::Dot, Role::Limit),
    (EventKind::FormationIntegrity, Mark::Dot, Role::Third),
];
