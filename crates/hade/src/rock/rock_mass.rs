//! What joints and disturbance leave of a rock: Hoek and Brown's rock mass, with an equivalent cohesion
//! and friction angle over a range of confinement.

use serde::{Deserialize, Serialize};

use super::account::{figures, mpa, number};
use super::hoek_brown::{HoekBrown, HoekBrownLaw};
use super::{Strength, rock_mass_check};
use crate::card::{Axis, Check, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Method, Role, Step};
use crate::error::{Error, Result};
use crate::units::{Angle, Pressure, Quantity, fixed, with_typed_unit};

/// A rock mass by Hoek and Brown (2002 edition) with its constants and strengths.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RockMass {
    inputs: RockMassInputs,
    outcome: RockMassOutcome,
}

/// The inputs.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RockMassInputs {
    pub(super) rock: HoekBrown,
    pub(super) sigma_3_max: Option<Pressure>,
}

/// What came out. Tension by its size.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RockMassOutcome {
    pub(super) m_b: f64,
    pub(super) s: f64,
    pub(super) a: f64,
    pub(super) compressive: Pressure,
    pub(super) tensile: Pressure,
    pub(super) global: Pressure,
    pub(super) equivalent: Option<Equivalent>,
}

/// The straight line of Mohr and Coulomb that fits the curve best.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct Equivalent {
    pub cohesion: Pressure,
    pub friction_angle: Angle,
}

impl HoekBrown {
    /// The rock mass: its constants and strengths.
    ///
    /// # Errors
    /// When a number is one that no rock mass has.
    pub fn rock_mass(self) -> Result<RockMass> {
        RockMass::compute(RockMassInputs { rock: self, sigma_3_max: None })
    }

    /// The rock mass with the cohesion and friction angle that fit its curve best from its tensile
    /// strength up to an effective σ3', which the engineer chooses by what confines the rock at hand.
    ///
    /// # Errors
    /// As [`HoekBrown::rock_mass`], and when the largest σ3' is not above zero.
    pub fn rock_mass_up_to(self, sigma_3_max: Pressure) -> Result<RockMass> {
        RockMass::compute(RockMassInputs { rock: self, sigma_3_max: Some(sigma_3_max) })
    }
}

impl RockMass {
    /// mb = mi exp((GSI − 100) / (28 − 14 D)).
    pub fn m_b(&self) -> f64 {
        self.outcome.m_b
    }
    /// s = exp((GSI − 100) / (9 − 3 D)).
    pub fn s(&self) -> f64 {
        self.outcome.s
    }
    /// a = ½ + (exp(−GSI / 15) − exp(−20 / 3)) / 6.
    pub fn a(&self) -> f64 {
        self.outcome.a
    }
    /// The uniaxial compressive strength of the mass, σci s^a: where failure begins at a free face.
    pub fn compressive_strength(&self) -> Pressure {
        self.outcome.compressive
    }
    /// The tensile strength of the mass, s σci / mb, as a size.
    pub fn tensile_strength(&self) -> Pressure {
        self.outcome.tensile
    }
    /// The global strength σcm: the uniaxial strength of the line fitted up to σ3' = σci / 4, for a
    /// pillar as a whole.
    pub fn global_strength(&self) -> Pressure {
        self.outcome.global
    }
    /// The cohesion of the fitted line; `None` without a largest σ3'.
    pub fn equivalent_cohesion(&self) -> Option<Pressure> {
        self.outcome.equivalent.map(|e| e.cohesion)
    }
    /// The friction angle of the fitted line; `None` without a largest σ3'.
    pub fn equivalent_friction_angle(&self) -> Option<Angle> {
        self.outcome.equivalent.map(|e| e.friction_angle)
    }
    /// The fitted line as a strength; `None` without a largest σ3'. Beyond that σ3' it flatters the rock.
    pub fn equivalent_strength(&self) -> Option<Strength> {
        self.outcome.equivalent.map(|e| Strength::mohr_coulomb(e.cohesion, e.friction_angle))
    }
    /// σ1' at failure beside an effective σ3'. `None` below −tensile strength, where nothing holds.
    pub fn sigma_1_at(&self, sigma_3: Pressure) -> Option<Pressure> {
        self.inputs.rock.law().beside(sigma_3.si()).map(Pressure::from_si)
    }
    /// The strength by the curve itself.
    pub fn strength(&self) -> Strength {
        Strength::hoek_brown(self.inputs.rock)
    }
}

