//! Stress and strength against the distance from a hole, at one tool face.

use serde::{Deserialize, Serialize};

use super::field_at::on_axes;
use super::field_method;
use super::rock_round::RockRound;
use crate::card::{Axis, Card, Check, Column, Explain, Explanation, Figure, Item, Layer, Role, Step, Table};
use crate::error::Result;
use crate::units::{Angle, Pressure, Quantity, as_typed, fixed, with_typed_unit};
use crate::well::wall::second_route::{ByPotentials, ByVectors, bearing_check};
use crate::well::wall::setup::WallSetup;
use crate::well::wall::{Wall, direction, method, pressure_item};

/// Distances of the table, in hole radii.
const RATIOS: [f64; 10] = [1.0, 1.05, 1.1, 1.25, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0];

/// The stresses against the distance from the hole's axis, 1–5 radii, at one tool face.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RadialProfile {
    wall: Wall,
    inputs: AlongRadius,
    outcome: ProfileOutcome,
}

/// The inputs of a radial profile.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AlongRadius {
    wall: WallSetup,
    pressure: Pressure,
    toolface: Angle,
}

/// What came out, in Pa and radians.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ProfileOutcome {
    /// σr, σθ, σz, τrθ, τθz, τrz (total), and by how much the rock, or the plane of weakness, bears
    /// more, at 1, 1.05, 1.1, 1.25, 1.5, 2, 2.5, 3, 4 and 5 radii.
    places: [[Pressure; 7]; RATIOS.len()],
    bearing: Option<Angle>,
}

impl Wall {
    /// Stresses and margin against the distance from the hole's axis at one tool face, with a figure.
    ///
    /// # Errors
    /// When a number is not finite, or the pore pressure or the temperature away from the wall is not
    /// known: the wall lets fluid pass, or is cooled or warmed.
    pub fn radial_profile(&self, pressure: Pressure, toolface: Angle) -> Result<RadialProfile> {
        pressure.finite("wall pressure")?;
        toolface.finite("tool face")?;
        self.known_off_the_wall()?;
        let rock = self.rock_round(pressure.si());
        let theta = toolface.si();
        let places = RATIOS.map(|ratio| {
            let u = ratio.powi(-2);
            let [a, b, c, d, e, f] = rock.at(theta, u).tensor().0;
            [a, b, c, d, e, f, -rock.excess(theta, u)].map(Pressure::from_si)
        });
        let outcome = ProfileOutcome { places, bearing: direction::bearing(self.attitude, theta) };
        Ok(RadialProfile { wall: *self, inputs: AlongRadius { wall: self.setup, pressure, toolface }, outcome })
    }
}

impl RadialProfile {
    /// Distance from the hole's axis in hole radii, with the radial, hoop and axial stress (total) there
    /// and the margin of the rock, in the measure of its criterion (on the plane of weakness, where that
    /// is less).
    pub fn places(&self) -> Vec<(f64, [Pressure; 4])> {
        let places = RATIOS.iter().zip(&self.outcome.places);
        places.map(|(ratio, [radial, hoop, axial, .., margin])| (*ratio, [*radial, *hoop, *axial, *margin])).collect()
    }

    fn rock(&self) -> RockRound {
        self.wall.rock_round(self.inputs.pressure.si())
    }

    /// Failing stretches along this radius, in radii from the hole's axis: from, to.
    fn failing(&self) -> Vec<(f64, f64)> {
        let ray = self.rock().ray(self.inputs.toolface.si());
        ray.failing.iter().rev().map(|(far, near)| (near.powf(-0.5), far.powf(-0.5))).collect()
    }
}

impl Explain for RadialProfile {
    const KIND: &'static str = "radial-profile";
    type Inputs = AlongRadius;
    type Outcome = ProfileOutcome;

    fn compute(inputs: AlongRadius) -> Result<Self> {
        Wall::of(inputs.wall)?.radial_profile(inputs.pressure, inputs.toolface)
    }
    fn inputs(&self) -> AlongRadius {
        self.inputs
    }
    fn outcome(&self) -> ProfileOutcome {
        self.outcome
    }

