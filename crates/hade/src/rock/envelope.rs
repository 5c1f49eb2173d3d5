//! A strength by itself: its constants, its domain, and its curve.

use serde::{Deserialize, Serialize};

use super::{Strength, StrengthConstants, strength_figure};
use crate::card::{Check, Explain, Explanation, Item, Method, Step};
use crate::error::Result;
use crate::stress::tensor::Tensor;
use crate::units::{Pressure, Quantity, fixed};

/// A strength with its derived constants and its curve of σ1' against σ3'.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FailureEnvelope {
    strength: Strength,
    outcome: EnvelopeOutcome,
}

/// What came out: the constants, and the strengths without confinement.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct EnvelopeOutcome {
    constants: StrengthConstants,
    uniaxial: Pressure,
    biaxial: Option<Pressure>,
}

impl Strength {
    /// The derived constants of the criterion, its domain and its curve, as a card.
    ///
    /// # Errors
    /// When the strength is one that no rock has.
    pub fn envelope(self) -> Result<FailureEnvelope> {
        FailureEnvelope::compute(self)
    }
}

impl FailureEnvelope {
    /// The derived constants.
    pub fn constants(&self) -> StrengthConstants {
        self.outcome.constants
    }
    /// The uniaxial compressive strength, σ2' = σ3' = 0.
    pub fn uniaxial(&self) -> Pressure {
        self.outcome.uniaxial
    }
    /// The strength under two equal stresses, σ1' = σ2', σ3' = 0. `None` where the criterion never
    /// fails so (a circumscribed cone of a high friction angle).
    pub fn biaxial(&self) -> Option<Pressure> {
        self.outcome.biaxial
    }
    /// σ1' at failure with σ2' = σ3' (triaxial compression). `None` where σ3' is beyond the tension
    /// that the criterion lets the rock bear, or not a number.
    pub fn triaxial_compression(&self, sigma_3: Pressure) -> Option<Pressure> {
        self.strength.in_compression(sigma_3.si()).map(Pressure::from_si)
    }
    /// σ1' at failure with σ2' = σ1' (triaxial extension). `None` as for compression, and where the
    /// criterion never fails so.
    pub fn triaxial_extension(&self, sigma_3: Pressure) -> Option<Pressure> {
        self.strength.in_extension(sigma_3.si()).map(Pressure::from_si)
    }

    /// The constants as results.
    fn items(&self) -> Vec<Item> {
        let plain = |symbol: &str, name: &str, value: f64| {
            let shown = if value != 0.0 && value.abs() < 1e-3 { format!("{value:.4e}") } else { fixed(value, 5) };
            Item::new(symbol, name, "criterion constant", vec![value], shown)
        };
        match self.outcome.constants {
            // UCS is the uniaxial strength below.
            StrengthConstants::MohrCoulomb { q, .. } => vec![plain("q", "slope of σ'_1 on σ'_3", q)],
            StrengthConstants::MogiCoulomb { a, b } => vec![
                Item::computed("a_M", "octahedral shear stress borne at σ'_m2 = 0", a),
                plain("b_M", "slope of τ_oct on σ'_m2", b),
            ],
            StrengthConstants::ModifiedLade { shift, eta } => {
                vec![
                    Item::computed("S_L", "shift of the stresses", shift),
                    plain("η", "constant of the criterion", eta),
                ]
            }
            StrengthConstants::DruckerPrager { alpha, k } => {
                vec![plain("α", "slope of √J_2 on I_1", alpha), Item::computed("k", "√J_2 borne at I_1 = 0", k)]
            }
            StrengthConstants::HoekBrown { m_b, s, a } => vec![
                plain("m_b", "constant m of the rock mass", m_b),
                plain("s", "constant s of the rock mass", s),
                plain("a", "exponent of the rock mass", a),
            ],
        }
    }
}

/// Two routes differ by rounding, more near a friction angle of 90°.
pub(super) fn relative_tolerance(strength: Strength) -> f64 {
    1e-10 + strength.cohesion_and_friction().map_or(0.0, |(_, phi)| 1e-14 / phi.si().cos())
}

impl Explain for FailureEnvelope {
    const KIND: &'static str = "failure-envelope";
    type Inputs = Strength;
    type Outcome = EnvelopeOutcome;

    fn compute(strength: Strength) -> Result<Self> {
        let sound = strength.checked()?;
        let outcome = EnvelopeOutcome {
            constants: sound.law().constants(),
            uniaxial: Pressure::from_si(sound.in_compression(0.0).unwrap_or(0.0)),
            biaxial: sound.in_extension(0.0).map(Pressure::from_si),
        };
        Ok(FailureEnvelope { strength, outcome })
    }
    fn inputs(&self) -> Strength {
        self.strength
    }
    fn outcome(&self) -> EnvelopeOutcome {
        self.outcome
    }

