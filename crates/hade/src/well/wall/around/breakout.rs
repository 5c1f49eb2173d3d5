//! The arcs of the wall that fail in shear at one pressure.

use serde::{Deserialize, Serialize};

use crate::card::{Card, Check, Column, Explain, Explanation, Item, Reference, Step, Table};
use crate::error::Result;
use crate::units::{Angle, Pressure, Quantity, fixed, with_typed_unit};
use crate::well::wall::round::on_circle;
use crate::well::wall::second_route::{ByVectors, bearing_check, outside};
use crate::well::wall::shear::{Arcs, MOST_ARCS, Mode, mode_of};
use crate::well::wall::{AtPressure, Wall, direction, method, pressure_item};

/// An arc of the wall that fails in shear. It stands for two: the same fails on the far side.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct Breakout {
    /// The tool face of its middle, 0–180°; it repeats at +180°. When the whole wall fails, the tool
    /// face of the worst place.
    pub centre: Angle,
    /// Its whole width; 180° when the whole wall fails.
    pub width: Angle,
    /// Whether the whole wall fails, so that the two arcs have met.
    pub whole_wall: bool,
    /// The bearing of its middle, `None` where that points straight up or down.
    pub bearing: Option<Angle>,
    /// How its middle fails: along which wall direction each principal stress lies nearest, largest
    /// first.
    pub mode: Mode,
    /// Whether its middle slips on the plane of weakness rather than fails through the rock.
    pub on_weak_plane: bool,
}

/// All arcs that fail at a pressure, and how the worst place stands; also when nothing fails.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FailingArcs {
    wall: Wall,
    inputs: AtPressure,
    outcome: ArcsOutcome,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ArcsOutcome {
    /// Widest first.
    arcs: [Option<Breakout>; MOST_ARCS],
    /// How much more the worst place bears, in the measure of the criterion; negative: it fails.
    least_margin: Pressure,
    /// The worst place; `None` where all places are alike.
    worst: Option<Angle>,
}

impl Wall {
    /// The widest arc that fails in shear at a pressure; `None` when nothing does.
    ///
    /// # Errors
    /// When the pressure is not a finite number.
    pub fn breakout(&self, pressure: Pressure) -> Result<Option<Breakout>> {
        Ok(self.failing_arcs(pressure)?.widest())
    }

    /// All arcs that fail in shear at a pressure, edges exact, as a result that explains itself.
    ///
    /// # Errors
    /// When the pressure is not a finite number.
    pub fn failing_arcs(&self, pressure: Pressure) -> Result<FailingArcs> {
        let inputs = self.at_pressure(pressure)?;
        Ok(FailingArcs { wall: *self, inputs, outcome: self.arcs_outcome(pressure) })
    }

    pub(crate) fn arcs_outcome(&self, pressure: Pressure) -> ArcsOutcome {
        let worst = self.shear.worst(pressure.si());
        let arcs = breakouts(self, &self.shear.failing(pressure.si()), 0.5 * worst.phi, pressure.si());
        ArcsOutcome {
            arcs,
            least_margin: Pressure::from_si(-worst.value),
            worst: (!worst.flat).then(|| Angle::from_si(0.5 * worst.phi)),
        }
    }
}

impl Breakout {
    /// "shear: σ'_1 hoop, σ'_2 axial, σ'_3 radial", or slip on the plane of weakness.
    pub fn words(&self) -> String {
        let how = if self.on_weak_plane { "slip on the plane of weakness" } else { "shear" };
        format!("{how}: {}", self.mode.words())
    }
}

impl ArcsOutcome {
    pub(crate) fn widest(&self) -> Option<Breakout> {
        self.arcs.first().copied().flatten()
    }
    pub(crate) fn least_margin(&self) -> Pressure {
        self.least_margin
    }
    pub(crate) fn list(&self) -> impl Iterator<Item = Breakout> {
        self.arcs.iter().flatten().copied()
    }
}

fn breakouts(wall: &Wall, arcs: &Arcs, worst: f64, pressure: f64) -> [Option<Breakout>; MOST_ARCS] {
    let breakout = |centre: f64, width: f64, whole_wall| Breakout {
        centre: Angle::from_si(centre),
        width: Angle::from_si(width),
        whole_wall,
        bearing: direction::bearing(wall.attitude, centre),
        mode: mode_of(wall.shear.at(centre, pressure), wall.shear.scale()),
        on_weak_plane: wall.shear.slips_at(pressure, 2.0 * centre),
    };
    let mut found = [None; MOST_ARCS];
    if arcs.whole {
        if let Some(cell) = found.first_mut() {
            *cell = Some(breakout(worst, std::f64::consts::PI, true));
        }
        return found;
    }
    for (cell, (from, to)) in found.iter_mut().zip(arcs.list()) {
        let centre = 0.5 * on_circle(0.5 * (from + to));
        *cell = Some(breakout(centre, 0.5 * (to - from), false));
    }
    // Widest first; of equal ones the smaller tool face first.
    found.sort_by(|a, b| {
        let key = |x: &Option<Breakout>| x.map_or((1.0, 0.0), |x| (-(x.width.si() * 1e10).round(), x.centre.si()));
        let (a, b) = (key(a), key(b));
        a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1))
    });
    found
}