    fn check(inputs: &AlongRadius, outcome: &ProfileOutcome) -> Vec<Check> {
        let (Some(vectors), Some(route)) = (ByVectors::new(&inputs.wall), ByPotentials::new(&inputs.wall)) else {
            return Vec::new();
        };
        let Ok(wall) = Wall::of(inputs.wall) else { return Vec::new() };
        let (theta, pressure) = (inputs.toolface.si(), inputs.pressure.si());
        let unit = (vectors.size() + pressure.abs()) * 1e-6;
        let axes = route.place(theta);
        let (mut got, mut other, mut margins, mut others) = (Vec::new(), Vec::new(), Vec::new(), Vec::new());
        for (ratio, [six @ .., margin]) in RATIOS.iter().zip(&outcome.places) {
            got.extend(six.map(Pressure::in_mpa));
            other.extend(on_axes(route.tensor(theta, *ratio, pressure), &axes));
            margins.push(margin.in_mpa());
            others.push(-route.excess(theta, *ratio, pressure) * 1e-6);
        }
        let mut checks = vec![
            Check::compare(
                "stresses of the table by complex potentials across the hole, in north, east, down",
                &got,
                &other,
                unit * 1e-11,
                "MPa",
            ),
            Check::compare("margins by the whole tensor in north, east, down", &margins, &others, unit * 1e-9, "MPa"),
            field_method::far_check(&wall, &vectors, theta, pressure),
        ];
        if let Some(bearing) = outcome.bearing {
            checks.push(bearing_check(vectors.direction(theta), bearing));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let AlongRadius { pressure, toolface, .. } = self.inputs;
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(pressure));
        inputs.push(Item::typed("θ", "tool face looked at", toolface).chosen());
        let [wall_place, ..] = self.outcome.places;
        let mut results = Vec::new();
        for (ratio, [radial, hoop, axial, .., margin]) in RATIOS.iter().zip(&self.outcome.places) {
            if ![1.0, 1.5, 2.0].contains(ratio) {
                continue;
            }
            let (k, at) = (as_typed(*ratio), format!("at {} radii", as_typed(*ratio)));
            results.push(Item::computed(&format!("σ_r({k})"), format!("radial stress {at}, total"), *radial));
            results.push(Item::computed(&format!("σ_θ({k})"), format!("hoop stress {at}, total"), *hoop));
            results.push(Item::computed(&format!("σ_z({k})"), format!("axial stress {at}, total"), *axial));
            results.push(Item::computed(&format!("m({k})"), format!("margin {at}"), *margin));
        }
        if let Some(bearing) = self.outcome.bearing {
            results.push(crate::frames::bearing_item("β", "bearing of the tool face", bearing));
        }
        let mut steps = vec![
            Step::matrix(
                "S'",
                &self.wall.setup.inputs.stress.rows_in_mpa(),
                4,
                "MPa",
                "top of hole, right, along the hole",
            ),
            Step::words("At 1.5 radii:"),
        ];
        steps.extend(field_method::worked(&self.wall, toolface.si(), pressure.si(), 1.5));
        let [_, _, _, _, at, ..] = RATIOS.map(|ratio| self.rock().effective(toolface.si(), ratio.powi(-2)));
        steps.extend(self.wall.strength().worked(at));
        steps.push(Step::Table { table: self.table() });
        let mut notes = method::notes(&self.wall);
        notes.push(format!("Along this radius {}.", self.failing_words()));
        Explanation {
            title: format!(
                "Stress against the distance from {} at tool face {}, {}",
                self.wall.place(),
                with_typed_unit(toolface),
                with_typed_unit(pressure)
            ),
            headline: format!(
                "hoop stress {} at the wall, {} at 1.5 and {} at 5 radii (total), tool face {}; {}",
                wall_place[1],
                self.outcome.places[4][1],
                self.outcome.places[9][1],
                direction::words(self.wall.attitude, toolface),
                self.failing_words()
            ),
            inputs,
            results,
            method: field_method::with_strength(
                &self.wall,
                "The whole elastic field along one radius of the hole, and what the rock bears there.",
            ),
            steps,
            figures: vec![self.figure()],
            notes,
            topics: self.wall.topics(&["wall", "elastic"]),
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

impl RadialProfile {
    fn failing_words(&self) -> String {
        let failing = self.failing();
        if failing.is_empty() {
            return "nothing is beyond the strength".to_owned();
        }
        let stretches: Vec<String> = failing
            .iter()
            .map(|(from, to)| match (*from <= 1.0, to.is_finite()) {
                (true, true) => format!("from the wall to {} radii", fixed(*to, 3)),
                (true, false) => "at every distance".to_owned(),
                (false, true) => format!("from {} to {} radii", fixed(*from, 3), fixed(*to, 3)),
                (false, false) => format!("from {} radii on", fixed(*from, 3)),
            })
            .collect();
        format!("the stress is beyond the strength {}", stretches.join(" and "))
    }

    fn table(&self) -> Table {
        let pore = self.wall.pore();
        let cell = |p: Pressure| fixed(p.in_mpa(), 2);
        let rock = self.rock();
        let row = |(ratio, place): (&f64, &[Pressure; 7])| {
            let [radial, hoop, axial, rt, tz, rz, margin] = *place;
            let [s1, _, s3] = rock.effective(self.inputs.toolface.si(), ratio.powi(-2));
            let mut cells = vec![as_typed(*ratio)];
            cells.extend([radial - pore, hoop - pore, axial - pore, rt, tz, rz].map(cell));
            cells.extend([fixed(s1 * 1e-6, 2), fixed(s3 * 1e-6, 2), cell(margin)]);
            cells
        };
        Table {
            caption: "Against the distance from the hole's axis, effective stresses (total less P_p)".to_owned(),
            columns: [
                ("r/R", ""),
                ("σ'_r", "MPa"),
                ("σ'_θ", "MPa"),
                ("σ'_z", "MPa"),
                ("τ_rθ", "MPa"),
                ("τ_θz", "MPa"),
                ("τ_rz", "MPa"),
                ("σ'_1", "MPa"),
                ("σ'_3", "MPa"),
                ("margin", "MPa"),
            ]
            .map(|(heading, unit)| Column::number(heading, unit))
            .to_vec(),
            rows: RATIOS.iter().zip(&self.outcome.places).map(row).collect(),
        }
    }

    fn figure(&self) -> Figure {
        let (rock, theta, pore) = (self.rock(), self.inputs.toolface.si(), self.wall.shear.pore);
        // Closer together near the wall, where the stress changes fast.
        let places = || (0..=100).map(|k| 1.0 + 4.0 * (f64::from(k) / 100.0).powi(2));
        let curve = |f: &dyn Fn(f64) -> f64| -> Vec<[f64; 2]> {
            places().map(|ratio| [ratio, f(ratio.powi(-2)) * 1e-6]).collect()
        };
        let radial = curve(&|u| rock.at(theta, u).radial - pore);
        let hoop = curve(&|u| rock.at(theta, u).hoop - pore);
        let axial = curve(&|u| rock.at(theta, u).axial - pore);
        let largest = curve(&|u| rock.effective(theta, u)[0]);
        let bears = curve(&|u| rock.bears(theta, u));
        let all = || [&radial, &hoop, &axial, &largest, &bears].into_iter().flatten().map(|p| p[1]);
        let (low, high) = (all().fold(0.0, f64::min), all().fold(f64::NEG_INFINITY, f64::max));
        let room = 0.06 * (high - low).max(1.0);
        let mut layers: Vec<Layer> = self
            .failing()
            .into_iter()
            .filter(|(from, _)| *from < 5.0)
            .map(|(from, to)| Layer::ColumnBand {
                label: "fails".to_owned(),
                role: Role::Failing,
                from,
                to: to.min(5.0),
            })
            .collect();
        layers.extend([
            Layer::line("σ'_r", Role::Quiet, radial),
            Layer::line("σ'_z", Role::Second, axial),
            Layer::line("σ'_θ", Role::First, hoop),
            Layer::line("σ'_1", Role::Third, largest),
            Layer::line("strength", Role::Limit, bears),
        ]);
        let pore = self.wall.pore();
        let [_, hoop_at_wall, ..] = self.outcome.places[0];
        let [_, hoop_far, ..] = self.outcome.places[9];
        Figure {
            caption: format!(
                "Effective hoop (σ'_θ), axial (σ'_z) and radial (σ'_r) stress and the largest principal stress σ'_1 against the distance from the hole's axis at tool face {}, {} in the hole, with the σ'_1 the rock bears there{}.",
                direction::words(self.wall.attitude, self.inputs.toolface),
                with_typed_unit(self.inputs.pressure),
                if self.wall.setup.weak_plane.is_some() {
                    " (the plane of weakness may slip below it); where either fails is shaded"
                } else {
                    "; where it is exceeded is shaded"
                }
            ),
            alt: format!(
                "Stress curves from the wall (1 radius) to 5 radii. Effective hoop stress {} at the wall and {} at 5 radii; {}.",
                hoop_at_wall - pore,
                hoop_far - pore,
                self.failing_words()
            ),
            x: Axis::new("distance from the hole's axis (hole radii)", 1.0, 5.0).ticks_every(0.5),
            y: Axis::new("effective stress (MPa)", low - room, high + room),
            equal_scale: false,
            layers,
        }
    }
}
