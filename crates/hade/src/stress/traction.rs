//! The traction of a stress on a plane.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::principals::{axes_words, with_axes};
use crate::card::{
    Card, Check, Explain, Explanation, Figure, Formula, Item, Method, Projection, Reference, Role, Step,
};
use crate::error::Result;
use crate::frames::net::Net;
use crate::frames::vector::{add, dot, norm, scale};
use crate::frames::{Geographic, Plane};
use crate::units::{Angle, Pressure, Quantity, fixed};

/// The traction on a plane: normal stress, shear stress, and the rake of the slip the shear drives.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct Traction {
    /// The normal stress, compression positive.
    pub normal: Pressure,
    /// The size of the shear stress.
    pub shear: Pressure,
    /// The shear stress along strike, positive towards the strike azimuth, by which the
    /// hanging wall drags the footwall.
    pub along_strike: Pressure,
    /// The shear stress along dip, positive down dip, by which the hanging wall drags the
    /// footwall.
    pub down_dip: Pressure,
    /// The direction the hanging wall would slip, in the plane from strike, positive up dip:
    /// −90° for a normal fault. `None` where there is no shear.
    pub rake: Option<Angle>,
    vector: [f64; 3],
    inputs: TractionInputs,
}

/// The inputs of a traction.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct TractionInputs {
    pub(super) stress: Stress<Geographic>,
    pub(super) plane: Plane,
}

/// What came out, in SI; the vector in north, east, down.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct TractionOutcome {
    normal: Pressure,
    along_strike: Pressure,
    down_dip: Pressure,
    shear: Pressure,
    rake: Option<Angle>,
    vector: [f64; 3],
}

/// From strike, up dip positive; slip against the strike is 180°, never −180°.
fn rake(along: f64, down: f64) -> f64 {
    let rake = (-down).atan2(along);
    if rake < -std::f64::consts::PI + 1e-9 { std::f64::consts::PI } else { rake }
}

/// Below this share of the largest stress the shear has no direction.
const NO_SHEAR: f64 = 1e-12;

impl Stress<Geographic> {
    /// The traction on a plane: t = S n, n the plane's normal pointing down.
    ///
    /// # Errors
    /// When the dip is outside 0–90° or the strike has no true north.
    pub fn on(&self, plane: Plane) -> Result<Traction> {
        Traction::compute(TractionInputs { stress: *self, plane })
    }
}

impl Traction {
    /// The traction vector t = S n in north, east, down.
    pub fn vector(&self) -> [Pressure; 3] {
        self.vector.map(Pressure::from_si)
    }
}

impl Explain for Traction {
    const KIND: &'static str = "traction-on-plane";
    type Inputs = TractionInputs;
    type Outcome = TractionOutcome;

    fn compute(inputs: TractionInputs) -> Result<Self> {
        let axes = inputs.plane.axes()?;
        let s = inputs.stress.tensor().finite("stress")?;
        let t = s.times(axes.normal);
        let (along, down) = (dot(t, axes.along_strike), dot(t, axes.down_dip));
        let shear = along.hypot(down);
        Ok(Traction {
            normal: Pressure::from_si(dot(t, axes.normal)),
            shear: Pressure::from_si(shear),
            along_strike: Pressure::from_si(along),
            down_dip: Pressure::from_si(down),
            rake: (shear > NO_SHEAR * s.largest()).then(|| Angle::from_si(rake(along, down))),
            vector: t,
            inputs,
        })
    }
    fn inputs(&self) -> TractionInputs {
        self.inputs
    }
    fn outcome(&self) -> TractionOutcome {
        TractionOutcome {
            normal: self.normal,
            along_strike: self.along_strike,
            down_dip: self.down_dip,
            shear: self.shear,
            rake: self.rake,
            vector: self.vector,
        }
    }

