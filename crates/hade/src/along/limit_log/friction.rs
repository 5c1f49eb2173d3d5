//! The stress along a log held against what friction on faults bears.

use serde::{Deserialize, Serialize};

use super::limit_log::LimitLog;
use super::row::LogRow;
use super::section::stretches;
use super::steps::{mpa, stretches_words};
use crate::card::{Check, Item, Step};
use crate::error::Result;
use crate::faults::frictional_ratio;
use crate::frames::Name;
use crate::units::{Length, Pressure, Quantity, as_typed, fixed};

/// A stress that is beyond the limit by less counts as at it, Pa: the last digits would decide.
const AT_THE_LIMIT: f64 = 1.0;

/// Where the stress along a log comes nearest to the frictional limit, or passes it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct FrictionAlong {
    /// The coefficient of friction of the faults, which have no cohesion.
    pub friction: f64,
    /// The measured depth where S1' is largest beside what S3' bears.
    pub md: Length,
    /// S1' less (√(μ² + 1) + μ)² S3' there: above zero the stress is beyond the limit.
    pub beyond_by: Pressure,
    /// Where it is, by measured depth.
    pub beyond: Vec<[Length; 2]>,
    pub(super) layer: Name,
}

impl LogRow {
    /// S1 and S3 above the pore pressure. The vertical is a principal direction.
    fn effective_extremes(&self) -> [Pressure; 2] {
        let all = [self.sv, self.sh_max, self.sh_min].map(Quantity::si);
        let (s1, s3) = (all.into_iter().fold(f64::MIN, f64::max), all.into_iter().fold(f64::MAX, f64::min));
        [s1, s3].map(|s| Pressure::from_si(s) - self.pore)
    }
}

impl LimitLog {
    /// With the stress of every depth held against the frictional limit of cohesionless faults: where
    /// (S1 − P_p) is more than (√(μ² + 1) + μ)² (S3 − P_p) the log says so, and by how much.
    ///
    /// # Errors
    /// When the coefficient is negative or not finite.
    pub fn with_friction(&self, friction: f64) -> Result<Self> {
        frictional_ratio(friction)?;
        self.held_against(friction)
    }
}

impl FrictionAlong {
    pub(super) fn of(rows: &[LogRow], friction: f64) -> Option<Self> {
        let ratio = frictional_ratio(friction).ok()?;
        let beyond_by = |row: &LogRow| {
            let [s1, s3] = row.effective_extremes();
            s1 - s3 * ratio
        };
        let worst = rows.iter().reduce(|a, b| if beyond_by(b) > beyond_by(a) { b } else { a })?;
        let beyond = stretches(&rows.iter().collect::<Vec<_>>(), |row| beyond_by(row).si() > AT_THE_LIMIT);
        Some(FrictionAlong { friction, md: worst.md, beyond_by: beyond_by(worst), beyond, layer: worst.layer })
    }

    /// The coefficient as an input of a card.
    pub(super) fn input(friction: f64) -> Item {
        Item::typed("μ", "coefficient of friction of faults", friction).chosen()
    }

    pub(super) fn result(&self) -> Item {
        let name =
            format!("S1' less what friction bears with S3', at MD {} m, where it is most", fixed(self.md.si(), 1));
        Item::computed("Δσ_μ", name, self.beyond_by)
    }

    /// Whether it is beyond friction anywhere.
    pub(super) fn is_beyond(&self) -> bool {
        !self.beyond.is_empty()
    }

    pub(super) fn note(&self) -> String {
        let mu = as_typed(self.friction);
        if !self.is_beyond() {
            return format!(
                "The stress stays within what faults of μ = {mu} bear; it is nearest at MD {} m in {}, {} MPa of S_1 below.",
                fixed(self.md.si(), 1),
                self.layer,
                fixed(-self.beyond_by.in_mpa(), 2)
            );
        }
        format!(
            "At {} the stress is beyond what faults of μ = {mu} bear, most at MD {} m in {}, by {} MPa of S_1. A crust with such faults would slip first: look at the stresses and the pore pressure stated there.",
            stretches_words(&self.beyond),
            fixed(self.md.si(), 1),
            self.layer,
            fixed(self.beyond_by.in_mpa(), 2)
        )
    }

    pub(super) fn step(&self, rows: &[LogRow]) -> Option<Step> {
        let ratio = frictional_ratio(self.friction).ok()?;
        let row = rows.iter().find(|row| row.md == self.md && row.layer == self.layer)?;
        let [s1, s3] = row.effective_extremes();
        Some(Step::worked(format!(
            "friction at MD {} m in {}: S_1 − P_p − (√(μ² + 1) + μ)² (S_3 − P_p) = {} − {} · {} = {} MPa",
            fixed(self.md.si(), 1),
            self.layer,
            mpa(s1),
            fixed(ratio, 6),
            mpa(s3),
            mpa(self.beyond_by)
        )))
    }

    /// The same with the angle of friction: tan²(45° + φ/2), φ = arctan μ.
    pub(super) fn check(stated: Option<&Self>, rows: &[LogRow], friction: f64) -> Vec<Check> {
        let ratio = (std::f64::consts::FRAC_PI_4 + 0.5 * friction.atan()).tan().powi(2);
        let off = |row: &LogRow| {
            let mut all = [row.sv, row.sh_max, row.sh_min].map(Pressure::in_mpa);
            all.sort_by(f64::total_cmp);
            let pore = row.pore.in_mpa();
            (all[2] - pore) - ratio * (all[0] - pore)
        };
        let Some(stated) = stated else {
            return vec![Check::holds("the frictional limit was looked at", 1.0, 0.0, "")];
        };
        let most = rows.iter().map(off).fold(f64::NEG_INFINITY, f64::max);
        let there = rows.iter().filter(|row| row.md == stated.md && row.layer == stated.layer).map(off);
        let size = rows.iter().map(|row| row.sv.in_mpa()).fold(1.0, f64::max);
        let all: Vec<&LogRow> = rows.iter().collect();
        vec![
            Check::compare(
                "S1' less what friction bears by tan²(45° + φ/2), of all rows and at its depth",
                &[stated.beyond_by.in_mpa(), stated.beyond_by.in_mpa()],
                &[most, there.fold(f64::NAN, f64::max)],
                1e-9 * size,
                "MPa",
            ),
            Check::compare("coefficient of friction", &[stated.friction], &[friction], 0.0, ""),
            super::check::same_stretches(
                "where the stress is beyond friction: beginnings and ends, counted from below",
                &stated.beyond,
                &all,
                |row| off(row) > AT_THE_LIMIT * 1e-6,
            ),
        ]
    }
}
