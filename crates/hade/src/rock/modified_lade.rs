//! The modified Lade criterion (Ewy 1999) on effective principal stresses shifted by S1 = c / tan φ:
//! I1³ / I3 ≤ 27 + η.

use super::criterion::{Criterion, Order};
use super::number::Number;

/// Its constants. `shift` in Pa; `eta` has no unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ModifiedLade {
    pub shift: f64,
    pub eta: f64,
    /// √((27 + η) / η).
    root: f64,
}

impl ModifiedLade {
    /// From cohesion c and friction angle φ (radians, above zero): S1 = c / tan φ,
    /// η = 4 tan² φ (9 − 7 sin φ) / (1 − sin φ).
    pub fn from_cohesion(cohesion: f64, friction: f64) -> Self {
        let (t, s) = (friction.tan(), friction.sin());
        let eta = 4.0 * t * t * (9.0 - 7.0 * s) / (1.0 - s);
        ModifiedLade { shift: cohesion / t, eta, root: ((27.0 + eta) / eta).sqrt() }
    }
}

impl ModifiedLade {
    /// The excess, with so many steps of Newton's method on the root.
    #[inline(always)]
    fn needed<N: Number, const STEPS: usize>(&self, [s1, s2, s3]: [N; 3]) -> N {
        let mean = (s1 + s2 + s3) * (1.0 / 3.0);
        let [a, b, c] = [s1 - mean, s2 - mean, s3 - mean];
        // What is added keeps a deviator of nothing from being divided by.
        let size = ((a * a + b * b + c * c) * 0.5 + 1e-180).sqrt() * self.root;
        // w = u / √(k J2): w³ − w + r = 0, by Newton from a guess that is close everywhere.
        let r = a * b * c * (self.root * self.root) / (size * size * size);
        let (mut w, r0) = (guess(r.value()), r.value());
        for _ in 0..STEPS {
            w -= (w * (w * w - 1.0) + r0) / (3.0 * w * w - 1.0);
        }
        // A step more for each derivative, which makes it exact.
        let mut root = r * 0.0 + w;
        for _ in 0..N::ORDERS {
            root = root - (root * (root * root - 1.0) + r) / (root * root * 3.0 - 1.0);
        }
        root * size - mean - self.shift
    }
}

impl Criterion for ModifiedLade {
    const ORDER: Order = Order::Any;

    /// The mean shifted stress that the deviator needs, less the one there. With u for the mean,
    /// I1³ = (27 + η) I3 is u³ − k J2 u + k J3 = 0, k = (27 + η) / η; its largest root is what is
    /// needed. A stress holds where its mean is larger: the other roots belong to shifted stresses
    /// below zero, for which the ratio I1³ / I3 means nothing.
    #[inline(always)]
    fn excess<N: Number>(&self, stress: [N; 3]) -> N {
        self.needed::<N, 3>(stress)
    }

    #[inline(always)]
    fn rough(&self, stress: [f64; 3]) -> f64 {
        self.needed::<f64, 1>(stress)
    }

    fn size(&self) -> f64 {
        self.shift
    }
}

/// The largest root of w³ − w + r = 0 to 5e-4: (2/√3) cos(60° − ⅔ asin h), h² = ½ (1 − (3√3/2) r), as a
/// polynomial in h.
#[inline(always)]
fn guess(r: f64) -> f64 {
    let half = 0.5 - 1.299_038_105_676_658 * r;
    let h = (if half > 0.0 { half } else { 0.0 }).sqrt();
    1.154_700_538_379_251_7 * (0.5 + h * (0.577_350_269_189_625_7 + h * (-0.099_14 + h * 0.021_79)))
}
