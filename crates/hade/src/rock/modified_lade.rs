//! The modified Lade criterion (Ewy 1999) on effective principal stresses shifted by S1 = c / tan φ:
//! I1³ / I3 ≤ 27 + η.
//!
//! It is defined where every shifted stress is above zero. Outside, the ratio misleads: with one
//! stress below zero it is negative, with two it can be small again, and both would read as safe. The
//! rock has failed there.

use super::account::{Account, figures, mpa, number};
use super::criterion::{Criterion, Order};
use super::number::Number;
use crate::card::{Formula, Reference, Step};
use crate::units::{Angle, Pressure, Quantity, fixed};

/// The least friction angle, in degrees: c / tan φ has no bound at 0°, and below this the two sides
/// of the criterion differ by less than their last figures.
pub(super) const LEAST_FRICTION_ANGLE: f64 = 0.01;

/// The largest friction angle, in degrees: near 90° two roots of the criterion's cubic are one, and it
/// loses its figures. No rock comes near.
pub(super) const LARGEST_FRICTION_ANGLE: f64 = 85.0;

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
        let (t, (s, c)) = (friction.tan(), friction.sin_cos());
        // 1 / (1 − sin φ) as (1 + sin φ) / cos² φ, which keeps its figures near 90°.
        let eta = 4.0 * t * t * (9.0 - 7.0 * s) * (1.0 + s) / (c * c);
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
        let j2 = (a * a + b * b + c * c) * 0.5 + 1e-60;
        let size = j2.value().sqrt() * self.root;
        let (over, square) = (1.0 / size, self.root * self.root);
        let cube = over * over * over;
        // size = √(k J2) and k / size³, by J2.
        let step = 0.5 * square * over * over;
        let k_over_cube = j2.through([square * cube, -3.0 * step * square * cube, 15.0 * step * step * square * cube]);
        let size = j2.through([size, step * size, -step * step * size]);
        // w = u / size: w³ − w + r = 0, by Newton from a guess that is close everywhere.
        let r = a * b * c * k_over_cube;
        // |J3| ≤ 2 (J2 / 3)^(3/2), but for the rounding of a deviator of nothing.
        let most = r * 0.0 + 0.384_900_179_459_750_5 / self.root;
        let r = r.smaller(most).larger(-most);
        let (mut w, r0) = (guess(r.value()), r.value());
        for _ in 0..STEPS {
            w -= (w * (w * w - 1.0) + r0) / (3.0 * w * w - 1.0);
        }
        // Its derivatives by r, from the cubic.
        let first = -1.0 / (3.0 * w * w - 1.0);
        let root = r.through([w, first, 6.0 * w * first * first * first]);
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

    /// I1³ / I3 and 27 + η; no ratio where a shifted stress is not above zero.
    fn sides(&self, stress: [f64; 3]) -> [Option<f64>; 2] {
        let shifted = stress.map(|s| s + self.shift);
        let [a, b, c] = shifted;
        let inside = shifted.iter().all(|s| *s > 0.0);
        [inside.then(|| (a + b + c).powi(3) / (a * b * c)), Some(27.0 + self.eta)]
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

/// What its card says.
pub(super) fn account(law: ModifiedLade, cohesion: Pressure, friction_angle: Angle) -> Account {
    let (s, tan) = (friction_angle.si().sin(), friction_angle.si().tan());
    Account {
        margin: "σ'_m + S_L − u",
        domain: "It is defined where every shifted stress is above zero, σ'_3 > −c / tan φ; anywhere else the rock counts as failed, whatever the ratio I_1³ / I_3 says. Where σ'_3 is tension rock parts at its tensile strength, so that a margin there flatters it.",
        steps: vec![
            Step::worked(format!(
                "S_L = c / tan φ = {} / {} = {} MPa",
                fixed(cohesion.in_mpa(), 4),
                number(tan),
                mpa(law.shift)
            )),
            Step::worked(format!(
                "η = 4 tan² φ (9 − 7 sin φ) / (1 − sin φ) = 4 · {t}² · (9 − 7 · {s}) / (1 − {s}) = {}",
                number(law.eta),
                t = number(tan),
                s = number(s)
            )),
        ],
        formulas: vec![
            Formula::new("I_1^3 / I_3 = 27 + eta", "I_1³ / I_3 = 27 + η"),
            Formula::new(
                "I_1 = (sigma'_1 + S_L) + (sigma'_2 + S_L) + (sigma'_3 + S_L)",
                "I_1 = (σ'_1 + S_L) + (σ'_2 + S_L) + (σ'_3 + S_L)",
            ),
            Formula::new(
                "I_3 = (sigma'_1 + S_L) (sigma'_2 + S_L) (sigma'_3 + S_L)",
                "I_3 = (σ'_1 + S_L) (σ'_2 + S_L) (σ'_3 + S_L)",
            ),
            Formula::new(
                "u^3 - k J_2 u + k J_3 = 0, quad k = (27 + eta) / eta",
                "u³ − k J_2 u + k J_3 = 0, k = (27 + η) / η: its largest root u is the I_1 / 3 that this deviator needs",
            ),
            Formula::new(
                "S_L = c / (tan phi), quad eta = (4 tan^2 phi (9 - 7 sin phi)) / (1 - sin phi)",
                "S_L = c / tan φ, η = 4 tan² φ (9 − 7 sin φ) / (1 − sin φ)",
            ),
        ],
        symbols: vec![
            ("S_L", "shift of the stresses (S_1 in Ewy 1999)"),
            ("I_1", "and I_3: sum and product of the shifted principal stresses"),
            ("J_2", "and J_3: ½ Σ d_i² and the product of d_i, the principal stresses less their mean"),
            ("u", "the I_1 / 3 that a deviator needs to hold"),
        ],
        references: vec![Reference::new(
            "Ewy, R.T. (1999) Wellbore-stability predictions by use of a modified Lade criterion, SPE Drill. & Completion 14 (2), 85–91 (SPE 56862; cited from memory)",
        )],
        assumptions: vec![
            "The intermediate principal stress strengthens the rock, more than by Mogi–Coulomb near σ'_2 = σ'_1; where σ'_2 = σ'_3 it is Mohr–Coulomb.",
        ],
    }
}

/// The margin of σ1', σ2', σ3' (Pa), with the numbers put in.
pub(super) fn worked(law: ModifiedLade, stress: [f64; 3]) -> Vec<Step> {
    let shifted = stress.map(|s| s + law.shift);
    let [a, b, c] = shifted.map(mpa);
    let [s1, s2, s3] = stress.map(mpa);
    let sum: f64 = shifted.iter().sum();
    let (bound, margin) = (27.0 + law.eta, mpa(-law.excess(stress)));
    let mut steps = vec![
        Step::worked(format!(
            "shifted by S_L = {l} MPa: {s1} + {l} = {a}, {s2} + {l} = {b}, {s3} + {l} = {c} MPa",
            l = mpa(law.shift)
        )),
        Step::worked(format!("I_1 = {a} + {b} + {c} = {} MPa", mpa(sum))),
    ];
    match law.sides(stress)[0] {
        Some(ratio) => {
            let product: f64 = shifted.iter().map(|s| s * 1e-6).product();
            steps.extend([
                Step::worked(format!("I_3 = {a} · {b} · {c} = {} MPa³", figures(product))),
                Step::worked(format!("I_1³ / I_3 = {} against 27 + η = {}", number(ratio), number(bound))),
            ]);
        }
        None => steps.push(Step::words(
            "A shifted stress is not above zero: outside the domain of the criterion, where the rock counts as failed.",
        )),
    }
    let mean = sum / 3.0;
    let deviator = shifted.map(|s| (s - mean) * 1e-6);
    let j2 = 0.5 * deviator.iter().map(|d| d * d).sum::<f64>();
    let j3: f64 = deviator.iter().product();
    let needs = mpa(law.excess(stress) + mean);
    steps.extend([
        Step::worked(format!(
            "σ'_m + S_L = I_1 / 3 = {} MPa; J_2 = {} MPa², J_3 = {} MPa³, k = (27 + η) / η = {}",
            mpa(mean),
            figures(j2),
            figures(j3),
            number(bound / law.eta)
        )),
        Step::worked(format!("u, the largest root of u³ − k J_2 u + k J_3 = 0, is {needs} MPa")),
        Step::worked(format!("margin = {} − {needs} = {margin} MPa", mpa(mean))),
    ]);
    steps
}
