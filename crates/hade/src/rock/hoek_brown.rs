//! Hoek–Brown, 2002 edition, on effective principal stresses of a rock mass:
//! σ1' ≤ σ3' + σci (mb σ3' / σci + s)^a.
//!
//! The curve ends at the tensile strength of the mass, σ3' = −s σci / mb. Below, the power of a
//! negative number is none, and the rock has failed.

use std::f64::consts::{LN_2, LOG2_E, SQRT_2};

use serde::{Deserialize, Serialize};

use super::account::{Account, figures, mpa, number};
use super::criterion::{Criterion, Order};
use super::number::Number;
use super::second_route::SecondRoute;
use crate::card::{Formula, Item, Reference, Step};
use crate::error::{Error, Result};
use crate::units::{Pressure, Quantity, as_typed, require_between, with_typed_unit};

/// A rock mass by Hoek and Brown: the intact rock, and what joints and disturbance leave of it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct HoekBrown {
    /// The uniaxial compressive strength of the intact rock, above zero.
    pub sigma_ci: Pressure,
    /// The constant mi of the intact rock, above zero.
    pub m_i: f64,
    /// The geological strength index, 0–100; 100 is intact rock.
    pub gsi: f64,
    /// The disturbance factor D, 0–1; 0 is undisturbed.
    pub disturbance: f64,
}

impl HoekBrown {
    /// Itself, or the error that says what no rock mass has.
    pub(super) fn checked(self) -> Result<Self> {
        if !(self.sigma_ci.si().is_finite() && self.sigma_ci.si() > 0.0) {
            let name = "uniaxial compressive strength σci of the intact rock";
            return Err(Error::out_of_range(name, with_typed_unit(self.sigma_ci), "above zero"));
        }
        if !(self.m_i.is_finite() && self.m_i > 0.0) {
            return Err(Error::out_of_range(
                "Hoek–Brown constant mi of the intact rock",
                as_typed(self.m_i),
                "above zero",
            ));
        }
        require_between("geological strength index GSI", self.gsi, 0.0, 100.0)?;
        require_between("disturbance factor D", self.disturbance, 0.0, 1.0)?;
        let law = self.law();
        if !(law.tensile_strength().is_finite() && law.m_b > 0.0 && law.excess([2.0, 1.0, 0.5]).is_finite()) {
            return Err(Error::out_of_range(
                "Hoek–Brown constant mi of the intact rock",
                as_typed(self.m_i),
                "large enough for a finite strength (a few to some tens)",
            ));
        }
        Ok(self)
    }

    pub(super) fn law(self) -> HoekBrownLaw {
        HoekBrownLaw::new(self.sigma_ci.si(), self.m_i, self.gsi, self.disturbance)
    }

    pub(super) fn second_route(self) -> SecondRoute {
        SecondRoute::hoek_brown(self)
    }

    /// The numbers as they were typed.
    pub(super) fn items(self) -> Vec<Item> {
        vec![
            Item::typed("σ_ci", "uniaxial compressive strength of the intact rock", self.sigma_ci),
            Item::typed("m_i", "Hoek–Brown constant of the intact rock", self.m_i),
            Item::typed("GSI", "geological strength index", self.gsi),
            Item::typed("D", "disturbance factor", self.disturbance),
        ]
    }
}

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

    /// The size of the tension at which the mass parts, s σci / mb.
    pub fn tensile_strength(self) -> f64 {
        self.s * self.sigma_ci / self.m_b
    }

    /// σ1' at failure beside σ3'; `None` where the curve is not defined.
    pub fn beside(self, s3: f64) -> Option<f64> {
        let under = self.m_b * s3 / self.sigma_ci + self.s;
        (under >= 0.0).then(|| s3 + self.sigma_ci * under.powf(self.a))
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

    #[inline(always)]
    fn rough(&self, [s1, _, s3]: [f64; 3]) -> f64 {
        let needs = rough_power((s1 - s3) * (1.0 / self.sigma_ci), 1.0 / self.a) - self.s;
        needs * (self.sigma_ci / self.m_b) - s3
    }

    /// σ1', and σ1' at failure beside σ3'; no strength where the curve is not defined.
    fn sides(&self, [s1, _, s3]: [f64; 3]) -> [Option<f64>; 2] {
        [Some(s1), self.beside(s3)]
    }

    fn size(&self) -> f64 {
        self.sigma_ci
    }
}

/// x^q to 1e-7 of itself for x above zero, else 0, as 2^(q log2 x) without a branch, so that the processor
/// takes several at a time.
#[inline(always)]
fn rough_power(x: f64, q: f64) -> f64 {
    // 2^52: a double with this exponent holds whole numbers in its last bits.
    const WHOLE: f64 = 4_503_599_627_370_496.0;
    let bits = x.to_bits();
    let exponent = f64::from_bits((bits >> 52) | WHOLE.to_bits()) - WHOLE - 1023.0;
    let mantissa = f64::from_bits((bits & 0x000F_FFFF_FFFF_FFFF) | 1.0_f64.to_bits());
    // ln m = 2 artanh t with t = (m/√2 − 1) / (m/√2 + 1), |t| ≤ 0.172, besides ½ ln 2.
    let t = (mantissa - SQRT_2) / (mantissa + SQRT_2);
    let t2 = t * t;
    let ln = t * (2.0 + t2 * (2.0 / 3.0 + t2 * (2.0 / 5.0 + t2 * (2.0 / 7.0 + t2 * (2.0 / 9.0)))));
    let log2 = exponent + 0.5 + ln * LOG2_E;
    let power = q * log2;
    let power = if power < 1000.0 { power } else { 1000.0 };
    let power = if power > -1000.0 { power } else { -1000.0 };
    // The nearest whole number stands in the last bits of this sum.
    let shifted = power + 1.5 * WHOLE;
    let rest = (power - (shifted - 1.5 * WHOLE)) * LN_2;
    let series = [1.0 / 5040.0, 1.0 / 720.0, 1.0 / 120.0, 1.0 / 24.0, 1.0 / 6.0, 0.5, 1.0, 1.0];
    let fraction = series.iter().fold(0.0, |sum, factor| sum * rest + factor);
    let result = f64::from_bits(fraction.to_bits().wrapping_add(shifted.to_bits() << 52));
    if x > 0.0 { result } else { 0.0 }
}

