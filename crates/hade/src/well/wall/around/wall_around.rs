//! The wall all round at one pressure: stresses, strength and failing arcs against tool face.

use super::envelope_points;
use serde::{Deserialize, Serialize};

use super::breakout::{ArcsOutcome, check_arcs};
use crate::card::{Axis, Card, Check, Column, Explain, Explanation, Figure, Item, Layer, Role, Step, Table};
use crate::error::Result;
use crate::units::{Angle, Pressure, Quantity, fixed, with_typed_unit};
use crate::well::wall::round::on_circle;
use crate::well::wall::second_route::{ByVectors, bearing_check, outside};
use crate::well::wall::{AtPressure, Wall, direction, method, pressure_item};

/// Places of the table: every 15° of tool face up to 180°, where everything repeats (τθz with the
/// other sign).
const PLACES: usize = 12;

/// The wall all round at one pressure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WallAround {
    wall: Wall,
    inputs: AtPressure,
    outcome: AroundOutcome,
}

/// What came out, in Pa and radians.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AroundOutcome {
    /// Hoop, axial and shear stress (total) at 0°, 15° … 165° of tool face.
    places: [[Pressure; 3]; PLACES],
    most_hoop: Pressure,
    least_hoop: Pressure,
    /// The tool face of the largest hoop stress; `None` where it is the same all round.
    most_hoop_at: Option<Angle>,
    most_hoop_bearing: Option<Angle>,
    arcs: ArcsOutcome,
}

impl Wall {
    /// The wall all round at a pressure, with its figure.
    ///
    /// # Errors
    /// When the pressure is not a finite number.
    pub fn around(&self, pressure: Pressure) -> Result<WallAround> {
        let inputs = self.at_pressure(pressure)?;
        let mut places = [[Pressure::default(); 3]; PLACES];
        for (k, place) in places.iter_mut().enumerate() {
            let at = self.shear.at(toolface(k), pressure.si());
            *place = [at.hoop, at.axial, at.shear].map(Pressure::from_si);
        }
        let hoop = self.shear.kirsch.hoop;
        // What the pressure takes off, and seepage adds, all round alike.
        let shift = self.shear.at(0.0, pressure.si()).hoop - hoop.at(1.0, 0.0);
        let swing = hoop.amplitude();
        let most_hoop_at =
            (swing > 1e-11 * self.shear.scale()).then(|| Angle::from_si(0.5 * on_circle(hoop.sin.atan2(hoop.cos))));
        let outcome = AroundOutcome {
            places,
            most_hoop: Pressure::from_si(hoop.mean + swing + shift),
            least_hoop: Pressure::from_si(hoop.mean - swing + shift),
            most_hoop_at,
            most_hoop_bearing: most_hoop_at.and_then(|t| direction::bearing(self.attitude, t.si())),
            arcs: self.arcs_outcome(pressure),
        };
        Ok(WallAround { wall: *self, inputs, outcome })
    }
}

fn toolface(k: usize) -> f64 {
    k as f64 * std::f64::consts::PI / PLACES as f64
}

impl WallAround {
    /// The largest hoop stress (total) of the wall.
    pub fn most_hoop(&self) -> Pressure {
        self.outcome.most_hoop
    }
    /// The smallest hoop stress (total) of the wall.
    pub fn least_hoop(&self) -> Pressure {
        self.outcome.least_hoop
    }
    /// The tool face of the largest hoop stress, 0–180° (it repeats at +180°); `None` where the hoop
    /// stress is the same all round.
    pub fn most_hoop_at(&self) -> Option<Angle> {
        self.outcome.most_hoop_at
    }
}

impl Explain for WallAround {
    const KIND: &'static str = "wall-around";
    type Inputs = AtPressure;
    type Outcome = AroundOutcome;

    fn compute(inputs: AtPressure) -> Result<Self> {
        Wall::of(inputs.wall)?.around(inputs.pressure)
    }
    fn inputs(&self) -> AtPressure {
        self.inputs
    }
    fn outcome(&self) -> AroundOutcome {
        self.outcome
    }

