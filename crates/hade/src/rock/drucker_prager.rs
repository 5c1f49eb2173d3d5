//! Drucker–Prager on the invariants of effective stress: √J2 ≤ k + α I1, fitted to Mohr–Coulomb in
//! one of three ways.

use serde::{Deserialize, Serialize};

use super::criterion::{Criterion, Order};
use super::number::Number;

/// Which way the cone is fitted to Mohr–Coulomb's pyramid.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub(crate) enum Fit {
    /// The cone inside the pyramid, touching its faces.
    Inscribed,
    /// Through the edges of triaxial compression: it flatters the rock.
    Circumscribed,
    /// Through the edges of triaxial extension.
    Extension,
}

/// The cone √J2 = k + α I1, α on I1 = σ1' + σ2' + σ3'. `k` in Pa; `alpha` has no unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct DruckerPrager {
    pub alpha: f64,
    pub k: f64,
}

impl DruckerPrager {
    /// From cohesion c and friction angle φ (radians).
    pub fn from_cohesion(fit: Fit, cohesion: f64, friction: f64) -> Self {
        let (s, c) = friction.sin_cos();
        let root = 3.0_f64.sqrt();
        let (below, share) = match fit {
            // The forms with sine and cosine: they hold up to 90°.
            Fit::Inscribed => (root * (3.0 + s * s).sqrt(), 1.0),
            Fit::Circumscribed => (root * (3.0 - s), 2.0),
            Fit::Extension => (root * (3.0 + s), 2.0),
        };
        DruckerPrager { alpha: share * s / below, k: 3.0 * share * cohesion * c / below }
    }
}

impl Criterion for DruckerPrager {
    const ORDER: Order = Order::Any;

    #[inline(always)]
    fn excess<N: Number>(&self, [s1, s2, s3]: [N; 3]) -> N {
        let (d12, d23, d31) = (s1 - s2, s2 - s3, s3 - s1);
        let root_j2 = ((d12 * d12 + d23 * d23 + d31 * d31) * (1.0 / 6.0)).sqrt();
        root_j2 - (s1 + s2 + s3) * self.alpha - self.k
    }

    fn size(&self) -> f64 {
        self.k
    }
}