/// Equations 12 and 13 of Hoek, Carranza-Torres and Corkum (2002): the straight line of least squares
/// over −tensile strength < σ3' < σ3max, which balances the areas above and below it.
fn equivalent(law: HoekBrownLaw, sigma_3_max: f64) -> Equivalent {
    let HoekBrownLaw { sigma_ci, m_b, s, a } = law;
    let n = sigma_3_max / sigma_ci;
    let power = (s + m_b * n).powf(a - 1.0);
    let both = (1.0 + a) * (2.0 + a);
    let slope = 6.0 * a * m_b * power;
    let sine = slope / (2.0 * both + slope);
    let cohesion =
        sigma_ci * ((1.0 + 2.0 * a) * s + (1.0 - a) * m_b * n) * power / (both * (1.0 + slope / both).sqrt());
    Equivalent { cohesion: Pressure::from_si(cohesion), friction_angle: Angle::from_si(sine.asin()) }
}

impl Explain for RockMass {
    const KIND: &'static str = "rock-mass";
    type Inputs = RockMassInputs;
    type Outcome = RockMassOutcome;

    fn compute(inputs: RockMassInputs) -> Result<Self> {
        let law = inputs.rock.checked()?.law();
        if let Some(most) = inputs.sigma_3_max.filter(|most| !(most.si().is_finite() && most.si() > 0.0)) {
            return Err(Error::out_of_range(
                "largest effective σ3' of the equivalent line",
                with_typed_unit(most),
                "above zero",
            ));
        }
        let HoekBrownLaw { sigma_ci, m_b, s, a } = law;
        let global = sigma_ci * (m_b + 4.0 * s - a * (m_b - 8.0 * s)) * (0.25 * m_b + s).powf(a - 1.0)
            / (2.0 * (1.0 + a) * (2.0 + a));
        let outcome = RockMassOutcome {
            m_b,
            s,
            a,
            compressive: Pressure::from_si(sigma_ci * s.powf(a)),
            tensile: Pressure::from_si(law.tensile_strength()),
            global: Pressure::from_si(global),
            equivalent: inputs.sigma_3_max.map(|most| equivalent(law, most.si())),
        };
        Ok(RockMass { inputs, outcome })
    }
    fn inputs(&self) -> RockMassInputs {
        self.inputs
    }
    fn outcome(&self) -> RockMassOutcome {
        self.outcome
    }

