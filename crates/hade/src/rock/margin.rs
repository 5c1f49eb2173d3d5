//! A stress held against a strength.

use serde::{Deserialize, Serialize};

use super::account::mpa;
use super::eigenvalues::principal_values;
use super::envelope::relative_tolerance;
use super::{Strength, StrengthConstants, strength_figure};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Step};
use crate::error::Result;
use crate::frames::Geographic;
use crate::stress::Stress;
use crate::stress::tensor::Tensor;
use crate::units::{Pressure, Quantity, fixed, with_typed_unit};

/// A stress held against a shear strength at a pore pressure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StrengthMargin {
    inputs: MarginInputs,
    outcome: MarginOutcome,
}

/// The inputs.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct MarginInputs {
    stress: Stress<Geographic>,
    pore: Pressure,
    strength: Strength,
}

/// What came out: the effective principal stresses, the two sides of the criterion in SI (`None`
/// where a side is not defined), and the margin.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct MarginOutcome {
    effective: [Pressure; 3],
    applied: Option<f64>,
    borne: Option<f64>,
    margin: Pressure,
}

impl Stress<Geographic> {
    /// Holds the stress against a shear strength at a pore pressure.
    ///
    /// # Errors
    /// When the strength is one that no rock has, or the pore pressure is not a finite number.
    pub fn strength_margin(&self, strength: Strength, pore: Pressure) -> Result<StrengthMargin> {
        StrengthMargin::compute(MarginInputs { stress: *self, pore, strength })
    }
}

impl StrengthMargin {
    /// How much more the rock bears, in the measure of the criterion ([`Strength::margin`]): positive
    /// where it holds, negative where it fails.
    pub fn margin(&self) -> Pressure {
        self.outcome.margin
    }
    /// Whether the rock fails by the criterion.
    pub fn fails(&self) -> bool {
        self.outcome.margin.si() < 0.0
    }
    /// The effective principal stresses σ1' ≥ σ2' ≥ σ3'.
    pub fn effective(&self) -> [Pressure; 3] {
        self.outcome.effective
    }
    /// What the modified Lade criterion holds against 27 + η: I1³ / I3 of the shifted stresses. `None`
    /// outside its domain (the rock counts as failed there), and for every other criterion.
    pub fn lade_ratio(&self) -> Option<f64> {
        let lade = matches!(self.inputs.strength.law().constants(), StrengthConstants::ModifiedLade { .. });
        self.outcome.applied.filter(|_| lade)
    }

    /// The names of the two sides, and whether they are stresses.
    fn sides(&self) -> ([(&'static str, &'static str); 2], bool) {
        match self.inputs.strength.law().constants() {
            StrengthConstants::MohrCoulomb { .. } => ([("σ'_1", ""), ("σ'_1f", "σ'_1 at failure, UCS + q σ'_3")], true),
            StrengthConstants::MogiCoulomb { .. } => (
                [
                    ("τ_oct", "octahedral shear stress"),
                    ("τ_oct_f", "octahedral shear stress at failure, a_M + b_M σ'_m2"),
                ],
                true,
            ),
            StrengthConstants::ModifiedLade { .. } => {
                ([("L", "I_1³ / I_3 of the shifted stresses"), ("L_f", "I_1³ / I_3 at failure, 27 + η")], false)
            }
            StrengthConstants::DruckerPrager { .. } => (
                [("√J_2", "root of the second invariant of the deviator"), ("√J_2f", "√J_2 at failure, k + α I_1")],
                true,
            ),
            StrengthConstants::HoekBrown { .. } => ([("σ'_1", ""), ("σ'_1f", "σ'_1 at failure")], true),
        }
    }
}

fn effective_tensor(inputs: &MarginInputs) -> Tensor {
    let pore = inputs.pore.si();
    inputs.stress.tensor().add(Tensor([-pore, -pore, -pore, 0.0, 0.0, 0.0]))
}

impl Explain for StrengthMargin {
    const KIND: &'static str = "strength-margin";
    type Inputs = MarginInputs;
    type Outcome = MarginOutcome;

    fn compute(inputs: MarginInputs) -> Result<Self> {
        let law = inputs.strength.checked()?.law();
        let effective = inputs.stress.effective(inputs.pore)?.principal();
        let stress = effective.map(Quantity::si);
        let [applied, borne] = law.sides(stress);
        let margin = Pressure::from_si(-law.excess(stress)).finite("margin of the strength")?;
        Ok(StrengthMargin { inputs, outcome: MarginOutcome { effective, applied, borne, margin } })
    }
    fn inputs(&self) -> MarginInputs {
        self.inputs
    }
    fn outcome(&self) -> MarginOutcome {
        self.outcome
    }

