//! How deep the rock round a hole fails at first, by the elastic field.

use serde::{Deserialize, Serialize};

use super::check::check;
use super::depth::Depth;
use crate::card::{Card, Check, Column, Explain, Explanation, Item, Step, Table};
use crate::error::Result;
use crate::units::{Angle, Pressure, Quantity, fixed, with_typed_unit};
use crate::well::wall::stress::field_method;
use crate::well::wall::{AtPressure, Wall, direction, method, pressure_item};

/// Places of the table: every 15° of tool face up to 180°, where everything repeats.
pub(super) const PLACES: usize = 12;

/// How deep the rock round a hole is beyond its strength at a pressure, by the elastic field: a first
/// guess, since what fails hands its load on and the zone deepens.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FailureDepth {
    pub(super) wall: Wall,
    pub(super) inputs: AtPressure,
    pub(super) outcome: DepthOutcome,
}

/// The deepest failing place.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct DeepestFailure {
    /// Its distance from the hole's axis in hole radii, 1 at the wall.
    pub radius_ratio: f64,
    /// Its tool face, 0–180° (it repeats at +180°); `None` where it is the same all round.
    pub toolface: Option<Angle>,
    /// The bearing of that tool face; `None` also where it points straight up or down.
    pub bearing: Option<Angle>,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct DepthOutcome {
    /// `None` where nothing fails, or the far field does.
    pub(super) deepest: Option<DeepestFailure>,
    pub(super) far_field_fails: bool,
    /// The nearest and the farthest failing distance at tool faces 0°, 15° … 165°, in hole radii; the
    /// farthest is none where the far field fails.
    pub(super) reach: [Option<(f64, Option<f64>)>; PLACES],
    /// How much more the worst place of all bears, in the measure of the criterion.
    pub(super) least_margin: Pressure,
    /// Its distance in hole radii; `None` far from the hole.
    pub(super) worst_ratio: Option<f64>,
    /// Its tool face; `None` where all are alike.
    pub(super) worst_toolface: Option<Angle>,
}

impl Wall {
    /// How deep the rock fails in shear, or slips on its plane of weakness, at a pressure, by the
    /// elastic field: the first guess, before the failed rock hands its load on.
    ///
    /// # Errors
    /// When the pressure is not a finite number, or the pore pressure or the temperature away from
    /// the wall is not known: the wall lets fluid pass, or is cooled or warmed.
    pub fn failure_depth(&self, pressure: Pressure) -> Result<FailureDepth> {
        let inputs = self.at_pressure(pressure)?;
        self.known_off_the_wall()?;
        let rock = self.rock_round(pressure.si());
        let at_wall = self.shear.worst(pressure.si());
        let Depth { deepest, worst, far_field_fails } =
            rock.depth((at_wall.value, (!at_wall.flat).then_some(0.5 * at_wall.phi)));
        let angle = |theta: Option<f64>| theta.map(Angle::from_si);
        let mut reach = [None; PLACES];
        for (k, place) in reach.iter_mut().enumerate() {
            let ray = rock.ray(toolface(k));
            if let (Some((far, _)), Some((_, near))) = (ray.failing.first(), ray.failing.last()) {
                *place = Some((near.powf(-0.5), (*far > 0.0).then(|| far.powf(-0.5))));
            }
        }
        let outcome = DepthOutcome {
            deepest: deepest.map(|found| DeepestFailure {
                radius_ratio: found.u.powf(-0.5),
                toolface: angle(found.theta),
                bearing: found.theta.and_then(|theta| direction::bearing(self.attitude, theta)),
            }),
            far_field_fails,
            reach,
            least_margin: Pressure::from_si(-worst.excess),
            worst_ratio: (worst.u > 0.0).then(|| worst.u.powf(-0.5)),
            worst_toolface: angle(worst.theta),
        };
        Ok(FailureDepth { wall: *self, inputs, outcome })
    }
}

pub(super) fn toolface(k: usize) -> f64 {
    k as f64 * std::f64::consts::PI / PLACES as f64
}

