//! What a log comes to: where its range is narrowest, where there is none, and its sections.

use serde::{Deserialize, Serialize};

use super::friction::FrictionAlong;
use super::row::LogRow;
use super::section::{HoleSection, SectionRange, stretches};
use crate::frames::Name;
use crate::units::{Length, Pressure};

/// Where the recommended range is narrowest.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct Narrowest {
    /// The measured depth.
    pub md: Length,
    /// How far the top is above the bottom there; negative: no pressure is recommended.
    pub breadth: Pressure,
    pub(super) layer: Name,
}

/// What came out: the rows that are printed, and what the log comes to.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct LogOutcome {
    pub(in crate::along) rows: Vec<LogRow>,
    /// `None` when an end is missing at every depth.
    pub(super) narrowest: Option<Narrowest>,
    /// Where no pressure is recommended, by measured depth.
    pub(super) empty: Vec<[Length; 2]>,
    pub(super) sections: Vec<SectionRange>,
    pub(super) friction: Option<FrictionAlong>,
}

impl LogOutcome {
    pub(super) fn of(rows: Vec<LogRow>, sections: &[HoleSection], friction: Option<f64>) -> Self {
        let whole = whole(&rows);
        let sections = if sections.is_empty() { whole.as_slice() } else { sections };
        LogOutcome {
            narrowest: narrowest(&rows),
            empty: stretches(&rows.iter().collect::<Vec<_>>(), |row| row.is_empty()),
            sections: sections.iter().filter_map(|section| SectionRange::of(section, &rows)).collect(),
            friction: friction.and_then(|friction| FrictionAlong::of(&rows, friction)),
            rows,
        }
    }
}

/// The whole log as one section, where none was stated.
fn whole(rows: &[LogRow]) -> Vec<HoleSection> {
    let ends = rows.first().zip(rows.last());
    ends.map(|(first, last)| HoleSection::between("whole log", first.md, last.md)).into_iter().collect()
}

fn narrowest(rows: &[LogRow]) -> Option<Narrowest> {
    let all = rows.iter().filter_map(|row| Some(Narrowest { md: row.md, breadth: row.breadth()?, layer: row.layer }));
    all.reduce(|a, b| if b.breadth < a.breadth { b } else { a })
}
