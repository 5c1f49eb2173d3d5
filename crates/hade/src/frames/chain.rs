//! A chain of named turns from one frame to another.

use serde::{Deserialize, Serialize};

use super::attitude::borehole_axes;
use super::azimuth::{TRUE_AZIMUTH, bearing, three_figures};
use super::vector::{M3, multiply, transpose};
use super::{Attitude, Name};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::units::{Angle, Quantity, as_typed};

/// One elementary turn of a chain.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct Turn {
    /// The turn in words ("by the azimuth, 120.0°, about down").
    pub words: String,
    /// The axis that stays ("down", "right of hole").
    pub axis: &'static str,
    /// The angle, right-handed about the axis.
    pub angle: Angle,
    /// The matrix: rows are the new axes in the old frame.
    pub matrix: [[f64; 3]; 3],
}

/// The chain Geographic → Borehole: a turn by the azimuth about down, then by the inclination
/// about the right axis. Its product Q has the new axes as rows.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Chain {
    attitude: Attitude,
    name: Option<Name>,
    q: M3,
}

/// The inputs of a chain.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ChainInputs {
    attitude: Attitude,
    name: Option<Name>,
}

/// A turn of the axes by an angle about down (z).
fn about_down(a: f64) -> M3 {
    let (s, c) = a.sin_cos();
    [[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]]
}
/// A turn of the axes by an angle about the second axis, which carries x (horizontal) to the top of
/// the hole and z (down) to the hole's direction.
fn about_right(i: f64) -> M3 {
    let (s, c) = i.sin_cos();
    [[c, 0.0, -s], [0.0, 1.0, 0.0], [s, 0.0, c]]
}

impl Chain {
    pub(crate) fn to_borehole(attitude: Attitude, name: Option<Name>) -> Result<Self> {
        let (i, a) = attitude.angles()?;
        Ok(Chain { attitude, name, q: multiply(&about_right(i), &about_down(a)) })
    }

    /// The attitude it leads to.
    pub fn attitude(&self) -> Attitude {
        self.attitude
    }

    /// The name of the hole and depth, if one was given.
    pub fn name(&self) -> Option<Name> {
        self.name
    }

    /// The product Q of its turns: rows are top of hole, right, along the hole, in north, east, down.
    pub fn matrix(&self) -> [[f64; 3]; 3] {
        self.q
    }

    /// The turns in the order they are made.
    pub fn steps(&self) -> Vec<Turn> {
        let i = self.attitude.inclination;
        let a = self.attitude.azimuth.true_north().unwrap_or_default();
        vec![
            Turn {
                words: format!("by the azimuth, {}°, about down", as_typed(a.in_deg())),
                axis: "down",
                angle: a,
                matrix: about_down(a.si()),
            },
            Turn {
                words: format!("by the inclination, {}°, about the right axis", as_typed(i.in_deg())),
                axis: "right of hole",
                angle: i,
                matrix: about_right(i.si()),
            },
        ]
    }
}

/// "the borehole frame of KF-3 at 2950 m (inclination 42.0°, azimuth 120.0°)".
pub(crate) fn frame_words(attitude: Attitude, name: Option<Name>) -> String {
    match name {
        Some(name) => format!("the borehole frame of {name} ({})", attitude.words()),
        None => format!("the borehole frame at {}", attitude.words()),
    }
}

impl Explain for Chain {
    const KIND: &'static str = "rotation-chain";
    type Inputs = ChainInputs;
    type Outcome = [[f64; 3]; 3];

    fn compute(inputs: ChainInputs) -> Result<Self> {
        Chain::to_borehole(inputs.attitude, inputs.name)
    }
    fn inputs(&self) -> ChainInputs {
        ChainInputs { attitude: self.attitude, name: self.name }
    }
    fn outcome(&self) -> [[f64; 3]; 3] {
        self.q
    }

