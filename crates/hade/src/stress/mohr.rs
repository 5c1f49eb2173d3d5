//! Mohr's circles of a stress state.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::envelope::{Distances, Envelope, Point};
use crate::card::{
    Axis, Card, Check, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Method, Reference, Role, Step,
};
use crate::error::Result;
use crate::frames::{Geographic, Name, Plane};
use crate::units::{Angle, Pressure, Quantity, fixed};

/// The three circles, with planes as points in them, and the line of a strength above.
#[derive(Clone, Debug, PartialEq)]
pub struct MohrCircles {
    inputs: MohrInputs,
    outcome: MohrOutcome,
}

/// The inputs: the stress, what is taken off (the pore pressure, for circles of effective stress),
/// planes, and a strength.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MohrInputs {
    stress: Stress<Geographic>,
    pore: Option<Pressure>,
    planes: Vec<MohrPlane>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    envelope: Option<Envelope>,
}

/// A plane with the name of its point.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
struct MohrPlane {
    #[serde(flatten)]
    plane: Plane,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    name: Option<Name>,
}

/// Centre and radius of the circles 1–3, 1–2, 2–3, normal and shear stress of the planes, and how
/// far the largest circle and the planes are from the line of the strength.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MohrOutcome {
    centres: [Pressure; 3],
    radii: [Pressure; 3],
    planes: Vec<[Pressure; 2]>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    distances: Option<Distances>,
}

impl MohrPlane {
    /// Its name, or its number.
    fn called(&self, n: usize) -> String {
        self.name.map_or_else(|| format!("plane {n}"), |name| name.to_string())
    }
}

