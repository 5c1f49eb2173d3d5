//! Mohr–Coulomb on effective principal stresses: σ1' ≤ UCS + q σ3'.
//!
//! The intermediate stress has no say. It holds for compression; in tension (σ3' < 0) it is
//! extended as the same straight line, and a result there is marked, since rock parts earlier.

use super::account::{Account, mpa, number};
use super::criterion::{Criterion, Order};
use super::number::Number;
use crate::card::{Formula, Reference, Step};
use crate::units::{Angle, Pressure, Quantity, fixed};

/// The straight line in σ1', σ3'. Numbers in Pa; `q` has none.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct MohrCoulomb<N = f64> {
    /// Uniaxial compressive strength.
    pub ucs: N,
    /// Slope of σ1' on σ3', 1 or more.
    pub q: N,
}

impl MohrCoulomb {
    /// From cohesion c and friction angle φ (radians): UCS = 2 c cos φ / (1 − sin φ), here with
    /// cos² φ = (1 − sin φ)(1 + sin φ), which keeps its figures near 90°.
    pub fn from_cohesion(cohesion: f64, friction: f64) -> Self {
        let (s, c) = friction.sin_cos();
        MohrCoulomb { ucs: 2.0 * cohesion * (1.0 + s) / c, q: slope(friction) }
    }

    /// From the uniaxial compressive strength and the friction angle (radians).
    pub fn from_ucs(ucs: f64, friction: f64) -> Self {
        MohrCoulomb { ucs, q: slope(friction) }
    }

    /// σ1' at failure beside σ3'.
    pub fn beside(self, s3: f64) -> f64 {
        self.ucs + self.q * s3
    }
}

impl Criterion for MohrCoulomb {
    const ORDER: Order = Order::Extremes;

    #[inline(always)]
    fn excess<N: Number>(&self, [s1, _, s3]: [N; 3]) -> N {
        s1 - s3 * self.q - self.ucs
    }

    /// σ1' and UCS + q σ3'.
    fn sides(&self, [s1, _, s3]: [f64; 3]) -> [Option<f64>; 2] {
        [Some(s1), Some(self.ucs + self.q * s3)]
    }

    fn size(&self) -> f64 {
        self.ucs
    }
}

/// q = (1 + sin φ) / (1 − sin φ).
fn slope(friction: f64) -> f64 {
    let (s, c) = friction.sin_cos();
    ((1.0 + s) / c).powi(2)
}

/// What its card says, by cohesion or by the uniaxial strength as it was stated.
pub(super) fn account(line: MohrCoulomb, cohesion: Option<Pressure>, friction_angle: Angle) -> Account {
    let (s, c) = friction_angle.si().sin_cos();
    let mut steps = vec![Step::worked(format!(
        "q = (1 + sin φ) / (1 − sin φ) = (1 + {}) / (1 − {}) = {}",
        fixed(s, 6),
        fixed(s, 6),
        fixed(line.q, 5)
    ))];
    if let Some(cohesion) = cohesion {
        steps.push(Step::worked(format!(
            "UCS = 2 c cos φ / (1 − sin φ) = 2 · {} · {} / (1 − {}) = {} MPa",
            fixed(cohesion.in_mpa(), 3),
            fixed(c, 6),
            fixed(s, 6),
            fixed(line.ucs * 1e-6, 3)
        )));
    }
    Account {
        margin: "UCS + q σ'_3 − σ'_1",
        domain: "It is a criterion of shear in compression. Where σ'_3 is tension the same line only goes on; rock parts there at its tensile strength, so that a margin in tension flatters it.",
        steps,
        formulas: vec![
            Formula::new("sigma'_1 = upright(\"UCS\") + q sigma'_3", "σ'_1 = UCS + q σ'_3"),
            Formula::new("q = (1 + sin phi) / (1 - sin phi)", "q = (1 + sin φ) / (1 − sin φ)"),
            Formula::new("upright(\"UCS\") = (2 c cos phi) / (1 - sin phi)", "UCS = 2 c cos φ / (1 − sin φ)"),
        ],
        symbols: vec![("q", "slope of σ'_1 on σ'_3"), ("UCS", "uniaxial compressive strength")],
        references: vec![Reference::new(
            "Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, ch. 4 (Coulomb's criterion; cited from memory)",
        )],
        assumptions: vec![
            "The intermediate principal stress has no say: rock that it strengthens is taken as weaker than it is.",
        ],
    }
}

/// The margin of σ1', σ2', σ3' (Pa), with the numbers put in.
pub(super) fn worked(line: MohrCoulomb, [s1, s2, s3]: [f64; 3]) -> Vec<Step> {
    let margin = -line.excess([s1, s2, s3]);
    vec![Step::worked(format!(
        "UCS + q σ'_3 − σ'_1 = {} + {} · {} − {} = {} MPa",
        mpa(line.ucs),
        number(line.q),
        mpa(s3),
        mpa(s1),
        mpa(margin)
    ))]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_two_ways_of_stating_it_agree() {
        let phi = 30.0_f64.to_radians();
        let a = MohrCoulomb::from_cohesion(10e6, phi);
        assert!((a.q - 3.0).abs() < 1e-12);
        assert!((a.ucs - 34.641_016_151_377_55e6).abs() < 1e-6);
        let b = MohrCoulomb::from_ucs(a.ucs, phi);
        assert!((b.excess([50e6, 30e6, 5e6]) - a.excess([50e6, 0.0, 5e6])).abs() < 1e-6);
    }

    /// The shear-plane form: on the plane at 45° + φ/2 to σ3 the shear stress is c + σn tan φ when
    /// the margin is zero (Jaeger, Cook and Zimmerman 2007, ch. 4; cited from memory).
    #[test]
    fn zero_margin_is_slip_on_the_coulomb_plane() {
        let (c, phi) = (8e6_f64, 35.0_f64.to_radians());
        let m = MohrCoulomb::from_cohesion(c, phi);
        let s3 = 6e6;
        let s1 = m.ucs + m.q * s3;
        let two_beta = std::f64::consts::FRAC_PI_2 + phi;
        let normal = 0.5 * (s1 + s3) + 0.5 * (s1 - s3) * two_beta.cos();
        let shear = 0.5 * (s1 - s3) * two_beta.sin();
        assert!((shear - (c + normal * phi.tan())).abs() < 1e-6);
    }
}
