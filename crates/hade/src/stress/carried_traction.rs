//! The traction on a plane carried along a chain of turns.

use serde::{Deserialize, Serialize};

use super::{Traction, TractionInputs};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::frames::vector::{V3, apply, dot};
use crate::frames::{Axes, CarriedBy, Chain, Frame, Geographic, chain_card, in_frame};
use crate::units::{Pressure, Quantity, fixed};

in_frame! {
    /// The traction on a plane as a vector in the axes of one frame. In a fault's own axes it is the
    /// shear along strike, the shear down dip and the normal stress.
    TractionVector, CarriedTraction, CarriedTractionInputs, [Pressure; 3], "Reading a traction"
}

/// A traction in some axes, whatever their kind.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CarriedTraction {
    inputs: CarriedTractionInputs,
    /// In pascals.
    geographic: V3,
    components: [Pressure; 3],
}

/// The inputs: the traction, and the axes it is wanted in.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct CarriedTractionInputs {
    traction: TractionInputs,
    axes: Axes,
}

impl<F: Frame> TractionVector<F> {
    /// Its three components.
    pub fn components(&self) -> [Pressure; 3] {
        self.inner.components
    }
}

impl<To: Frame> CarriedBy<Geographic, To> for Traction {
    type Carried = TractionVector<To>;
    fn carried_by(&self, chain: &Chain<Geographic, To>) -> TractionVector<To> {
        turned(self.inputs(), self.vector().map(Quantity::si), chain)
    }
}

impl<From: Frame, To: Frame> CarriedBy<From, To> for TractionVector<From> {
    type Carried = TractionVector<To>;
    fn carried_by(&self, chain: &Chain<From, To>) -> TractionVector<To> {
        turned(self.inner.inputs.traction, self.inner.geographic, chain)
    }
}

fn turned<From: Frame, To: Frame>(
    traction: TractionInputs,
    geographic: V3,
    chain: &Chain<From, To>,
) -> TractionVector<To> {
    let components = apply(chain.rows_of_to(), geographic).map(Pressure::from_si);
    let inputs = CarriedTractionInputs { traction, axes: chain.to() };
    TractionVector::around(CarriedTraction { inputs, geographic, components })
}

impl Explain for CarriedTraction {
    const KIND: &'static str = "carried-traction";
    type Inputs = CarriedTractionInputs;
    type Outcome = [Pressure; 3];

    fn compute(inputs: CarriedTractionInputs) -> Result<Self> {
        let geographic = Traction::compute(inputs.traction)?.vector().map(Quantity::si);
        let components = apply(&inputs.axes.matrix()?, geographic).map(Pressure::from_si);
        Ok(CarriedTraction { inputs, geographic, components })
    }
    fn inputs(&self) -> CarriedTractionInputs {
        self.inputs
    }
    fn outcome(&self) -> [Pressure; 3] {
        self.components
    }

    /// By the stress itself: the component along an axis e is n · (S e), n the plane's normal, because
    /// the tensor is symmetric.
    fn check(inputs: &CarriedTractionInputs, outcome: &[Pressure; 3]) -> Vec<Check> {
        let (Ok(axes), Ok(plane)) = (inputs.axes.by_definition(), inputs.traction.plane.axes()) else {
            return Vec::new();
        };
        let s = inputs.traction.stress.tensor();
        let other = axes.map(|e| dot(plane.normal, s.times(e)) * 1e-6);
        vec![Check::compare(
            "components from the stress across each axis, n · (S e)",
            &outcome.map(Pressure::in_mpa),
            &other,
            s.largest().max(1.0) * 1e-12 * 1e-6,
            "MPa",
        )]
    }

    fn explain(&self) -> Explanation {
        let CarriedTractionInputs { traction, axes } = self.inputs;
        let plane = traction.plane;
        let t = self.geographic.map(|c| fixed(c * 1e-6, 4));
        let there = self.components.map(|c| fixed(c.in_mpa(), 4));
        let mut inputs = vec![
            traction.stress.item("S", "stress in north, east, down"),
            plane.strike.item("s", "strike of the plane, dip to its right"),
            Item::typed("d", "dip of the plane", plane.dip),
        ];
        if let (true, Ok(q)) = (axes != Axes::NorthEastDown, axes.matrix()) {
            inputs.push(Item::new(
                "Q",
                format!("turn from north, east, down to {}", axes.title()),
                "turn",
                q.as_flattened().to_vec(),
                "3 × 3 matrix",
            ));
        }
        Explanation {
            title: format!("Traction on the plane {} in {}", plane.words(), axes.title()),
            headline: format!("({}) MPa", there.join(", ")),
            inputs,
            results: axes
                .letters()
                .iter()
                .zip(axes.axis_names())
                .zip(self.components)
                .map(|((letter, name), c)| Item::computed(&format!("t_{letter}"), format!("traction {name}"), c))
                .collect(),
            method: Method {
                words: "The traction on the plane, whose normal points down, is turned into the axes as a vector."
                    .to_owned(),
                formulas: vec![Formula::new("t = S n", "t = S n"), Formula::new("t' = Q t", "t' = Q t")],
                references: vec![Reference::new(
                    "Brady, B.H.G. and Brown, E.T. (2004) Rock Mechanics for Underground Mining, 3rd ed., Kluwer, ch. 2 (traction and its transformation)",
                )],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("t = S n = ({}, {}, {}) MPa in north, east, down", t[0], t[1], t[2])),
                Step::worked(format!("t' = Q t = ({}) MPa", there.join(", "))),
            ],
            topics: vec!["rotation".to_owned(), "stress".to_owned(), "plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let CarriedTractionInputs { traction, axes } = self.inputs;
        let mut cards = traction.stress.upstream_with_own();
        cards.extend(traction.plane.strike.upstream());
        cards.extend(chain_card(axes));
        cards
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    #[test]
    fn in_the_faults_own_axes_a_traction_is_its_shears_and_its_normal_stress() {
        let s = Stress::from_horizontals(Horizontals {
            sv: 60.mpa(),
            sh_max: 55.mpa(),
            sh_min: 40.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(30.deg()),
        })
        .unwrap();
        let plane = Plane { strike: Azimuth::from_true_north(70.deg()), dip: 55.deg() };
        let t = s.on(plane).unwrap();
        let chain = plane.chain_named("F1").unwrap();
        let there = chain.carry(&t);
        for (got, want) in there.components().iter().zip([t.along_strike, t.down_dip, t.normal]) {
            assert!((*got - want).abs().in_mpa() < 1e-12, "{got} {want}");
        }
        // The stress itself in those axes holds the same numbers in its last row.
        let own = chain.carry(&s);
        assert!((own.component(Axis::Z, Axis::Z) - t.normal).abs().in_mpa() < 1e-12);
        assert!((own.component(Axis::X, Axis::Z) - t.along_strike).abs().in_mpa() < 1e-12);
        assert!(there.card().passed());
        let back = chain.back().carry(&there);
        assert_eq!(back.components(), t.vector());
    }
}