impl Stress<Geographic> {
    /// Mohr's circles of the total stress.
    pub fn mohr(&self) -> MohrCircles {
        let inputs = MohrInputs { stress: *self, pore: None, planes: Vec::new(), envelope: None };
        let outcome = circles(&inputs).unwrap_or(MohrOutcome {
            centres: [Pressure::default(); 3],
            radii: [Pressure::default(); 3],
            planes: Vec::new(),
            distances: None,
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

    /// With a plane as a point, named by its number.
    ///
    /// # Errors
    /// When the plane's dip is out of range or its strike has no true north.
    pub fn with_plane(mut self, plane: Plane) -> Result<Self> {
        self.inputs.planes.push(MohrPlane { plane, name: None });
        MohrCircles::compute(self.inputs)
    }

    /// With a plane as a point under a name of its own ("fault F2").
    ///
    /// # Errors
    /// As [`Self::with_plane`].
    pub fn with_named_plane(mut self, name: &str, plane: Plane) -> Result<Self> {
        self.inputs.planes.push(MohrPlane { plane, name: Some(Name::new(name)) });
        MohrCircles::compute(self.inputs)
    }

    /// With the straight line of a Mohr–Coulomb strength, τ = c + σ'_n tan φ, and the distances of
    /// the largest circle and of the planes to it. Only for circles of effective stress, because
    /// the line holds for no other.
    ///
    /// # Errors
    /// When no pore pressure was taken off, the cohesion is negative, or the friction angle is
    /// outside 0° to below 90°.
    pub fn with_envelope(mut self, cohesion: Pressure, friction_angle: Angle) -> Result<Self> {
        self.inputs.envelope = Some(Envelope { cohesion, friction_angle });
        MohrCircles::compute(self.inputs)
    }

    /// The distance of the largest circle to the line of the strength, at right angles to it:
    /// c cos φ + C_13 sin φ − R_13. Positive: the circle stays below; zero: it touches; negative: it
    /// passes the line. `None` without a strength.
    pub fn distance_to_envelope(&self) -> Option<Pressure> {
        self.outcome.distances.as_ref().map(|d| d.circle)
    }

    /// The same distance of each plane's point, in the order the planes were added.
    pub fn plane_distances(&self) -> Vec<Pressure> {
        self.outcome.distances.as_ref().map_or_else(Vec::new, |d| d.planes.clone())
    }
}

fn circles(inputs: &MohrInputs) -> Result<MohrOutcome> {
    let envelope = inputs.envelope.map(|line| line.checked(inputs.pore)).transpose()?;
    let pore = inputs.pore.map_or(0.0, Quantity::si);
    let [a, b, c] = inputs.stress.tensor().eigen().values.map(|v| v - pore);
    let pairs = [(a, c), (a, b), (b, c)];
    let mut planes = Vec::new();
    for plane in &inputs.planes {
        let t = inputs.stress.on(plane.plane)?;
        planes.push([t.normal - Pressure::from_si(pore), t.shear]);
    }
    let half = |sum: f64| Pressure::from_si(0.5 * sum);
    let distances = envelope.map(|line| line.distances(half(a + c), half(a - c), &planes));
    Ok(MohrOutcome {
        centres: pairs.map(|(p, q)| half(p + q)),
        radii: pairs.map(|(p, q)| half(p - q)),
        planes,
        distances,
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
    /// trigonometric solution; the planes by the principal stresses and direction cosines; the
    /// distances by the strength in its principal form and by the nearest point of the line.
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
        let mut expected = Vec::new();
        if !inputs.planes.is_empty() {
            let e = s.eigen();
            for plane in &inputs.planes {
                let Ok(axes) = plane.plane.axes() else { return Vec::new() };
                let l = e.axes.map(|v| crate::frames::vector::dot(v, axes.normal));
                let normal: f64 = e.values.iter().zip(l).map(|(s, l)| s * l * l).sum();
                let square: f64 = e.values.iter().zip(l).map(|(s, l)| s * s * l * l).sum();
                expected.push([(normal - pore) * 1e-6, (square - normal * normal).max(0.0).sqrt() * 1e-6]);
            }
            let got: Vec<f64> = outcome.planes.iter().flatten().map(|p| p.in_mpa()).collect();
            checks.push(Check::compare(
                "normal and shear stress of the planes from the principal stresses",
                &got,
                expected.as_flattened(),
                largest * 1e-6,
                "MPa",
            ));
        }
        if let Some(line) = inputs.envelope {
            checks.extend(line.checks(outcome.distances.as_ref(), [a, c], &expected, largest));
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
        for (named, n) in self.inputs.planes.iter().zip(1..) {
            let (plane, called) = (named.plane, named.called(n));
            inputs.push(plane.strike.item(&format!("s_{n}"), &format!("strike of {called}")));
            inputs.push(Item::typed(&format!("d_{n}"), format!("dip of {called}"), plane.dip));
        }
        if let Some(line) = self.inputs.envelope {
            inputs.extend(line.items());
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
        let points = self.points();
        for ((called, [normal, shear]), n) in points.iter().zip(1..) {
            results.push(Item::computed(&format!("σ_n{n}"), format!("normal stress on {called}"), *normal));
            results.push(Item::computed(&format!("τ_{n}"), format!("shear stress on {called}"), *shear));
        }
        let mut method = method();
        let mut notes = Vec::new();
        let mut headline = format!("largest shear stress {}", self.outcome.radii[0]);
        if let (Some(line), Some(distances)) = (self.inputs.envelope, &self.outcome.distances) {
            results.extend(distances.items(&points));
            steps.extend(line.steps(distances, self.outcome.centres[0], self.outcome.radii[0], &points));
            line.extend(&mut method);
            headline.push_str(&format!("; {}", distances.words()));
            notes.extend(distances.warning(&points));
        }
        Explanation {
            title: format!("Mohr's circles of the {what}{}", self.inputs.stress.of_name()),
            headline,
            inputs,
            results,
            method,
            steps,
            figures: vec![self.figure(what, symbol)],
            notes,
            topics: vec!["stress".to_owned()],
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        cards.extend(self.inputs.planes.iter().flat_map(|p| p.plane.strike.upstream()));
        cards
    }
}

/// The method of the circles, without a strength.
fn method() -> Method {
    Method {
        words:
            "One circle for each pair of principal stresses; every plane's normal and shear stress lies between them."
                .to_owned(),
        formulas: vec![
            Formula::new("C_(i j) = (S_i + S_j) / 2", "C_ij = (S_i + S_j) / 2"),
            Formula::new("R_(i j) = (S_i - S_j) / 2", "R_ij = (S_i − S_j) / 2"),
        ],
        references: vec![Reference::new(
            "Mohr, O. (1882) Civilingenieur 28, 113–156; Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, ch. 2 (cited from memory)",
        )],
        ..Method::default()
    }
}

impl MohrCircles {
    /// The planes' points with their names.
    fn points(&self) -> Vec<Point> {
        self.outcome
            .planes
            .iter()
            .zip(&self.inputs.planes)
            .zip(1..)
            .map(|((p, named), n)| (named.called(n), *p))
            .collect()
    }

    fn figure(&self, what: &str, symbol: &str) -> Figure {
        let mpa = Pressure::in_mpa;
        let (c13, r13) = (mpa(self.outcome.centres[0]), mpa(self.outcome.radii[0]));
        let span = (c13 + r13).max(1.0);
        let mut left = (c13 - r13 - 0.08 * span).min(0.0);
        let right = c13 + r13 + 0.12 * span;
        let mut top = r13.max(0.05 * span) * 1.15;
        let mut layers = Vec::new();
        let mut said = Vec::new();
        if let (Some(line), Some(distances)) = (self.inputs.envelope, &self.outcome.distances) {
            let (c, slope) = (mpa(line.cohesion), line.slope());
            // From where the line meets the axis, or from the left edge.
            if slope > 0.0 {
                left = left.min((-c / slope).max(-0.25 * span));
            }
            let from = if slope > 0.0 { (-c / slope).max(left) } else { left };
            layers.push(Layer::line("strength", Role::Limit, [from, right].map(|x| [x, c + slope * x])));
            top = top.max((c + slope * c13).min((1.6 * r13).max(1.2 * c)) * 1.1);
            // The distance of the largest circle, where it is long enough to be seen.
            let d = mpa(distances.circle);
            if d.abs() > 0.03 * span {
                let (sin, cos) = line.friction_angle.si().sin_cos();
                let ends = [r13, r13 + d].map(|r| [c13 - r * sin, r * cos]);
                layers.push(Layer::line("D", Role::Quiet, ends));
            }
            said.push(distances.words());
        }
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
        for (called, [normal, shear]) in self.points() {
            let (normal, shear) = (mpa(normal), mpa(shear));
            said.push(format!("{called} at {}, {} MPa", fixed(normal, 2), fixed(shear, 2)));
            layers.push(Layer::Points {
                label: called,
                role: Role::Limit,
                mark: Mark::Dot,
                points: vec![[normal, shear]],
            });
        }
        let beside = if self.inputs.envelope.is_some() {
            "; the heavy line is the strength, D the distance of the largest circle to it"
        } else {
            ""
        };
        let ends: Vec<String> = ends.iter().map(|(x, n)| format!("{symbol}_{n} = {} MPa", fixed(*x, 2))).collect();
        let said: String = said.iter().map(|s| format!("; {s}")).collect();
        Figure {
            caption: format!("Mohr's circles of the {what}; crosses mark {symbol}_1, {symbol}_2, {symbol}_3{beside}."),
            alt: format!("Three half circles over normal stress. {}{said}", ends.join(", ")),
            x: Axis::new(&format!("normal {what} (MPa)"), left, right),
            y: Axis::new("shear stress (MPa)", 0.0, top),
            equal_scale: true,
            layers,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::prelude::{Azimuth, Horizontals, Units};

    fn circles() -> MohrCircles {
        let s = Stress::from_horizontals(Horizontals {
            sv: 60.mpa(),
            sh_max: 55.mpa(),
            sh_min: 40.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(30.deg()),
        })
        .unwrap();
        s.mohr()
    }

    #[test]
    fn a_strength_over_total_stress_and_no_strength_at_all_are_refused() {
        let e = circles().with_envelope(5.mpa(), 30.deg()).unwrap_err();
        assert_eq!(
            e.to_string(),
            "A strength over Mohr's circles of total stress: it holds for effective stress only; take the pore pressure off first, with .effective(pore)."
        );
        let effective = || circles().effective(20.mpa()).unwrap();
        assert!(effective().with_envelope((-1).mpa(), 30.deg()).unwrap_err().is_range());
        for phi in [-1.0, 90.0, f64::NAN] {
            let e = effective().with_envelope(5.mpa(), phi.deg()).unwrap_err();
            assert!(e.to_string().starts_with("friction angle is"), "{e}");
        }
    }

    /// σ' = 40, 35, 20: at φ = 30° the circle touches where 40 = 2 c √3 + 3 · 20, which no c ≥ 0
    /// does; at φ = 0 it touches with c = 10, and the distance falls by cos φ for each MPa of c.
    #[test]
    fn distance_is_zero_where_the_circle_touches() {
        let effective = circles().effective(20.mpa()).unwrap();
        let d = |c: f64, phi: f64| {
            effective.clone().with_envelope(c.mpa(), phi.deg()).unwrap().distance_to_envelope().unwrap().in_mpa()
        };
        assert!(d(10.0, 0.0).abs() < 1e-9);
        assert!((d(12.5, 0.0) - 2.5).abs() < 1e-9);
        assert!((d(0.0, 30.0) - 5.0).abs() < 1e-9);
        // sin φ = R / C: the tangent through the origin.
        assert!(d(0.0, (1.0_f64 / 3.0).asin().to_degrees()).abs() < 1e-9);
        let past = effective.clone().with_envelope(0.mpa(), 10.deg()).unwrap().card();
        assert!(past.explanation.headline.contains("PASSES") && past.explanation.notes[0].starts_with("WARNING"));
        assert!(d(0.0, 10.0) < 0.0);
        assert!(circles().distance_to_envelope().is_none());
    }

    /// On the plane whose normal is 45° + φ/2 from σ1 towards σ3 the distance is the circle's.
    #[test]
    fn the_plane_that_the_circle_touches_at_has_the_circles_distance() {
        let phi = 24.0;
        // A normal fault striking with SHmax, dip 45° + φ/2.
        let plane = Plane { strike: Azimuth::from_true_north(30.deg()), dip: (45.0 + phi / 2.0).deg() };
        let c = circles().effective(20.mpa()).unwrap().with_named_plane("F1", plane).unwrap();
        let c = c.with_envelope(3.mpa(), phi.deg()).unwrap();
        let (circle, planes) = (c.distance_to_envelope().unwrap(), c.plane_distances());
        assert!((circle - planes[0]).abs().in_mpa() < 1e-9, "{circle} {planes:?}");
        assert!(c.card().passed());
        let figure = &c.card().explanation.figures[0];
        assert!(figure.alt.contains("below the line") && figure.alt.contains("F1 at"), "{}", figure.alt);
    }

    #[test]
    fn a_record_without_names_and_strength_is_read() {
        let old = circles().with_plane(Plane { strike: Azimuth::from_true_north(1.deg()), dip: 2.deg() }).unwrap();
        let text = serde_json::to_string(&old.inputs()).unwrap();
        assert!(!text.contains("envelope") && !text.contains("name\":\"plane"), "{text}");
        assert_eq!(serde_json::from_str::<MohrInputs>(&text).unwrap(), old.inputs());
        let outcome = serde_json::to_string(&old.outcome()).unwrap();
        assert!(!outcome.contains("distances"));
    }
}