    /// By the principal stresses: σn = Σ S_k l_k², τ² = Σ S_k² l_k² − σn²; and the vector put
    /// together again from its parts.
    fn check(inputs: &TractionInputs, outcome: &TractionOutcome) -> Vec<Check> {
        let Ok(axes) = inputs.plane.axes() else { return Vec::new() };
        let e = inputs.stress.tensor().eigen();
        let largest = inputs.stress.tensor().largest().max(1.0);
        let cosines = e.axes.map(|v| dot(v, axes.normal));
        let normal: f64 = e.values.iter().zip(cosines).map(|(s, l)| s * l * l).sum();
        let square: f64 = e.values.iter().zip(cosines).map(|(s, l)| s * s * l * l).sum();
        let vector = e.values.iter().zip(cosines).zip(e.axes).fold([0.0; 3], |t, ((s, l), v)| add(t, scale(v, s * l)));
        let parts = add(
            scale(axes.normal, outcome.normal.si()),
            add(scale(axes.along_strike, outcome.along_strike.si()), scale(axes.down_dip, outcome.down_dip.si())),
        );
        let mut checks = vec![
            Check::compare(
                "normal stress from the principal stresses, Σ S_k l_k²",
                &[outcome.normal.in_mpa()],
                &[normal * 1e-6],
                largest * 1e-11 * 1e-6,
                "MPa",
            ),
            Check::compare(
                "square of the shear stress from the principal stresses, Σ S_k² l_k² − σ_n²",
                &[outcome.shear.in_mpa().powi(2)],
                &[(square - normal * normal) * 1e-12],
                largest * largest * 1e-11 * 1e-12,
                "MPa²",
            ),
            Check::compare(
                "traction vector from the principal stresses",
                &outcome.vector.map(|c| c * 1e-6),
                &vector.map(|c| c * 1e-6),
                largest * 1e-11 * 1e-6,
                "MPa",
            ),
            Check::compare(
                "traction vector put together from its parts",
                &parts.map(|c| c * 1e-6),
                &vector.map(|c| c * 1e-6),
                largest * 1e-11 * 1e-6,
                "MPa",
            ),
        ];
        let shear = add(vector, scale(axes.normal, -normal));
        // Well away from the least shear that has a direction, there is a rake or there is none.
        let size = norm(shear) / largest;
        let due = if size > 1e3 * NO_SHEAR { 1.0 } else { 0.0 };
        if !(1e-3 * NO_SHEAR..=1e3 * NO_SHEAR).contains(&size) {
            let stated = if outcome.rake.is_some() { 1.0 } else { 0.0 };
            checks.push(Check::compare(
                "a rake where there is shear, none where there is not",
                &[stated],
                &[due],
                0.0,
                "",
            ));
        }
        if let Some(rake) = outcome.rake {
            let slip = add(scale(axes.along_strike, rake.si().cos()), scale(axes.down_dip, -rake.si().sin()));
            checks.push(Check::compare(
                "slip direction of the rake, as long as the shear stress, against the shear part of the traction",
                &scale(slip, outcome.shear.in_mpa()),
                &shear.map(|c| c * 1e-6),
                (outcome.shear.in_mpa() * 1e-8).max(largest * 1e-6 * 1e-14),
                "MPa",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let plane = self.inputs.plane;
        let n = plane.axes().map(|a| a.normal).unwrap_or_default();
        let t = self.vector.map(|c| fixed(c * 1e-6, 3));
        let mut results = vec![
            Item::computed("σ_n", "normal stress on the plane", self.normal),
            Item::computed("τ", "shear stress on the plane", self.shear),
            Item::computed("τ_s", "shear along strike, of the hanging wall on the footwall", self.along_strike),
            Item::computed("τ_d", "shear down dip, of the hanging wall on the footwall", self.down_dip),
        ];
        if let Some(rake) = self.rake {
            results.push(Item::computed("r", "rake of hanging-wall slip, from strike, up dip positive", rake));
        }
        Explanation {
            title: format!("Traction{} on the plane {}", self.inputs.stress.of_name(), plane.words()),
            headline: format!("normal stress {}, shear stress {}", self.normal, self.shear),
            inputs: vec![
                self.inputs.stress.item("S", "stress in north, east, down"),
                plane.strike.item("s", "strike of the plane, dip to its right"),
                Item::typed("d", "dip of the plane", plane.dip),
            ],
            results,
            method: Method {
                words: "The traction is the tensor times the plane's normal, which points down; its part in the plane is the shear by which the hanging wall drags the footwall, the way it would slip.".to_owned(),
                formulas: vec![
                    Formula::new("t = S n", "t = S n"),
                    Formula::new("sigma_n = t dot n", "σ_n = t · n"),
                    Formula::new("tau = sqrt(t dot t - sigma_n^2)", "τ = √(t·t − σ_n²)"),
                    Formula::new("n = vec(sin s sin d, -cos s sin d, cos d)", "n = (sin s sin d, −cos s sin d, cos d)"),
                ],
                references: vec![Reference::new(
                    "Espinoza, D.N., Introduction to Energy Geomechanics (open textbook, rev. Nov 2025), §5.5 (tractions on faults)",
                )],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("n = ({}, {}, {})", fixed(n[0], 6), fixed(n[1], 6), fixed(n[2], 6))),
                Step::worked(format!("t = S n = ({}, {}, {}) MPa", t[0], t[1], t[2])),
                Step::worked(format!("σ_n = t · n = {} MPa", fixed(self.normal.in_mpa(), 3))),
            ],
            figures: self.figure().into_iter().collect(),
            topics: vec!["stress".to_owned(), "plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        cards.extend(self.inputs.plane.strike.upstream());
        cards
    }
}

impl Traction {
    /// The plane, its pole, the principal axes and the slip on a net.
    fn figure(&self) -> Option<Figure> {
        let plane = self.inputs.plane;
        let axes = plane.axes().ok()?;
        let principal = self.inputs.stress.principals().axes();
        let net = Net::new(Projection::EqualArea).plane("plane", Role::Limit, axes.normal).pole(
            "pole",
            Role::Limit,
            axes.normal,
        );
        let mut net = with_axes(net, principal);
        let mut said = vec![plane.words(), format!("pole {}", axes_words(Some(axes.normal)))];
        said.extend((1..).zip(principal).map(|(n, axis)| format!("S_{n} {}", axes_words(axis))));
        let mut caption = format!("The plane ({}) with its pole, and the principal axes.", plane.words());
        match self.rake {
            Some(rake) => {
                let (s, c) = rake.in_rad().sin_cos();
                net = net.movement("slip", Role::Fourth, add(scale(axes.along_strike, c), scale(axes.down_dip, -s)));
                caption.push_str(" The arrow shows where the shear drives the hanging wall: outward is down.");
                said.push(format!("the shear drives the hanging wall at rake {rake:.1}"));
            }
            None => said.push("no shear on the plane".to_owned()),
        }
        Some(net.figure(caption, format!("{}.", said.join("; "))))
    }
}
