//! The stress at any tool face and distance from a hole.

use serde::{Deserialize, Serialize};

use super::field_method;
use crate::card::{Card, Check, Explain, Explanation, Item, Step};
use crate::error::{Error, Result};
use crate::frames::vector::transpose;
use crate::stress::tensor::Tensor;
use crate::stress::{EffectiveStress, Made, Stress};
use crate::units::{Angle, Pressure, Quantity, as_typed, with_typed_unit};
use crate::well::wall::elastic::AtPlace;
use crate::well::wall::second_route::{ByPotentials, ByVectors, bearing_check};
use crate::well::wall::setup::WallSetup;
use crate::well::wall::{Wall, direction, method, pressure_item};

/// The total stress at a tool face and a distance from the hole's axis, in the hole's cylindrical axes:
/// across (radial), around (hoop), along (axial).
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct FieldStress {
    /// σr, across: the pressure in the hole at its wall.
    pub radial: Pressure,
    /// σθ, around the hole.
    pub hoop: Pressure,
    /// σz, along the hole.
    pub axial: Pressure,
    /// τrθ; none at the wall.
    pub radial_hoop: Pressure,
    /// τθz; it changes its sign on the far side of the hole.
    pub hoop_axial: Pressure,
    /// τrz; none at the wall; it changes its sign on the far side of the hole.
    pub radial_axial: Pressure,
    /// The effective principal stresses for failure (total − pore pressure).
    pub effective: EffectiveStress,
    /// How much more the rock bears here, in the measure of its criterion; negative: the stress is
    /// beyond it.
    pub margin: Pressure,
    /// c_w + σn' tan φ_w − τ on the plane of weakness here; `None` where there is none.
    pub weak_plane_margin: Option<Pressure>,
    /// The compass bearing of the tool face, `None` where it points straight up or down.
    pub bearing: Option<Angle>,
    wall: Wall,
    inputs: AtDistance,
}

/// The inputs of a stress in the field.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AtDistance {
    wall: WallSetup,
    pressure: Pressure,
    toolface: Angle,
    /// Distance from the hole's axis in hole radii.
    radius_ratio: f64,
}

/// What came out, in Pa and radians.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AtDistanceOutcome {
    /// σr, σθ, σz, τrθ, τθz, τrz.
    stress: [Pressure; 6],
    effective: [Pressure; 3],
    margin: Pressure,
    weak_plane_margin: Option<Pressure>,
    bearing: Option<Angle>,
}

impl Wall {
    /// The stress at a tool face and a distance from the hole's axis in hole radii (1 at the wall), at
    /// a pressure in the hole: the whole elastic field (Hiramatsu and Oka 1962).
    ///
    /// # Errors
    /// When a number is not finite, the distance is less than 1 radius, or it is more and the pore
    /// pressure or temperature there is not known: the wall lets fluid pass, or is cooled or warmed.
    pub fn field_at(&self, pressure: Pressure, toolface: Angle, radius_ratio: f64) -> Result<FieldStress> {
        pressure.finite("wall pressure")?;
        toolface.finite("tool face")?;
        if !(radius_ratio.is_finite() && radius_ratio >= 1.0) {
            return Err(Error::out_of_range(
                "distance from the hole's axis, in hole radii,",
                as_typed(radius_ratio),
                "finite and at least 1 (the wall)",
            ));
        }
        if radius_ratio > 1.0 {
            self.known_off_the_wall()?;
        }
        let (theta, p) = (toolface.si(), pressure.si());
        let at = self.place_in_field(theta, p, radius_ratio);
        // At the wall what seeps or warms counts, and is known.
        let behind = if radius_ratio > 1.0 { self.shear.pore } else { self.shear.pore_behind(p) };
        let effective = EffectiveStress::of(at.tensor(), Pressure::from_si(behind));
        let weak_plane_margin = if radius_ratio > 1.0 {
            self.rock_round(p).slip(theta, radius_ratio.powi(-2)).map(|slip| Pressure::from_si(-slip))
        } else {
            method::on_weak_plane(self, theta, p).map(|plane| Pressure::from_si(plane.margin))
        };
        Ok(FieldStress {
            radial: Pressure::from_si(at.radial),
            hoop: Pressure::from_si(at.hoop),
            axial: Pressure::from_si(at.axial),
            radial_hoop: Pressure::from_si(at.radial_hoop),
            hoop_axial: Pressure::from_si(at.hoop_axial),
            radial_axial: Pressure::from_si(at.radial_axial),
            effective,
            margin: Pressure::from_si(-self.shear.law.excess(effective.principal().map(Pressure::si))),
            weak_plane_margin,
            bearing: direction::bearing(self.attitude, theta),
            wall: *self,
            inputs: AtDistance { wall: self.setup, pressure, toolface, radius_ratio },
        })
    }

