//! A stress carried along a chain of turns.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::tensor::Tensor;
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::{Error, Result};
use crate::frames::vector::{M3, dot};
use crate::frames::{Axes, CarriedBy, Chain, Frame, Geographic, Turned, chain_card};

impl<From: Frame, To: Frame> CarriedBy<From, To> for Stress<From> {
    type Carried = Stress<To>;

    /// S' = Q S Qᵀ. A stress knows the axes it is in and is always turned out of those; what was
    /// carried keeps the geographic tensor it came from, so that there and back loses nothing.
    fn carried_by(&self, chain: &Chain<From, To>) -> Stress<To> {
        let behind = self.behind();
        match chain.to() {
            Axes::NorthEastDown => Stress::of(behind.tensor, self.made, None),
            axes => Stress::of(into(&behind, axes, chain.rows_of_to()), self.made, Some((behind.tensor, axes))),
        }
        .with_label(self.label)
    }
}

/// The tensor in some axes. Where it was stated in those, it is what was stated, to the last bit.
fn into(s: &Stress<Geographic>, axes: Axes, rows: &M3) -> Tensor {
    s.stated_in(axes).unwrap_or_else(|| s.tensor.turned(rows))
}

/// A stress in some axes, whatever their kind.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CarriedStress {
    inputs: CarriedInputs,
    tensor: Tensor,
}

/// The inputs of a carried stress: the geographic one, and the axes it is carried to.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct CarriedInputs {
    stress: Stress<Geographic>,
    axes: Axes,
}

impl Explain for CarriedStress {
    const KIND: &'static str = "carried-stress";
    const VERSION: u32 = 2;
    type Inputs = CarriedInputs;
    type Outcome = Stress6;

    fn compute(inputs: CarriedInputs) -> Result<Self> {
        Ok(CarriedStress { inputs, tensor: into(&inputs.stress, inputs.axes, &inputs.axes.matrix()?) })
    }
    fn inputs(&self) -> CarriedInputs {
        self.inputs
    }
    fn outcome(&self) -> Stress6 {
        Stress6(self.tensor)
    }

    /// The tensor rebuilt from dot products of the axis vectors with the traction on each: S'_jk =
    /// e_j · (S e_k), with e from their definitions, not from the chain's matrix.
    fn check(inputs: &CarriedInputs, outcome: &Stress6) -> Vec<Check> {
        let CarriedInputs { stress, axes } = inputs;
        let Ok(axes) = axes.by_definition() else { return Vec::new() };
        let rebuilt = |j: usize, k: usize| dot(axes[j], stress.tensor.times(axes[k]));
        let other = [rebuilt(0, 0), rebuilt(1, 1), rebuilt(2, 2), rebuilt(0, 1), rebuilt(1, 2), rebuilt(0, 2)];
        let scale = stress.tensor.largest().max(1.0);
        let mpa = |c: f64| c * 1e-6;
        let mut checks = vec![Check::compare(
            "S' rebuilt from dot products of the new axis vectors",
            &outcome.0.0.map(mpa),
            &other.map(mpa),
            scale * 1e-12 * 1e-6,
            "MPa",
        )];
        let (before, after) = (stress.tensor.eigen(), outcome.0.eigen());
        checks.push(Check::compare(
            "principal values before and after the turn",
            &after.values.map(mpa),
            &before.values.map(mpa),
            scale * 1e-11 * 1e-6,
            "MPa",
        ));
        checks
    }

