//! Mogi–Coulomb on effective principal stresses: τoct ≤ a + b (σ1' + σ3') / 2.
//!
//! The intermediate stress strengthens the rock up to half-way and no further. Where two of the three
//! are equal it is Mohr–Coulomb with the same cohesion and friction angle. It was fitted to tests in
//! compression; in tension the line only goes on.

use super::account::{Account, mpa, number};
use super::criterion::{Criterion, Order};
use super::number::Number;
use crate::card::{Formula, Reference, Step};
use crate::units::{Angle, Pressure, Quantity, fixed};

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

impl MogiCoulomb {
    /// The two σ2' at which σ1' and σ3' are just borne, half-way between them less and more the same:
    /// 9 τoct² = 2 (σ2' − m)² + 6 d² with m = (σ1' + σ3') / 2, d = (σ1' − σ3') / 2. `None` where no σ2' is
    /// enough.
    pub fn middles(self, s1: f64, s3: f64) -> Option<[f64; 2]> {
        let (m, d) = (0.5 * (s1 + s3), 0.5 * (s1 - s3));
        let square = 4.5 * (self.a + self.b * m).powi(2) - 3.0 * d * d;
        (square >= 0.0).then(|| [m - square.sqrt(), m + square.sqrt()])
    }

    /// The largest σ1' that some σ2' lets the rock bear beside σ3'. `None` where there is none (friction
    /// angles above 60°).
    pub fn most(self, s3: f64) -> Option<f64> {
        let root = 6.0_f64.sqrt();
        (root > 3.0 * self.b).then(|| (6.0 * self.a + s3 * (root + 3.0 * self.b)) / (root - 3.0 * self.b))
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

    /// τoct and a + b (σ1' + σ3') / 2.
    fn sides(&self, [s1, s2, s3]: [f64; 3]) -> [Option<f64>; 2] {
        let octahedral = ((s1 - s2).powi(2) + (s2 - s3).powi(2) + (s3 - s1).powi(2)).sqrt() / 3.0;
        [Some(octahedral), Some(self.a + 0.5 * self.b * (s1 + s3))]
    }

    fn size(&self) -> f64 {
        self.a
    }
}

/// What its card says.
pub(super) fn account(line: MogiCoulomb, cohesion: Pressure, friction_angle: Angle) -> Account {
    let (s, c) = friction_angle.si().sin_cos();
    Account {
        margin: "a_M + b_M σ'_m2 − τ_oct",
        domain: "It was fitted to polyaxial tests in compression. Where σ'_3 is tension the same line only goes on; rock parts there at its tensile strength, so that a margin in tension flatters it.",
        steps: vec![
            Step::worked(format!(
                "a_M = (2 √2 / 3) c cos φ = 0.942809 · {} · {} = {} MPa",
                fixed(cohesion.in_mpa(), 4),
                number(c),
                fixed(line.a * 1e-6, 5)
            )),
            Step::worked(format!("b_M = (2 √2 / 3) sin φ = 0.942809 · {} = {}", number(s), number(line.b))),
        ],
        formulas: vec![
            Formula::new(
                "tau_upright(\"oct\") = a_upright(M) + b_upright(M) sigma'_(upright(m) 2)",
                "τ_oct = a_M + b_M σ'_m2",
            ),
            Formula::new(
                "tau_upright(\"oct\") = 1/3 sqrt((sigma'_1 - sigma'_2)^2 + (sigma'_2 - sigma'_3)^2 + (sigma'_3 - sigma'_1)^2)",
                "τ_oct = ⅓ √((σ'_1 − σ'_2)² + (σ'_2 − σ'_3)² + (σ'_3 − σ'_1)²)",
            ),
            Formula::new("sigma'_(upright(m) 2) = (sigma'_1 + sigma'_3) / 2", "σ'_m2 = (σ'_1 + σ'_3) / 2"),
            Formula::new(
                "a_upright(M) = (2 sqrt(2)) / 3 c cos phi, quad b_upright(M) = (2 sqrt(2)) / 3 sin phi",
                "a_M = (2 √2 / 3) c cos φ, b_M = (2 √2 / 3) sin φ",
            ),
        ],
        symbols: vec![
            ("τ_oct", "octahedral shear stress"),
            ("σ'_m2", "mean of the largest and the least effective principal stress"),
        ],
        references: vec![Reference::new(
            "Al-Ajmi, A.M. and Zimmerman, R.W. (2005) Relation between the Mogi and the Coulomb failure criteria, Int. J. Rock Mech. Min. Sci. 42, 431–439 (cited from memory)",
        )],
        assumptions: vec![
            "The intermediate principal stress strengthens the rock, most where it is half-way between the other two; where two of the three are equal it is Mohr–Coulomb.",
            "Close to σ'_2 = σ'_1 the curve turns back: beside one σ'_2 a larger σ'_1 may hold where a smaller one fails.",
        ],
    }
}

/// The margin of σ1', σ2', σ3' (Pa), with the numbers put in.
pub(super) fn worked(line: MogiCoulomb, stress: [f64; 3]) -> Vec<Step> {
    let [s1, s2, s3] = stress.map(mpa);
    let octahedral = line.sides(stress)[0].unwrap_or(f64::NAN);
    let mean = 0.5 * (stress[0] + stress[2]);
    vec![
        Step::worked(format!(
            "τ_oct = ⅓ · √(({s1} − {s2})² + ({s2} − {s3})² + ({s3} − {s1})²) = {} MPa",
            mpa(octahedral)
        )),
        Step::worked(format!("σ'_m2 = ({s1} + {s3}) / 2 = {} MPa", mpa(mean))),
        Step::worked(format!(
            "a_M + b_M σ'_m2 − τ_oct = {} + {} · {} − {} = {} MPa",
            mpa(line.a),
            number(line.b),
            mpa(mean),
            mpa(octahedral),
            mpa(-line.excess(stress))
        )),
    ]
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Just beside σ2' = σ1' a larger σ1' holds where a smaller one fails; both σ2' of a σ1' are at the
    /// limit, and at the largest σ1' they are one.
    #[test]
    fn the_curve_turns_back_near_two_equal_stresses() {
        let line = MogiCoulomb::from_cohesion(11e6, 33.0_f64.to_radians());
        let s3 = 10.13e6;
        assert!(line.excess([75e6, 75e6, s3]) > 0.0);
        assert!(line.excess([79e6, 75e6, s3]) < 0.0);
        assert!(line.excess([90e6, 75e6, s3]) > 0.0);
        let most = line.most(s3).unwrap();
        for s1 in [80e6, 95e6, most * (1.0 - 1e-9)] {
            for s2 in line.middles(s1, s3).unwrap() {
                assert!(line.excess([s1, s2, s3]).abs() < 1e-2);
            }
        }
        let [low, high] = line.middles(most * (1.0 - 1e-12), s3).unwrap();
        assert!((low - high).abs() < 1e-4 * most && (low - 0.5 * (most + s3)).abs() < 1e-4 * most);
        assert_eq!(line.middles(1.0001 * most, s3), None);
        assert_eq!(MogiCoulomb::from_cohesion(11e6, 61.0_f64.to_radians()).most(s3), None);
    }
}
