//! Mohr's circles of a stress state.

use serde::{Deserialize, Serialize};

use super::Stress;
use crate::card::{
    Axis, Card, Check, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Method, Reference, Role, Step,
};
use crate::error::Result;
use crate::frames::{Geographic, Plane};
use crate::units::{Pressure, Quantity, fixed};

/// The three circles, with planes as points in them.
#[derive(Clone, Debug, PartialEq)]
pub struct MohrCircles {
    inputs: MohrInputs,
    outcome: MohrOutcome,
}

/// The inputs: the stress, what is taken off (the pore pressure, for circles of effective stress),
/// and planes.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MohrInputs {
    stress: Stress<Geographic>,
    pore: Option<Pressure>,
    planes: Vec<Plane>,
}

/// Centre and radius of the circles 1–3, 1–2, 2–3, and normal and shear stress of the planes.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MohrOutcome {
    centres: [Pressure; 3],
    radii: [Pressure; 3],
    planes: Vec<[Pressure; 2]>,
}

impl Stress<Geographic> {
    /// Mohr's circles of the total stress.
    pub fn mohr(&self) -> MohrCircles {
        let inputs = MohrInputs { stress: *self, pore: None, planes: Vec::new() };
        let outcome = circles(&inputs).unwrap_or(MohrOutcome {
            centres: [Pressure::default(); 3],
            radii: [Pressure::default(); 3],
            planes: Vec::new(),
        });
        MohrCircles { inputs, outcome }
    }
}

impl MohrCircles {
    /// The circles of the effective stress at a pore pressure.
    ///
    /// # Errors
    /// When the pore pressure is not finite.
    pub fn effective(self, pore: Pressure) -> Result<Self> {
        pore.finite("pore pressure")?;
        MohrCircles::compute(MohrInputs { pore: Some(pore), ..self.inputs })
    }

    /// With a plane as a point.
    ///
    /// # Errors
    /// When the plane's dip is out of range or its strike has no true north.
    pub fn with_plane(mut self, plane: Plane) -> Result<Self> {
        self.inputs.planes.push(plane);
        MohrCircles::compute(self.inputs)
    }
}

fn circles(inputs: &MohrInputs) -> Result<MohrOutcome> {
    let pore = inputs.pore.map_or(0.0, Quantity::si);
    let [a, b, c] = inputs.stress.tensor().eigen().values.map(|v| v - pore);
    let pairs = [(a, c), (a, b), (b, c)];
    let mut planes = Vec::new();
    for plane in &inputs.planes {
        let t = inputs.stress.on(*plane)?;
        planes.push([t.normal - Pressure::from_si(pore), t.shear]);
    }
    Ok(MohrOutcome {
        centres: pairs.map(|(p, q)| Pressure::from_si(0.5 * (p + q))),
        radii: pairs.map(|(p, q)| Pressure::from_si(0.5 * (p - q))),
        planes,
    })
}

impl Explain for MohrCircles {
    const KIND: &'static str = "mohr-circles";
    type Inputs = MohrInputs;
    type Outcome = MohrOutcome;

    fn compute(inputs: MohrInputs) -> Result<Self> {
        let outcome = circles(&inputs)?;
        Ok(MohrCircles { inputs, outcome })
    }
    fn inputs(&self) -> MohrInputs {
        self.inputs.clone()
    }
    fn outcome(&self) -> MohrOutcome {
        self.outcome.clone()
    }

