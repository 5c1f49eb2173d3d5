//! Every criterion a second time, for checks: from the six components of the effective tensor, with
//! constants by other algebra. Nothing of the criteria's own files is used here.

use super::HoekBrown;
use super::constants::StrengthConstants;
use super::drucker_prager::Fit;
use super::eigenvalues::principal_values;
use crate::stress::tensor::Tensor;
use crate::units::{Pressure, Quantity};

/// Mohr–Coulomb by t = tan(45° + φ/2): UCS = 2 c t, q = t². The other constants follow from these two.
#[derive(Clone, Copy)]
pub(super) struct Tangent {
    ucs: f64,
    q: f64,
}

impl Tangent {
    /// From cohesion (Pa) and friction angle (radians).
    pub fn from_cohesion(cohesion: f64, friction: f64) -> Self {
        let t = tangent(friction);
        Tangent { ucs: 2.0 * cohesion * t, q: t * t }
    }
    /// From the uniaxial compressive strength (Pa) and friction angle (radians).
    pub fn from_ucs(ucs: f64, friction: f64) -> Self {
        Tangent { ucs, q: tangent(friction).powi(2) }
    }
}

fn tangent(friction: f64) -> f64 {
    (std::f64::consts::FRAC_PI_4 + 0.5 * friction).tan()
}

/// A criterion by its second route; numbers in Pa.
#[derive(Clone, Copy)]
pub(super) enum SecondRoute {
    MohrCoulomb { ucs: f64, q: f64 },
    MogiCoulomb { a: f64, b: f64 },
    ModifiedLade { shift: f64, eta: f64, bound: f64 },
    DruckerPrager { alpha: f64, k: f64 },
    HoekBrown { sigma_ci: f64, m_b: f64, s: f64, a: f64 },
}

impl SecondRoute {
    pub fn mohr_coulomb(Tangent { ucs, q }: Tangent) -> Self {
        SecondRoute::MohrCoulomb { ucs, q }
    }

    /// By the link of Al-Ajmi and Zimmerman (2005): a = (2√2/3) UCS / (q + 1), b = (2√2/3)(q − 1) / (q + 1).
    pub fn mogi_coulomb(Tangent { ucs, q }: Tangent) -> Self {
        let share = 8.0_f64.sqrt() / (3.0 * (q + 1.0));
        SecondRoute::MogiCoulomb { a: share * ucs, b: share * (q - 1.0) }
    }

    /// S_L = UCS / (q − 1), 27 + η = (q + 2)³ / q: the constants that give Mohr–Coulomb's line where
    /// σ2' = σ3'. (q + 2)³ = 27 q + (q − 1)² (q + 8).
    pub fn modified_lade(Tangent { ucs, q }: Tangent) -> Self {
        let over = q - 1.0;
        SecondRoute::ModifiedLade { shift: ucs / over, eta: over * over * (q + 8.0) / q, bound: (q + 2.0).powi(3) / q }
    }

    /// Through Mohr–Coulomb's triaxial edges by UCS and q; touching its faces by tan φ.
    pub fn drucker_prager(fit: Fit, Tangent { ucs, q }: Tangent) -> Self {
        let root = 3.0_f64.sqrt();
        let (alpha, k) = match fit {
            Fit::Inscribed => {
                // tan φ = (q − 1) / (2 √q), c = UCS / (2 √q).
                let (tan, cohesion) = (0.5 * (q - 1.0) / q.sqrt(), 0.5 * ucs / q.sqrt());
                let below = (9.0 + 12.0 * tan * tan).sqrt();
                (tan / below, 3.0 * cohesion / below)
            }
            Fit::Circumscribed => ((q - 1.0) / (root * (q + 2.0)), root * ucs / (q + 2.0)),
            Fit::Extension => ((q - 1.0) / (root * (2.0 * q + 1.0)), root * ucs / (2.0 * q + 1.0)),
        };
        SecondRoute::DruckerPrager { alpha, k }
    }

    /// s from m_b, and a by the difference of two exponentials as one.
    pub fn hoek_brown(mass: HoekBrown) -> Self {
        let below = 14.0 * (2.0 - mass.disturbance);
        let share = (std::f64::consts::LOG2_E * (mass.gsi - 100.0) / below).exp2();
        SecondRoute::HoekBrown {
            sigma_ci: mass.sigma_ci.si(),
            m_b: mass.m_i * share,
            s: share.powf(below / (3.0 * (3.0 - mass.disturbance))),
            a: 0.5 + (-20.0_f64 / 3.0).exp() * ((100.0 - mass.gsi) / 15.0).exp_m1() / 6.0,
        }
    }

    /// The constants.
    pub fn constants(self) -> StrengthConstants {
        let pa = Pressure::from_si;
        match self {
            SecondRoute::MohrCoulomb { ucs, q } => StrengthConstants::MohrCoulomb { ucs: pa(ucs), q },
            SecondRoute::MogiCoulomb { a, b } => StrengthConstants::MogiCoulomb { a: pa(a), b },
            SecondRoute::ModifiedLade { shift, eta, .. } => StrengthConstants::ModifiedLade { shift: pa(shift), eta },
            SecondRoute::DruckerPrager { alpha, k } => StrengthConstants::DruckerPrager { alpha, k: pa(k) },
            SecondRoute::HoekBrown { m_b, s, a, .. } => StrengthConstants::HoekBrown { m_b, s, a },
        }
    }