impl FailureDepth {
    /// The deepest failing place; `None` when nothing fails, or the far field does.
    pub fn deepest(&self) -> Option<DeepestFailure> {
        self.outcome.deepest
    }

    /// Whether anything fails.
    pub fn fails(&self) -> bool {
        self.outcome.far_field_fails || self.outcome.deepest.is_some()
    }

    /// Whether the stress far from the hole is itself beyond the strength, so that the failing zone
    /// has no end: then stress or strength is not what it is said to be.
    pub fn far_field_fails(&self) -> bool {
        self.outcome.far_field_fails
    }

    /// The failing stretches along the radius of a tool face, in hole radii from the hole's axis: from,
    /// to; the last is infinite where the far field fails. Empty where nothing fails.
    ///
    /// # Errors
    /// When the tool face is not a finite number.
    pub fn at(&self, toolface: Angle) -> Result<Vec<(f64, f64)>> {
        toolface.finite("tool face")?;
        Ok(self.stretches(toolface.si()))
    }

    /// How much more the worst place bears, in the measure of the criterion; negative: it fails.
    pub fn least_margin(&self) -> Pressure {
        self.outcome.least_margin
    }

    /// The pressure in the hole.
    pub fn pressure(&self) -> Pressure {
        self.inputs.pressure
    }

    pub(super) fn stretches(&self, theta: f64) -> Vec<(f64, f64)> {
        let ray = self.wall.rock_round(self.inputs.pressure.si()).ray(theta);
        ray.failing.iter().rev().map(|(far, near)| (near.powf(-0.5), far.powf(-0.5))).collect()
    }

    /// Whether the deepest place belongs to a zone that does not reach the wall there.
    pub(super) fn detached(&self) -> bool {
        let Some(deepest) = self.outcome.deepest else { return false };
        let theta = deepest.toolface.unwrap_or_default().si();
        self.stretches(theta).last().is_some_and(|(from, _)| *from > 1.0 + 1e-9)
    }

    pub(super) fn headline(&self) -> String {
        match self.outcome.deepest {
            _ if self.outcome.far_field_fails => {
                "the stress far from the hole is itself beyond the strength: the failing zone has no end".to_owned()
            }
            None => format!("nothing is beyond the strength; least margin {}", self.outcome.least_margin),
            Some(DeepestFailure { radius_ratio, toolface, .. }) => format!(
                "by the elastic field the rock is beyond its strength to {} radii from the hole's axis ({} radii behind the wall), {}",
                fixed(radius_ratio, 4),
                fixed(radius_ratio - 1.0, 4),
                toolface.map_or_else(
                    || "all round alike".to_owned(),
                    |t| format!("deepest at tool face {} and at +180°", direction::words(self.wall.attitude, t))
                )
            ),
        }
    }

    fn table(&self) -> Table {
        let rock = self.wall.rock_round(self.inputs.pressure.si());
        let row = |(k, reach): (usize, &Option<(f64, Option<f64>)>)| {
            let theta = toolface(k);
            let [near, far] = match reach {
                None => ["–", "–"].map(str::to_owned),
                Some((near, far)) => [fixed(*near, 4), far.map_or_else(|| "no end".to_owned(), |far| fixed(far, 4))],
            };
            vec![
                fixed(theta.to_degrees(), 0),
                direction::bearing_cell(self.wall.attitude, Angle::from_si(theta)),
                near,
                far,
                fixed(-rock.excess(theta, 1.0) * 1e-6, 2),
            ]
        };
        Table {
            caption:
                "Nearest and farthest place beyond strength at each tool face, from the hole's axis; it repeats at +180°"
                    .to_owned(),
            columns: vec![
                Column::number("tool face", "°"),
                Column::number("bearing", "°"),
                Column::number("from", "radii"),
                Column::number("to", "radii"),
                Column::number("margin at the wall", "MPa"),
            ],
            rows: self.outcome.reach.iter().enumerate().map(row).collect(),
        }
    }
}

