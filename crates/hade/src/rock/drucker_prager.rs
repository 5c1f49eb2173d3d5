//! Drucker–Prager on the invariants of effective stress: √J2 ≤ k + α I1, fitted to Mohr–Coulomb in
//! one of three ways. For comparison only: a cone fits a rock at one edge or face of Mohr–Coulomb's
//! pyramid and nowhere else.

use serde::{Deserialize, Serialize};

use super::account::{Account, mpa, number};
use super::criterion::{Criterion, Order};
use super::number::Number;
use crate::card::{Formula, Reference, Step};
use crate::units::{Angle, Pressure, Quantity, fixed};

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

    /// √J2 and k + α I1.
    fn sides(&self, [s1, s2, s3]: [f64; 3]) -> [Option<f64>; 2] {
        let root_j2 = (((s1 - s2).powi(2) + (s2 - s3).powi(2) + (s3 - s1).powi(2)) / 6.0).sqrt();
        [Some(root_j2), Some(self.k + self.alpha * (s1 + s2 + s3))]
    }

    fn size(&self) -> f64 {
        self.k
    }
}

/// What its card says.
pub(super) fn account(cone: DruckerPrager, fit: Fit, cohesion: Pressure, friction_angle: Angle) -> Account {
    let (s, c) = friction_angle.si().sin_cos();
    let (s, c, cohesion) = (number(s), number(c), fixed(cohesion.in_mpa(), 4));
    let (alpha, k) = (number(cone.alpha), mpa(cone.k));
    let (formula, steps, fitted) = match fit {
        Fit::Inscribed => (
            Formula::new(
                "alpha = (sin phi) / (sqrt(3) sqrt(3 + sin^2 phi)), quad k = (3 c cos phi) / (sqrt(3) sqrt(3 + sin^2 phi))",
                "α = sin φ / (√3 √(3 + sin² φ)), k = 3 c cos φ / (√3 √(3 + sin² φ))",
            ),
            [
                format!("α = sin φ / (√3 √(3 + sin² φ)) = {s} / (√3 · √(3 + {s}²)) = {alpha}"),
                format!("k = 3 c cos φ / (√3 √(3 + sin² φ)) = 3 · {cohesion} · {c} / (√3 · √(3 + {s}²)) = {k} MPa"),
            ],
            "For comparison only. The inscribed cone touches the faces of Mohr–Coulomb's pyramid from inside: it takes the rock as weaker than Mohr–Coulomb does, much weaker near triaxial compression.",
        ),
        Fit::Circumscribed => (
            Formula::new(
                "alpha = (2 sin phi) / (sqrt(3) (3 - sin phi)), quad k = (6 c cos phi) / (sqrt(3) (3 - sin phi))",
                "α = 2 sin φ / (√3 (3 − sin φ)), k = 6 c cos φ / (√3 (3 − sin φ))",
            ),
            [
                format!("α = 2 sin φ / (√3 (3 − sin φ)) = 2 · {s} / (√3 · (3 − {s})) = {alpha}"),
                format!("k = 6 c cos φ / (√3 (3 − sin φ)) = 6 · {cohesion} · {c} / (√3 · (3 − {s})) = {k} MPa"),
            ],
            "For comparison only: the circumscribed cone flatters the rock. It is Mohr–Coulomb in triaxial compression alone and stronger everywhere else; where sin φ ≥ 3/5 it never fails at all under two large equal stresses.",
        ),
        Fit::Extension => (
            Formula::new(
                "alpha = (2 sin phi) / (sqrt(3) (3 + sin phi)), quad k = (6 c cos phi) / (sqrt(3) (3 + sin phi))",
                "α = 2 sin φ / (√3 (3 + sin φ)), k = 6 c cos φ / (√3 (3 + sin φ))",
            ),
            [
                format!("α = 2 sin φ / (√3 (3 + sin φ)) = 2 · {s} / (√3 · (3 + {s})) = {alpha}"),
                format!("k = 6 c cos φ / (√3 (3 + sin φ)) = 6 · {cohesion} · {c} / (√3 · (3 + {s})) = {k} MPa"),
            ],
            "For comparison only. The cone goes through the edges of triaxial extension: it is Mohr–Coulomb there, weaker in triaxial compression, and a little stronger in between.",
        ),
    };
    Account {
        margin: "k + α I_1 − √J_2",
        domain: "It is defined for every stress. In tension the cone only goes on to its apex; rock parts there at its tensile strength, so that a margin in tension flatters it.",
        steps: steps.map(Step::worked).to_vec(),
        formulas: vec![
            Formula::new("sqrt(J_2) = k + alpha I_1", "√J_2 = k + α I_1"),
            Formula::new("I_1 = sigma'_1 + sigma'_2 + sigma'_3", "I_1 = σ'_1 + σ'_2 + σ'_3"),
            Formula::new(
                "J_2 = 1/6 [(sigma'_1 - sigma'_2)^2 + (sigma'_2 - sigma'_3)^2 + (sigma'_3 - sigma'_1)^2]",
                "J_2 = ⅙ [(σ'_1 − σ'_2)² + (σ'_2 − σ'_3)² + (σ'_3 − σ'_1)²]",
            ),
            formula,
        ],
        symbols: vec![
            ("α", "slope on I_1 (a third of the slope on the mean stress)"),
            ("I_1", "sum of the effective principal stresses"),
            ("J_2", "second invariant of the deviator"),
        ],
        references: vec![
            Reference::new(
                "Drucker, D.C. and Prager, W. (1952) Soil mechanics and plastic analysis or limit design, Q. Appl. Math. 10, 157–165 (cited from memory)",
            ),
            Reference::new(
                "Colmenares, L.B. and Zoback, M.D. (2002) A statistical evaluation of intact rock failure criteria constrained by polyaxial test data for five different rocks, Int. J. Rock Mech. Min. Sci. 39, 695–729 (inscribed and circumscribed; cited from memory)",
            ),
        ],
        assumptions: vec![fitted],
    }
}

/// The margin of σ1', σ2', σ3' (Pa), with the numbers put in.
pub(super) fn worked(cone: DruckerPrager, stress: [f64; 3]) -> Vec<Step> {
    let [s1, s2, s3] = stress.map(mpa);
    let root_j2 = mpa(cone.sides(stress)[0].unwrap_or(f64::NAN));
    let i1 = mpa(stress.iter().sum());
    vec![
        Step::worked(format!("I_1 = {s1} + {s2} + {s3} = {i1} MPa")),
        Step::worked(format!("√J_2 = √((({s1} − {s2})² + ({s2} − {s3})² + ({s3} − {s1})²) / 6) = {root_j2} MPa")),
        Step::worked(format!(
            "k + α I_1 − √J_2 = {} + {} · {i1} − {root_j2} = {} MPa",
            mpa(cone.k),
            number(cone.alpha),
            mpa(-cone.excess(stress))
        )),
    ]
}