    fn place_in_field(&self, theta: f64, pressure: f64, ratio: f64) -> AtPlace {
        if ratio > 1.0 {
            return self.elastic_field().at(theta, ratio.powi(-2), pressure);
        }
        let at = self.shear.at(theta, pressure);
        AtPlace { radial: at.radial, hoop: at.hoop, axial: at.axial, hoop_axial: at.shear, ..AtPlace::default() }
    }
}

impl FieldStress {
    /// The tool face, as it was given.
    pub fn toolface(&self) -> Angle {
        self.inputs.toolface
    }

    /// The distance from the hole's axis in hole radii, as it was given.
    pub fn radius_ratio(&self) -> f64 {
        self.inputs.radius_ratio
    }

    /// The total stress in north, east, down.
    pub fn in_geographic(&self) -> Stress {
        let q = self.wall.attitude.matrix().unwrap_or_default();
        let (s, c) = self.inputs.toolface.si().sin_cos();
        let to_hole = self.tensor().turned(&[[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]]);
        Stress::of(to_hole.turned(&transpose(&q)), Made::Combined { parts: None }, None)
    }

    fn tensor(&self) -> Tensor {
        Tensor(self.six().map(Pressure::si))
    }

    fn six(&self) -> [Pressure; 6] {
        [self.radial, self.hoop, self.axial, self.radial_hoop, self.hoop_axial, self.radial_axial]
    }
}

/// σr, σθ, σz, τrθ, τθz, τrz of a tensor in north, east, down, on a place's axes; MPa.
pub(super) fn on_axes(tensor: Tensor, axes: &[[f64; 3]; 3]) -> [f64; 6] {
    tensor.turned(axes).0.map(|c| c * 1e-6)
}

impl Explain for FieldStress {
    const KIND: &'static str = "field-stress";
    type Inputs = AtDistance;
    type Outcome = AtDistanceOutcome;

    fn compute(inputs: AtDistance) -> Result<Self> {
        Wall::of(inputs.wall)?.field_at(inputs.pressure, inputs.toolface, inputs.radius_ratio)
    }
    fn inputs(&self) -> AtDistance {
        self.inputs
    }
    fn outcome(&self) -> AtDistanceOutcome {
        AtDistanceOutcome {
            stress: self.six(),
            effective: self.effective.principal(),
            margin: self.margin,
            weak_plane_margin: self.weak_plane_margin,
            bearing: self.bearing,
        }
    }

