//! The stress at one place of the wall.

use serde::{Deserialize, Serialize};

use crate::card::{Card, Check, Explain, Explanation, Item, Step};
use crate::error::Result;
use crate::frames::{Axes, Geographic, WallAxes};
use crate::stress::{EffectiveStress, Made, Stress};
use crate::units::{Angle, Pressure, Quantity, with_typed_unit};
use crate::well::wall::second_route::{ByVectors, bearing_check};
use crate::well::wall::setup::WallSetup;
use crate::well::wall::{Wall, direction, method, pressure_item};

/// The total stress at one tool face of the wall, in wall axes, and what of it is effective.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct WallStress {
    /// σr, across the wall: the pressure in the hole.
    pub radial: Pressure,
    /// σθ, around the hole.
    pub hoop: Pressure,
    /// σz, along the hole.
    pub axial: Pressure,
    /// τθz, in the wall; it changes its sign on the far side of the hole.
    pub shear: Pressure,
    /// The effective principal stresses for failure (total − pore pressure).
    pub effective: EffectiveStress,
    /// c_w + σn' tan φ_w − τ on the plane of weakness here; `None` where the wall has none.
    weak_plane_margin: Option<Pressure>,
    /// The compass bearing of the tool face, `None` where it points straight up or down.
    pub bearing: Option<Angle>,
    wall: Wall,
    inputs: AtToolface,
}

/// The inputs of a wall stress.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AtToolface {
    wall: WallSetup,
    pressure: Pressure,
    toolface: Angle,
}

/// What came out, in Pa and radians.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AtToolfaceOutcome {
    radial: Pressure,
    hoop: Pressure,
    axial: Pressure,
    shear: Pressure,
    effective: [Pressure; 3],
    weak_plane_margin: Option<Pressure>,
    bearing: Option<Angle>,
}

impl Wall {
    /// The stress at a tool face, at a pressure in the hole.
    ///
    /// # Errors
    /// When the pressure or the tool face is not a finite number.
    pub fn stress_at(&self, pressure: Pressure, toolface: Angle) -> Result<WallStress> {
        pressure.finite("wall pressure")?;
        toolface.finite("tool face")?;
        let at = self.shear.at(toolface.si(), pressure.si());
        Ok(WallStress {
            radial: Pressure::from_si(at.radial),
            hoop: Pressure::from_si(at.hoop),
            axial: Pressure::from_si(at.axial),
            shear: Pressure::from_si(at.shear),
            effective: EffectiveStress::of(at.tensor(), Pressure::from_si(self.shear.pore_behind(pressure.si()))),
            weak_plane_margin: method::on_weak_plane(self, toolface.si(), pressure.si())
                .map(|plane| Pressure::from_si(plane.margin)),
            bearing: direction::bearing(self.attitude, toolface.si()),
            wall: *self,
            inputs: AtToolface { wall: self.setup, pressure, toolface },
        })
    }
}

impl WallStress {
    /// The tool face, as it was given.
    pub fn toolface(&self) -> Angle {
        self.inputs.toolface
    }

    /// How much more shear the plane of weakness bears here: c_w + σn' tan φ_w − τ, by the whole
    /// traction on it; negative: it slips. `None` where the wall has no such plane.
    pub fn weak_plane_margin(&self) -> Option<Pressure> {
        self.weak_plane_margin
    }

    /// The total stress in wall axes: radial, around the hole, along the hole.
    pub fn in_wall_axes(&self) -> Stress<WallAxes> {
        let at = self.wall.shear.at(self.inputs.toolface.si(), self.inputs.pressure.si());
        let axes = Axes::Wall {
            attitude: self.wall.attitude,
            name: self.wall.setup.inputs.stress.name(),
            tool_face: self.inputs.toolface,
        };
        let geographic = self.in_geographic().tensor();
        Stress::of(at.tensor(), Made::Combined { parts: None }, Some((geographic, axes)))
    }

    /// The total stress in north, east, down.
    pub fn in_geographic(&self) -> Stress<Geographic> {
        let at = self.wall.shear.at(self.inputs.toolface.si(), self.inputs.pressure.si());
        let (s, c) = self.inputs.toolface.si().sin_cos();
        // Rows: top, right and along in wall axes (radial, around, along).
        let to_hole = at.tensor().turned(&[[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]]);
        let q = self.wall.attitude.matrix().unwrap_or_default();
        let tensor = to_hole.turned(&crate::frames::vector::transpose(&q));
        Stress::of(tensor, Made::Combined { parts: None }, None)
    }
}

impl Explain for WallStress {
    const KIND: &'static str = "wall-stress";
    type Inputs = AtToolface;
    type Outcome = AtToolfaceOutcome;

