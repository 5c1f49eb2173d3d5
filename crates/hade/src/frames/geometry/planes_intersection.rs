//! The line in which two planes cut each other.

use serde::{Deserialize, Serialize};

use super::{
    ACUTE, PARALLEL, angle, angle_by_half_angles, degrees, line_along, line_results, out_of_plane, plane_inputs,
    strike_and_dip, textbook, trend_and_plunge, unit, vector_words,
};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Step};
use crate::error::{Error, Result};
use crate::frames::vector::{angle_between_lines, cross, scale};
use crate::frames::{Azimuth, Line, Plane};
use crate::units::{Angle, Quantity, fixed};

/// The line in which two planes cut each other, such as the edge of a wedge of rock.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct PlanesIntersection {
    /// The line, by its lower end.
    pub line: Line,
    /// The angle between the planes (dihedral angle), 1–90°.
    pub angle: Angle,
    inputs: TwoPlanes,
}

/// The two planes.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct TwoPlanes {
    first: Plane,
    second: Plane,
}

/// What came out, in SI: trend from true north and plunge of the line, angle between the planes.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct PlanesIntersectionOutcome {
    trend: Angle,
    plunge: Angle,
    angle: Angle,
}

impl Plane {
    /// The line in which this plane cuts another: l = n₁ × n₂.
    ///
    /// # Errors
    /// When the planes are within 1° of each other, a dip is outside 0–90°, or a strike has no true
    /// north.
    pub fn intersection(self, other: Plane) -> Result<PlanesIntersection> {
        PlanesIntersection::compute(TwoPlanes { first: self, second: other })
    }
}

impl Explain for PlanesIntersection {
    const KIND: &'static str = "intersection-of-planes";
    type Inputs = TwoPlanes;
    type Outcome = PlanesIntersectionOutcome;

    fn compute(inputs: TwoPlanes) -> Result<Self> {
        let (a, b) = (inputs.first.axes()?.normal, inputs.second.axes()?.normal);
        let between = angle_between_lines(a, b);
        if between < PARALLEL.to_radians() {
            return Err(Error::not_physical(
                format!("The intersection of the planes {} and {}", inputs.first.words(), inputs.second.words()),
                format!(
                    "the planes are only {}° apart, so their intersection is lost in their errors; give two planes at least {PARALLEL}° apart.",
                    fixed(between.to_degrees(), 2)
                ),
            ));
        }
        Ok(PlanesIntersection { line: line_along(cross(a, b)), angle: angle(between), inputs })
    }
    fn inputs(&self) -> TwoPlanes {
        self.inputs
    }
    fn outcome(&self) -> PlanesIntersectionOutcome {
        let trend = self.line.trend.true_north().unwrap_or(Angle::from_si(f64::NAN));
        PlanesIntersectionOutcome { trend, plunge: self.line.plunge, angle: self.angle }
    }