    fn check(inputs: &AtPressure, outcome: &AroundOutcome) -> Vec<Check> {
        let Some(route) = ByVectors::new(&inputs.wall) else { return Vec::new() };
        let pressure = inputs.pressure.si();
        let unit = (route.size() + pressure.abs()) * 1e-6;
        let mut got = Vec::new();
        let mut other = Vec::new();
        for (k, place) in outcome.places.iter().enumerate() {
            got.extend(place.map(Pressure::in_mpa));
            let [_, hoop, axial, shear] = route.parts(toolface(k), pressure);
            other.extend([hoop, axial, shear].map(|v| v * 1e-6));
        }
        let hoop = |theta: f64| route.parts(theta, pressure)[1] * 1e-6;
        let (most, _) = route.greatest(hoop);
        let (least, _) = route.greatest(|theta| -hoop(theta));
        let mut checks = vec![
            Check::compare(
                "stresses of the table from the geographic tensor and the hole's axis vectors",
                &got,
                &other,
                unit * 1e-11,
                "MPa",
            ),
            Check::compare(
                "largest and smallest hoop stress, looking all round",
                &[outcome.most_hoop.in_mpa(), outcome.least_hoop.in_mpa()],
                &[most, -least],
                unit * 1e-9,
                "MPa",
            ),
        ];
        if let Some(at) = outcome.most_hoop_at {
            checks.push(Check::compare(
                "hoop stress at the tool face of its peak, by vectors",
                &[hoop(at.si())],
                &[most],
                unit * 1e-9,
                "MPa",
            ));
            checks.push(Check::holds("that tool face within 0–180°", outside(at.si()), 0.0, "rad"));
        }
        if let (Some(at), Some(bearing)) = (outcome.most_hoop_at, outcome.most_hoop_bearing) {
            checks.push(bearing_check(route.direction(at.si()), bearing));
        }
        checks.extend(check_arcs(&route, pressure, &outcome.arcs));
        checks
    }