    /// By complex potentials across the hole; by axis vectors; the far field back at 50 radii;
    /// principal values, margins and bearing in north, east, down.
    fn check(inputs: &AtDistance, outcome: &AtDistanceOutcome) -> Vec<Check> {
        let (Some(vectors), Some(route)) = (ByVectors::new(&inputs.wall), ByPotentials::new(&inputs.wall)) else {
            return Vec::new();
        };
        let Ok(wall) = Wall::of(inputs.wall) else { return Vec::new() };
        let (theta, pressure, ratio) = (inputs.toolface.si(), inputs.pressure.si(), inputs.radius_ratio);
        let unit = (vectors.size() + pressure.abs()) * 1e-6;
        let at_wall = ratio <= 1.0;
        let axes = route.place(theta);
        let added = if at_wall { vectors.added(pressure) } else { 0.0 };
        let total = route.tensor(theta, ratio, pressure).add(Tensor::from_axes([0.0, added, added], &axes));
        let got = outcome.stress.map(Pressure::in_mpa);
        let mut checks = vec![
            Check::compare(
                "the six stresses by complex potentials in x and y across the hole, resolved on the place's axes",
                &got,
                &on_axes(total, &axes),
                unit * 1e-11,
                "MPa",
            ),
            Check::compare(
                "the stress put back into north, east, down against the whole field by the hole's axis vectors",
                &Tensor(got).turned(&transpose(&axes)).0,
                &vectors.field(theta, ratio, pressure).add(Tensor::from_axes([0.0, added, added], &axes)).scale(1e-6).0,
                unit * 1e-11,
                "MPa",
            ),
            field_method::far_check(&wall, &vectors, theta, pressure),
        ];
        if at_wall {
            let [radial, hoop, axial, shear] = vectors.parts(theta, pressure).map(|v| v * 1e-6);
            checks.push(Check::compare(
                "at one radius the wall's own stresses, and no shear across it",
                &got,
                &[radial, hoop, axial, 0.0, shear, 0.0],
                unit * 1e-11,
                "MPa",
            ));
        }
        let pore = if at_wall { vectors.pore_behind(pressure) } else { inputs.wall.inputs.pore.si() };
        let effective = total.add(Tensor([-pore, -pore, -pore, 0.0, 0.0, 0.0]));
        checks.push(Check::compare(
            "effective principal stresses by the eigenvalues of the whole tensor in north, east, down",
            &outcome.effective.map(Pressure::in_mpa),
            &effective.eigen().values.map(|v| v * 1e-6),
            unit * 1e-11,
            "MPa",
        ));
        checks.push(Check::compare(
            "margin of the rock by the whole tensor in north, east, down",
            &[outcome.margin.in_mpa()],
            &[-inputs.wall.inputs.rock.strength.excess_by_tensor(effective) * 1e-6],
            unit * 1e-9,
            "MPa",
        ));
        let slip = if at_wall { vectors.slip(theta, pressure) } else { route.slip(total) };
        if let (Some(margin), Some(slip)) = (outcome.weak_plane_margin, slip) {
            checks.push(Check::compare(
                "margin on the plane of weakness from its traction in north, east, down",
                &[margin.in_mpa()],
                &[-slip * 1e-6],
                unit * 1e-11,
                "MPa",
            ));
        }
        if let Some(bearing) = outcome.bearing {
            checks.push(bearing_check(vectors.direction(theta), bearing));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let AtDistance { pressure, toolface, radius_ratio, .. } = self.inputs;
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(pressure));
        inputs.push(Item::typed("θ", "tool face looked at", toolface).chosen());
        inputs.push(field_method::ratio_item(radius_ratio));
        let mut results: Vec<Item> = [
            ("σ_r", "radial stress, total"),
            ("σ_θ", "hoop stress, total"),
            ("σ_z", "axial stress, total"),
            ("τ_rθ", "shear stress across and around"),
            ("τ_θz", "shear stress around and along"),
            ("τ_rz", "shear stress across and along"),
        ]
        .into_iter()
        .zip(self.six())
        .map(|((symbol, name), value)| Item::computed(symbol, name, value))
        .collect();
        for (value, n) in self.effective.principal().into_iter().zip(1..) {
            results.push(Item::computed(&format!("σ_{n}'"), format!("effective principal stress {n}"), value));
        }
        let margin = format!("margin {} of the rock here", self.wall.strength().margin_words());
        results.push(Item::computed("m", margin, self.margin));
        if let Some(margin) = self.weak_plane_margin {
            results.push(Item::computed("m_w", "margin c_w + σ'_n tan φ_w − τ on the plane of weakness", margin));
        }
        if let Some(bearing) = self.bearing {
            results.push(crate::frames::bearing_item("β", "bearing of the tool face", bearing));
        }
        let mut steps = vec![Step::matrix(
            "S'",
            &self.wall.setup.inputs.stress.rows_in_mpa(),
            4,
            "MPa",
            "top of hole, right, along the hole",
        )];
        if radius_ratio > 1.0 {
            steps.extend(field_method::worked(&self.wall, toolface.si(), pressure.si(), radius_ratio));
            steps.extend(self.wall.strength().worked(self.effective.principal().map(Pressure::si)));
        } else {
            steps.extend(method::worked(&self.wall, toolface.si(), pressure.si()));
            steps.extend(method::worked_strength(&self.wall, toolface.si(), pressure.si()));
        }
        Explanation {
            title: format!(
                "Stress round {} at tool face {}, {} radii from its axis, {}",
                self.wall.place(),
                with_typed_unit(toolface),
                as_typed(radius_ratio),
                with_typed_unit(pressure)
            ),
            headline: format!(
                "radial {}, hoop {}, axial {} (total) at {} radii from the hole's axis, tool face {}",
                self.radial,
                self.hoop,
                self.axial,
                as_typed(radius_ratio),
                direction::words(self.wall.attitude, toolface)
            ),
            inputs,
            results,
            method: field_method::with_strength(
                &self.wall,
                "The whole elastic field round the hole at one place: stress, what of it is effective, and what the rock bears.",
            ),
            steps,
            notes: method::notes(&self.wall),
            topics: self.wall.topics(&["wall", "elastic"]),
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}
