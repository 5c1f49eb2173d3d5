//! A stress carried along a chain of turns.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::made::Made;
use super::tensor::Tensor;
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::frames::vector::dot;
use crate::frames::{Attitude, Borehole, Chain, Frame, Geographic, Name};

impl Chain {
    /// Carries a geographic stress to the hole: S' = Q S Qᵀ.
    pub fn carry(&self, s: &Stress<Geographic>) -> Stress<Borehole> {
        Stress::of(s.tensor.turned(&self.matrix()), s.made, Some((s.tensor, self.attitude(), self.name())))
    }

    /// The way back to the geographic frame.
    pub fn back(&self) -> Back {
        Back { chain: *self }
    }
}

/// The turn from a borehole frame back to the geographic one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Back {
    chain: Chain,
}

impl Back {
    /// Carries a stress from the hole's axes back: S = Qᵀ S' Q. A stress knows the hole it is in,
    /// and is always turned back by that hole's own attitude.
    pub fn carry(&self, s: &Stress<Borehole>) -> Stress<Geographic> {
        let q = match s.attitude().map(|attitude| Chain::to_borehole(attitude, None)) {
            Some(Ok(own)) => own.matrix(),
            _ => self.chain.matrix(),
        };
        let tensor = s.tensor.turned(&crate::frames::vector::transpose(&q));
        Stress::of(tensor, Made::Combined, None)
    }
}

/// The inputs of a carried stress.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct CarriedInputs {
    stress: Stress<Geographic>,
    attitude: Attitude,
    name: Option<Name>,
}

impl Explain for Stress<Borehole> {
    const KIND: &'static str = "carried-stress";
    type Inputs = Option<CarriedInputs>;
    type Outcome = Stress6;

    fn compute(inputs: Option<CarriedInputs>) -> Result<Self> {
        let Some(CarriedInputs { stress, attitude, name }) = inputs else {
            return Err(crate::error::Error::undeclared(
                "A stress in borehole axes names no hole",
                "carry it there with a chain.",
            ));
        };
        Ok(Chain::to_borehole(attitude, name)?.carry(&stress))
    }
    fn inputs(&self) -> Option<CarriedInputs> {
        self.carried.map(|(geographic, attitude, name)| CarriedInputs {
            stress: Stress::of(geographic, self.made, None),
            attitude,
            name,
        })
    }
    fn outcome(&self) -> Stress6 {
        Stress6(self.tensor)
    }

    /// The tensor rebuilt from dot products of the hole's axis vectors with the traction on each:
    /// S'_jk = e_j · (S e_k), with e from their definitions, not from the chain's matrix.
    fn check(inputs: &Option<CarriedInputs>, outcome: &Stress6) -> Vec<Check> {
        let Some(CarriedInputs { stress, attitude, .. }) = inputs else { return Vec::new() };
        let Ok(axes) = attitude.matrix() else { return Vec::new() };
        let rebuilt = |j: usize, k: usize| dot(axes[j], stress.tensor.times(axes[k]));
        let other = [rebuilt(0, 0), rebuilt(1, 1), rebuilt(2, 2), rebuilt(0, 1), rebuilt(1, 2), rebuilt(0, 2)];
        let scale = stress.tensor.largest().max(1.0);
        let mpa = |c: f64| c * 1e-6;
        let mut checks = vec![Check::compare(
            "S' rebuilt from dot products of the hole's axis vectors",
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
        let Some((geographic, attitude, name)) = self.carried else { return Explanation::default() };
        let s: Stress<Geographic> = Stress::of(geographic, self.made, None);
        let place = name.map_or_else(|| attitude.words(), |n| n.to_string());
        let q = Chain::to_borehole(attitude, name).map(|chain| chain.matrix()).unwrap_or_default();
        Explanation {
            title: format!("Stress in the borehole axes of {place}"),
            headline: self.item("S'", "").shown,
            inputs: vec![
                s.item("S", "stress in north, east, down"),
                Item::new(
                    "Q",
                    "turn from geographic to borehole axes",
                    "turn",
                    q.as_flattened().to_vec(),
                    "3 × 3 matrix",
                ),
            ],
            results: vec![self.item("S'", "stress in borehole axes (x top of hole, y right, z along the hole)")],
            method: Method {
                words: "The tensor is turned into the hole's axes.".to_owned(),
                formulas: vec![Formula::new("S' = Q S Q^upright(T)", "S' = Q S Qᵀ")],
                references: vec![Reference::new(
                    "Brady, B.H.G. and Brown, E.T. (2004) Rock Mechanics for Underground Mining, 3rd ed., Kluwer, ch. 2 (stress transformation)",
                )],
                ..Method::default()
            },
            steps: vec![
                Step::matrix("S", &s.rows_in_mpa(), 4, "MPa", "north, east, down"),
                Step::matrix("Q", &q, 6, "", "rows: top of hole, right, along the hole"),
                Step::matrix("S'", &self.rows_in_mpa(), 4, "MPa", "top of hole, right, along the hole"),
            ],
            topics: vec!["rotation".to_owned(), "stress".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let Some(CarriedInputs { stress, attitude, name }) = self.inputs() else { return Vec::new() };
        let mut cards = stress.upstream();
        cards.extend(stress.stated());
        if let Ok(chain) = Chain::to_borehole(attitude, name) {
            cards.extend(chain.upstream());
            cards.push(chain.card());
        }
        cards
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