    /// By spherical trigonometry: the line plunges as each plane dips along its trend,
    /// tan p = tan d sin(t − s), and the angle between the planes comes from half angles.
    fn check(inputs: &TwoPlanes, outcome: &PlanesIntersectionOutcome) -> Vec<Check> {
        let (Some(a), Some(b)) = (strike_and_dip(inputs.first), strike_and_dip(inputs.second)) else {
            return Vec::new();
        };
        let line = Line { trend: Azimuth::from_true_north(outcome.trend), plunge: outcome.plunge };
        let Some(line) = trend_and_plunge(line) else { return Vec::new() };
        // The poles of the planes as directions: azimuth a quarter before strike, 90° − dip down.
        let quarter = std::f64::consts::FRAC_PI_2;
        let dihedral = angle_by_half_angles((a.0 - quarter, quarter - a.1), (b.0 - quarter, quarter - b.1));
        vec![
            Check::compare(
                "sine of the angle from each plane to the line, sin p cos d − cos p sin d sin(t − s), against zero",
                &[out_of_plane(line, a), out_of_plane(line, b)],
                &[0.0, 0.0],
                1e-11,
                "",
            ),
            Check::compare(
                "angle between the planes by half angles",
                &[outcome.angle.in_deg()],
                &[dihedral.min(std::f64::consts::PI - dihedral).to_degrees()],
                1e-8,
                "°",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        let TwoPlanes { first, second } = self.inputs;
        let normal = |plane: Plane| plane.axes().map(|a| a.normal).unwrap_or_default();
        let (a, b) = (normal(first), normal(second));
        let product = cross(a, b);
        let l = unit(if product[2] < 0.0 { scale(product, -1.0) } else { product });
        let mut inputs = plane_inputs(first, "_1", "the first plane").to_vec();
        inputs.extend(plane_inputs(second, "_2", "the second plane"));
        let mut results = line_results(self.line, "", "the line of both planes").to_vec();
        results.push(Item::computed("δ", "angle between the planes", self.angle));
        let mut notes = Vec::new();
        if self.angle.in_deg() < ACUTE {
            notes.push(format!(
                "The planes are only {} apart: an error of 1° in one of them turns the line by up to {}°.",
                self.angle,
                fixed(1.0 / self.angle.si().sin(), 1)
            ));
        }
        Explanation {
            title: format!("Intersection of the planes {} and {}", first.words(), second.words()),
            headline: self.line.words(),
            inputs,
            results,
            method: Method {
                words: "The line lies in both planes, so it is across both normals; their cross product gives it, by its lower end.".to_owned(),
                formulas: vec![
                    Formula::new("n = vec(sin s sin d, -cos s sin d, cos d)", "n = (sin s sin d, −cos s sin d, cos d)"),
                    Formula::new("l = (n_1 times n_2) / abs(n_1 times n_2)", "l = (n_1 × n_2) / |n_1 × n_2|"),
                    Formula::new(
                        "tan t = l_upright(e) / l_upright(n), quad sin p = l_upright(d)",
                        "tan t = l_e / l_n, sin p = l_d",
                    ),
                    Formula::new("tan delta = abs(n_1 times n_2) / abs(n_1 dot n_2)", "tan δ = |n_1 × n_2| / |n_1 · n_2|"),
                ],
                symbols: vec![
                    ("n".to_owned(), "unit normal of a plane, pointing down, in north, east, down".to_owned()),
                    ("l".to_owned(), "unit vector along the line".to_owned()),
                ],
                references: vec![textbook()],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("n_1 = {}", vector_words(a))),
                Step::worked(format!("n_2 = {}", vector_words(b))),
                Step::worked(format!("n_1 × n_2 = {}", vector_words(product))),
                Step::worked(format!("l = {}", vector_words(l))),
                Step::worked(format!(
                    "t = atan2({}, {}) = {}, p = asin({}) = {}",
                    fixed(l[1], 6),
                    fixed(l[0], 6),
                    degrees(self.line.trend.true_north().unwrap_or_default().si()),
                    fixed(l[2], 6),
                    degrees(self.line.plunge.si())
                )),
            ],
            notes,
            topics: vec!["plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.first.strike.upstream();
        cards.extend(self.inputs.second.strike.upstream());
        cards
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn plane(strike: f64, dip: f64) -> Plane {
        Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() }
    }

    #[test]
    fn a_symmetric_wedge_plunges_along_its_middle() {
        // Dips of 45° towards 135 and 225: the edge goes south, tan p = tan 45° · cos 45°.
        let edge = plane(45.0, 45.0).intersection(plane(135.0, 45.0)).unwrap();
        assert!((edge.line.trend.true_north().unwrap().in_deg() - 180.0).abs() < 1e-12);
        assert!((edge.line.plunge.in_rad().tan() - 0.5_f64.sqrt()).abs() < 1e-14);
        assert!((edge.angle.in_deg() - 60.0).abs() < 1e-12);
        assert!(edge.card().passed(), "{:#?}", edge.card().checks);
    }

    #[test]
    fn planes_of_one_strike_meet_along_it_by_the_end_below_180() {
        for (a, b) in [(plane(200.0, 30.0), plane(20.0, 50.0)), (plane(200.0, 90.0), plane(200.0, 20.0))] {
            let line = a.intersection(b).unwrap().line;
            assert!((line.trend.true_north().unwrap().in_deg() - 20.0).abs() < 1e-11, "{line:?}");
            assert_eq!(line.plunge, 0.deg());
        }
    }

    #[test]
    fn parallel_planes_are_refused() {
        // Two vertical planes of opposite strike are one plane.
        let said = plane(20.0, 90.0).intersection(plane(200.0, 89.5)).unwrap_err().to_string();
        assert!(said.contains("only 0.50° apart"), "{said}");
        assert!(plane(20.0, 91.0).intersection(plane(100.0, 20.0)).unwrap_err().is_range());
    }
}
