//! Hoek–Brown, 2002 edition, on effective principal stresses of a rock mass:
//! σ1' ≤ σ3' + σci (mb σ3' / σci + s)^a.

use super::criterion::{Criterion, Order};
use super::number::Number;

/// Its constants. `sigma_ci` in Pa; the others have no unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct HoekBrownLaw {
    pub sigma_ci: f64,
    pub m_b: f64,
    pub s: f64,
    pub a: f64,
}

impl HoekBrownLaw {
    /// From the intact rock (σci in Pa, mi), the geological strength index and the disturbance D.
    pub fn new(sigma_ci: f64, m_i: f64, gsi: f64, disturbance: f64) -> Self {
        HoekBrownLaw {
            sigma_ci,
            m_b: m_i * ((gsi - 100.0) / (28.0 - 14.0 * disturbance)).exp(),
            s: ((gsi - 100.0) / (9.0 - 3.0 * disturbance)).exp(),
            a: 0.5 + ((-gsi / 15.0).exp() - (-20.0_f64 / 3.0).exp()) / 6.0,
        }
    }
}

impl Criterion for HoekBrownLaw {
    const ORDER: Order = Order::Extremes;

    /// The σ3' that σ1' − σ3' needs, less the σ3' there:
    /// (σci / mb) (((σ1' − σ3') / σci)^(1/a) − s) − σ3'. It has the sign of σ1' less the curve where
    /// the curve is defined, and is positive where σ3' is below −s σci / mb, the tensile strength of
    /// the mass: the rock has failed there.
    #[inline(always)]
    fn excess<N: Number>(&self, [s1, _, s3]: [N; 3]) -> N {
        let needs = ((s1 - s3) * (1.0 / self.sigma_ci)).power(1.0 / self.a) - self.s;
        needs * (self.sigma_ci / self.m_b) - s3
    }

    fn size(&self) -> f64 {
        self.sigma_ci
    }
}