    fn explain(&self) -> Explanation {
        let (p, attitude) = (self.inputs.pressure, self.wall.attitude);
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(p));
        let mut results = vec![
            Item::computed("σ_θmax", "largest hoop stress at the wall, total", self.outcome.most_hoop),
            Item::computed("σ_θmin", "smallest hoop stress at the wall, total", self.outcome.least_hoop),
            Item::computed("m", method::margin_name(&self.wall), self.outcome.arcs.least_margin()),
        ];
        if let Some(at) = self.outcome.most_hoop_at {
            results.extend(direction::items(attitude, "the largest hoop stress", "max", at));
        }
        let mut notes = method::notes(&self.wall);
        match self.outcome.arcs.widest() {
            None => notes.push("Nothing of the wall fails in shear at this pressure.".to_owned()),
            Some(arc) if arc.whole_wall => {
                notes.push("The whole wall fails in shear at this pressure.".to_owned());
            }
            Some(arc) => notes.push(format!(
                "An arc {} wide fails in shear, its middle at tool face {} and at +180°.",
                arc.width,
                direction::words(attitude, arc.centre)
            )),
        }
        let mut steps = self.wall.strength().steps();
        let place = self.outcome.most_hoop_at.unwrap_or_default();
        steps.push(Step::words("At the largest hoop stress:".to_owned()));
        steps.extend(method::worked(&self.wall, place.si(), p.si()));
        steps.extend(method::worked_strength(&self.wall, place.si(), p.si()));
        steps.push(Step::Table { table: self.table() });
        Explanation {
            title: format!("Wall of {} all round at {}", self.wall.place(), with_typed_unit(p)),
            headline: format!(
                "hoop stress {} to {} (total); margin {} at the worst place",
                self.outcome.least_hoop,
                self.outcome.most_hoop,
                self.outcome.arcs.least_margin()
            ),
            inputs,
            results,
            method: method::with_strength(
                &self.wall,
                "Stress and strength at every tool face of the wall at one pressure in the hole.",
            ),
            steps,
            figures: vec![self.figure(), envelope_points::figure(&self.wall, p.si())],
            notes,
            topics: self.wall.topics(&["wall", "breakout", "elastic"]),
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

impl WallAround {
    fn table(&self) -> Table {
        let pressure = self.inputs.pressure.si();
        let pore = Pressure::from_si(self.wall.shear.pore_behind(pressure));
        let cell = |p: Pressure| fixed(p.in_mpa(), 2);
        Table {
            caption:
                "Round the wall, effective stresses (total less the pore pressure behind the wall); from 180° on it repeats, τ_θz with the other sign"
                    .to_owned(),
            columns: vec![
                Column::number("tool face", "°"),
                Column::number("bearing", "°"),
                Column::number("hoop", "MPa"),
                Column::number("axial", "MPa"),
                Column::number("τ_θz", "MPa"),
                Column::number("σ'_1", "MPa"),
                Column::number("σ'_3", "MPa"),
                Column::number("margin", "MPa"),
            ],
            rows: self
                .outcome
                .places
                .iter()
                .enumerate()
                .map(|(k, [hoop, axial, shear])| {
                    let [s1, _, s3] = self.wall.shear.principal(toolface(k), pressure);
                    let margin = -self.wall.shear.excess_at(pressure, 2.0 * toolface(k));
                    vec![
                        fixed(toolface(k).to_degrees(), 0),
                        direction::bearing_cell(self.wall.attitude, Angle::from_si(toolface(k))),
                        cell(*hoop - pore),
                        cell(*axial - pore),
                        cell(*shear),
                        fixed(s1 * 1e-6, 2),
                        fixed(s3 * 1e-6, 2),
                        fixed(margin * 1e-6, 2),
                    ]
                })
                .collect(),
        }
    }

    fn figure(&self) -> Figure {
        let (wall, pressure) = (&self.wall, self.inputs.pressure.si());
        let pore = wall.shear.pore_behind(pressure);
        let places = || (0..=120).map(|k| f64::from(k) * 3.0);
        let curve = |f: &dyn Fn(f64) -> f64| -> Vec<[f64; 2]> {
            places().map(|degrees| [degrees, f(degrees.to_radians()) * 1e-6]).collect()
        };
        let at = |theta: f64| wall.shear.at(theta, pressure);
        let hoop = curve(&|t| at(t).hoop - pore);
        let axial = curve(&|t| at(t).axial - pore);
        let radial = curve(&|t| at(t).radial - pore);
        let largest = curve(&|t| wall.shear.principal(t, pressure)[0]);
        let bears = curve(&|t| method::bears(wall, t, pressure));
        let (mut low, mut high) = (0.0_f64, f64::NEG_INFINITY);
        for [_, y] in [&hoop, &axial, &radial, &largest, &bears].into_iter().flatten() {
            low = low.min(*y);
            high = high.max(*y);
        }
        let room = 0.06 * (high - low).max(1.0);
        let mut layers = Vec::new();
        for arc in self.outcome.arcs.list() {
            if arc.whole_wall {
                layers.push(band(0.0, 360.0, "the whole wall fails"));
                continue;
            }
            let half = 0.5 * arc.width.in_deg();
            for middle in [arc.centre.in_deg(), arc.centre.in_deg() + 180.0, arc.centre.in_deg() + 360.0] {
                // Arcs through 0° or 360° show on both ends.
                let (from, to) = ((middle - half).max(0.0), (middle + half).min(360.0));
                if to > from {
                    layers.push(band(from, to, if middle < 180.0 { "fails" } else { "" }));
                }
            }
        }
        layers.extend([
            Layer::line("σ'_r", Role::Quiet, radial),
            Layer::line("σ'_z", Role::Second, axial),
            Layer::line("σ'_θ", Role::First, hoop),
            Layer::line("σ'_1", Role::Third, largest),
            Layer::line("strength", Role::Limit, bears),
        ]);
        Figure {
            caption: format!(
                "Effective hoop (σ'_θ), axial (σ'_z) and radial (σ'_r) stress and the largest principal stress σ'_1 against tool face at {} in the hole, with the σ'_1 the rock bears there; failing arcs are shaded. {}",
                with_typed_unit(self.inputs.pressure),
                direction::reference(wall.attitude)
            ),
            alt: format!(
                "Stress curves over tool face 0 to 360°. Effective hoop stress from {} to {}; {}",
                self.outcome.least_hoop - Pressure::from_si(pore),
                self.outcome.most_hoop - Pressure::from_si(pore),
                match self.outcome.arcs.widest() {
                    None => "nothing fails in shear.".to_owned(),
                    Some(arc) if arc.whole_wall => "the whole wall fails in shear.".to_owned(),
                    Some(arc) => format!("arcs {} wide fail around tool face {} and +180°.", arc.width, arc.centre),
                }
            ),
            x: Axis::new("tool face (°)", 0.0, 360.0).ticks_every(30.0),
            y: Axis::new("effective stress (MPa)", low - room, high + room),
            equal_scale: false,
            layers,
        }
    }
}

fn band(from: f64, to: f64, label: &str) -> Layer {
    Layer::ColumnBand { label: label.to_owned(), role: Role::Failing, from, to }
}
