//! The horizontal stresses of any stress tensor, also one whose axes tilt.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::invariants_card::factor;
use super::regime::{EQUAL, steepest};
use crate::card::{Card, Check, Column, Explain, Explanation, Formula, Item, Method, Reference, Step, Table};
use crate::error::Result;
use crate::frames::{Azimuth, Geographic, Line, bearing_item, three_figures};
use crate::units::{Angle, Pressure, Quantity, fixed};

/// The largest and the smallest normal stress in the horizontal directions, and the vertical normal
/// stress.
///
/// Where the axes tilt these are not principal stresses: shear stress is left on the three planes,
/// and the azimuth of S_Hmax is not the trend of S1.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct HorizontalStresses {
    /// The largest normal stress in a horizontal direction, S_Hmax.
    pub sh_max: Pressure,
    /// The smallest, S_hmin, at right angles to it.
    pub sh_min: Pressure,
    /// The azimuth of S_Hmax, 0° to below 180°. `None` where the two are equal.
    pub sh_max_azimuth: Option<Azimuth>,
    /// The normal stress in the vertical direction, S_v = S_dd.
    pub sv: Pressure,
    stress: Stress<Geographic>,
}

/// What came out, in SI; the azimuth from true north.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct HorizontalOutcome {
    sh_max: Pressure,
    sh_min: Pressure,
    sh_max_azimuth: Option<Angle>,
    sv: Pressure,
}

/// A principal axis this near to vertical, in degrees, is called vertical.
const UPRIGHT: f64 = 0.05;

impl Stress<Geographic> {
    /// The horizontal stresses S_Hmax and S_hmin, as the extremes of the normal stress over all
    /// horizontal directions (Lund and Townend 2007), with the azimuth of S_Hmax, and the vertical
    /// normal stress.
    pub fn horizontal_stresses(&self) -> HorizontalStresses {
        HorizontalStresses::of(*self)
    }
}

impl HorizontalStresses {
    fn of(stress: Stress<Geographic>) -> Self {
        let [nn, ee, dd, ne, ..] = stress.tensor().0;
        let (centre, half) = (0.5 * (nn + ee), 0.5 * (nn - ee));
        let radius = half.hypot(ne);
        let (sh_max, sh_min) = (centre + radius, centre - radius);
        let defined = sh_max - sh_min > EQUAL * (sh_max.abs() + sh_min.abs());
        let azimuth = (0.5 * ne.atan2(half)).rem_euclid(std::f64::consts::PI);
        let azimuth = if azimuth >= std::f64::consts::PI { 0.0 } else { azimuth };
        HorizontalStresses {
            sh_max: Pressure::from_si(sh_max),
            sh_min: Pressure::from_si(sh_min),
            sh_max_azimuth: defined.then(|| Azimuth::from_true_north(Angle::from_si(azimuth))),
            sv: Pressure::from_si(dd),
            stress,
        }
    }

    fn azimuth(&self) -> Option<Angle> {
        self.sh_max_azimuth.and_then(|a| a.true_north().ok())
    }

    /// What the principal axes say beside it.
    fn notes(&self, lines: [Option<Line>; 3]) -> Vec<String> {
        let mut notes = Vec::new();
        if self.sh_max_azimuth.is_none() {
            notes
                .push("The normal stress is the same in every horizontal direction: S_Hmax has no azimuth.".to_owned());
        }
        let Some(upright) = steepest(&self.stress.tensor().eigen()) else { return notes };
        if upright.tilt.to_degrees() < UPRIGHT {
            notes.push(
                "The vertical is a principal direction: S_Hmax, S_hmin and S_v are the principal stresses.".to_owned(),
            );
            return notes;
        }
        notes.push(format!(
            "The principal axis nearest to vertical is tilted by {}°: S_Hmax, S_hmin and S_v are normal stresses, not principal ones; shear stress is left on these planes.",
            fixed(upright.tilt.to_degrees(), 1)
        ));
        // Of the two flatter axes, the one of the larger stress.
        let k = usize::from(upright.index == 0);
        let trend = lines[k].and_then(|line| line.trend.true_north().ok());
        if let (Some(azimuth), Some(trend)) = (self.azimuth(), trend) {
            let apart = (azimuth.in_deg() - trend.in_deg() + 90.0).rem_euclid(180.0) - 90.0;
            notes.push(format!(
                "The azimuth of S_Hmax, {}°, is not the trend of S_{}, {}°: as lines they are {}° apart, because a tilted axis shows only part of its stress in the horizontal.",
                three_figures(azimuth),
                k + 1,
                three_figures(trend),
                fixed(apart.abs(), 1)
            ));
        }
        notes
    }
}

impl Explain for HorizontalStresses {
    const KIND: &'static str = "horizontal-stresses";
    type Inputs = Stress<Geographic>;
    type Outcome = HorizontalOutcome;

