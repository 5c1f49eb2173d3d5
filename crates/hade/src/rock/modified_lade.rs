//! The modified Lade criterion (Ewy 1999) on effective principal stresses shifted by S1 = c / tan φ:
//! I1³ / I3 ≤ 27 + η.

use super::criterion::{Criterion, Order};
use super::number::Number;

/// Its constants. `shift` in Pa; `eta` has no unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ModifiedLade {
    pub shift: f64,
    pub eta: f64,
    /// (27 + η)^(−1/3).
    by_sum: f64,
}

impl ModifiedLade {
    /// From cohesion c and friction angle φ (radians, above zero): S1 = c / tan φ,
    /// η = 4 tan² φ (9 − 7 sin φ) / (1 − sin φ).
    pub fn from_cohesion(cohesion: f64, friction: f64) -> Self {
        let (t, s) = (friction.tan(), friction.sin());
        let eta = 4.0 * t * t * (9.0 - 7.0 * s) / (1.0 - s);
        ModifiedLade { shift: cohesion / t, eta, by_sum: (27.0 + eta).cbrt().recip() }
    }
}

impl Criterion for ModifiedLade {
    const ORDER: Order = Order::Any;

    /// I1 / (27 + η)^(1/3) − I3^(1/3), which has the sign of I1³ / I3 − (27 + η) where the criterion
    /// is defined and is a stress. Where a shifted stress is not above zero the rock has failed, by
    /// that much and more.
    #[inline(always)]
    fn excess<N: Number>(&self, stress: [N; 3]) -> N {
        let [a, b, c] = stress.map(|s| s + self.shift);
        let least = a.smaller(b).smaller(c);
        let sum = (a + b + c) * self.by_sum;
        if least.value() > 0.0 {
            sum - (a * b * c).cbrt()
        } else if sum.value() > 0.0 {
            sum - least
        } else {
            -least
        }
    }

    fn size(&self) -> f64 {
        self.shift
    }
}
