//! Mogi–Coulomb on effective principal stresses: τoct ≤ a + b (σ1' + σ3') / 2.

use super::criterion::{Criterion, Order};
use super::number::Number;

/// The straight line in τoct and (σ1' + σ3') / 2. `a` in Pa; `b` has no unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct MogiCoulomb {
    pub a: f64,
    pub b: f64,
}

impl MogiCoulomb {
    /// From cohesion c and friction angle φ (radians): a = (2√2/3) c cos φ, b = (2√2/3) sin φ.
    pub fn from_cohesion(cohesion: f64, friction: f64) -> Self {
        let k = 2.0 * std::f64::consts::SQRT_2 / 3.0;
        MogiCoulomb { a: k * cohesion * friction.cos(), b: k * friction.sin() }
    }
}

impl Criterion for MogiCoulomb {
    const ORDER: Order = Order::Middle;
    /// No proof is known.
    const CONVEX: bool = false;

    #[inline(always)]
    fn excess<N: Number>(&self, [s1, s2, s3]: [N; 3]) -> N {
        let (d12, d23, d31) = (s1 - s2, s2 - s3, s3 - s1);
        let octahedral = (d12 * d12 + d23 * d23 + d31 * d31).sqrt() * (1.0 / 3.0);
        octahedral - (s1 + s3) * (0.5 * self.b) - self.a
    }

    fn size(&self) -> f64 {
        self.a
    }
}
