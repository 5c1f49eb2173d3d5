//! Drilling events.

use std::path::Path;

use serde::{Deserialize, Serialize};

use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::Name;
use crate::sheet::IntoGiven;
use crate::units::{Density, Length, Quantity, with_typed_unit};

/// What happened, or what was tested or measured.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[non_exhaustive]
pub enum EventKind {
    /// Mud was lost to the formation.
    Losses,
    /// The formation's fluid came in.
    Gain,
    /// Pipe was dragged through the hole.
    TightHole,
    /// Cuttings or cavings closed the annulus.
    PackOff,
    /// Pieces of the wall came up.
    Cavings,
    /// The caliper found the hole enlarged.
    Enlarged,
    /// The caliper found the hole in gauge: an event that was not.
    InGauge,
    /// A leak-off test that leaked.
    LeakOff,
    /// A formation-integrity test: the pressure was held, so it is a lower bound.
    FormationIntegrity,
}

impl EventKind {
    pub(super) const ALL: [EventKind; 9] = [
        EventKind::Losses,
        EventKind::Gain,
        EventKind::TightHole,
        EventKind::PackOff,
        EventKind::Cavings,
        EventKind::Enlarged,
        EventKind::InGauge,
        EventKind::LeakOff,
        EventKind::FormationIntegrity,
    ];

    /// "losses", as a file writes it too.
    pub fn words(self) -> &'static str {
        match self {
            EventKind::Losses => "losses",
            EventKind::Gain => "gain",
            EventKind::TightHole => "tight hole",
            EventKind::PackOff => "pack-off",
            EventKind::Cavings => "cavings",
            EventKind::Enlarged => "caliper enlarged",
            EventKind::InGauge => "caliper in gauge",
            EventKind::LeakOff => "leak-off test",
            EventKind::FormationIntegrity => "formation-integrity test",
        }
    }

    /// The kind that a file names in one of the trade's usual words.
    pub(super) fn from_words(words: &str) -> Option<Self> {
        let plain = words.trim().to_lowercase().replace(['_', '-'], " ");
        match plain.as_str() {
            "loss" | "lost circulation" => Some(EventKind::Losses),
            "kick" | "influx" => Some(EventKind::Gain),
            "packoff" => Some(EventKind::PackOff),
            "lot" | "xlot" | "leak off" => Some(EventKind::LeakOff),
            "fit" => Some(EventKind::FormationIntegrity),
            _ => EventKind::ALL.into_iter().find(|kind| kind.words().replace('-', " ") == plain),
        }
    }
}

/// One event.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct DrillingEvent {
    /// The measured depth.
    pub md: Length,
    /// What happened.
    pub kind: EventKind,
    /// The mud weight at rest; of a test the equivalent mud weight at which it leaked, or that was held.
    pub mud_weight: Density,
    /// The equivalent circulating density, where it circulated.
    pub circulating_density: Option<Density>,
}

/// Drilling events along a hole.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct DrillingEvents {
    pub(in crate::along) events: Vec<DrillingEvent>,
    /// The file they were read from, and its SHA-256.
    pub(in crate::along) file: Option<(String, String)>,
    /// The hole that the file names.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(in crate::along) hole: Option<Name>,
}

/// More events are no list that a record can hold.
pub(super) const MOST: usize = 200;
/// No mud is heavier than this, kg/m³; beyond it a unit was mistaken.
const HEAVIEST: f64 = 4000.0;

impl DrillingEvent {
    /// Itself, or the error that says what cannot be.
    pub(super) fn checked(self) -> Result<Self> {
        self.md.finite("measured depth of an event")?;
        for (what, density) in
            [("mud weight", Some(self.mud_weight)), ("circulating density", self.circulating_density)]
        {
            let Some(density) = density else { continue };
            if !(density.si() > 0.0 && density.si() <= HEAVIEST) {
                return Err(Error::out_of_range(
                    format!("{what} of the event at MD {}", with_typed_unit(self.md)),
                    with_typed_unit(density),
                    "above 0 sg and at most 4 sg",
                ));
            }
        }
        match self.circulating_density {
            Some(circulating) if circulating < self.mud_weight => Err(Error::not_physical(
                format!(
                    "The circulating density {} of the event at MD {}",
                    with_typed_unit(circulating),
                    with_typed_unit(self.md)
                ),
                format!("it is below the mud weight, {}; friction only adds to it.", with_typed_unit(self.mud_weight)),
            )),
            _ => Ok(self),
        }
    }
}

impl DrillingEvents {
    /// Events as they are typed, in any order.
    ///
    /// # Errors
    /// When there is none or more than 200, or a number is out of its range.
    pub fn from_events(events: &[DrillingEvent]) -> Result<Self> {
        if events.is_empty() || events.len() > MOST {
            return Err(Error::out_of_range(
                "the number of events",
                events.len().to_string(),
                format!("between 1 and {MOST}"),
            ));
        }
        let events = events.iter().map(|event| event.checked()).collect::<Result<Vec<_>>>()?;
        Ok(DrillingEvents { events, file: None, hole: None })
    }

    /// Reads events from a CSV file. Lines that begin with `#` above the column names declare what a
    /// table of numbers cannot say:
    ///
    /// ```text
    /// # depth_unit: m | ft
    /// # depth_datum: rotary table
    /// # mud_weight_unit: sg | kg/m3 | g/cm3 | ppg | pcf
    /// md,kind,mud_weight,ecd
    /// ```
    ///
    /// `kind` is one of losses, gain, tight hole, pack-off, cavings, caliper enlarged, caliper in gauge,
    /// leak-off test, formation-integrity test. The column `ecd`, or cells of it, may be left out. A column `remark`
    /// is not read; any other needs a line `# not_read: its name`.
    ///
    /// # Errors
    /// With file, line, column and what to change: a missing declaration or column, an unknown kind,
    /// decimal commas, and what [`DrillingEvents::from_events`] refuses.
    pub fn read_csv(path: impl AsRef<Path>) -> Result<Self> {
        super::read::read_csv(path.as_ref())
    }

    /// Those between two measured depths, these included: for a log that does not reach all of them.
    ///
    /// # Errors
    /// When there is none.
    pub fn between(&self, from: Length, to: Length) -> Result<Self> {
        let events: Vec<DrillingEvent> =
            self.events.iter().filter(|event| event.md >= from && event.md <= to).copied().collect();
        if events.is_empty() {
            return Err(Error::not_physical(
                format!(
                    "The {} events between MD {} and {}",
                    self.events.len(),
                    with_typed_unit(from),
                    with_typed_unit(to)
                ),
                "none of them lies there; give depths that hold one.",
            ));
        }
        Ok(DrillingEvents { events, ..self.clone() })
    }

    /// The events, as they were given.
    pub fn events(&self) -> Vec<DrillingEvent> {
        self.events.clone()
    }
}

impl IntoGiven for DrillingEvents {
    type Value = DrillingEvents;
    /// As one given.
    fn into_given(self, symbol: &str, meaning: &str) -> (DrillingEvents, Item, Option<(f64, String)>) {
        let item = self.item(symbol, meaning);
        (self, item, None)
    }
}

impl DrillingEvents {
    /// All of them as one value.
    pub(super) fn item(&self, symbol: &str, name: &str) -> Item {
        let numbers = self.events.iter().flat_map(|event| {
            let ecd = event.circulating_density.map(Quantity::si);
            [event.md.si(), event.mud_weight.si()].into_iter().chain(ecd)
        });
        let shown = format!("{} events", self.events.len());
        Item::new(symbol, name, "drilling events", numbers.collect(), shown)
    }
}