impl FailingArcs {
    /// The arcs, widest first; each repeats at +180°.
    pub fn arcs(&self) -> Vec<Breakout> {
        self.outcome.list().collect()
    }

    /// The widest arc, if anything fails.
    pub fn widest(&self) -> Option<Breakout> {
        self.outcome.widest()
    }

    /// Whether the whole wall fails.
    pub fn whole_wall(&self) -> bool {
        self.widest().is_some_and(|arc| arc.whole_wall)
    }

    /// How much more the worst place of the wall bears, in the measure of the criterion (Mohr–Coulomb:
    /// UCS + q σ3' − σ1'); negative: it fails there.
    pub fn least_margin(&self) -> Pressure {
        self.outcome.least_margin
    }

    /// The pressure in the hole.
    pub fn pressure(&self) -> Pressure {
        self.inputs.pressure
    }
}

/// Edges, places and margins of arcs by the second route.
pub(crate) fn check_arcs(route: &ByVectors, pressure: f64, outcome: &ArcsOutcome) -> Vec<Check> {
    use std::f64::consts::PI;
    let size = route.size() + pressure.abs();
    let unit = size * 1e-6;
    let mut checks = vec![Check::compare(
        "margin at the worst place by eigenvalues of the whole tensor, looking all round",
        &[outcome.least_margin.in_mpa()],
        &[-route.worst(pressure) * 1e-6],
        unit * 1e-9,
        "MPa",
    )];
    if let Some(worst) = outcome.worst {
        let there = route.excess(worst.si(), pressure);
        checks.push(Check::compare(
            "margin at the tool face of the worst place",
            &[outcome.least_margin.in_mpa()],
            &[-there * 1e-6],
            unit * 1e-9,
            "MPa",
        ));
        checks.push(Check::holds("that tool face within 0–180°", outside(worst.si()), 0.0, "rad"));
    }
    let arcs: Vec<&Breakout> = outcome.arcs.iter().flatten().collect();
    let mut edges = Vec::new();
    let mut sides = 0.0_f64;
    for arc in &arcs {
        let (centre, half) = (arc.centre.si(), 0.5 * arc.width.si());
        sides = sides.max(outside(centre)).max(half - 0.5 * PI);
        if arc.whole_wall {
            checks.push(Check::compare("width of a wall that fails all round", &[arc.width.si()], &[PI], 1e-12, "rad"));
        } else {
            edges.extend([centre - half, centre + half].map(|edge| route.excess(edge, pressure) * 1e-6));
            // Inside and outside by a share of the arc and of the gap, at most a thousandth of a degree.
            for side in [-1.0, 1.0] {
                let edge = centre + side * half;
                let gaps = arcs.iter().map(|other| {
                    let near_edge = other.centre.si() - side * 0.5 * other.width.si();
                    (side * (near_edge - edge)).rem_euclid(PI)
                });
                let nudge = |room: f64| side * (0.1 * room).min(1.75e-5);
                sides = sides.max(-route.excess(edge - nudge(half), pressure) * 1e-6);
                sides = sides.max(route.excess(edge + nudge(gaps.fold(PI, f64::min)), pressure) * 1e-6);
            }
        }
        if let Some(bearing) = arc.bearing {
            checks.push(bearing_check(route.direction(centre), bearing));
        }
    }
    if !edges.is_empty() {
        checks.push(Check::compare(
            "margin at the edges of the arcs is zero",
            &edges,
            &vec![0.0; edges.len()],
            unit * 1e-9,
            "MPa",
        ));
    }
    checks.push(Check::holds("fails just inside each edge and holds just outside", sides, unit * 1e-9, "MPa"));
    let listed = |theta: f64| {
        arcs.iter().any(|arc| {
            let off = (theta - arc.centre.si()).rem_euclid(PI);
            arc.whole_wall || off.min(PI - off) < 0.5 * arc.width.si()
        })
    };
    // A place may stand in the wrong list only where its margin is rounding.
    let wrong = (0..360_u32).map(|k| f64::from(k) * PI / 360.0).fold(0.0_f64, |wrong, theta| {
        let excess = route.excess(theta, pressure) * 1e-6;
        if (excess > 0.0) == listed(theta) { wrong } else { wrong.max(excess.abs()) }
    });
    checks.push(Check::holds(
        "every half degree of the wall fails where an arc is and holds elsewhere",
        wrong,
        unit * 1e-9,
        "MPa",
    ));
    checks
}