    /// Constants by other algebra; the strengths by halving on the criterion of the whole tensor.
    fn check(strength: &Strength, outcome: &EnvelopeOutcome) -> Vec<Check> {
        let again = strength.second_route();
        let relative = relative_tolerance(*strength);
        let (stated, other) = (outcome.constants.numbers(), again.constants().numbers());
        let mut checks: Vec<Check> = stated
            .iter()
            .zip(&other)
            .zip(1..)
            .map(|((a, b), n)| {
                let (scale, unit) = if b.1 == "Pa" { (1e-6, "MPa") } else { (1.0, "") };
                Check::compare(
                    format!("constant {n} of the criterion by other algebra"),
                    &[a.0 * scale],
                    &[b.0 * scale],
                    relative * (b.0 * scale).abs(),
                    unit,
                )
            })
            .collect();
        let alike = std::mem::discriminant(&outcome.constants) == std::mem::discriminant(&again.constants());
        checks.push(Check::compare("constants of this criterion", &[f64::from(u8::from(alike))], &[1.0], 0.0, ""));

        let most = 1e3 * (outcome.uniaxial.si().abs() + 1e6);
        let least = 1e-9;
        let by_halving = again.fails_at(|s| Tensor([s, 0.0, 0.0, 0.0, 0.0, 0.0]), most).unwrap_or(f64::NAN) * 1e-6;
        checks.push(Check::compare(
            "uniaxial strength by halving on the criterion of the whole tensor",
            &[outcome.uniaxial.in_mpa()],
            &[by_halving],
            1e-7 * (1.0 + 1e-3 * again.conditioning()) * by_halving.abs() + least,
            "MPa",
        ));
        let by_halving = again.fails_at(|s| Tensor([s, s, 0.0, 0.0, 0.0, 0.0]), most).map(|s| s * 1e-6);
        checks.push(match (outcome.biaxial, by_halving) {
            (Some(stated), Some(found)) => Check::compare(
                "strength under two equal stresses by halving on the criterion of the whole tensor",
                &[stated.in_mpa()],
                &[found],
                1e-7 * (1.0 + 1e-3 * again.conditioning()) * found.abs() + least,
                "MPa",
            ),
            // Beyond what the halving looked at, or never.
            (stated, found) => Check::holds(
                "two equal stresses up to a thousand times the uniaxial strength do not fail",
                if found.is_none() && stated.is_none_or(|s| s.si() > most) { 0.0 } else { 1.0 },
                0.0,
                "",
            ),
        });
        checks
    }

    fn explain(&self) -> Explanation {
        let EnvelopeOutcome { uniaxial, biaxial, .. } = self.outcome;
        let mut results = self.items();
        results.push(Item::computed("UCS", "uniaxial compressive strength, σ'_2 = σ'_3 = 0", uniaxial));
        let mut notes: Vec<String> = self.strength.warning().into_iter().map(str::to_owned).collect();
        let two = match biaxial {
            Some(biaxial) => {
                results.push(Item::computed(
                    "σ_b",
                    "strength under two equal stresses, σ'_1 = σ'_2, σ'_3 = 0",
                    biaxial,
                ));
                format!("{biaxial} under two equal stresses")
            }
            None => {
                notes.push(
                    "WARNING: by this criterion the rock never fails under two equal stresses, however large."
                        .to_owned(),
                );
                "no limit under two equal stresses".to_owned()
            }
        };
        let worked = |name: &str, stress: [f64; 3]| {
            let mut steps = vec![Step::words(format!("Margin at the {name} strength, zero but for rounding:"))];
            steps.extend(self.strength.worked(stress));
            steps
        };
        let mut steps = self.strength.steps();
        steps.extend(worked("uniaxial", [uniaxial.si(), 0.0, 0.0]));
        if let Some(biaxial) = biaxial {
            steps.extend(worked("biaxial", [biaxial.si(), biaxial.si(), 0.0]));
        }
        Explanation {
            title: format!("Strength by {}", self.strength.words()),
            headline: format!("uniaxial strength {uniaxial}, {two}"),
            inputs: self.strength.items(),
            results,
            method: Method {
                words: "A criterion of shear failure on effective principal stresses, with its constants from the numbers stated.".to_owned(),
                formulas: self.strength.formulas(),
                symbols: self.strength.symbols(),
                references: self.strength.references(),
                assumptions: self.strength.assumptions(),
            },
            steps,
            figures: strength_figure::figures(self.strength, None),
            notes,
            topics: vec!["strength".to_owned()],
        }
    }
}
