//! A direction in any axes: a line of trend and plunge carried there.

use serde::{Deserialize, Serialize};

use super::azimuth::three_figures;
use super::vector::{V3, apply, dot, wrap};
use super::{Axes, Borehole, CarriedBy, Chain, Frame, Geographic, Line, in_frame};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::units::{Angle, Quantity, fixed};

in_frame! {
    /// A line as a unit vector in the axes of one frame, pointing to the end that was stated.
    Direction, CarriedLine, DirectionInputs, [f64; 3], "Reading a direction"
}

/// A line in some axes, whatever their kind.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CarriedLine {
    inputs: DirectionInputs,
    /// In north, east, down.
    geographic: V3,
    components: V3,
}

/// The inputs of a direction: the line, and the axes it is wanted in.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct DirectionInputs {
    line: Line,
    axes: Axes,
}

impl Line {
    /// The line as a unit vector in north, east, down, ready to be carried.
    ///
    /// # Errors
    /// When the plunge is outside ±90° or the trend has no true north.
    pub fn direction(self) -> Result<Direction<Geographic>> {
        let carried = CarriedLine::compute(DirectionInputs { line: self, axes: Axes::NorthEastDown })?;
        Ok(Direction::around(carried))
    }
}

impl<F: Frame> Direction<F> {
    /// Its three direction cosines in these axes.
    pub fn components(&self) -> [f64; 3] {
        self.inner.components
    }

    /// The line, in trend and plunge.
    pub fn line(&self) -> Line {
        self.inner.inputs.line
    }
}

impl Direction<Borehole> {
    /// The tool face it points to, 0–360°; `None` along the hole.
    pub fn tool_face(&self) -> Option<Angle> {
        tool_face(self.inner.components)
    }

    /// The angle between the line and the hole's axis, 0–90°.
    pub fn from_axis(&self) -> Angle {
        Angle::from_si(from_axis(self.inner.components))
    }
}

fn tool_face([x, y, _]: V3) -> Option<Angle> {
    (x.hypot(y) > 1e-9).then(|| Angle::from_si(wrap(y.atan2(x))))
}
fn from_axis([x, y, z]: V3) -> f64 {
    x.hypot(y).atan2(z.abs())
}

impl<From: Frame, To: Frame> CarriedBy<From, To> for Direction<From> {
    type Carried = Direction<To>;
    fn carried_by(&self, chain: &Chain<From, To>) -> Direction<To> {
        let geographic = self.inner.geographic;
        let inputs = DirectionInputs { axes: chain.to(), ..self.inner.inputs };
        let components = apply(chain.rows_of_to(), geographic);
        Direction::around(CarriedLine { inputs, geographic, components })
    }
}

impl Explain for CarriedLine {
    const KIND: &'static str = "direction";
    type Inputs = DirectionInputs;
    type Outcome = [f64; 3];

    fn compute(inputs: DirectionInputs) -> Result<Self> {
        let geographic = inputs.line.vector()?;
        Ok(CarriedLine { inputs, geographic, components: apply(&inputs.axes.matrix()?, geographic) })
    }
    fn inputs(&self) -> DirectionInputs {
        self.inputs
    }
    fn outcome(&self) -> [f64; 3] {
        self.components
    }

    /// By spherical trigonometry: the cosine of the angle to each axis from the trends and plunges of
    /// line and axis, cos = cos p cos q cos(t − u) + sin p sin q.
    fn check(inputs: &DirectionInputs, outcome: &[f64; 3]) -> Vec<Check> {
        let (Ok(trend), Ok(axes)) = (inputs.line.trend.true_north(), inputs.axes.by_definition()) else {
            return Vec::new();
        };
        let (t, p) = (trend.si(), inputs.line.plunge.si());
        let cosines = axes.map(|axis| {
            let (u, q) = (axis[1].atan2(axis[0]), axis[2].atan2(axis[0].hypot(axis[1])));
            p.cos() * q.cos() * (t - u).cos() + p.sin() * q.sin()
        });
        vec![
            Check::compare(
                "direction cosines by spherical trigonometry from trends and plunges",
                outcome,
                &cosines,
                1e-12,
                "",
            ),
            Check::compare("length of the direction", &[dot(*outcome, *outcome)], &[1.0], 1e-12, ""),
        ]
    }

