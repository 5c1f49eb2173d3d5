//! The recommended range beside itself: by other criteria, and by other models of the wall, with the
//! same choices.

use serde::{Deserialize, Serialize};

use super::check::Conditions;
use super::ends::{Ends, GovernedPressure, pushed_out_above};
use super::recommended::{RangeInputs, RecommendedRange};
use crate::card::{Check, Item};
use crate::error::{Error, Result};
use crate::rock::Strength;
use crate::units::{Pressure, Quantity};
use crate::well::wall::Wall;
use crate::well::wall::setup::{Seepage, WallSetup};

/// What is different in a range that stands beside another.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Alternative(Other);

#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "other", content = "with", rename_all = "snake_case")]
enum Other {
    Criterion(Strength),
    Seepage(Seepage),
    Impermeable,
}

impl Alternative {
    /// The same wall judged by another criterion.
    pub fn criterion(strength: Strength) -> Self {
        Alternative(Other::Criterion(strength))
    }

    /// The same criterion at a permeable wall, with Biot's coefficient α, 0–1.
    pub fn permeable(biot: f64) -> Self {
        Alternative::partly_sealed(biot, 0.0)
    }

    /// The same criterion at a wall between permeable (sealing 0) and impermeable (sealing 1), with
    /// Biot's coefficient α, 0–1.
    pub fn partly_sealed(biot: f64, sealing: f64) -> Self {
        Alternative(Other::Seepage(Seepage { biot, sealing }))
    }

    /// The same criterion at an impermeable wall.
    pub fn impermeable() -> Self {
        Alternative(Other::Impermeable)
    }

    /// The wall that it makes of another.
    fn of(self, wall: WallSetup) -> WallSetup {
        let mut setup = wall;
        match self.0 {
            Other::Criterion(strength) => setup.inputs.rock.strength = strength,
            Other::Seepage(seepage) => setup.seepage = Some(seepage),
            Other::Impermeable => setup.seepage = None,
        }
        setup
    }

    /// What it takes beyond the wall it stands beside.
    pub(super) fn items(self) -> Vec<Item> {
        match self.0 {
            Other::Criterion(strength) => strength.items(),
            Other::Seepage(seepage) => vec![
                Item::typed("α", "Biot's coefficient", seepage.biot),
                Item::typed("w_s", "sealing of the wall: 0 permeable, 1 impermeable", seepage.sealing).chosen(),
            ],
            Other::Impermeable => Vec::new(),
        }
    }
}

/// One of the ranges that stand beside each other.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct RangeBeside {
    /// The lower shear limit at the allowed width; `None` when no pressure keeps failing arcs within
    /// it, or when any does.
    pub lower_shear: Option<Pressure>,
    /// Initiation; `None` when the wall is parted or spalled at any pressure.
    pub initiation: Option<Pressure>,
    /// Above it the hole is pushed out in shear; `None` when some place fails at any pressure, or none
    /// at any high one.
    pub upper_shear: Option<Pressure>,
    /// The bottom and what governs it; `None` when no pressure keeps failing arcs within the allowed
    /// width.
    pub bottom: Option<GovernedPressure>,
    /// The top and what governs it.
    pub top: Option<GovernedPressure>,
    /// How far its bottom is above that of the first range.
    pub bottom_change: Option<Pressure>,
    /// How far its top is above that of the first range.
    pub top_change: Option<Pressure>,
}

impl RangeBeside {
    fn of(ends: &Ends, first: &Ends) -> Self {
        let change =
            |here: Option<GovernedPressure>, there: Option<GovernedPressure>| Some(here?.pressure - there?.pressure);
        RangeBeside {
            lower_shear: ends.limits.lower_shear.pressure(),
            initiation: ends.limits.initiation.pressure(),
            upper_shear: pushed_out_above(&ends.limits.upper_shear),
            bottom: ends.bottom,
            top: ends.top,
            bottom_change: change(ends.bottom, first.bottom),
            top_change: change(ends.top, first.top),
        }
    }

    /// How far the top is above the bottom; `None` when an end is missing.
    pub fn breadth(&self) -> Option<Pressure> {
        Some(self.top?.pressure - self.bottom?.pressure)
    }

    /// Whether no pressure is recommended.
    pub fn is_empty(&self) -> bool {
        self.breadth().is_none_or(|breadth| breadth <= Pressure::default())
    }
}

/// A recommended range with others beside it, that differ in one thing each.
#[derive(Clone, Debug, PartialEq)]
pub struct RangesBeside {
    pub(super) range: RecommendedRange,
    pub(super) alternatives: Vec<Alternative>,
    /// The walls, in the order of the rows.
    pub(super) walls: Vec<Wall>,
    pub(super) outcome: BesideOutcome,
}

/// The inputs of ranges beside each other.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct BesideInputs {
    pub(super) range: RangeInputs,
    pub(super) alternatives: Vec<Alternative>,
}

/// What came out.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct BesideOutcome {
    /// The first is the range that the others stand beside.
    pub(super) rows: Vec<RangeBeside>,
    /// The highest bottom and the lowest top, where every range has that end.
    pub(super) highest_bottom: Option<Pressure>,
    pub(super) lowest_top: Option<Pressure>,
}

/// More do not stand beside each other on a page.
const MOST: usize = 12;

