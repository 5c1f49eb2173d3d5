//! The largest stress that a rock bears beside the other two.

use super::Strength;
use super::drucker_prager::Fit;
use super::law::Law;
use super::mohr_coulomb::MohrCoulomb;

/// 1/√3.
const ROOT: f64 = 0.577_350_269_189_625_8;

impl Strength {
    /// σ1' at failure with σ2' = σ3' (triaxial compression), in Pa. `None` where σ3' is beyond what the
    /// rock bears in tension by the criterion, so that no σ1' holds.
    pub(crate) fn in_compression(self, s3: f64) -> Option<f64> {
        let s1 = match self.law() {
            // By their cohesion and friction angle these three and the circumscribed cone are one line.
            Law::MohrCoulomb(line) => line.beside(s3),
            Law::MogiCoulomb(_) | Law::ModifiedLade(_) => self.coulomb_line()?.beside(s3),
            Law::DruckerPrager(_) if self.fit() == Some(Fit::Circumscribed) => self.coulomb_line()?.beside(s3),
            // √J2 = (σ1' − σ3') / √3, I1 = σ1' + 2 σ3'.
            Law::DruckerPrager(cone) => (cone.k + s3 * (ROOT + 2.0 * cone.alpha)) / (ROOT - cone.alpha),
            Law::HoekBrown(law) => law.beside(s3)?,
        };
        (s1 >= s3).then_some(s1)
    }

    /// σ1' at failure with σ2' = σ1' (triaxial extension), in Pa. `None` as above, and where the
    /// criterion never fails so.
    pub(crate) fn in_extension(self, s3: f64) -> Option<f64> {
        let s1 = match self.law() {
            Law::MogiCoulomb(_) => self.coulomb_line()?.beside(s3),
            Law::ModifiedLade(law) => (s3 + law.shift) * ratio_in_extension(27.0 + law.eta) - law.shift,
            Law::DruckerPrager(_) if self.fit() == Some(Fit::Extension) => self.coulomb_line()?.beside(s3),
            // √J2 = (σ1' − σ3') / √3, I1 = 2 σ1' + σ3'.
            Law::DruckerPrager(cone) => {
                let rise = ROOT - 2.0 * cone.alpha;
                if rise <= 0.0 {
                    return None;
                }
                (cone.k + s3 * (ROOT + cone.alpha)) / rise
            }
            Law::MohrCoulomb(_) | Law::HoekBrown(_) => return self.in_compression(s3),
        };
        (s1 >= s3).then_some(s1)
    }

    /// A σ1' at failure beside σ2' ≥ σ3', in Pa, by halving; for figures. `None` where σ1' = σ2' fails
    /// already, or nothing below a hundred times the triaxial strength does.
    pub(super) fn beside(self, s2: f64, s3: f64) -> Option<f64> {
        let law = self.law();
        let excess = |s1: f64| law.excess([s1, s2, s3]);
        let mut low = s2;
        let mut high = s2.max(self.in_compression(s3)?).max(1.0) * 100.0;
        if excess(low) > 0.0 || excess(high) <= 0.0 {
            return None;
        }
        for _ in 0..60 {
            let middle = 0.5 * (low + high);
            *(if excess(middle) > 0.0 { &mut high } else { &mut low }) = middle;
        }
        Some(0.5 * (low + high))
    }

    /// Mohr–Coulomb with the same cohesion and friction angle.
    fn coulomb_line(self) -> Option<MohrCoulomb> {
        self.cohesion_and_friction().map(|(c, phi)| MohrCoulomb::from_cohesion(c.in_pa(), phi.in_rad()))
    }
}

/// The ratio r = x / z, 1 or more, at which stresses x, x, z meet (2 x + z)³ = B x² z: the largest root
/// of (2 r + 1)³ − B r², by Newton's method from above it.
fn ratio_in_extension(bound: f64) -> f64 {
    let mut r = 0.125 * bound;
    for _ in 0..100 {
        let value = (2.0 * r + 1.0).powi(3) - bound * r * r;
        let slope = 6.0 * (2.0 * r + 1.0).powi(2) - 2.0 * bound * r;
        let next = r - value / slope;
        if !(slope > 0.0 && next < r && next >= 1.0) {
            break;
        }
        r = next;
    }
    r
}

#[cfg(test)]
mod tests {
    use crate::rock::{HoekBrown, Strength};
    use crate::stress::tensor::Tensor;
    use crate::units::Units;

    fn every() -> [Strength; 8] {
        let (c, phi) = (9.mpa(), 37.5.deg());
        let mass = HoekBrown { sigma_ci: 80.mpa(), m_i: 12.0, gsi: 62.0, disturbance: 0.3 };
        [
            Strength::mohr_coulomb(c, phi),
            Strength::mohr_coulomb_ucs(30.mpa(), phi),
            Strength::mogi_coulomb(c, phi),
            Strength::modified_lade(c, phi),
            Strength::drucker_prager_inscribed(c, phi),
            Strength::drucker_prager_circumscribed(c, 30.deg()),
            Strength::drucker_prager_extension(c, phi),
            Strength::hoek_brown(mass),
        ]
    }

    /// At failure both routes of the criterion are at zero.
    #[test]
    fn the_criterion_is_just_met() {
        for strength in every() {
            for s3 in [-1e5, 0.0, 4e6, 30e6] {
                let c = strength.in_compression(s3).unwrap();
                let e = strength.in_extension(s3).unwrap();
                for [s1, s2] in [[c, s3], [e, e]] {
                    let size = s1.abs().max(1e7);
                    let off = strength.law().excess([s1, s2, s3]);
                    assert!(off.abs() < 1e-12 * size, "{strength:?} {s3}: {off}");
                    let off = strength.excess_by_tensor(Tensor([s1, s2, s3, 0.0, 0.0, 0.0]));
                    assert!(off.abs() < 1e-12 * size, "{strength:?} {s3}: {off}");
                }
                let between = strength.beside(0.5 * (s3 + c), s3).unwrap();
                assert!(between >= c.min(e) * (1.0 - 1e-12) - 1.0, "{strength:?}");
            }
        }
    }

    /// Beyond the tension that a criterion lets rock bear, nothing holds; and the circumscribed cone
    /// at a high friction angle bears any two equal stresses.
    #[test]
    fn there_may_be_no_failure_stress() {
        for strength in every() {
            assert_eq!(strength.in_compression(-1e9), None, "{strength:?}");
            assert_eq!(strength.in_extension(-1e9), None, "{strength:?}");
        }
        let flattering = Strength::drucker_prager_circumscribed(9.mpa(), 37.5.deg());
        assert_eq!(flattering.in_extension(5e6), None);
        assert!(flattering.in_compression(5e6).is_some());
    }
}