    fn compute(inputs: AtToolface) -> Result<Self> {
        Wall::of(inputs.wall)?.stress_at(inputs.pressure, inputs.toolface)
    }
    fn inputs(&self) -> AtToolface {
        self.inputs
    }
    fn outcome(&self) -> AtToolfaceOutcome {
        AtToolfaceOutcome {
            radial: self.radial,
            hoop: self.hoop,
            axial: self.axial,
            shear: self.shear,
            effective: self.effective.principal(),
            weak_plane_margin: self.weak_plane_margin,
            bearing: self.bearing,
        }
    }

    /// By axis vectors and the geographic tensor; by the whole elastic field at the wall and far
    /// off; the principal values by eigenvalues of the whole tensor; the bearing as a vector.
    fn check(inputs: &AtToolface, outcome: &AtToolfaceOutcome) -> Vec<Check> {
        let Some(route) = ByVectors::new(&inputs.wall) else { return Vec::new() };
        let (theta, pressure) = (inputs.toolface.si(), inputs.pressure.si());
        let size = (route.size() + pressure.abs()) * 1e-6;
        let mpa = |c: f64| c * 1e-6;
        let got = [outcome.radial, outcome.hoop, outcome.axial, outcome.shear].map(Pressure::in_mpa);
        let n = route.direction(theta);
        let near = route.field(theta, 1.0, pressure);
        let (m, t) = (route.direction(theta + std::f64::consts::FRAC_PI_2), route.direction_along());
        let dots = |a: [f64; 3], b: [f64; 3]| mpa(crate::frames::vector::dot(a, near.times(b)));
        let added = mpa(route.added(pressure));
        let mut checks = vec![
            Check::compare(
                "wall stresses from the geographic tensor and the hole's axis vectors",
                &got,
                &route.parts(theta, pressure).map(mpa),
                size * 1e-11,
                "MPa",
            ),
            Check::compare(
                "wall stresses from the whole elastic field at one radius, resolved on the wall's axes (with what seepage and warming add)",
                &got,
                &[dots(n, n), dots(m, m) + added, dots(t, t) + added, dots(m, t)],
                size * 1e-11,
                "MPa",
            ),
            Check::compare(
                "the whole elastic field at 50 radii against the far-field stress (its share of the hole is 1/2500)",
                &route.field(theta, 50.0, pressure).0.map(mpa),
                &route.far().0.map(mpa),
                size * 6.0 / 2500.0,
                "MPa",
            ),
            Check::compare(
                "effective principal stresses by the eigenvalues of the whole tensor in north, east, down",
                &outcome.effective.map(Pressure::in_mpa),
                &route.effective(theta, pressure).map(mpa),
                size * 1e-11,
                "MPa",
            ),
        ];
        if let (Some(margin), Some(slip)) = (outcome.weak_plane_margin, route.slip(theta, pressure)) {
            checks.push(Check::compare(
                "margin on the plane of weakness from its traction in north, east, down",
                &[margin.in_mpa()],
                &[-mpa(slip)],
                size * 1e-11,
                "MPa",
            ));
        }
        if let Some(bearing) = outcome.bearing {
            checks.push(bearing_check(n, bearing));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let (p, theta) = (self.inputs.pressure, self.inputs.toolface);
        let attitude = self.wall.attitude;
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(p));
        inputs.push(Item::typed("θ", "tool face looked at", theta).chosen());
        let mut results = vec![
            Item::computed("σ_r", "radial stress at the wall, total", self.radial),
            Item::computed("σ_θ", "hoop stress at the wall, total", self.hoop),
            Item::computed("σ_zw", "axial stress at the wall, total", self.axial),
            Item::computed("τ_θz", "shear stress in the wall", self.shear),
        ];
        for (value, n) in self.effective.principal().into_iter().zip(1..) {
            results.push(Item::computed(
                &format!("σ_{n}'"),
                format!("effective principal stress {n} at the wall"),
                value,
            ));
        }
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
        steps.extend(method::worked(&self.wall, theta.si(), p.si()));
        steps.extend(method::worked_plane(&self.wall, theta.si(), p.si()));
        Explanation {
            title: format!(
                "Stress at the wall of {} at tool face {}, {}",
                self.wall.place(),
                with_typed_unit(theta),
                with_typed_unit(p)
            ),
            headline: format!(
                "radial {}, hoop {}, axial {}, shear {} (total) at tool face {}",
                self.radial,
                self.hoop,
                self.axial,
                self.shear,
                direction::words(attitude, theta)
            ),
            inputs,
            results,
            method: method::wall_stresses(&self.wall),
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