    fn compute(inputs: Stress<Geographic>) -> Result<Self> {
        Ok(HorizontalStresses::of(inputs))
    }
    fn inputs(&self) -> Stress<Geographic> {
        self.stress
    }
    fn outcome(&self) -> HorizontalOutcome {
        HorizontalOutcome { sh_max: self.sh_max, sh_min: self.sh_min, sh_max_azimuth: self.azimuth(), sv: self.sv }
    }

    /// The horizontal part of the traction across each direction is that stress alone; sum and
    /// product come out as of the tensor; the vertical stress from the principal ones.
    fn check(inputs: &Stress<Geographic>, outcome: &HorizontalOutcome) -> Vec<Check> {
        let s = inputs.tensor();
        let [nn, ee, _, ne, ..] = s.scale(1e-6).0;
        let largest = s.largest().max(1.0) * 1e-6;
        let (big, small) = (outcome.sh_max.in_mpa(), outcome.sh_min.in_mpa());
        let e = s.eigen();
        let sv: f64 = e.values.iter().zip(e.axes).map(|(value, axis)| value * axis[2] * axis[2] * 1e-6).sum();
        let mut checks = vec![
            Check::compare("S_Hmax + S_hmin against S_nn + S_ee", &[big + small], &[nn + ee], largest * 1e-11, "MPa"),
            Check::compare(
                "S_Hmax · S_hmin against S_nn S_ee − S_ne²",
                &[big * small],
                &[nn * ee - ne * ne],
                largest * largest * 1e-11,
                "MPa²",
            ),
            Check::holds("S_hmin above S_Hmax", small - big, 0.0, "MPa"),
            Check::compare(
                "S_v from the principal stresses, Σ S_k sin² P_k",
                &[outcome.sv.in_mpa()],
                &[sv],
                largest * 1e-11,
                "MPa",
            ),
        ];
        if let Some(azimuth) = outcome.sh_max_azimuth {
            let (sin, cos) = azimuth.si().sin_cos();
            let level = |v: [f64; 3]| {
                let t = s.times(v);
                [t[0] * 1e-6, t[1] * 1e-6]
            };
            let (along, across) = (level([cos, sin, 0.0]), level([-sin, cos, 0.0]));
            checks.push(Check::compare(
                "horizontal part of the traction across each direction against that stress along it (no horizontal shear)",
                &[along[0], along[1], across[0], across[1]],
                &[big * cos, big * sin, -small * sin, small * cos],
                largest * 1e-11,
                "MPa",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let [nn, ee, _, ne, ..] = self.stress.tensor().scale(1e-6).0;
        let principals = self.stress.principals();
        let lines = principals.lines();
        let (centre, radius) = (0.5 * (nn + ee), (0.5 * (nn - ee)).hypot(ne));
        let mut results = vec![
            Item::computed("S_Hmax", "largest horizontal normal stress", self.sh_max),
            Item::computed("S_hmin", "smallest horizontal normal stress", self.sh_min),
            Item::computed("S_v", "vertical normal stress", self.sv),
        ];
        let mut steps = vec![
            Step::matrix("S", &self.stress.rows_in_mpa(), 4, "MPa", "north, east, down"),
            Step::worked(format!(
                "half difference and radius: ({} − {}) / 2 = {}, √({}² + {}²) = {} MPa",
                factor(nn),
                factor(ee),
                fixed(0.5 * (nn - ee), 4),
                factor(0.5 * (nn - ee)),
                factor(ne),
                factor(radius)
            )),
            Step::worked(format!(
                "S_Hmax = {} + {} = {} MPa, S_hmin = {} − {} = {} MPa",
                factor(centre),
                factor(radius),
                fixed(self.sh_max.in_mpa(), 4),
                factor(centre),
                factor(radius),
                fixed(self.sh_min.in_mpa(), 4)
            )),
        ];
        let azimuth = self.azimuth();
        if let Some(azimuth) = azimuth {
            results.insert(1, bearing_item("A", "azimuth of S_Hmax, by its end below 180°", azimuth));
            steps.push(Step::worked(format!(
                "A = ½ · atan2({}, {}) = {}°, counted within 0–180°",
                factor(ne),
                factor(0.5 * (nn - ee)),
                fixed(azimuth.in_deg(), 3)
            )));
        }
        steps.push(Step::Table { table: beside_the_principal_axes(principals.magnitudes(), lines) });
        Explanation {
            title: format!("Horizontal and vertical stresses of the tensor{}", self.stress.of_name()),
            headline: format!(
                "S_Hmax {} {}, S_hmin {}, S_v {}",
                self.sh_max,
                azimuth.map_or_else(|| "in every direction".to_owned(), |a| format!("at {}°", three_figures(a))),
                self.sh_min,
                self.sv
            ),
            inputs: vec![self.stress.item("S", "stress in north, east, down")],
            results,
            method: Method {
                words: "The normal stress across vertical planes as a function of their azimuth has one maximum and one minimum in 180°, at right angles: those of the horizontal 2 × 2 part of the tensor.".to_owned(),
                formulas: vec![
                    Formula::new(
                        "S_upright(H max) = 1/2 (S_(n n) + S_(e e)) + sqrt(1/4 (S_(n n) - S_(e e))^2 + S_(n e)^2)",
                        "S_Hmax = ½ (S_nn + S_ee) + √(¼ (S_nn − S_ee)² + S_ne²)",
                    ),
                    Formula::new(
                        "S_upright(h min) = 1/2 (S_(n n) + S_(e e)) - sqrt(1/4 (S_(n n) - S_(e e))^2 + S_(n e)^2)",
                        "S_hmin = ½ (S_nn + S_ee) − √(¼ (S_nn − S_ee)² + S_ne²)",
                    ),
                    Formula::new("tan 2 A = (2 S_(n e)) / (S_(n n) - S_(e e))", "tan 2A = 2 S_ne / (S_nn − S_ee)"),
                    Formula::new("S_upright(v) = S_(d d)", "S_v = S_dd"),
                ],
                references: vec![Reference::new(
                    "Lund, B. and Townend, J. (2007) Calculating horizontal stress orientations with full or partial knowledge of the tectonic stress tensor, Geophys. J. Int. 170, 1328–1335 (cited from memory)",
                )],
                ..Method::default()
            },
            steps,
            notes: self.notes(lines),
            topics: vec!["stress".to_owned(), "azimuth".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.stress.upstream();
        cards.extend(self.stress.stated());
        cards
    }
}

/// The principal stresses, to be read beside the horizontal ones.
fn beside_the_principal_axes(magnitudes: [Pressure; 3], lines: [Option<Line>; 3]) -> Table {
    let row = |(i, (magnitude, line)): (usize, (Pressure, Option<Line>))| {
        let (trend, plunge) = match line {
            Some(line) => (
                // A vertical line has no trend of its own.
                line.trend
                    .true_north()
                    .ok()
                    .filter(|_| line.plunge.in_deg() <= 90.0 - UPRIGHT)
                    .map_or_else(|| "–".to_owned(), three_figures),
                fixed(line.plunge.in_deg(), 1),
            ),
            None => ("any".to_owned(), "any".to_owned()),
        };
        vec![format!("S_{}", i + 1), fixed(magnitude.in_mpa(), 3), trend, plunge]
    };
    Table {
        caption: "The principal stresses beside them; trend from true north, by the lower end".to_owned(),
        columns: vec![
            Column::text("axis"),
            Column::number("magnitude", "MPa"),
            Column::number("trend", "°"),
            Column::number("plunge", "°"),
        ],
        rows: magnitudes.into_iter().zip(lines).enumerate().map(row).collect(),
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    #[test]
    fn a_stress_of_vertical_and_horizontals_gives_them_back() {
        let given = Horizontals {
            sv: 66.9.mpa(),
            sh_max: 58.2.mpa(),
            sh_min: 47.1.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(125.deg()),
        };
        let h = Stress::from_horizontals(given).unwrap().horizontal_stresses();
        assert!((h.sh_max - given.sh_max).abs() < 1.pa() && (h.sh_min - given.sh_min).abs() < 1.pa());
        assert_eq!(h.sv, given.sv);
        assert!((h.sh_max_azimuth.unwrap().true_north().unwrap().in_deg() - 125.0).abs() < 1e-10);
        let card = h.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert!(card.explanation.notes[0].contains("The vertical is a principal direction"));
    }

    #[test]
    fn equal_horizontal_stresses_have_no_azimuth() {
        let z = 0.mpa();
        let s = Stress::from_components(Components { nn: 30.mpa(), ee: 30.mpa(), dd: 55.mpa(), ne: z, nd: z, ed: z });
        let h = s.unwrap().horizontal_stresses();
        assert_eq!((h.sh_max, h.sh_min, h.sh_max_azimuth), (30.mpa(), 30.mpa(), None));
        assert!(h.card().passed());
        assert!(h.card().explanation.headline.contains("in every direction"));
    }

    #[test]
    fn the_azimuth_is_below_180() {
        let s = |ne: f64, nn: f64| {
            let z = 0.mpa();
            Stress::from_components(Components { nn: nn.mpa(), ee: 30.mpa(), dd: 55.mpa(), ne: ne.mpa(), nd: z, ed: z })
                .unwrap()
                .horizontal_stresses()
                .sh_max_azimuth
                .unwrap()
                .true_north()
                .unwrap()
                .in_deg()
        };
        assert_eq!(s(-1e-22, 40.0), 0.0);
        assert!((s(-1e-3, 40.0) - 179.99).abs() < 1e-2);
        assert_eq!(s(0.0, 20.0), 90.0);
    }
}