    /// Everything from the components of the effective tensor, with constants by other algebra.
    fn check(inputs: &MarginInputs, outcome: &MarginOutcome) -> Vec<Check> {
        let tensor = effective_tensor(inputs);
        let again = inputs.strength.second_route();
        let size = inputs.strength.law().size();
        let largest = inputs.stress.tensor().largest().max(inputs.pore.si().abs()).max(size).max(1.0) * 1e-6;
        let relative = relative_tolerance(inputs.strength);
        let numbers = |side: [Option<f64>; 2]| -> Vec<f64> { side.into_iter().flatten().collect() };
        let sides = again.sides(tensor);
        let plain = matches!(inputs.strength.law().constants(), StrengthConstants::ModifiedLade { .. });
        let (scale, unit) = if plain { (1.0, "") } else { (1e-6, "MPa") };
        let stated: Vec<f64> = numbers([outcome.applied, outcome.borne]).iter().map(|v| v * scale).collect();
        let found: Vec<f64> = numbers(sides).iter().map(|v| v * scale).collect();
        let most = found.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
        // The size of the terms that a margin is the difference of.
        let terms = if plain { largest } else { largest.max(most) };
        let defined = |side: [Option<f64>; 2]| side.map(|s| f64::from(u8::from(s.is_some())));
        // At the very edge of a domain a last bit decides, and the curve is steep.
        let at_edge = again.inside_domain(tensor).is_some_and(|d| d.abs() * 1e-6 <= 1e-7 * largest);
        let mut checks = vec![
            Check::compare(
                "effective principal stresses by the axis that stands apart and Mohr's circle across it",
                &outcome.effective.map(|p| p.in_mpa()),
                &principal_values(tensor).map(|v| v * 1e-6),
                largest * 1e-12,
                "MPa",
            ),
            Check::compare(
                "margin from the components of the tensor, with constants by other algebra",
                &[outcome.margin.in_mpa()],
                &[-again.excess(tensor) * 1e-6],
                if at_edge { 1e-4 } else { relative * again.conditioning() } * terms,
                "MPa",
            ),
        ];
        if at_edge {
            return checks;
        }
        checks.extend([
            Check::compare(
                "which sides of the criterion are defined, from the tensor",
                &defined([outcome.applied, outcome.borne]),
                &defined(sides),
                0.0,
                "",
            ),
            Check::compare(
                "both sides of the criterion from the components of the tensor",
                &stated,
                &found,
                // A ratio is the less exact the larger it is: its I_3 is a small difference.
                relative * if plain { most * (most / 27.0).max(1.0) } else { terms },
                unit,
            ),
        ]);
        checks
    }

    fn explain(&self) -> Explanation {
        let MarginInputs { stress, pore, strength } = self.inputs;
        let MarginOutcome { effective, applied, borne, margin } = self.outcome;
        let si = effective.map(Quantity::si);
        let verdict = if self.fails() { "the rock FAILS" } else { "the rock holds" };
        let mut inputs =
            vec![stress.item("S", "stress in north, east, down"), Item::typed("P_p", "pore pressure", pore)];
        inputs.extend(strength.items());
        let mut results: Vec<Item> = effective
            .iter()
            .zip(1..)
            .map(|(s, n)| Item::computed(&format!("σ'_{n}"), format!("effective principal stress {n}"), *s))
            .collect();
        let (names, stresses) = self.sides();
        for ((symbol, name), value) in names.into_iter().zip([applied, borne]) {
            // σ'_1 stands there already.
            if let Some(value) = value.filter(|_| !name.is_empty()) {
                results.push(if stresses {
                    Item::computed(symbol, name, Pressure::from_si(value))
                } else {
                    Item::new(symbol, name, "criterion constant", vec![value], fixed(value, 4))
                });
            }
        }
        results.push(Item::computed("M", format!("margin, {}", strength.margin_words()), margin));
        let mut notes: Vec<String> = strength.warning().into_iter().map(str::to_owned).collect();
        if applied.is_none() || borne.is_none() {
            notes.push(format!("WARNING: the stress is outside the domain of the criterion. {}", strength.domain()));
        } else if si[2] < 0.0 {
            notes.push(format!("σ'_3 is tension. {}", strength.domain()));
        }
        let mut steps: Vec<Step> = stress
            .principals()
            .magnitudes()
            .iter()
            .zip(effective)
            .zip(1..)
            .map(|((total, effective), n)| {
                Step::worked(format!(
                    "σ'_{n} = S_{n} − P_p = {} − {} = {} MPa",
                    mpa(total.si()),
                    mpa(pore.si()),
                    mpa(effective.si())
                ))
            })
            .collect();
        steps.extend(strength.steps());
        steps.extend(strength.worked(si));
        let mut formulas = vec![Formula::new("sigma'_k = S_k - P_upright(p)", "σ'_k = S_k − P_p")];
        formulas.extend(strength.formulas());
        Explanation {
            title: format!(
                "Stress{} at a pore pressure of {} against {}",
                stress.of_name(),
                with_typed_unit(pore),
                strength.words()
            ),
            headline: format!("margin {margin}: {verdict}"),
            inputs,
            results,
            method: Method {
                words: "The effective principal stresses are put into the shear criterion; the margin is how much more the rock bears, in the measure of the criterion, negative where it fails.".to_owned(),
                formulas,
                symbols: strength.symbols(),
                references: strength.references(),
                assumptions: strength.assumptions(),
            },
            steps,
            figures: strength_figure::figures(strength, Some(si)),
            notes,
            topics: vec!["stress".to_owned(), "strength".to_owned()],
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        cards
    }
}
