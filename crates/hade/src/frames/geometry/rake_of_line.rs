//! The rake of a line that was measured in a plane.

use serde::{Deserialize, Serialize};

use super::line_at_rake::RAKE_CONVENTION;
use super::{
    angle, degrees, line_inputs, out_of_plane, plane_inputs, strike_and_dip, textbook, trend_and_plunge, vector_words,
};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Step};
use crate::error::{Error, Result};
use crate::frames::vector::dot;
use crate::frames::{Line, Plane};
use crate::units::{Angle, Quantity, fixed};

/// The rake of a line measured in a plane, such as the striae on a fault. A line has two ends, so
/// it has two rakes, 180° apart; the sense of slip, which says which of them is the slip, is not
/// in a line.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct RakeOfLine {
    /// The rake of the end that points up dip, 0° ≤ r < 180°, from strike.
    pub up: Angle,
    /// The rake of the end that points down dip: `up` − 180°.
    pub down: Angle,
    /// The angle between the line and the plane; zero when it was measured without error.
    pub misfit: Angle,
    inputs: RakeOfLineInputs,
}

/// The plane and the line.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RakeOfLineInputs {
    plane: Plane,
    line: Line,
}

/// What came out, in SI.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct RakeOfLineOutcome {
    up: Angle,
    down: Angle,
    misfit: Angle,
}

/// A line further than this from the plane, in degrees, was not measured in it.
const FARTHEST: f64 = 10.0;

/// Rakes within this of 180°, in radians, are the rake 0°.
const EXACT: f64 = 1e-12;

impl Plane {
    /// The rake of a line in this plane, of its projection on the plane when it was measured a
    /// little off: tan r = −(l · e_d) / (l · e_s), e_s along strike and e_d down dip.
    ///
    /// # Errors
    /// When the line is more than 10° from the plane, the plunge is outside ±90°, the dip outside
    /// 0–90°, or an azimuth has no true north.
    pub fn rake_of(self, line: Line) -> Result<RakeOfLine> {
        RakeOfLine::compute(RakeOfLineInputs { plane: self, line })
    }
}

impl Explain for RakeOfLine {
    const KIND: &'static str = "rake-of-line";
    type Inputs = RakeOfLineInputs;
    type Outcome = RakeOfLineOutcome;

    fn compute(inputs: RakeOfLineInputs) -> Result<Self> {
        let (axes, l) = (inputs.plane.axes()?, inputs.line.vector()?);
        let misfit = inputs.line.angle_to_plane(&inputs.plane)?;
        if misfit.in_deg() > FARTHEST {
            return Err(Error::not_physical(
                format!("The rake of the line {} in the plane {}", inputs.line.words(), inputs.plane.words()),
                format!(
                    "the line is {}° away from the plane, and at most {FARTHEST}° may be error of measurement; check both readings.",
                    fixed(misfit.in_deg(), 1)
                ),
            ));
        }
        let half = std::f64::consts::PI;
        let up = (-dot(l, axes.down_dip)).atan2(dot(l, axes.along_strike)).rem_euclid(half);
        let up = if up >= half - EXACT { 0.0 } else { up };
        Ok(RakeOfLine { up: angle(up), down: angle(up - half), misfit, inputs })
    }
    fn inputs(&self) -> RakeOfLineInputs {
        self.inputs
    }
    fn outcome(&self) -> RakeOfLineOutcome {
        RakeOfLineOutcome { up: self.up, down: self.down, misfit: self.misfit }
    }

    /// By spherical trigonometry on the trend and plunge: cos r cos m = cos p cos(t − s) and
    /// sin r cos m = −(sin p sin d + cos p cos d sin(t − s)), for the end that points up dip;
    /// sin m = |sin p cos d − cos p sin d sin(t − s)|.
    fn check(inputs: &RakeOfLineInputs, outcome: &RakeOfLineOutcome) -> Vec<Check> {
        let (Some((s, d)), Some((t, p))) = (strike_and_dip(inputs.plane), trend_and_plunge(inputs.line)) else {
            return Vec::new();
        };
        let along = p.cos() * (t - s).cos();
        let up = -(p.sin() * d.sin() + p.cos() * d.cos() * (t - s).sin());
        let (r, m) = (outcome.up.si(), outcome.misfit.si());
        let got = [r.cos() * m.cos(), r.sin() * m.cos()];
        // The other end of the line has both signs turned; a level line is taken along strike.
        let sign = if got[0] * along + got[1] * up < 0.0 { -1.0 } else { 1.0 };
        vec![
            Check::compare(
                "parts of the line along strike and up dip, from its trend and plunge",
                &got,
                &[sign * along, sign * up],
                1e-11,
                "",
            ),
            Check::compare(
                "sine of the misfit by sin p cos d − cos p sin d sin(t − s)",
                &[m.sin()],
                &[out_of_plane((t, p), (s, d)).abs()],
                1e-12,
                "",
            ),
            Check::compare(
                "rakes of the two ends differ by 180°",
                &[outcome.up.in_deg() - outcome.down.in_deg()],
                &[180.0],
                1e-11,
                "°",
            ),
            Check::holds("rake of the end up dip below 0°", -outcome.up.in_deg(), 0.0, "°"),
        ]
    }

