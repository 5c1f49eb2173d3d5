//! A rock mass by other routes: other algebra, logarithms, and the line of least squares by numerical
//! integration of the curve.

use super::constants::StrengthConstants;
use super::hoek_brown::HoekBrown;
use super::rock_mass::{Equivalent, RockMassInputs, RockMassOutcome};
use crate::card::Check;
use crate::units::Quantity;

/// Nodes and weights of Gauss and Legendre's rule of four points on −1 to 1 (Abramowitz and Stegun,
/// Handbook of Mathematical Functions, table 25.4).
const GAUSS: [(f64, f64); 4] = [
    (-0.861_136_311_594_052_6, 0.347_854_845_137_453_85),
    (-0.339_981_043_584_856_26, 0.652_145_154_862_546_1),
    (0.339_981_043_584_856_26, 0.652_145_154_862_546_1),
    (0.861_136_311_594_052_6, 0.347_854_845_137_453_85),
];

/// The constants by the second route: mb, s, a.
fn constants(rock: HoekBrown) -> [f64; 3] {
    match rock.second_route().constants() {
        StrengthConstants::HoekBrown { m_b, s, a } => [m_b, s, a],
        _ => [f64::NAN; 3],
    }
}

/// The straight line of least squares through σ1' over −tensile strength < σ3' < `most`: its value at
/// σ3' = 0 and its slope. The curve is steep at its end in tension, so the places crowd there.
fn fitted(rock: HoekBrown, most: f64) -> [f64; 2] {
    let (sigma_ci, [m_b, s, a]) = (rock.sigma_ci.si(), constants(rock));
    let span = most + s * sigma_ci / m_b;
    let (mut area, mut moment) = (0.0, 0.0);
    for panel in 0..64 {
        for (node, weight) in GAUSS {
            // σ3' = −tensile + span w³; u is w³, the share of the span.
            let w = (f64::from(panel) + 0.5 + 0.5 * node) / 64.0;
            let u = w * w * w;
            let part = weight / 128.0 * 3.0 * w * w;
            let deviator = sigma_ci * (a * (m_b * span * u / sigma_ci).ln()).exp();
            area += part * deviator;
            moment += part * (u - 0.5) * deviator;
        }
    }
    let slope = 12.0 * moment / span;
    let middle = most - 0.5 * span;
    [area - slope * middle, 1.0 + slope]
}

/// A cohesion and friction angle as the line σ1' = UCS + q σ3': UCS and q.
fn line(e: Equivalent) -> [f64; 2] {
    let t = (std::f64::consts::FRAC_PI_4 + 0.5 * e.friction_angle.si()).tan();
    [2.0 * e.cohesion.si() * t, t * t]
}

pub(super) fn checks(inputs: &RockMassInputs, outcome: &RockMassOutcome) -> Vec<Check> {
    let rock = inputs.rock;
    let [m_b, s, a] = constants(rock);
    let ci = rock.sigma_ci.in_mpa();
    let near = |what: &str, got: f64, want: f64, relative: f64, unit: &str| {
        Check::compare(what, &[got], &[want], relative * want.abs(), unit)
    };
    let compressive = ci * (a * s.ln()).exp();
    let tensile = ci * (s.ln() - m_b.ln()).exp();
    let mut checks = vec![
        near("m_b by powers of two", outcome.m_b, m_b, 1e-11, ""),
        near("s from m_b / m_i", outcome.s, s, 1e-11, ""),
        near("a with one exponential", outcome.a, a, 1e-12, ""),
        near("uniaxial strength by logarithms", outcome.compressive.in_mpa(), compressive, 1e-11, "MPa"),
        near("tensile strength by logarithms", outcome.tensile.in_mpa(), tensile, 1e-11, "MPa"),
        near(
            "global strength: the line of least squares up to σ_ci / 4, by integration, at σ'_3 = 0",
            outcome.global.in_mpa(),
            fitted(rock, 0.25 * rock.sigma_ci.si())[0] * 1e-6,
            1e-7,
            "MPa",
        ),
    ];
    match (inputs.sigma_3_max, outcome.equivalent) {
        (Some(most), Some(stated)) => {
            let ([ucs, q], [other_ucs, other_q]) = (line(stated), fitted(rock, most.si()));
            checks.push(near("slope of the line of least squares by integration", q, other_q, 1e-7, ""));
            checks.push(near(
                "the line of least squares at σ'_3 = 0, by integration",
                ucs * 1e-6,
                other_ucs * 1e-6,
                1e-6,
                "MPa",
            ));
        }
        (most, stated) => checks.push(Check::holds(
            "an equivalent line where σ'_3max is stated, none where it is not",
            if most.is_none() && stated.is_none() { 0.0 } else { 1.0 },
            0.0,
            "",
        )),
    }
    checks
}