impl Explain for FailingArcs {
    const KIND: &'static str = "failing-arcs";
    type Inputs = AtPressure;
    type Outcome = ArcsOutcome;

    fn compute(inputs: AtPressure) -> Result<Self> {
        Wall::of(inputs.wall)?.failing_arcs(inputs.pressure)
    }
    fn inputs(&self) -> AtPressure {
        self.inputs
    }
    fn outcome(&self) -> ArcsOutcome {
        self.outcome
    }
    fn check(inputs: &AtPressure, outcome: &ArcsOutcome) -> Vec<Check> {
        ByVectors::new(&inputs.wall).map_or_else(Vec::new, |route| check_arcs(&route, inputs.pressure.si(), outcome))
    }

    fn explain(&self) -> Explanation {
        let (p, attitude) = (self.inputs.pressure, self.wall.attitude);
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(p));
        let mut results = vec![Item::computed("m", method::margin_name(&self.wall), self.outcome.least_margin)];
        for (arc, n) in self.arcs().into_iter().zip(1..) {
            results.extend(direction::items(attitude, &format!("the middle of arc {n}"), &n.to_string(), arc.centre));
            results.push(Item::computed(&format!("w_{n}"), format!("width of arc {n}"), arc.width));
        }
        let mut steps = self.wall.strength().steps();
        if let Some(table) = self.table() {
            steps.push(Step::Table { table });
        }
        let place = match (self.widest(), self.outcome.worst) {
            (Some(arc), _) if !arc.whole_wall => {
                let edge = arc.centre.si() + 0.5 * arc.width.si();
                steps.push(Step::words("At the edge of the widest arc the criterion is just met:".to_owned()));
                edge
            }
            (_, Some(worst)) => {
                steps.push(Step::words("At the worst place:".to_owned()));
                worst.si()
            }
            _ => {
                steps.push(Step::words("All places of the wall are alike:".to_owned()));
                0.0
            }
        };
        steps.extend(method::worked(&self.wall, place, p.si()));
        steps.extend(method::worked_strength(&self.wall, place, p.si()));
        let mut method = method::with_strength(
            &self.wall,
            "Where the wall's effective principal stresses exceed the strength. The edges are the roots of the criterion along the wall.",
        );
        method.references.push(Reference::new(
            "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, ch. 6 (breakouts as arcs of the wall beyond strength)",
        ));
        let mut notes = method::notes(&self.wall);
        notes.push(
            "Each arc stands for two: the same fails on the far side of the hole, 180° of tool face away.".to_owned(),
        );
        Explanation {
            title: format!("Failing arcs of the wall of {} at {}", self.wall.place(), with_typed_unit(p)),
            headline: self.headline(),
            inputs,
            results,
            method,
            steps,
            notes,
            topics: self.wall.topics(&["wall", "breakout", "elastic"]),
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

impl FailingArcs {
    fn headline(&self) -> String {
        match self.widest() {
            None => format!("nothing fails in shear; margin {} at the worst place", self.outcome.least_margin),
            Some(arc) if arc.whole_wall => "the whole wall fails in shear".to_owned(),
            Some(arc) => format!(
                "an arc {} wide fails in shear, middle at tool face {} and at +180°",
                arc.width,
                direction::words(self.wall.attitude, arc.centre)
            ),
        }
    }

    fn table(&self) -> Option<Table> {
        let arcs = self.arcs();
        (!arcs.is_empty()).then(|| Table {
            caption: "Arcs that fail in shear, widest first; each repeats at +180° of tool face".to_owned(),
            columns: vec![
                Column::text("arc"),
                Column::number("middle, tool face", "°"),
                Column::number("middle, bearing", "°"),
                Column::number("from", "°"),
                Column::number("to", "°"),
                Column::number("width", "°"),
                Column::text("mode at its middle"),
            ],
            rows: arcs
                .iter()
                .zip(1..)
                .map(|(arc, n)| {
                    let (centre, half) = (arc.centre.in_deg(), 0.5 * arc.width.in_deg());
                    vec![
                        if arc.whole_wall { "whole wall".to_owned() } else { n.to_string() },
                        fixed(centre, 1),
                        direction::bearing_cell(self.wall.attitude, arc.centre),
                        fixed(centre - half, 2),
                        fixed(centre + half, 2),
                        fixed(2.0 * half, 2),
                        arc.words(),
                    ]
                })
                .collect(),
        })
    }
}