    /// The principal values come back as the ends of the circles, by the characteristic equation's
    /// trigonometric solution; the planes by the principal stresses and direction cosines.
    fn check(inputs: &MohrInputs, outcome: &MohrOutcome) -> Vec<Check> {
        let pore = inputs.pore.map_or(0.0, Quantity::si);
        let s = inputs.stress.tensor();
        let [a, b, c] = s.values_by_invariants().map(|v| (v - pore) * 1e-6);
        let mut ends = Vec::new();
        for (centre, radius) in outcome.centres.iter().zip(outcome.radii) {
            ends.push((*centre + radius).in_mpa());
            ends.push((*centre - radius).in_mpa());
        }
        let largest = s.largest().max(1.0) * 1e-6;
        let mut checks = vec![Check::compare(
            "ends of the circles against the roots of the characteristic equation (trigonometric solution)",
            &ends,
            &[a, c, a, b, b, c],
            largest * 1e-7,
            "MPa",
        )];
        if !inputs.planes.is_empty() {
            let e = s.eigen();
            let mut expected = Vec::new();
            for plane in &inputs.planes {
                let Ok(axes) = plane.axes() else { return Vec::new() };
                let l = e.axes.map(|v| crate::frames::vector::dot(v, axes.normal));
                let normal: f64 = e.values.iter().zip(l).map(|(s, l)| s * l * l).sum();
                let square: f64 = e.values.iter().zip(l).map(|(s, l)| s * s * l * l).sum();
                expected.extend([(normal - pore) * 1e-6, (square - normal * normal).max(0.0).sqrt() * 1e-6]);
            }
            let got: Vec<f64> = outcome.planes.iter().flatten().map(|p| p.in_mpa()).collect();
            checks.push(Check::compare(
                "normal and shear stress of the planes from the principal stresses",
                &got,
                &expected,
                largest * 1e-6,
                "MPa",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let (what, symbol) =
            if self.inputs.pore.is_some() { ("effective stress", "σ'") } else { ("total stress", "S") };
        let mut inputs = vec![self.inputs.stress.item("S", "stress in north, east, down")];
        if let Some(pore) = self.inputs.pore {
            inputs.push(Item::typed("P_p", "pore pressure", pore));
        }
        for (plane, n) in self.inputs.planes.iter().zip(1..) {
            inputs.push(plane.strike.item(&format!("s_{n}"), &format!("strike of plane {n}")));
            inputs.push(Item::typed(&format!("d_{n}"), format!("dip of plane {n}"), plane.dip));
        }
        let names = [(1, 3), (1, 2), (2, 3)];
        let mut results = Vec::new();
        let mut steps = Vec::new();
        for (((i, j), centre), radius) in names.iter().zip(self.outcome.centres).zip(self.outcome.radii) {
            results.push(Item::computed(&format!("C_{i}{j}"), format!("centre of the circle {i}–{j}"), centre));
            results.push(Item::computed(&format!("R_{i}{j}"), format!("radius of the circle {i}–{j}"), radius));
            let (p, q) = ((centre + radius).in_mpa(), (centre - radius).in_mpa());
            steps.push(Step::worked(format!(
                "circle {i}–{j}: centre ({} + {}) / 2 = {} MPa, radius ({} − {}) / 2 = {} MPa",
                fixed(p, 3),
                fixed(q, 3),
                fixed(centre.in_mpa(), 3),
                fixed(p, 3),
                fixed(q, 3),
                fixed(radius.in_mpa(), 3)
            )));
        }
        for (point, n) in self.outcome.planes.iter().zip(1..) {
            results.push(Item::computed(&format!("σ_n{n}"), format!("normal stress on plane {n}"), point[0]));
            results.push(Item::computed(&format!("τ_{n}"), format!("shear stress on plane {n}"), point[1]));
        }
        Explanation {
            title: format!("Mohr's circles of the {what}{}", self.inputs.stress.of_name()),
            headline: format!("largest shear stress {}", self.outcome.radii[0]),
            inputs,
            results,
            method: Method {
                words: "One circle for each pair of principal stresses; every plane's normal and shear stress lies between them.".to_owned(),
                formulas: vec![
                    Formula::new("C_(i j) = (S_i + S_j) / 2", "C_ij = (S_i + S_j) / 2"),
                    Formula::new("R_(i j) = (S_i - S_j) / 2", "R_ij = (S_i − S_j) / 2"),
                ],
                references: vec![Reference::new("Mohr, O. (1882) Civilingenieur 28, 113–156; Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, ch. 2 (cited from memory)")],
                ..Method::default()
            },
            steps,
            figures: vec![self.figure(what, symbol)],
            topics: vec!["stress".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        cards.extend(self.inputs.planes.iter().flat_map(|p| p.strike.upstream()));
        cards
    }
}

impl MohrCircles {
    fn figure(&self, what: &str, symbol: &str) -> Figure {
        let mpa = Pressure::in_mpa;
        let (c13, r13) = (mpa(self.outcome.centres[0]), mpa(self.outcome.radii[0]));
        let span = (c13 + r13).max(1.0);
        let left = (c13 - r13 - 0.08 * span).min(0.0);
        let right = c13 + r13 + 0.12 * span;
        let mut layers = Vec::new();
        let roles = [Role::First, Role::Second, Role::Third];
        for (i, role) in [0, 1, 2].into_iter().zip(roles) {
            let name = ["1–3", "1–2", "2–3"][i];
            layers.push(Layer::Circle {
                label: name.to_owned(),
                role,
                centre: [mpa(self.outcome.centres[i]), 0.0],
                radius: mpa(self.outcome.radii[i]),
                upper_half: true,
            });
        }
        let ends = [(c13 + r13, 1), (mpa(self.outcome.centres[1] - self.outcome.radii[1]), 2), (c13 - r13, 3)];
        layers.push(Layer::Points {
            label: String::new(),
            role: Role::Quiet,
            mark: Mark::Cross,
            points: ends.iter().map(|(x, _)| [*x, 0.0]).collect(),
        });
        for (point, n) in self.outcome.planes.iter().zip(1..) {
            layers.push(Layer::Points {
                label: format!("plane {n}"),
                role: Role::Limit,
                mark: Mark::Dot,
                points: vec![[mpa(point[0]), mpa(point[1])]],
            });
        }
        Figure {
            caption: format!("Mohr's circles of the {what}; crosses mark {symbol}_1, {symbol}_2, {symbol}_3."),
            alt: format!(
                "Three half circles over normal stress. {}",
                ends.iter().map(|(x, n)| format!("{symbol}_{n} = {} MPa", fixed(*x, 2))).collect::<Vec<_>>().join(", ")
            ),
            x: Axis::new(&format!("normal {what} (MPa)"), left, right),
            y: Axis::new("shear stress (MPa)", 0.0, r13.max(0.05 * span) * 1.15),
            equal_scale: true,
            layers,
        }
    }
}