    /// What an effective tensor puts on the rock and what the rock bears, as the two sides of the
    /// criterion; `None` for a side that is not defined there.
    pub fn sides(self, tensor: Tensor) -> [Option<f64>; 2] {
        let [xx, yy, zz, xy, yz, xz] = tensor.0;
        let i1 = xx + yy + zz;
        match self {
            SecondRoute::MohrCoulomb { ucs, q } => {
                let [s1, _, s3] = principal_values(tensor);
                [Some(s1), Some(q * s3 + ucs)]
            }
            SecondRoute::MogiCoulomb { a, b } => {
                let middle = principal_values(tensor)[1];
                [Some((2.0 * j2(tensor) / 3.0).sqrt()), Some(a + 0.5 * b * (i1 - middle))]
            }
            SecondRoute::ModifiedLade { shift, bound, .. } => {
                let (x, y, z) = (xx + shift, yy + shift, zz + shift);
                // The leading minors: all positive where every shifted principal stress is.
                let minor = x * y - xy * xy;
                let i3 = z * minor + xy * yz * xz + xy * yz * xz - x * yz * yz - y * xz * xz;
                let inside = x > 0.0 && minor > 0.0 && i3 > 0.0;
                [inside.then(|| (x + y + z).powi(3) / i3), Some(bound)]
            }
            SecondRoute::DruckerPrager { alpha, k } => [Some(j2(tensor).sqrt()), Some(k + alpha * i1)],
            SecondRoute::HoekBrown { sigma_ci, m_b, s, a } => {
                let [s1, _, s3] = principal_values(tensor);
                let under = m_b * s3 / sigma_ci + s;
                [Some(s1), (under >= 0.0).then(|| s3 + sigma_ci * (a * under.ln()).exp())]
            }
        }
    }

    /// How far σ3' is inside the domain of the criterion, for those that have an edge.
    pub fn inside_domain(self, tensor: Tensor) -> Option<f64> {
        let least = principal_values(tensor)[2];
        match self {
            SecondRoute::ModifiedLade { shift, .. } => Some(least + shift),
            SecondRoute::HoekBrown { sigma_ci, m_b, s, .. } => Some(least + s * sigma_ci / m_b),
            _ => None,
        }
    }

    /// How much a last bit may weigh: near 90° of friction two roots of Lade's cubic are nearly one, and
    /// near 0° the mean that a deviator needs is many times as large as it.
    pub fn conditioning(self) -> f64 {
        match self {
            SecondRoute::ModifiedLade { eta, bound, .. } => bound / (27.0 * eta).sqrt(),
            _ => 1.0,
        }
    }

    /// By how much an effective tensor exceeds what the rock bears, in the measure of the criterion.
    pub fn excess(self, tensor: Tensor) -> f64 {
        match (self, self.sides(tensor)) {
            (SecondRoute::ModifiedLade { shift, eta, bound }, _) => {
                // The largest root of the cubic in the mean by its trigonometric solution.
                let k = bound / eta;
                let [xx, yy, zz, xy, yz, xz] = tensor.0;
                let mean = (xx + yy + zz) / 3.0;
                let (x, y, z) = (xx - mean, yy - mean, zz - mean);
                let j3 = x * (y * z - yz * yz) - xy * (xy * z - yz * xz) + xz * (xy * yz - y * xz);
                let size = (k * j2(tensor) / 3.0).sqrt();
                let cosine = if size > 0.0 { (-0.5 * k * j3 / size.powi(3)).clamp(-1.0, 1.0) } else { 0.0 };
                2.0 * size * (cosine.acos() / 3.0).cos() - mean - shift
            }
            (SecondRoute::HoekBrown { sigma_ci, m_b, s, a }, _) => {
                let [s1, _, s3] = principal_values(tensor);
                let needs = if s1 > s3 { (((s1 - s3) / sigma_ci).ln() / a).exp() } else { 0.0 };
                (needs - s) * sigma_ci / m_b - s3
            }
            (_, [Some(applied), Some(borne)]) => applied - borne,
            _ => f64::NAN,
        }
    }
}

impl SecondRoute {
    /// The least σ1' of zero or more that fails on a path of tensors, by halving; `None` where nothing
    /// up to `most` fails.
    pub fn fails_at(self, path: impl Fn(f64) -> Tensor, most: f64) -> Option<f64> {
        let (mut low, mut high) = (0.0, most);
        if self.excess(path(high)) <= 0.0 {
            return None;
        }
        for _ in 0..100 {
            let middle = 0.5 * (low + high);
            *(if self.excess(path(middle)) > 0.0 { &mut high } else { &mut low }) = middle;
        }
        Some(low)
    }
}

