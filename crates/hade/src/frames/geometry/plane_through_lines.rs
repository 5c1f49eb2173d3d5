//! The plane that contains two lines.

use serde::{Deserialize, Serialize};

use super::{
    ACUTE, PARALLEL, angle, degrees, line_inputs, lines_by_half_angles, out_of_plane, plane_results, strike_and_dip,
    textbook, trend_and_plunge, unit, vector_words,
};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Step};
use crate::error::{Error, Result};
use crate::frames::vector::{angle_between_lines, cross, scale};
use crate::frames::{Azimuth, Line, Plane};
use crate::units::{Angle, Quantity, fixed};

/// The plane that contains two lines, such as two traces of one joint on two rock faces.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct PlaneThroughLines {
    /// The plane.
    pub plane: Plane,
    /// The angle between the two lines, 1–90°.
    pub angle: Angle,
    inputs: TwoLines,
}

/// The two lines.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct TwoLines {
    first: Line,
    second: Line,
}

/// What came out, in SI: strike from true north, dip, angle between the lines.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct PlaneThroughLinesOutcome {
    strike: Angle,
    dip: Angle,
    angle: Angle,
}

impl Plane {
    /// The plane that contains two lines: its normal is n = l₁ × l₂, turned to point down.
    ///
    /// # Errors
    /// When the lines are within 1° of each other, a plunge is outside ±90°, or a trend has no true
    /// north.
    pub fn through(first: Line, second: Line) -> Result<PlaneThroughLines> {
        PlaneThroughLines::compute(TwoLines { first, second })
    }
}

impl Explain for PlaneThroughLines {
    const KIND: &'static str = "plane-through-two-lines";
    type Inputs = TwoLines;
    type Outcome = PlaneThroughLinesOutcome;

    fn compute(inputs: TwoLines) -> Result<Self> {
        let (a, b) = (inputs.first.vector()?, inputs.second.vector()?);
        let between = angle_between_lines(a, b);
        if between < PARALLEL.to_radians() {
            return Err(Error::not_physical(
                format!("The plane through the lines {} and {}", inputs.first.words(), inputs.second.words()),
                format!(
                    "the lines are only {}° apart, so every plane along them would do; give two lines at least {PARALLEL}° apart.",
                    fixed(between.to_degrees(), 2)
                ),
            ));
        }
        Ok(PlaneThroughLines { plane: Plane::with_normal(cross(a, b)), angle: angle(between), inputs })
    }
    fn inputs(&self) -> TwoLines {
        self.inputs
    }
    fn outcome(&self) -> PlaneThroughLinesOutcome {
        let strike = self.plane.strike.true_north().unwrap_or(Angle::from_si(f64::NAN));
        PlaneThroughLinesOutcome { strike, dip: self.plane.dip, angle: self.angle }
    }