/// What its card says.
pub(super) fn account(mass: HoekBrown) -> Account {
    let law = mass.law();
    let [gsi, d, m_i] = [mass.gsi, mass.disturbance, mass.m_i].map(as_typed);
    Account {
        margin: "σ'_3 − (σ_ci / m_b) (((σ'_1 − σ'_3) / σ_ci)^(1/a) − s)",
        domain: "The curve is defined down to the tensile strength of the mass, σ'_3 = −s σ_ci / m_b; below it the rock counts as failed. Between that and zero it is extended, not tested.",
        steps: vec![
            Step::worked(format!(
                "m_b = m_i exp((GSI − 100) / (28 − 14 D)) = {m_i} · exp(({gsi} − 100) / (28 − 14 · {d})) = {}",
                figures(law.m_b)
            )),
            Step::worked(format!(
                "s = exp((GSI − 100) / (9 − 3 D)) = exp(({gsi} − 100) / (9 − 3 · {d})) = {}",
                figures(law.s)
            )),
            Step::worked(format!(
                "a = ½ + (exp(−GSI / 15) − exp(−20 / 3)) / 6 = ½ + (exp(−{gsi} / 15) − exp(−20 / 3)) / 6 = {}",
                number(law.a)
            )),
        ],
        formulas: vec![
            Formula::new(
                "sigma'_1 = sigma'_3 + sigma_upright(\"ci\") (m_upright(b) sigma'_3 / sigma_upright(\"ci\") + s)^a",
                "σ'_1 = σ'_3 + σ_ci (m_b σ'_3 / σ_ci + s)^a",
            ),
            Formula::new(
                "m_upright(b) = m_upright(i) exp((upright(\"GSI\") - 100) / (28 - 14 D)), quad s = exp((upright(\"GSI\") - 100) / (9 - 3 D))",
                "m_b = m_i exp((GSI − 100) / (28 − 14 D)), s = exp((GSI − 100) / (9 − 3 D))",
            ),
            Formula::new(
                "a = 1/2 + 1/6 (exp(-upright(\"GSI\") / 15) - exp(-20 / 3))",
                "a = ½ + ⅙ (exp(−GSI / 15) − exp(−20 / 3))",
            ),
        ],
        symbols: vec![("m_b", "and s, a: constants of the rock mass")],
        references: vec![Reference::new(
            "Hoek, E., Carranza-Torres, C. and Corkum, B. (2002) Hoek–Brown failure criterion – 2002 edition, Proc. NARMS-TAC, Toronto, 1, 267–273 (cited from memory)",
        )],
        assumptions: vec![
            "The rock mass is isotropic: intact, or with so many joints that no direction of theirs governs.",
            "The intermediate principal stress has no say: rock that it strengthens is taken as weaker than it is.",
        ],
    }
}

/// The margin of σ1', σ2', σ3' (Pa), with the numbers put in.
pub(super) fn worked(law: HoekBrownLaw, stress: [f64; 3]) -> Vec<Step> {
    let [s1, _, s3] = stress.map(mpa);
    let under = law.m_b * stress[2] / law.sigma_ci + law.s;
    let (m_b, ci, margin) = (figures(law.m_b), mpa(law.sigma_ci), mpa(-law.excess(stress)));
    let mut steps = vec![Step::worked(format!(
        "m_b σ'_3 / σ_ci + s = {m_b} · {s3} / {ci} + {} = {}",
        figures(law.s),
        figures(under)
    ))];
    steps.push(match law.beside(stress[2]) {
        Some(bears) => Step::worked(format!(
            "σ'_1 at failure beside σ'_3 = {s3} + {ci} · {}^{} = {} MPa, against {s1}",
            figures(under),
            number(law.a),
            mpa(bears)
        )),
        None => Step::words(
            "σ'_3 is below −s σ_ci / m_b, the tensile strength of the mass: outside the domain of the criterion, where the rock counts as failed.",
        ),
    });
    let needs = law.excess(stress) + stress[2];
    steps.extend([
        Step::worked(format!(
            "σ'_3 that this σ'_1 − σ'_3 needs = ({ci} / {m_b}) ((({s1} − {s3}) / {ci})^(1 / {}) − {}) = {} MPa",
            number(law.a),
            figures(law.s),
            mpa(needs)
        )),
        Step::worked(format!("margin = {s3} − {} = {margin} MPa", mpa(needs))),
    ]);
    steps
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_rough_power_is_the_power_to_1e_7() {
        for k in -400..400 {
            let x = 1.37_f64.powi(k / 8) * (1.0 + 0.119 * f64::from(k.rem_euclid(8)));
            for q in [1.5, 1.7, 1.93, 2.0] {
                let (rough, power) = (rough_power(x, q), x.powf(q));
                assert!((rough - power).abs() < 1e-7 * power, "{x}^{q}: {rough} {power}");
            }
        }
        assert_eq!([-1.0, 0.0, -0.0].map(|x| rough_power(x, 1.7)), [0.0; 3]);
        assert!(rough_power(f64::MAX, 2.0) > 1e300 && rough_power(f64::MIN_POSITIVE, 2.0) < 1e-300);
    }
}