    fn explain(&self) -> Explanation {
        let DirectionInputs { line, axes } = self.inputs;
        let cosines = self.components.map(|c| fixed(c, 6));
        let mut results: Vec<Item> = axes
            .letters()
            .iter()
            .zip(axes.axis_names())
            .zip(self.components)
            .map(|((letter, name), c)| {
                Item::new(
                    &format!("v_{letter}"),
                    format!("direction cosine {name}"),
                    "direction cosine",
                    vec![c],
                    fixed(c, 6),
                )
            })
            .collect();
        let mut steps = vec![Step::worked(format!(
            "v = (cos P cos T, cos P sin T, sin P) = ({}, {}, {}) in north, east, down",
            fixed(self.geographic[0], 6),
            fixed(self.geographic[1], 6),
            fixed(self.geographic[2], 6)
        ))];
        if axes != Axes::NorthEastDown {
            steps.push(Step::worked(format!("v' = Q v = ({})", cosines.join(", "))));
        }
        let mut headline = format!("({})", cosines.join(", "));
        if let Axes::Hole { .. } = axes {
            let angle = Angle::from_si(from_axis(self.components));
            results.push(Item::computed("γ", "angle to the hole's axis", angle));
            headline = format!("{angle} from the hole's axis");
            if let Some(face) = tool_face(self.components) {
                results.push(Item::computed("θ", "tool face", face));
                headline = format!("{headline}, tool face {face}");
                steps.push(Step::worked(format!(
                    "θ = atan2(v'_y, v'_x) = atan2({}, {}) = {face}",
                    cosines[1], cosines[0]
                )));
            }
        }
        let mut inputs = vec![
            line.trend.item("T", "trend of the line"),
            Item::typed("P", "plunge of the line, down positive", line.plunge),
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
        let trend = line.trend.true_north().map_or_else(|_| String::new(), three_figures);
        Explanation {
            title: format!("The line {trend}°/{} in {}", fixed(line.plunge.in_deg(), 1), axes.title()),
            headline,
            inputs,
            results,
            method: Method {
                words: "The line is written as a unit vector in north, east, down and turned.".to_owned(),
                formulas: vec![
                    Formula::new("v = vec(cos P cos T, cos P sin T, sin P)", "v = (cos P cos T, cos P sin T, sin P)"),
                    Formula::new("v' = Q v", "v' = Q v"),
                ],
                references: vec![Reference::new(
                    "Brady, B.H.G. and Brown, E.T. (2004) Rock Mechanics for Underground Mining, 3rd ed., Kluwer, p. 149 (rotation matrix of direction cosines)",
                )],
                ..Method::default()
            },
            steps,
            topics: vec!["rotation".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.line.trend.upstream();
        cards.extend(chain_card(self.inputs.axes));
        cards
    }
}

/// The card of the chain from north, east, down to some axes, behind the cards it stands on.
pub(crate) fn chain_card(axes: Axes) -> Vec<Card> {
    let mut cards = axes.upstream();
    if axes != Axes::NorthEastDown {
        cards.extend(super::Route::to(axes).map(|route| route.card()));
    }
    cards
}

#[cfg(test)]
mod tests {
    use super::super::vector::{cross, norm};
    use super::*;
    use crate::frames::{Attitude, Azimuth};
    use crate::units::Units;

    #[test]
    fn the_top_of_a_hole_is_tool_face_zero_and_the_hole_has_none() {
        let hole = Attitude { inclination: 30.deg(), azimuth: Azimuth::from_true_north(50.deg()) };
        let chain = hole.chain().unwrap();
        let top = Line { trend: Azimuth::from_true_north(50.deg()), plunge: (-30).deg() }.direction().unwrap();
        let there = chain.carry(&top);
        assert!(there.tool_face().unwrap().in_deg().abs() < 1e-9 && (there.from_axis().in_deg() - 90.0).abs() < 1e-9);
        let along = Line { trend: Azimuth::from_true_north(50.deg()), plunge: 60.deg() }.direction().unwrap();
        assert!(chain.carry(&along).tool_face().is_none());
        assert!(norm(cross(chain.carry(&along).components(), [0.0, 0.0, 1.0])) < 1e-15);
        // There and back is the same line.
        let back = chain.back().carry(&chain.carry(&top));
        assert_eq!(back.line(), top.line());
        assert!(chain.carry(&top).card().passed());
    }
}