    fn explain(&self) -> Explanation {
        let RakeOfLineInputs { plane, line } = self.inputs;
        let axes = plane.axes().ok();
        let (along, down) = axes.map(|a| (a.along_strike, a.down_dip)).unwrap_or_default();
        let l = line.vector().unwrap_or_default();
        let mut inputs = plane_inputs(plane, "", "the plane").to_vec();
        inputs.extend(line_inputs(line, "", "the line"));
        let mut notes = vec![
            RAKE_CONVENTION.to_owned(),
            "A line has no sense: the slip of the hanging wall is at one of the two rakes, and only the sense of slip says at which.".to_owned(),
        ];
        if self.misfit.in_deg() > 0.05 {
            notes.push(format!(
                "The line was measured {} away from the plane; the rake is that of its projection on the plane.",
                self.misfit
            ));
        }
        Explanation {
            title: format!("Rake of the line {} in the plane {}", line.words(), plane.words()),
            headline: format!("rake {} up dip or {} down dip, {} off the plane", self.up, self.down, self.misfit),
            inputs,
            results: vec![
                Item::computed("r_up", "rake of the end that points up dip", self.up),
                Item::computed("r_down", "rake of the end that points down dip", self.down),
                Item::computed("m", "angle between the line and the plane", self.misfit),
            ],
            method: Method {
                words: "The line is projected on the plane; the rake is the angle of the projection from strike."
                    .to_owned(),
                formulas: vec![
                    Formula::new(
                        "tan r = - (l dot e_upright(d)) / (l dot e_upright(s))",
                        "tan r = −(l · e_d) / (l · e_s)",
                    ),
                    Formula::new("e_upright(s) = vec(cos s, sin s, 0)", "e_s = (cos s, sin s, 0)"),
                    Formula::new(
                        "e_upright(d) = vec(-sin s cos d, cos s cos d, sin d)",
                        "e_d = (−sin s cos d, cos s cos d, sin d)",
                    ),
                    Formula::new("sin m = abs(l dot n)", "sin m = |l · n|"),
                ],
                symbols: vec![
                    ("l".to_owned(), "unit vector along the line, in north, east, down".to_owned()),
                    ("e_s, e_d".to_owned(), "unit vectors along strike and down dip".to_owned()),
                    ("n".to_owned(), "unit normal of the plane, n = e_s × e_d".to_owned()),
                ],
                references: vec![textbook()],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("l = {}", vector_words(l))),
                Step::worked(format!("e_s = {}, e_d = {}", vector_words(along), vector_words(down))),
                Step::worked(format!(
                    "r = atan2(−({}), {}), by its end in 0–180°: {}",
                    fixed(dot(l, down), 6),
                    fixed(dot(l, along), 6),
                    degrees(self.up.si())
                )),
                Step::worked(format!(
                    "sin m = {}, m = {}",
                    fixed(self.misfit.si().sin(), 6),
                    degrees(self.misfit.si())
                )),
            ],
            notes,
            topics: vec!["plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.plane.strike.upstream();
        cards.extend(self.inputs.line.trend.upstream());
        cards
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn plane() -> Plane {
        Plane { strike: Azimuth::from_true_north(45.deg()), dip: 60.deg() }
    }
    fn line(trend: f64, plunge: f64) -> Line {
        Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }
    }

    #[test]
    fn a_line_has_two_rakes_and_a_misfit() {
        let down_dip = plane().rake_of(line(135.0, 60.0)).unwrap();
        assert!((down_dip.up.in_deg() - 90.0).abs() < 1e-12 && (down_dip.down.in_deg() + 90.0).abs() < 1e-12);
        assert!(down_dip.misfit.in_deg() < 1e-12);
        // Either end, also of a horizontal line along strike.
        for l in [line(45.0, 0.0), line(225.0, 0.0)] {
            let along = plane().rake_of(l).unwrap();
            assert_eq!((along.up, along.down), (0.deg(), (-180).deg()));
            assert!(along.card().passed(), "{:#?}", along.card().checks);
        }
        let steep = plane().rake_of(line(135.0, 65.0)).unwrap();
        assert!((steep.misfit.in_deg() - 5.0).abs() < 1e-11 && (steep.up.in_deg() - 90.0).abs() < 1e-11);
        assert!(steep.card().explanation.notes[2].contains("5.0° away from the plane"));
    }

    #[test]
    fn a_line_that_is_not_in_the_plane_is_refused() {
        let said = plane().rake_of(line(135.0, 75.0)).unwrap_err().to_string();
        assert!(said.contains("15.0° away from the plane"), "{said}");
    }
}