    fn check(inputs: &RockMassInputs, outcome: &RockMassOutcome) -> Vec<Check> {
        rock_mass_check::checks(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let RockMassInputs { rock, sigma_3_max } = self.inputs;
        let RockMassOutcome { m_b, s, a, compressive, tensile, global, equivalent } = self.outcome;
        let constant = |symbol: &str, name: &str, value: f64| {
            Item::new(symbol, name, "criterion constant", vec![value], figures(value))
        };
        let mut inputs = rock.items();
        let mut results = vec![
            constant("m_b", "constant m of the rock mass", m_b),
            constant("s", "constant s of the rock mass", s),
            constant("a", "exponent of the rock mass", a),
            Item::computed("σ_c", "uniaxial compressive strength of the rock mass", compressive),
            Item::new(
                "σ_t",
                "tensile strength of the rock mass",
                Pressure::KIND,
                vec![tensile.si()],
                format!("{} MPa", figures(tensile.in_mpa())),
            ),
            Item::computed("σ_cm", "global strength of the rock mass", global),
        ];
        let mut headline = format!("uniaxial strength of the mass {compressive}, global strength {global}");
        let mut formulas = Strength::hoek_brown(rock).formulas();
        formulas.extend([
            Formula::new(
                "sigma_upright(c) = sigma_upright(\"ci\") s^a, quad sigma_upright(t) = (s sigma_upright(\"ci\")) / m_upright(b)",
                "σ_c = σ_ci s^a, σ_t = s σ_ci / m_b",
            ),
            Formula::new(
                "sigma_upright(\"cm\") = sigma_upright(\"ci\") ((m_upright(b) + 4 s - a (m_upright(b) - 8 s)) (m_upright(b) / 4 + s)^(a - 1)) / (2 (1 + a) (2 + a))",
                "σ_cm = σ_ci (m_b + 4 s − a (m_b − 8 s)) (m_b / 4 + s)^(a − 1) / (2 (1 + a) (2 + a))",
            ),
        ]);
        let mut notes = Vec::new();
        if let (Some(most), Some(line)) = (sigma_3_max, equivalent) {
            inputs.push(Item::typed("σ'_3max", "largest effective σ'_3 of the equivalent line", most).chosen());
            results.push(Item::computed("c'", "equivalent cohesion", line.cohesion));
            results.push(Item::computed("φ'", "equivalent friction angle", line.friction_angle));
            headline = format!(
                "{headline}; up to σ'_3 {}: cohesion {}, friction angle {}",
                with_typed_unit(most),
                line.cohesion,
                line.friction_angle
            );
            formulas.extend([
                Formula::new(
                    "sin phi' = X / (2 + X), quad X = (6 a m_upright(b) (s + m_upright(b) sigma'_(3 n))^(a - 1)) / ((1 + a) (2 + a)), quad sigma'_(3 n) = sigma'_(3 upright(max)) / sigma_upright(\"ci\")",
                    "sin φ' = X / (2 + X), X = 6 a m_b (s + m_b σ'_3n)^(a − 1) / ((1 + a) (2 + a)), σ'_3n = σ'_3max / σ_ci",
                ),
                Formula::new(
                    "c' = sigma_upright(\"ci\") (((1 + 2 a) s + (1 - a) m_upright(b) sigma'_(3 n)) (s + m_upright(b) sigma'_(3 n))^(a - 1)) / ((1 + a) (2 + a) sqrt(1 + X))",
                    "c' = σ_ci [(1 + 2 a) s + (1 − a) m_b σ'_3n] (s + m_b σ'_3n)^(a − 1) / ((1 + a) (2 + a) √(1 + X))",
                ),
            ]);
            notes.push(format!(
                "Cohesion and friction angle hold up to σ'_3 = {}; beyond it the line flatters the rock mass.",
                with_typed_unit(most)
            ));
        }
        if rock.gsi < 100.0 && rock.gsi >= 75.0 {
            notes.push("With a GSI of 75 or more few joints are left: a single plane of weakness may govern, which this criterion does not know.".to_owned());
        }
        let mut symbols = Strength::hoek_brown(rock).symbols();
        symbols.push(("σ_cm".to_owned(), "uniaxial strength of the line fitted up to σ'_3 = σ_ci / 4".to_owned()));
        Explanation {
            title: format!("Rock mass, {}", Strength::hoek_brown(rock).words()),
            headline,
            inputs,
            results,
            method: Method {
                words: "The constants of the intact rock are reduced by the geological strength index and the disturbance. The equivalent line is the one of least squares over −σ_t < σ'_3 < σ'_3max; the areas above and below it are equal.".to_owned(),
                formulas,
                symbols,
                references: Strength::hoek_brown(rock).references(),
                assumptions: Strength::hoek_brown(rock).assumptions(),
            },
            steps: self.steps(),
            figures: vec![self.figure()],
            notes,
            topics: vec!["strength".to_owned(), "rock mass".to_owned()],
        }
    }
}

impl RockMass {
    fn steps(&self) -> Vec<Step> {
        let RockMassInputs { rock, sigma_3_max } = self.inputs;
        let RockMassOutcome { m_b, s, a, compressive, tensile, global, equivalent } = self.outcome;
        let (ci, mb, s, a_) = (mpa(rock.sigma_ci.si()), figures(m_b), figures(s), number(a));
        let mut steps = Strength::hoek_brown(rock).steps();
        steps.extend([
            Step::worked(format!("σ_c = σ_ci s^a = {ci} · {s}^{a_} = {} MPa", mpa(compressive.si()))),
            Step::worked(format!("σ_t = s σ_ci / m_b = {s} · {ci} / {mb} = {} MPa", figures(tensile.in_mpa()))),
            Step::worked(format!(
                "σ_cm = {ci} · ({mb} + 4 · {s} − {a_} · ({mb} − 8 · {s})) · ({mb} / 4 + {s})^({a_} − 1) / (2 · (1 + {a_}) · (2 + {a_})) = {} MPa",
                mpa(global.si())
            )),
        ]);
        if let (Some(most), Some(line)) = (sigma_3_max, equivalent) {
            let n = most / rock.sigma_ci;
            let power = (self.outcome.s + m_b * n).powf(a - 1.0);
            let x = 6.0 * a * m_b * power / ((1.0 + a) * (2.0 + a));
            let (n, power, x_) = (figures(n), number(power), number(x));
            steps.extend([
                Step::worked(format!("σ'_3n = {} / {ci} = {n}", mpa(most.si()))),
                Step::worked(format!("(s + m_b σ'_3n)^(a − 1) = ({s} + {mb} · {n})^({a_} − 1) = {power}")),
                Step::worked(format!("X = 6 · {a_} · {mb} · {power} / ((1 + {a_}) · (2 + {a_})) = {x_}")),
                Step::worked(format!(
                    "φ' = arcsin({x_} / (2 + {x_})) = {}°",
                    fixed(line.friction_angle.in_deg(), 4)
                )),
                Step::worked(format!(
                    "c' = {ci} · [(1 + 2 · {a_}) · {s} + (1 − {a_}) · {mb} · {n}] · {power} / ((1 + {a_}) · (2 + {a_}) · √(1 + {x_})) = {} MPa",
                    mpa(line.cohesion.si())
                )),
            ]);
        }
        steps
    }