    fn explain(&self) -> Explanation {
        let CarriedInputs { stress, axes } = self.inputs;
        let place = axes.title();
        let q = axes.matrix().unwrap_or_default();
        let names = axes.axis_names().join(", ");
        let item = Item::new(
            "S'",
            format!("stress in {place} ({})", axis_legend(axes)),
            format!("stress in {}", axes.kind()),
            self.tensor.0.to_vec(),
            self.tensor.words(axes.letters()),
        );
        Explanation {
            title: format!("Stress{} in {place}", stress.of_name()),
            headline: item.shown.clone(),
            inputs: vec![
                stress.item("S", "stress in north, east, down"),
                Item::new(
                    "Q",
                    format!("turn from north, east, down to {place}"),
                    "turn",
                    q.as_flattened().to_vec(),
                    "3 × 3 matrix",
                ),
            ],
            results: vec![item],
            method: Method {
                words: "The tensor is turned into the new axes.".to_owned(),
                formulas: vec![Formula::new("S' = Q S Q^upright(T)", "S' = Q S Qᵀ")],
                references: vec![Reference::new(
                    "Brady, B.H.G. and Brown, E.T. (2004) Rock Mechanics for Underground Mining, 3rd ed., Kluwer, ch. 2 (stress transformation)",
                )],
                ..Method::default()
            },
            steps: vec![
                Step::matrix("S", &stress.rows_in_mpa(), 4, "MPa", "north, east, down"),
                Step::matrix("Q", &q, 6, "", &format!("rows: {names}")),
                Step::matrix("S'", &self.tensor.scale(1e-6).rows(), 4, "MPa", &names),
            ],
            notes: match axes {
                Axes::Wall { .. } => vec![
                    "This is the stress of the far field in the axes of the wall: the hole's own concentration of stress is not in it. The stress at the wall is that of a Wall's stress_at."
                        .to_owned(),
                ],
                _ => Vec::new(),
            },
            topics: vec!["rotation".to_owned(), "stress".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let CarriedInputs { stress, axes } = self.inputs;
        let mut cards = stress.upstream();
        cards.extend(stress.stated());
        cards.extend(chain_card(axes));
        cards
    }
}

/// "x top of hole, y right, z along the hole".
fn axis_legend(axes: Axes) -> String {
    let named: Vec<String> =
        axes.letters().iter().zip(axes.axis_names()).map(|(letter, name)| format!("{letter} {name}")).collect();
    named.join(", ")
}

impl<F: Turned> Explain for Stress<F> {
    const KIND: &'static str = CarriedStress::KIND;
    const VERSION: u32 = CarriedStress::VERSION;
    type Inputs = Option<CarriedInputs>;
    type Outcome = Stress6;

    fn compute(inputs: Option<CarriedInputs>) -> Result<Self> {
        let Some(inputs) = inputs.filter(|i| i.axes.kind() == F::NAME) else {
            return Err(Error::undeclared(
                format!("A stress in {} does not say which", F::NAME),
                "carry it there with a chain.",
            ));
        };
        let CarriedStress { inputs: CarriedInputs { stress, axes }, tensor } = CarriedStress::compute(inputs)?;
        Ok(Stress::of(tensor, stress.made, Some((stress.tensor, axes))).with_label(stress.label))
    }
    fn inputs(&self) -> Option<CarriedInputs> {
        self.carried.map(|(_, axes)| CarriedInputs { stress: self.behind(), axes })
    }
    fn outcome(&self) -> Stress6 {
        Stress6(self.tensor)
    }
    fn check(inputs: &Option<CarriedInputs>, outcome: &Stress6) -> Vec<Check> {
        inputs.as_ref().map(|inputs| CarriedStress::check(inputs, outcome)).unwrap_or_default()
    }
    fn explain(&self) -> Explanation {
        self.inputs().map(|inputs| CarriedStress { inputs, tensor: self.tensor }.explain()).unwrap_or_default()
    }
    fn upstream(&self) -> Vec<Card> {
        self.inputs().map(|inputs| CarriedStress { inputs, tensor: self.tensor }.upstream()).unwrap_or_default()
    }
}

/// Six components as an outcome, in Pa: xx, yy, zz, xy, yz, xz.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Stress6(pub(crate) Tensor);

impl<F: Frame> Stress<F> {
    pub(crate) fn six(&self) -> Stress6 {
        Stress6(self.tensor)
    }
}