/// J2 from the components.
fn j2(tensor: Tensor) -> f64 {
    let [xx, yy, zz, xy, yz, xz] = tensor.0;
    let (a, b, c) = (xx - yy, yy - zz, zz - xx);
    (a * a + b * b + c * c) / 6.0 + xy * xy + yz * yz + xz * xz
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rock::Strength;
    use crate::units::Units;
    use proptest::prelude::*;

    fn every(cohesion: f64, friction: f64, mass: HoekBrown) -> [Strength; 8] {
        let (c, phi) = (cohesion.mpa(), friction.deg());
        [
            Strength::mohr_coulomb(c, phi),
            Strength::mohr_coulomb_ucs(c, phi),
            Strength::mogi_coulomb(c, phi),
            Strength::modified_lade(c, phi),
            Strength::drucker_prager_inscribed(c, phi),
            Strength::drucker_prager_circumscribed(c, phi),
            Strength::drucker_prager_extension(c, phi),
            Strength::hoek_brown(mass),
        ]
    }

    fn mass() -> impl Strategy<Value = HoekBrown> {
        (1.0..250.0_f64, 1.0..35.0_f64, 0.0..=100.0_f64, 0.0..=1.0_f64)
            .prop_map(|(ci, m_i, gsi, disturbance)| HoekBrown { sigma_ci: ci.mpa(), m_i, gsi, disturbance })
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(2_000))]

        /// Both routes on random tensors, in tension too.
        #[test]
        fn both_routes_agree(
            six in proptest::array::uniform6(-60.0..90.0_f64), shear in 0.0..1.0_f64,
            cohesion in 0.0..40.0_f64, friction in 0.5..70.0_f64, mass in mass(),
        ) {
            let [a, b, c, d, e, f] = six.map(|x| x * 1e6);
            let tensor = Tensor([a, b, c, shear * d, shear * e, shear * f]);
            for strength in every(cohesion, friction, mass) {
                let law = strength.checked().unwrap().law();
                let first = law.excess(tensor.eigen().values);
                let second = strength.excess_by_tensor(tensor);
                prop_assert!(first.is_finite() && second.is_finite());
                let size = tensor.largest().max(law.size()).max(mass.sigma_ci.si());
                let inside = strength.second_route().inside_domain(tensor);
                if inside.is_none_or(|d| d.abs() > 1e-3 * size) {
                    // q, which the tension is multiplied by, is up to 32 at 70°; the confinement that a
                    // weak rock mass needs may be much larger than the stresses.
                    let size = size.max(first.abs() / 40.0);
                    prop_assert!((first - second).abs() <= 1e-12 * 40.0 * size, "{:?} {} {}", strength, first, second);
                    let defined = |sides: [Option<f64>; 2]| sides.map(|s| s.is_some());
                    let sides = law.sides(tensor.eigen().values);
                    prop_assert_eq!(defined(sides), defined(strength.second_route().sides(tensor)));
                }
                if inside.is_some_and(|d| d < 0.0) {
                    prop_assert!(first >= 0.0 && second >= 0.0, "{:?} {} {}", strength, first, second);
                }
                if let [Some(applied), Some(borne)] = law.sides(tensor.eigen().values) {
                    prop_assert!((applied > borne) == (first > 0.0) || first.abs() < 1e-9 * size);
                }
            }
        }

        /// Across the edge of the domain neither route jumps.
        #[test]
        fn both_routes_are_continuous(
            s1 in 0.0..90.0_f64, share in 0.0..1.0_f64, cohesion in 0.1..40.0_f64, friction in 0.5..70.0_f64, mass in mass(),
        ) {
            for strength in every(cohesion, friction, mass) {
                let route = strength.second_route();
                let Some(edge) = route.inside_domain(Tensor([0.0; 6])) else { continue };
                let at = |s3: f64| [s1 * 1e6, s3 + share * (s1 * 1e6 - s3), s3];
                let size = (s1 * 1e6).max(edge).max(mass.sigma_ci.si());
                let mut before: Option<f64> = None;
                for step in [-1e-12, -1e-15, 0.0, 1e-15, 1e-12] {
                    let [a, b, c] = at(-edge + step * size);
                    let tensor = Tensor([a, b, c, 0.0, 0.0, 0.0]);
                    for excess in [strength.law().excess([a, b, c]), strength.excess_by_tensor(tensor)] {
                        // The cube root of 1e-12, and the square root.
                        prop_assert!(before.is_none_or(|b| (b - excess).abs() < 1e-3 * size), "{:?}", strength);
                        prop_assert!(excess > -1e-3 * size);
                        before = Some(excess);
                    }
                }
            }
        }
    }

    #[test]
    fn constants_of_intact_rock_are_exact() {
        let whole = HoekBrown { sigma_ci: 50.mpa(), m_i: 10.0, gsi: 100.0, disturbance: 0.0 };
        let exact = StrengthConstants::HoekBrown { m_b: 10.0, s: 1.0, a: 0.5 };
        assert_eq!(SecondRoute::hoek_brown(whole).constants(), exact);
        assert_eq!(Strength::hoek_brown(whole).law().constants(), exact);
    }
}