impl RecommendedRange {
    /// The ranges that the same choices make by another criterion or another model of the wall, beside
    /// this one; each differs from it in one thing. A top that the engineer raised is left aside: the
    /// computed ones are compared.
    ///
    /// # Errors
    /// When the list is empty or longer than twelve, an alternative is this very range or stands twice,
    /// or its strength, Biot's coefficient or sealing is out of range.
    pub fn beside(&self, alternatives: &[Alternative]) -> Result<RangesBeside> {
        if alternatives.is_empty() || alternatives.len() > MOST {
            return Err(Error::out_of_range(
                "number of ranges beside the recommended one",
                alternatives.len().to_string(),
                format!("1 to {MOST}: give a second criterion, the other model of the wall, or both"),
            ));
        }
        let range = self.as_computed();
        let mut walls = vec![range.wall];
        for alternative in alternatives {
            let setup = alternative.of(range.wall.setup);
            if walls.iter().any(|wall| wall.setup == setup) {
                return Err(Error::not_physical(
                    format!("A range beside the recommended one by {} stands there already", words(&Wall::of(setup)?)),
                    "give each criterion and each model of the wall once, other than that of the range itself.",
                ));
            }
            walls.push(Wall::of(setup)?);
        }
        let ends = walls.iter().map(|wall| wall.ends(&range.choices)).collect::<Result<Vec<_>>>()?;
        let rows: Vec<RangeBeside> = ends.iter().map(|e| RangeBeside::of(e, ends.first().unwrap_or(e))).collect();
        let outcome = BesideOutcome {
            highest_bottom: extreme(rows.iter().map(|row| row.bottom), 1.0),
            lowest_top: extreme(rows.iter().map(|row| row.top), -1.0),
            rows,
        };
        Ok(RangesBeside { range, alternatives: alternatives.to_vec(), walls, outcome })
    }
}

/// The largest end (the smallest with sign −1), `None` where one is missing.
fn extreme(ends: impl Iterator<Item = Option<GovernedPressure>>, sign: f64) -> Option<Pressure> {
    let all = ends.map(|end| end.map(|e| e.pressure)).collect::<Option<Vec<_>>>()?;
    all.into_iter().reduce(|a, b| if (b - a).si() * sign > 0.0 { b } else { a })
}

/// "Mogi–Coulomb, permeable wall (α = 1)".
pub(super) fn words(wall: &Wall) -> String {
    format!("{}, {}", wall.strength().name(), wall.setup.model_words())
}

impl RangesBeside {
    /// All ranges; the first is the one that the others stand beside.
    pub fn ranges(&self) -> &[RangeBeside] {
        &self.outcome.rows
    }

    /// Criterion and model of the wall of each, in words.
    pub fn names(&self) -> Vec<String> {
        self.walls.iter().map(words).collect()
    }

    /// Which is tightest: the one with the least between its ends; one without a range before all.
    pub fn tightest(&self) -> usize {
        let breadth = |row: &RangeBeside| row.breadth().map_or(f64::NEG_INFINITY, Quantity::si);
        let rows = self.outcome.rows.iter().map(breadth).enumerate();
        rows.reduce(|a, b| if b.1 < a.1 { b } else { a }).map_or(0, |(k, _)| k)
    }

    /// The pressures that every one of them recommends: the highest bottom and the lowest top; `None`
    /// when they share none.
    pub fn shared(&self) -> Option<(Pressure, Pressure)> {
        let (bottom, top) = (self.outcome.highest_bottom?, self.outcome.lowest_top?);
        (bottom < top).then_some((bottom, top))
    }
}

/// Every range by the second route, and the comparisons.
pub(super) fn check(inputs: &BesideInputs, outcome: &BesideOutcome) -> Vec<Check> {
    let setup = inputs.range.wall;
    let choices = &inputs.range.choices;
    let setups = std::iter::once(setup).chain(inputs.alternatives.iter().map(|a| a.of(setup)));
    let mut checks = vec![Check::compare(
        "a range for the recommended one and for every alternative",
        &[outcome.rows.len() as f64],
        &[inputs.alternatives.len() as f64 + 1.0],
        0.0,
        "",
    )];
    let first = outcome.rows.first().copied();
    let mut unit = 1e-6;
    for (n, (row, setup)) in (1..).zip(outcome.rows.iter().zip(setups)) {
        let Some(conditions) = Conditions::new(&setup, choices) else { return Vec::new() };
        unit = (conditions.route.size() * 1e-6).max(unit);
        let name = format!("range {n}");
        checks.push(conditions.ends(&name, row.bottom, row.top));
        checks
            .extend(conditions.limits(&name, [row.lower_shear, row.initiation, row.upper_shear]).into_iter().flatten());
        for (change, end, of, first) in [
            (row.bottom_change, row.bottom, "bottom", first.and_then(|f| f.bottom)),
            (row.top_change, row.top, "top", first.and_then(|f| f.top)),
        ] {
            if let (Some(change), Some(end), Some(first)) = (change, end, first) {
                checks.push(Check::compare(
                    format!("{name}: {of} of the first range and the difference make its {of}"),
                    &[(first.pressure + change).in_mpa()],
                    &[end.pressure.in_mpa()],
                    unit * 1e-12,
                    "MPa",
                ));
            }
        }
    }
    let spans = [
        (outcome.highest_bottom, 1.0, "highest bottom", outcome.rows.iter().map(|r| r.bottom).collect::<Vec<_>>()),
        (outcome.lowest_top, -1.0, "lowest top", outcome.rows.iter().map(|r| r.top).collect()),
    ];
    for (stated, sign, name, ends) in spans {
        let Some(stated) = stated else { continue };
        let beyond = ends.iter().map(|end| end.map_or(f64::NAN, |e| sign * (e.pressure - stated).in_mpa()));
        let beyond: Vec<f64> = beyond.collect();
        let most = beyond.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        let broken = if beyond.iter().all(|b| b.is_finite()) { most.abs() } else { f64::NAN };
        checks.push(Check::holds(format!("{name}: no range passes it, and one is at it"), broken, unit * 1e-12, "MPa"));
    }
    checks
}