    fn figure(&self) -> Figure {
        let law = self.inputs.rock.law();
        let tensile = law.tensile_strength();
        let most = self.inputs.sigma_3_max.map_or(0.25 * law.sigma_ci, Quantity::si);
        let to = 1.15 * most;
        // Closer where the curve bends most.
        let place = |i: u32| (to + tensile) * (f64::from(i) / 60.0).powi(2) - tensile;
        let curve: Vec<[f64; 2]> =
            (0..=60).filter_map(|i| law.beside(place(i)).map(|y| [place(i) * 1e-6, y * 1e-6])).collect();
        let top = curve.last().map_or(1.0, |p| p[1]);
        let mut layers = vec![Layer::line("rock mass", Role::Limit, curve)];
        let mut alt = format!(
            "σ'_1 at failure against σ'_3 of the rock mass: from the tensile strength {} MPa through {} MPa without confinement to {} MPa at σ'_3 = {} MPa.",
            figures(tensile * 1e-6),
            fixed(self.outcome.compressive.in_mpa(), 2),
            fixed(law.beside(most).unwrap_or(0.0) * 1e-6, 2),
            fixed(most * 1e-6, 2)
        );
        let mut caption = "The largest effective stress that the rock mass bears beside the least.".to_owned();
        if let Some(line) = self.equivalent_strength() {
            let at = |s3: f64| line.in_compression(s3).map(|s1| [s3 * 1e-6, s1 * 1e-6]);
            layers.push(Layer::line("c', φ'", Role::Second, [-tensile, most].into_iter().filter_map(at)));
            layers.push(Layer::line(
                "",
                Role::Quiet,
                [[most * 1e-6, 0.0], [most * 1e-6, law.beside(most).unwrap_or(0.0) * 1e-6]],
            ));
            caption.push_str(" The straight line has the equivalent cohesion and friction angle and ends at σ'_3max.");
            alt.push_str(&format!(" The equivalent line: {}.", line.words()));
        }
        layers.push(Layer::Points {
            label: "σ_c".to_owned(),
            role: Role::First,
            mark: Mark::Dot,
            points: vec![[0.0, self.outcome.compressive.in_mpa()]],
        });
        Figure {
            caption,
            alt,
            x: Axis::new("σ'_3 (MPa)", (-1.2 * tensile).min(-0.02 * to) * 1e-6, to * 1e-6),
            y: Axis::new("σ'_1 (MPa)", (-1.2 * tensile * 1e-6).max(-0.1 * top).min(0.0), 1.05 * top),
            equal_scale: false,
            layers,
        }
    }
}
