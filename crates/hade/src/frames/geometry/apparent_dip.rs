//! The dip that a plane shows in a vertical section.

use serde::{Deserialize, Serialize};

use super::{PARALLEL, angle, degrees, line_results, plane_inputs, strike_and_dip, textbook};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Step};
use crate::error::{Error, Result};
use crate::frames::vector::dot;
use crate::frames::{Azimuth, Line, Plane, three_figures};
use crate::units::{Angle, Quantity, fixed};

/// The dip that a plane shows in a vertical section (apparent dip), as on a drawing or a wall of an
/// excavation.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct ApparentDip {
    /// The angle of the plane's trace in the section below horizontal, −90° to 90°: positive where
    /// the trace goes down towards the azimuth of the section, negative where it rises.
    pub dip: Angle,
    /// The trace of the plane in the section, by its lower end.
    pub trace: Line,
    inputs: ApparentDipInputs,
}

/// The plane and the azimuth of the section.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ApparentDipInputs {
    plane: Plane,
    section: Azimuth,
}

impl Plane {
    /// The apparent dip in a vertical section that runs along an azimuth:
    /// tan α = tan d sin(A − s).
    ///
    /// # Errors
    /// When the plane is vertical and strikes within 1° of the section (then it is the section), the
    /// dip is outside 0–90°, or an azimuth has no true north.
    pub fn apparent_dip(self, section: Azimuth) -> Result<ApparentDip> {
        ApparentDip::compute(ApparentDipInputs { plane: self, section })
    }
}

impl Explain for ApparentDip {
    const KIND: &'static str = "apparent-dip";
    type Inputs = ApparentDipInputs;
    type Outcome = Angle;

    fn compute(inputs: ApparentDipInputs) -> Result<Self> {
        inputs.plane.axes()?;
        let (s, d) = (inputs.plane.strike.true_north()?.si(), inputs.plane.dip.si());
        let section = inputs.section.true_north()?;
        let (down, along) = (d.sin() * (section.si() - s).sin(), d.cos());
        // Their root of squares is the sine of the angle between the plane and the section.
        if down.hypot(along) < PARALLEL.to_radians().sin() {
            return Err(Error::not_physical(
                format!(
                    "The apparent dip of the plane {} in the section along {}°",
                    inputs.plane.words(),
                    three_figures(section)
                ),
                format!(
                    "the plane is within {PARALLEL}° of the section itself and has no trace in it; choose a section across it."
                ),
            ));
        }
        let dip = down.atan2(along);
        let trace = Line { trend: inputs.section, plunge: angle(dip) }.lower_end()?;
        Ok(ApparentDip { dip: angle(dip), trace, inputs })
    }
    fn inputs(&self) -> ApparentDipInputs {
        self.inputs
    }
    fn outcome(&self) -> Angle {
        self.dip
    }

    /// By vectors: the trace, as a vector in the section, lies in the plane, across its normal.
    fn check(inputs: &ApparentDipInputs, outcome: &Angle) -> Vec<Check> {
        let (Ok(axes), Ok(section)) = (inputs.plane.axes(), inputs.section.true_north()) else { return Vec::new() };
        let (a, o) = (section.si(), outcome.si());
        let trace = [o.cos() * a.cos(), o.cos() * a.sin(), o.sin()];
        vec![
            Check::compare("trace · normal of the plane against zero", &[dot(trace, axes.normal)], &[0.0], 1e-12, ""),
            Check::holds("size of the apparent dip above 90°", outcome.abs().in_deg() - 90.0, 1e-9, "°"),
        ]
    }

    fn explain(&self) -> Explanation {
        let ApparentDipInputs { plane, section } = self.inputs;
        let (s, d) = strike_and_dip(plane).unwrap_or_default();
        let a = section.true_north().unwrap_or_default();
        let towards = if self.dip.si() < 0.0 { a + Angle::deg(180.0) } else { a };
        let mut inputs = plane_inputs(plane, "", "the plane").to_vec();
        inputs.push(section.item("A", "azimuth of the vertical section"));
        let mut results =
            vec![Item::computed("α", "apparent dip, positive down towards the azimuth of the section", self.dip)];
        results.extend(line_results(self.trace, "", "the trace"));
        Explanation {
            title: format!("Apparent dip of the plane {} in the section along {}°", plane.words(), three_figures(a)),
            headline: format!("{} down towards {}°", self.dip.abs(), three_figures(towards)),
            inputs,
            results,
            method: Method {
                words: "A vertical section along azimuth A shows the plane's true dip only where it runs along the dip direction; elsewhere it shows less.".to_owned(),
                formulas: vec![Formula::new("tan alpha = tan d sin(A - s)", "tan α = tan d sin(A − s)")],
                references: vec![textbook()],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("A − s = {} − {} = {}", degrees(a.si()), degrees(s), degrees(a.si() - s))),
                Step::worked(format!(
                    "tan α = sin d sin(A − s) / cos d = {} · ({}) / {}",
                    fixed(d.sin(), 6),
                    fixed((a.si() - s).sin(), 6),
                    fixed(d.cos(), 6)
                )),
                Step::worked(format!("α = {}", degrees(self.dip.si()))),
            ],
            topics: vec!["plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.plane.strike.upstream();
        cards.extend(self.inputs.section.upstream());
        cards
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn true_north(degrees: f64) -> Azimuth {
        Azimuth::from_true_north(degrees.deg())
    }

    #[test]
    fn full_along_the_dip_none_along_the_strike_less_between() {
        let plane = Plane { strike: true_north(45.0), dip: 60.deg() };
        let shown = |section: f64| plane.apparent_dip(true_north(section)).unwrap().dip.in_deg();
        assert!((shown(135.0) - 60.0).abs() < 1e-12);
        assert!((shown(315.0) + 60.0).abs() < 1e-12);
        assert!(shown(45.0).abs() < 1e-12 && shown(225.0).abs() < 1e-12);
        // tan 60° · sin 30° = √3 / 2.
        assert!((shown(75.0).to_radians().tan() - 0.75_f64.sqrt()).abs() < 1e-14);
        let rising = plane.apparent_dip(true_north(285.0)).unwrap();
        assert_eq!(rising.card().explanation.headline, "56.3° down towards 105°".replace("105°", "105.0°"));
        assert!((rising.trace.trend.true_north().unwrap().in_deg() - 105.0).abs() < 1e-12);
        assert!(rising.card().passed());
    }

    #[test]
    fn a_vertical_plane_shows_as_a_vertical_line_or_not_at_all() {
        let plane = Plane { strike: true_north(45.0), dip: 90.deg() };
        assert!((plane.apparent_dip(true_north(100.0)).unwrap().dip.in_deg() - 90.0).abs() < 1e-9);
        let said = plane.apparent_dip(true_north(225.5)).unwrap_err().to_string();
        assert!(said.contains("has no trace in it"), "{said}");
        assert!(plane.apparent_dip(Azimuth::from_grid_north(10.deg())).is_err());
    }
}
