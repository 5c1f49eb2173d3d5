//! Mohr–Coulomb on effective principal stresses: σ1' ≤ UCS + q σ3'.
//!
//! The intermediate stress has no say. It holds for compression; in tension (σ3' < 0) it is
//! extended as the same straight line, and a result there is marked, since rock parts earlier.

use super::criterion::{Criterion, Order};
use super::number::Number;

/// The straight line in σ1', σ3'. Numbers in Pa; `q` has none.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct MohrCoulomb {
    /// Uniaxial compressive strength.
    pub ucs: f64,
    /// Slope of σ1' on σ3', 1 or more.
    pub q: f64,
}

impl MohrCoulomb {
    /// From cohesion c and friction angle φ (radians): UCS = 2 c cos φ / (1 − sin φ).
    pub fn from_cohesion(cohesion: f64, friction: f64) -> Self {
        MohrCoulomb { ucs: 2.0 * cohesion * friction.cos() / (1.0 - friction.sin()), q: slope(friction) }
    }

    /// From the uniaxial compressive strength and the friction angle (radians).
    pub fn from_ucs(ucs: f64, friction: f64) -> Self {
        MohrCoulomb { ucs, q: slope(friction) }
    }
}

// SHIM
impl MohrCoulomb {
    pub fn margin(self, s: [f64; 3]) -> f64 {
        -self.excess(s)
    }
}

impl Criterion for MohrCoulomb {
    const ORDER: Order = Order::Extremes;

    #[inline(always)]
    fn excess<N: Number>(&self, [s1, _, s3]: [N; 3]) -> N {
        s1 - s3 * self.q - self.ucs
    }

    fn size(&self) -> f64 {
        self.ucs
    }
}

/// q = (1 + sin φ) / (1 − sin φ).
fn slope(friction: f64) -> f64 {
    let s = friction.sin();
    (1.0 + s) / (1.0 - s)
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
