//! The line that lies in a plane at a given rake.

use serde::{Deserialize, Serialize};

use super::{degrees, line_along, line_results, plane_inputs, strike_and_dip, textbook, vector_words};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Step};
use crate::error::Result;
use crate::frames::vector::{add, dot, scale};
use crate::frames::{Azimuth, Line, Plane};
use crate::units::{Angle, Quantity, fixed, require_between};

/// How a rake is counted here; it stands on every card with one.
pub(super) const RAKE_CONVENTION: &str = "Rake is counted in the plane from the strike azimuth (right-hand rule), up dip positive, −180° to 180°, as for the slip of a hanging wall: −90° points straight down dip. A pitch counted downward from strike has the other sign.";

/// The line that lies in a plane at a rake, such as the slip on a fault.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct LineAtRake {
    /// The line, by its lower end. Whether the rake itself points to that end is
    /// [`LineAtRake::points_up`].
    pub line: Line,
    inputs: LineAtRakeInputs,
}

/// The plane and the rake.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LineAtRakeInputs {
    plane: Plane,
    rake: Angle,
}

/// What came out, in SI: trend from true north and plunge, by the lower end.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LineOutcome {
    trend: Angle,
    plunge: Angle,
}

impl Plane {
    /// The line at a rake in this plane, counted from strike, up dip positive (as
    /// `Traction::rake`): l = cos r e_s − sin r e_d, e_s along strike and e_d down dip.
    ///
    /// # Errors
    /// When the rake is outside ±180°, the dip outside 0–90°, or the strike has no true north.
    pub fn line_at_rake(self, rake: Angle) -> Result<LineAtRake> {
        LineAtRake::compute(LineAtRakeInputs { plane: self, rake })
    }
}

impl LineAtRake {
    /// Whether the rake points up along the line, away from its lower end (hanging-wall slip with a
    /// reverse part).
    pub fn points_up(&self) -> bool {
        self.inputs.rake.si().sin() * self.inputs.plane.dip.si().sin() > 0.0
    }
}

impl Explain for LineAtRake {
    const KIND: &'static str = "line-at-rake";
    type Inputs = LineAtRakeInputs;
    type Outcome = LineOutcome;

    fn compute(inputs: LineAtRakeInputs) -> Result<Self> {
        let axes = inputs.plane.axes()?;
        let r = require_between("rake", inputs.rake, Angle::deg(-180.0), Angle::deg(180.0))?.si();
        let l = add(scale(axes.along_strike, r.cos()), scale(axes.down_dip, -r.sin()));
        Ok(LineAtRake { line: line_along(l), inputs })
    }
    fn inputs(&self) -> LineAtRakeInputs {
        self.inputs
    }
    fn outcome(&self) -> LineOutcome {
        let trend = self.line.trend.true_north().unwrap_or(Angle::from_si(f64::NAN));
        LineOutcome { trend, plunge: self.line.plunge }
    }

    /// By spherical trigonometry: sin p = −sin r sin d, tan(t − s) = −tan r cos d.
    fn check(inputs: &LineAtRakeInputs, outcome: &LineOutcome) -> Vec<Check> {
        let Some((s, d)) = strike_and_dip(inputs.plane) else { return Vec::new() };
        let line = Line { trend: Azimuth::from_true_north(outcome.trend), plunge: outcome.plunge };
        let Ok(got) = line.vector() else { return Vec::new() };
        let r = inputs.rake.si();
        let plunge = (-r.sin() * d.sin()).asin();
        let trend = s + (-r.sin() * d.cos()).atan2(r.cos());
        let other = [plunge.cos() * trend.cos(), plunge.cos() * trend.sin(), plunge.sin()];
        let sign = if dot(got, other) < 0.0 { -1.0 } else { 1.0 };
        vec![
            Check::compare(
                "line as a unit vector (north, east, down), from sin p = −sin r sin d and tan(t − s) = −tan r cos d",
                &got,
                &scale(other, sign),
                // The arc sine loses half its figures near a vertical line.
                if plunge.abs() > 1.5 { 1e-7 } else { 1e-11 },
                "",
            ),
            Check::holds("plunge of the lower end below 0°", -outcome.plunge.in_deg(), 0.0, "°"),
        ]
    }