impl Explain for FailureDepth {
    const KIND: &'static str = "failure-depth";
    type Inputs = AtPressure;
    type Outcome = DepthOutcome;
    // Its tool face is where a smooth function is greatest, which arithmetic finds to half the digits.
    const REPLAY_TOLERANCE: f64 = 1e-7;

    fn compute(inputs: AtPressure) -> Result<Self> {
        Wall::of(inputs.wall)?.failure_depth(inputs.pressure)
    }
    fn inputs(&self) -> AtPressure {
        self.inputs
    }
    fn outcome(&self) -> DepthOutcome {
        self.outcome
    }
    fn check(inputs: &AtPressure, outcome: &DepthOutcome) -> Vec<Check> {
        check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let (pressure, attitude) = (self.inputs.pressure, self.wall.attitude);
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(pressure));
        let mut results =
            vec![Item::computed("m", format!("{} of all", method::margin_name(&self.wall)), self.outcome.least_margin)];
        if let Some(deepest) = self.outcome.deepest {
            let name = "farthest place beyond strength, from the hole's axis in hole radii";
            results.push(field_method::ratio_found("r_f/R", name, deepest.radius_ratio));
            if let Some(toolface) = deepest.toolface {
                results.extend(direction::items(attitude, "that place", "f", toolface));
            }
        }
        if let Some(ratio) = self.outcome.worst_ratio {
            results.push(field_method::ratio_found("r_m/R", "distance of the worst place in hole radii", ratio));
        }
        if let Some(toolface) = self.outcome.worst_toolface {
            results.push(Item::computed("θ_m", "tool face of the worst place", toolface));
        }
        let mut steps = self.wall.strength().steps();
        if let Some(DeepestFailure { radius_ratio, toolface, .. }) = self.outcome.deepest {
            let theta = toolface.unwrap_or_default().si();
            steps.push(Step::words("At the farthest place beyond strength the criterion is just met:"));
            steps.extend(field_method::worked(&self.wall, theta, pressure.si(), radius_ratio));
            let rock = self.wall.rock_round(pressure.si());
            steps.extend(self.wall.strength().worked(rock.effective(theta, radius_ratio.powi(-2))));
            if let Some(slip) = rock.slip(theta, radius_ratio.powi(-2)) {
                steps.push(Step::worked(format!(
                    "on the plane of weakness c_w + σ'_n tan φ_w − τ = {} MPa",
                    fixed(-slip * 1e-6, 4)
                )));
            }
        }
        steps.push(Step::Table { table: self.table() });
        let mut method = field_method::with_strength(
            &self.wall,
            "How far from the hole the elastic stress is beyond the strength. Along each radius the criterion is looked at from far off to the wall in even steps of u = (R/r)², and where it turns between two of them at its turning point, so that a zone that does not touch the wall is not passed over; its edges are roots. Round the hole the deepest of all tool faces is closed in on.",
        );
        method.assumptions.push(
            "The stress is the elastic one of the round hole also where it is beyond the strength: nothing has failed yet.".to_owned(),
        );
        Explanation {
            title: format!("Depth of first failure round {} at {}", self.wall.place(), with_typed_unit(pressure)),
            headline: self.headline(),
            inputs,
            results,
            method,
            steps,
            figures: vec![self.figure()],
            notes: self.notes(),
            topics: self.wall.topics(&["wall", "breakout", "elastic"]),
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

impl FailureDepth {
    fn notes(&self) -> Vec<String> {
        let mut notes = method::notes(&self.wall);
        notes.push("This is the elastic first guess: rock beyond its strength yields and hands its load on, so the zone redistributes and deepens, and a breakout that has come to rest is deeper than this.".to_owned());
        if self.outcome.far_field_fails {
            notes.push("WARNING: the far-field stress is beyond the strength without any hole; stress, pore pressure or strength cannot all be as stated.".to_owned());
        }
        if self.detached() {
            notes.push(
                "The farthest zone does not reach the wall at its tool face: rock fails behind a wall that holds there."
                    .to_owned(),
            );
        }
        notes
    }
}
