//! The faulting regime of a stress state.

use std::fmt;

use serde::{Deserialize, Serialize};

use super::Stress;
use super::tensor::Eigen;
use crate::frames::Geographic;

/// Anderson's regimes, by the principal stress nearest to vertical.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[non_exhaustive]
pub enum Regime {
    /// The largest stress is nearest to vertical.
    NormalFaulting,
    /// The intermediate one is.
    StrikeSlip,
    /// The smallest one is.
    ReverseFaulting,
    /// All three are equal.
    Isotropic,
}

impl fmt::Display for Regime {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Regime::NormalFaulting => "normal faulting",
            Regime::StrikeSlip => "strike-slip faulting",
            Regime::ReverseFaulting => "reverse faulting",
            Regime::Isotropic => "isotropic (no regime)",
        })
    }
}

/// Magnitudes closer than this, relative to the sum of all three sizes, are equal: they have no
/// axes of their own.
pub(super) const EQUAL: f64 = 1e-9;

/// Which neighbouring magnitudes are equal: S1 = S2, S2 = S3.
pub(super) fn ties(values: [f64; 3]) -> [bool; 2] {
    let sizes: f64 = values.iter().map(|v| v.abs()).sum();
    [(0, 1), (1, 2)].map(|(i, j)| (values[i] - values[j]).abs() <= EQUAL * sizes)
}

/// Tilts closer than this, in radians, are alike.
pub(super) const ALIKE: f64 = 1e-7;

/// The principal axis nearest to vertical.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Steepest {
    /// 0, 1, 2 for S1, S2, S3; the larger of two equal magnitudes.
    pub index: usize,
    /// Its angle from vertical in radians; for two equal magnitudes that of their plane.
    pub tilt: f64,
    /// Whether its magnitude equals another one's.
    pub tied: bool,
}

/// `None` when all three magnitudes are equal. Of two equal ones every line in their plane is an
/// axis, so the steepest line of the plane stands for both.
pub(super) fn steepest(e: &Eigen) -> Option<Steepest> {
    let tilt = |i: usize| e.axes[i][0].hypot(e.axes[i][1]).atan2(e.axes[i][2].abs());
    let dip = |i: usize| std::f64::consts::FRAC_PI_2 - tilt(i);
    let one = |index: usize| Steepest { index, tilt: tilt(index), tied: false };
    let candidates = match ties(e.values) {
        [true, true] => return None,
        [true, false] => vec![Steepest { index: 0, tilt: dip(2), tied: true }, one(2)],
        [false, true] => vec![one(0), Steepest { index: 1, tilt: dip(0), tied: true }],
        [false, false] => vec![one(0), one(1), one(2)],
    };
    nearest(candidates)
}

/// The least tilted; of axes tilted alike the one of the larger magnitude, whose A_φ is smaller.
pub(super) fn nearest(candidates: Vec<Steepest>) -> Option<Steepest> {
    let least = candidates.iter().map(|s| s.tilt).fold(f64::INFINITY, f64::min);
    candidates.into_iter().find(|s| s.tilt <= least + ALIKE)
}

impl Regime {
    /// By the place of the steepest axis: 0, 1, 2 for S1, S2, S3.
    pub(super) fn of(steepest: Option<Steepest>) -> Self {
        match steepest.map(|s| s.index) {
            Some(0) => Regime::NormalFaulting,
            Some(1) => Regime::StrikeSlip,
            Some(_) => Regime::ReverseFaulting,
            None => Regime::Isotropic,
        }
    }
}

impl Stress<Geographic> {
    /// The regime, by the principal axis nearest to vertical (Anderson 1951, The Dynamics of
    /// Faulting). On the boundary of two regimes, where the vertical stress equals a horizontal
    /// one, the name is that of the regime with the smaller A_φ. [`Stress::a_phi`] also says how far
    /// the axis is from vertical.
    pub fn regime(&self) -> Regime {
        Regime::of(steepest(&self.tensor().eigen()))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::prelude::*;

    fn of(sv: f64, sh_max: f64, sh_min: f64) -> Regime {
        Stress::from_horizontals(Horizontals {
            sv: sv.mpa(),
            sh_max: sh_max.mpa(),
            sh_min: sh_min.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        })
        .unwrap()
        .regime()
    }

    #[test]
    fn names_of_the_regimes() {
        assert_eq!(of(60.0, 55.0, 40.0).to_string(), "normal faulting");
        assert_eq!(of(50.0, 55.0, 40.0).to_string(), "strike-slip faulting");
        assert_eq!(of(30.0, 55.0, 40.0).to_string(), "reverse faulting");
        assert_eq!(of(40.0, 40.0, 40.0).to_string(), "isotropic (no regime)");
        // On the boundaries.
        assert_eq!(of(55.0, 55.0, 40.0), Regime::NormalFaulting);
        assert_eq!(of(40.0, 55.0, 40.0), Regime::StrikeSlip);
    }

    /// Two equal magnitudes leave their axes open: the plane of both is what stands near to
    /// vertical, whichever axes the solution happened to take.
    #[test]
    fn the_plane_of_two_equal_magnitudes_counts_as_a_whole() {
        // S3 plunges 40°, so the plane of S1 = S2 is 40° from vertical, and S3 is 50° from it.
        let (s, c) = 40.0_f64.to_radians().sin_cos();
        let (across, out) = ([0.0, 1.0, 0.0], [-s, 0.0, c]);
        let half = std::f64::consts::FRAC_1_SQRT_2;
        let mixed = |sign: f64| [0, 1, 2].map(|i| half * (across[i] + sign * out[i]));
        let e = Eigen { values: [50.0, 50.0, 20.0], axes: [mixed(1.0), mixed(-1.0), [c, 0.0, s]] };
        let found = steepest(&e).unwrap();
        assert_eq!((found.index, found.tied), (0, true));
        assert!((found.tilt.to_degrees() - 40.0).abs() < 1e-12);
    }
}