    fn explain(&self) -> Explanation {
        let LineAtRakeInputs { plane, rake } = self.inputs;
        let (_, d) = strike_and_dip(plane).unwrap_or_default();
        let r = rake.si();
        let axes = plane.axes().ok();
        let (along, down) = axes.map(|a| (a.along_strike, a.down_dip)).unwrap_or_default();
        let l = add(scale(along, r.cos()), scale(down, -r.sin()));
        let mut inputs = plane_inputs(plane, "", "the plane").to_vec();
        inputs.push(Item::typed("r", "rake in the plane, from strike, up dip positive", rake));
        let mut notes = vec![RAKE_CONVENTION.to_owned()];
        if self.points_up() {
            notes.push("The rake points up; the line is given by its lower end, which is the other one.".to_owned());
        }
        if d == 0.0 {
            notes.push(
                "The plane is horizontal: its strike is only the direction that the rake is counted from.".to_owned(),
            );
        }
        Explanation {
            title: format!("Line at rake {rake} in the plane {}", plane.words()),
            headline: self.line.words(),
            inputs,
            results: line_results(self.line, "", "the line").to_vec(),
            method: Method {
                words: "The line is made of its part along strike and its part down dip.".to_owned(),
                formulas: vec![
                    Formula::new("l = (cos r) e_upright(s) - (sin r) e_upright(d)", "l = (cos r) e_s − (sin r) e_d"),
                    Formula::new("e_upright(s) = vec(cos s, sin s, 0)", "e_s = (cos s, sin s, 0)"),
                    Formula::new(
                        "e_upright(d) = vec(-sin s cos d, cos s cos d, sin d)",
                        "e_d = (−sin s cos d, cos s cos d, sin d)",
                    ),
                    Formula::new(
                        "sin p = l_upright(d), quad tan t = l_upright(e) / l_upright(n)",
                        "sin p = l_d, tan t = l_e / l_n",
                    ),
                ],
                symbols: vec![
                    ("e_s".to_owned(), "unit vector along strike".to_owned()),
                    ("e_d".to_owned(), "unit vector down dip".to_owned()),
                    ("l".to_owned(), "unit vector at the rake, in north, east, down".to_owned()),
                ],
                references: vec![textbook()],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("e_s = {}", vector_words(along))),
                Step::worked(format!("e_d = {}", vector_words(down))),
                Step::worked(format!(
                    "l = {} · e_s − ({}) · e_d = {}",
                    fixed(r.cos(), 6),
                    fixed(r.sin(), 6),
                    vector_words(l)
                )),
                Step::worked(format!(
                    "by its lower end: t = {}, p = {}",
                    degrees(self.line.trend.true_north().unwrap_or_default().si()),
                    degrees(self.line.plunge.si())
                )),
            ],
            notes,
            topics: vec!["plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.inputs.plane.strike.upstream()
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn plane(strike: f64, dip: f64) -> Plane {
        Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() }
    }
    fn at(rake: f64) -> (f64, f64) {
        let l = plane(45.0, 60.0).line_at_rake(rake.deg()).unwrap();
        assert!(l.card().passed(), "{rake}: {:#?}", l.card().checks);
        (l.line.trend.true_north().unwrap().in_deg(), l.line.plunge.in_deg())
    }

    #[test]
    fn rakes_of_the_pure_slips() {
        // Normal and reverse slip are one line, straight down dip.
        for rake in [-90.0, 90.0] {
            let (trend, plunge) = at(rake);
            assert!((trend - 135.0).abs() < 1e-11 && (plunge - 60.0).abs() < 1e-11);
        }
        // Left-lateral and right-lateral slip are one line, along strike.
        for rake in [0.0, 180.0, -180.0] {
            let (trend, plunge) = at(rake);
            assert!((trend - 45.0).abs() < 1e-11 && plunge == 0.0, "{trend} {plunge}");
        }
        // sin p = sin 30° sin 60°; it points down to the right of strike.
        let (trend, plunge) = at(-30.0);
        assert!((plunge.to_radians().sin() - 0.5 * 0.75_f64.sqrt()).abs() < 1e-14);
        assert!((trend - 45.0 - (30.0_f64.to_radians().tan() * 0.5).atan().to_degrees()).abs() < 1e-11);
    }

    #[test]
    fn a_rake_upward_is_given_by_its_lower_end_and_says_so() {
        let l = plane(45.0, 60.0).line_at_rake(30.deg()).unwrap();
        assert!(l.points_up() && l.line.plunge.in_deg() > 0.0);
        let notes = l.card().explanation.notes;
        assert!(notes[0].contains("up dip positive") && notes[1].contains("lower end"), "{notes:?}");
        assert!(!plane(45.0, 60.0).line_at_rake((-30).deg()).unwrap().points_up());
        let said = plane(45.0, 60.0).line_at_rake(200.deg()).unwrap_err().to_string();
        assert!(said.starts_with("rake is 200°, but it must be between -180° and 180°"), "{said}");
    }
}
