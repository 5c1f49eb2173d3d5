//! Events held against the limits of the log: which of them it would have told beforehand.

use serde::{Deserialize, Serialize};

use super::event::{DrillingEvent, DrillingEvents, EventKind};
use crate::along::limit_log::{LimitLog, LogInputs, LogRow};
use crate::error::{Error, Result};
use crate::frames::Name;
use crate::units::{Length, Pressure, Quantity, require_not_negative, with_typed_unit};

/// One event, held against the limit that speaks of it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct HindcastRow {
    /// The event.
    pub event: DrillingEvent,
    /// The true vertical depth below the rotary table.
    pub tvd: Length,
    pub(super) layer: Name,
    /// The pressure of the mud that counts: at rest, or circulating for losses; of a test the tested one.
    pub pressure: Pressure,
    /// The limit it is held against; `None` when there is none at that depth.
    pub limit: Option<Pressure>,
    pub(super) against: Against,
    /// How far the pressure is on the side of the limit where the log tells the event, negative when it
    /// is on the other; `None` as the limit.
    pub beyond: Option<Pressure>,
    /// Whether the log tells the event: within the tolerance.
    pub hit: bool,
}

/// The limit that speaks of an event.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub(super) enum Against {
    PorePressure,
    LowerShear,
    LeastStress,
    Initiation,
    /// There is none: no pressure keeps failing arcs within the allowed width.
    NoSafe,
    /// There is none: any pressure does.
    AnySafe,
}

impl Against {
    pub fn words(self) -> &'static str {
        match self {
            Against::PorePressure => "pore pressure",
            Against::LowerShear => "lower shear limit",
            Against::LeastStress => "least stress",
            Against::Initiation => "initiation",
            Against::NoSafe => "no safe pressure in shear",
            Against::AnySafe => "no lower shear limit",
        }
    }
}

/// Events held against a log.
#[derive(Clone, Debug, PartialEq)]
pub struct Hindcast {
    pub(super) log: LimitLog,
    pub(super) events: DrillingEvents,
    pub(super) within: Pressure,
    pub(super) rows: Vec<HindcastRow>,
}

/// The inputs: the log reduced to its printed depths and those of the events, and the events.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct HindcastInputs {
    pub(super) log: LogInputs,
    pub(super) events: DrillingEvents,
    pub(super) within: Pressure,
}

/// What came out, in the order of the events.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct HindcastOutcome {
    pub(super) rows: Vec<HindcastRow>,
}

impl LimitLog {
    /// Holds events against the limits at their depths. An event is a hit when the log tells it: the
    /// pressure of the mud is on the event's side of the limit that speaks of it, or within a tolerance of
    /// it. Losses are held against the least stress, a gain against the pore pressure; tight hole, pack-off,
    /// cavings and an enlarged caliper against the lower shear limit at the log's allowed width, a caliper
    /// in gauge against the same the other way; a leak-off test is a hit between least stress and
    /// initiation, and a formation-integrity test, which did not leak, below the higher of the two.
    ///
    /// # Errors
    /// When the tolerance is negative, or an event lies outside the log.
    pub fn hindcast(&self, events: &DrillingEvents, within: Pressure) -> Result<Hindcast> {
        require_not_negative("tolerance of the hindcast", within)?;
        let mut rows = Vec::with_capacity(events.events.len());
        for event in &events.events {
            let event = event.checked()?;
            let row = self.at(event.md).map_err(|e| {
                Error::not_physical(
                    format!("The event \"{}\" at MD {}", event.kind.words(), with_typed_unit(event.md)),
                    crate::lines::reason(&e)
                        + "; make the log longer, or keep the events in it with events.between(from, to)?.",
                )
            })?;
            rows.push(held(event, &row, within));
        }
        let log = self.with_looks_at(&events.events.iter().map(|event| event.md).collect::<Vec<_>>())?;
        Ok(Hindcast { log, events: events.clone(), within, rows })
    }
}