    /// Two routes that a transposed matrix does not survive: the rows against the axis vectors by
    /// their definition, and the hole's direction read back from the matrix as trend and plunge.
    fn check(inputs: &ChainInputs, q: &[[f64; 3]; 3]) -> Vec<Check> {
        let Ok((i, a)) = inputs.attitude.angles() else { return Vec::new() };
        let axes = borehole_axes(i, a);
        let identity = multiply(q, &transpose(q));
        vec![
            Check::compare(
                "rows of Q against top, right and along-hole vectors from their definitions",
                q.as_flattened(),
                axes.as_flattened(),
                1e-12,
                "",
            ),
            Check::compare(
                "third row of Q against the hole's direction (sin i cos a, sin i sin a, cos i)",
                &q[2],
                &[i.sin() * a.cos(), i.sin() * a.sin(), i.cos()],
                1e-12,
                "",
            ),
            Check::compare(
                "Q times its transpose against the unit matrix",
                identity.as_flattened(),
                &[1.0, 0.0, 0.0, 0.0, 1.0, 0.0, 0.0, 0.0, 1.0],
                1e-12,
                "",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        let a = self.attitude.azimuth.true_north().unwrap_or_default();
        let mut steps = Vec::new();
        for (turn, name) in self.steps().iter().zip(["Q₁", "Q₂"]) {
            steps.push(Step::words(format!("Turn {}.", turn.words)));
            steps.push(Step::matrix(name, &turn.matrix, 6, "", "rows: the new axes in the axes before the turn"));
        }
        steps.push(Step::words("The product of the turns, the first on the right: Q = Q₂ Q₁."));
        steps.push(Step::matrix(
            "Q",
            &self.q,
            6,
            "",
            "rows: top of hole, right, along the hole; columns: north, east, down",
        ));
        let reference = if self.attitude.is_vertical() {
            format!("The hole is vertical: tool faces count from azimuth {}°.", three_figures(a))
        } else {
            "Tool faces count clockwise from the top of the hole, looking down the hole.".to_owned()
        };
        Explanation {
            title: match self.name {
                Some(name) => format!("Turn from north, east, down to the axes of {name}"),
                None => format!("Turn from north, east, down to borehole axes ({})", self.attitude.words()),
            },
            headline: format!("{}: {}", self.attitude.words(), "two turns, about down and about the right axis"),
            inputs: self.attitude.items(),
            results: vec![Item::new(
                "Q",
                "turn from geographic to borehole axes",
                "turn",
                self.q.as_flattened().to_vec(),
                "the 3 × 3 matrix Q of the steps",
            )],
            method: Method {
                words: "The axes are turned first by the azimuth about down, then by the inclination about the axis to the right of the hole. Rows of Q are the new axes in the old frame.".to_owned(),
                formulas: vec![
                    Formula::new("Q = Q_2 Q_1", "Q = Q₂ Q₁"),
                    Formula::new(
                        "Q_1 = mat(cos a, sin a, 0; -sin a, cos a, 0; 0, 0, 1)",
                        "Q₁ = [cos a, sin a, 0; −sin a, cos a, 0; 0, 0, 1]",
                    ),
                    Formula::new(
                        "Q_2 = mat(cos i, 0, -sin i; 0, 1, 0; sin i, 0, cos i)",
                        "Q₂ = [cos i, 0, −sin i; 0, 1, 0; sin i, 0, cos i]",
                    ),
                ],
                references: vec![Reference::new(
                    "Brady, B.H.G. and Brown, E.T. (2004) Rock Mechanics for Underground Mining, 3rd ed., Kluwer, p. 149 (rotation matrix of direction cosines)",
                )],
                ..Method::default()
            },
            steps,
            notes: vec![reference],
            topics: vec!["rotation".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.attitude.azimuth.upstream()
    }
}

/// A bearing as an item of a result.
pub(crate) fn bearing_item(symbol: &str, name: &str, angle: Angle) -> Item {
    Item::new(symbol, name, TRUE_AZIMUTH, vec![angle.si()], bearing(angle))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Azimuth;
    use crate::units::Units;

    fn attitude(i: f64, a: f64) -> Attitude {
        Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) }
    }

    #[test]
    fn rows_are_the_axes_by_definition_in_every_quadrant() {
        for i in [0.0, 30.0, 90.0, 135.0, 180.0] {
            for a in [0.0, 50.0, 123.0, 222.0, 359.999] {
                let q = attitude(i, a).chain().unwrap();
                assert!(Chain::check(&q.inputs(), &q.outcome()).iter().all(|c| c.passed), "{i} {a}");
                assert!(
                    Chain::check(&q.inputs(), &transpose(&q.q)).iter().any(|c| !c.passed)
                        || i == 0.0 && a == 0.0
                        || i == 180.0
                );
            }
        }
    }

    #[test]
    fn inclination_out_of_range_is_refused() {
        let e = attitude(190.0, 0.0).chain().unwrap_err();
        assert_eq!(e.to_string(), "inclination is 190°, but it must be between 0° and 180°.");
    }
}