    /// By spherical trigonometry: each line plunges as the plane dips along its trend,
    /// tan p = tan d sin(t − s), and the angle between the lines comes from half angles.
    fn check(inputs: &TwoLines, outcome: &PlaneThroughLinesOutcome) -> Vec<Check> {
        let (Some(a), Some(b)) = (trend_and_plunge(inputs.first), trend_and_plunge(inputs.second)) else {
            return Vec::new();
        };
        let plane = Plane { strike: Azimuth::from_true_north(outcome.strike), dip: outcome.dip };
        let Some(plane) = strike_and_dip(plane) else { return Vec::new() };
        vec![
            Check::compare(
                "sine of the angle from the plane to each line, sin p cos d − cos p sin d sin(t − s), against zero",
                &[out_of_plane(a, plane), out_of_plane(b, plane)],
                &[0.0, 0.0],
                1e-11,
                "",
            ),
            Check::compare(
                "angle between the lines by half angles",
                &[outcome.angle.in_deg()],
                &[lines_by_half_angles(a, b).to_degrees()],
                1e-8,
                "°",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        let TwoLines { first, second } = self.inputs;
        let (a, b) = (first.vector().unwrap_or_default(), second.vector().unwrap_or_default());
        let product = cross(a, b);
        let n = unit(if product[2] < 0.0 { scale(product, -1.0) } else { product });
        let mut inputs = line_inputs(first, "_1", "the first line").to_vec();
        inputs.extend(line_inputs(second, "_2", "the second line"));
        let mut results = plane_results(self.plane, "", "the plane through both lines").to_vec();
        results.push(Item::computed("β", "angle between the lines", self.angle));
        let mut notes = Vec::new();
        if self.angle.in_deg() < ACUTE {
            notes.push(format!(
                "The lines are only {} apart: an error of 1° in one of them turns the plane about them by up to {}°.",
                self.angle,
                fixed(1.0 / self.angle.si().sin(), 1)
            ));
        }
        Explanation {
            title: format!("Plane through the lines {} and {}", first.words(), second.words()),
            headline: self.plane.words(),
            inputs,
            results,
            method: Method {
                words: "The normal of the plane is the cross product of the two lines, turned to point down; strike and dip are read from it.".to_owned(),
                formulas: vec![
                    Formula::new("l = vec(cos p cos t, cos p sin t, sin p)", "l = (cos p cos t, cos p sin t, sin p)"),
                    Formula::new("n = (l_1 times l_2) / abs(l_1 times l_2)", "n = (l_1 × l_2) / |l_1 × l_2|"),
                    Formula::new(
                        "tan s = n_upright(n) / (- n_upright(e)), quad cos d = n_upright(d)",
                        "tan s = n_n / (−n_e), cos d = n_d",
                    ),
                    Formula::new("tan beta = abs(l_1 times l_2) / abs(l_1 dot l_2)", "tan β = |l_1 × l_2| / |l_1 · l_2|"),
                ],
                symbols: vec![
                    ("l".to_owned(), "unit vector along a line, in north, east, down".to_owned()),
                    ("n".to_owned(), "unit normal of the plane, pointing down".to_owned()),
                ],
                references: vec![textbook()],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("l_1 = {}", vector_words(a))),
                Step::worked(format!("l_2 = {}", vector_words(b))),
                Step::worked(format!("l_1 × l_2 = {}", vector_words(product))),
                Step::worked(format!("n = {}", vector_words(n))),
                Step::worked(format!(
                    "s = atan2({}, {}) = {}, d = acos({}) = {}",
                    fixed(n[0], 6),
                    fixed(-n[1], 6),
                    degrees(self.plane.strike.true_north().unwrap_or_default().si()),
                    fixed(n[2], 6),
                    degrees(self.plane.dip.si())
                )),
            ],
            notes,
            topics: vec!["plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.first.trend.upstream();
        cards.extend(self.inputs.second.trend.upstream());
        cards
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn line(trend: f64, plunge: f64) -> Line {
        Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }
    }

    #[test]
    fn two_traces_of_one_joint_give_it_back() {
        // Strike 045, dip 60: along strike, and straight down its dip.
        let found = Plane::through(line(45.0, 0.0), line(135.0, 60.0)).unwrap();
        assert!((found.plane.strike.true_north().unwrap().in_deg() - 45.0).abs() < 1e-12);
        assert!((found.plane.dip.in_deg() - 60.0).abs() < 1e-12);
        assert!((found.angle.in_deg() - 90.0).abs() < 1e-12);
        assert!(found.card().passed(), "{:#?}", found.card().checks);
        // Either end of either line, in either order.
        let other = Plane::through(line(315.0, -60.0), line(225.0, 0.0)).unwrap();
        assert!(other.plane.angle_to(&found.plane).unwrap().in_deg() < 1e-12);
    }

    #[test]
    fn nearly_parallel_lines_are_marked_and_parallel_ones_refused() {
        let close = Plane::through(line(45.0, 10.0), line(50.0, 10.0)).unwrap();
        assert!(close.card().explanation.notes[0].contains("turns the plane about them by up to 11.7°"));
        let said = Plane::through(line(45.0, 10.0), line(225.5, -10.0)).unwrap_err().to_string();
        assert!(said.contains("only 0.49° apart") && said.contains("at least 1° apart"), "{said}");
    }
}