fn held(event: DrillingEvent, row: &LogRow, within: Pressure) -> HindcastRow {
    let still = event.mud_weight.column(row.tvd);
    let highest = event.circulating_density.map_or(still, |density| density.column(row.tvd));
    let upper = |higher: bool| {
        let initiation = row.initiation.filter(|p| (*p > row.least_stress) == higher);
        initiation.map_or((Against::LeastStress, row.least_stress), |p| (Against::Initiation, p))
    };
    let shear = || match row.lower_shear {
        Some(limit) => (Against::LowerShear, Some(limit)),
        None if row.bottom.is_none() => (Against::NoSafe, None),
        None => (Against::AnySafe, None),
    };
    let some = |(against, limit)| (against, Some(limit));
    // The pressure, the limit, and the sign by which a higher pressure is on the event's side.
    let (pressure, (against, limit), sign) = match event.kind {
        EventKind::Losses => (highest, some((Against::LeastStress, row.least_stress)), 1.0),
        EventKind::Gain => (still, some((Against::PorePressure, row.pore)), -1.0),
        EventKind::TightHole | EventKind::PackOff | EventKind::Cavings | EventKind::Enlarged => (still, shear(), -1.0),
        EventKind::InGauge => (still, shear(), 1.0),
        EventKind::LeakOff => {
            let (low, high) = (upper(false), upper(true));
            // Held against the end that is nearer.
            if still - low.1 < high.1 - still { (still, some(low), 1.0) } else { (still, some(high), -1.0) }
        }
        EventKind::FormationIntegrity => (still, some(upper(true)), -1.0),
    };
    let beyond = limit.map(|limit| (pressure - limit) * sign);
    let hit = match (beyond, against) {
        (Some(beyond), _) => beyond >= -within,
        // Without a limit every pressure fails, or none does.
        (None, against) => (against == Against::NoSafe) == (sign < 0.0),
    };
    HindcastRow { event, tvd: row.tvd, layer: row.layer_name(), pressure, limit, against, beyond, hit }
}

impl HindcastRow {
    /// The name of the layer.
    pub fn layer(&self) -> &'static str {
        self.layer.text()
    }

    /// Why it is a hit or a miss, in one sentence.
    pub fn reason(&self) -> String {
        let weight = |p: Pressure| format!("{:.3} sg", p.mud_weight_at(self.tvd).in_sg());
        let (Some(limit), Some(beyond)) = (self.limit, self.beyond) else {
            return match self.against {
                Against::AnySafe => "there is no lower shear limit here: the wall holds at any low pressure".to_owned(),
                _ => "no pressure keeps failing arcs within the allowed width here".to_owned(),
            };
        };
        let side = if (self.pressure - limit).si() < 0.0 { "below" } else { "above" };
        let by = format!(
            "{} is {:.2} MPa {side} the {}, {}",
            weight(self.pressure),
            (self.pressure - limit).abs().in_mpa(),
            self.against.words(),
            weight(limit)
        );
        let held = match (self.event.kind, self.hit) {
            (EventKind::LeakOff, true) => "; it leaked between least stress and initiation",
            (EventKind::LeakOff, false) if self.against == Against::Initiation && beyond.si() < 0.0 => {
                "; it held more than the log bears"
            }
            (EventKind::LeakOff, false) => "; it leaked at less than the log bears",
            (EventKind::FormationIntegrity, true) => "; it was held, a lower bound",
            (EventKind::FormationIntegrity, false) => "; it was held, more than the log bears",
            (_, true) if beyond.si() < 0.0 => "; within the tolerance",
            (EventKind::Losses, false) => "; losses into openings that are there already are not in these limits",
            (EventKind::TightHole | EventKind::PackOff, false) => {
                "; cuttings, swelling and key seats are not in these limits"
            }
            (EventKind::Cavings | EventKind::Enlarged, false) => {
                "; time, chemistry and planes of weakness that were not stated are not in these limits"
            }
            _ => "",
        };
        by + held
    }
}

impl Hindcast {
    /// Every event with its limit, in the order they were given.
    pub fn rows(&self) -> Vec<HindcastRow> {
        self.rows.clone()
    }

    /// How many events the log tells, and how many it does not.
    pub fn count(&self) -> (usize, usize) {
        let hits = self.rows.iter().filter(|row| row.hit).count();
        (hits, self.rows.len() - hits)
    }
}
