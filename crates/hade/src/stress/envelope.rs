//! A straight line of strength over Mohr's circles, and how far they are from it.

use serde::{Deserialize, Serialize};

use crate::card::{Check, Formula, Item, Method, Reference, Step};
use crate::error::{Error, Result};
use crate::units::{Angle, Pressure, Quantity, as_typed, fixed, require_not_negative, with_typed_unit};

/// A straight line of strength, τ = c + σ'_n tan φ (Coulomb).
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct Envelope {
    pub cohesion: Pressure,
    pub friction_angle: Angle,
}

/// Distances to the line, at right angles to it; negative beyond it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct Distances {
    pub circle: Pressure,
    pub planes: Vec<Pressure>,
}

/// A plane's point: its name, normal and shear stress.
pub(super) type Point = (String, [Pressure; 2]);

impl Envelope {
    /// Itself, when it is a strength and stands over circles that it holds for.
    pub fn checked(self, pore: Option<Pressure>) -> Result<Self> {
        if pore.is_none() {
            return Err(Error::not_physical(
                "A strength over Mohr's circles of total stress",
                "it holds for effective stress only; take the pore pressure off first, with .effective(pore).",
            ));
        }
        require_not_negative("cohesion", self.cohesion)?;
        if !(self.friction_angle.si() >= 0.0 && self.friction_angle.in_deg() < 90.0) {
            return Err(Error::out_of_range(
                "friction angle",
                with_typed_unit(self.friction_angle),
                "at least 0° and below 90°",
            ));
        }
        Ok(self)
    }

    /// Distance of a point, c cos φ + σ'_n sin φ − τ cos φ.
    fn distance(self, normal: Pressure, shear: Pressure) -> Pressure {
        let (s, c) = self.friction_angle.si().sin_cos();
        self.cohesion * c + normal * s - shear * c
    }

    /// The distances of a circle and of points. A circle's is its centre's less its radius.
    pub fn distances(self, centre: Pressure, radius: Pressure, points: &[[Pressure; 2]]) -> Distances {
        Distances {
            circle: self.distance(centre, Pressure::default()) - radius,
            planes: points.iter().map(|[normal, shear]| self.distance(*normal, *shear)).collect(),
        }
    }

    /// tan φ.
    pub fn slope(self) -> f64 {
        self.friction_angle.si().tan()
    }

    /// From a point (MPa) to the foot of the perpendicular on the line; negative from above it.
    fn to_nearest_point(self, [normal, shear]: [f64; 2]) -> f64 {
        let (c, slope) = (self.cohesion.in_mpa(), self.slope());
        let foot = (normal + slope * (shear - c)) / (1.0 + slope * slope);
        let (dx, dy) = (foot - normal, c + slope * foot - shear);
        dx.hypot(dy).copysign(c + slope * normal - shear)
    }

    /// The circle's distance by the strength in its principal form, the points' by the nearest
    /// point of the line. Stresses σ'_1, σ'_3 and points in MPa by routes that the outcome did not
    /// take; a missing outcome fails.
    pub fn checks(
        self,
        outcome: Option<&Distances>,
        [s1, s3]: [f64; 2],
        points: &[[f64; 2]],
        largest: f64,
    ) -> Vec<Check> {
        let tangent = (std::f64::consts::FRAC_PI_4 + 0.5 * self.friction_angle.si()).tan();
        let reserve = 2.0 * self.cohesion.in_mpa() * tangent + tangent * tangent * s3 - s1;
        let circle: Vec<f64> = outcome.iter().map(|d| d.circle.in_mpa()).collect();
        let mut checks = vec![Check::compare(
            "distance of the largest circle from the strength left in σ'_1: (2 c t + σ'_3 t² − σ'_1) / (1 + t²), t = tan(45° + φ/2)",
            &circle,
            &[reserve / (1.0 + tangent * tangent)],
            largest * 1e-7,
            "MPa",
        )];
        if !points.is_empty() {
            let planes: Vec<f64> = outcome.iter().flat_map(|d| d.planes.iter().map(|p| p.in_mpa())).collect();
            let nearest: Vec<f64> = points.iter().map(|p| self.to_nearest_point(*p)).collect();
            checks.push(Check::compare(
                "distances of the planes to the nearest point of the line",
                &planes,
                &nearest,
                largest * 1e-6,
                "MPa",
            ));
        }
        checks
    }

    /// The numbers as they were typed.
    pub fn items(self) -> [Item; 2] {
        [Item::typed("c", "cohesion", self.cohesion), Item::typed("φ", "friction angle", self.friction_angle)]
    }

    /// The work, with the numbers put in.
    pub fn steps(self, distances: &Distances, centre: Pressure, radius: Pressure, points: &[Point]) -> Vec<Step> {
        let mpa = |p: Pressure| fixed(p.in_mpa(), 3);
        let (s, c) = self.friction_angle.si().sin_cos();
        let (s, c, cohesion) = (fixed(s, 6), fixed(c, 6), as_typed(self.cohesion.in_mpa()));
        let mut steps = vec![Step::worked(format!(
            "D = c cos φ + C_13 sin φ − R_13 = {cohesion} · {c} + {} · {s} − {} = {} MPa",
            mpa(centre),
            mpa(radius),
            mpa(distances.circle)
        ))];
        for (((called, [normal, shear]), distance), n) in points.iter().zip(&distances.planes).zip(1..) {
            steps.push(Step::worked(format!(
                "{called}: D_{n} = (c − τ_{n}) cos φ + σ_n{n} sin φ = ({cohesion} − {}) · {c} + {} · {s} = {} MPa",
                mpa(*shear),
                mpa(*normal),
                mpa(*distance)
            )));
        }
        steps
    }

    /// What the method says besides.
    pub fn extend(self, method: &mut Method) {
        method.words.push_str(
            " Above them stands the straight line of the strength; distances to it are at right angles, negative beyond it.",
        );
        method.formulas.extend([
            Formula::new("tau = c + sigma'_upright(n) tan phi", "τ = c + σ'_n tan φ"),
            Formula::new("D = c cos phi + C_(1 3) sin phi - R_(1 3)", "D = c cos φ + C_13 sin φ − R_13"),
            Formula::new(
                "D_i = (c - tau_i) cos phi + sigma'_(upright(n) i) sin phi",
                "D_i = (c − τ_i) cos φ + σ'_ni sin φ",
            ),
        ]);
        method.references.push(Reference::new(
            "Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, ch. 4 (Coulomb's criterion; cited from memory)",
        ));
        method.assumptions.push(
            "The line of the strength is straight; where the normal stress is tension it only goes on as drawn."
                .to_owned(),
        );
    }
}

impl Distances {
    /// The distances as results.
    pub fn items(&self, points: &[Point]) -> Vec<Item> {
        let circle = Item::computed("D", "distance of the largest circle to the line of the strength", self.circle);
        let planes = self.planes.iter().zip(points).zip(1..).map(|((distance, (called, _)), n)| {
            Item::computed(&format!("D_{n}"), format!("distance of {called} to the line of the strength"), *distance)
        });
        std::iter::once(circle).chain(planes).collect()
    }

    /// "the largest circle stays 3.20 MPa below the line of the strength".
    pub fn words(&self) -> String {
        match self.circle.si() {
            d if d > 0.0 => format!("the largest circle stays {} below the line of the strength", self.circle),
            d if d < 0.0 => format!("the largest circle PASSES the line of the strength by {}", self.circle.abs()),
            _ => "the largest circle touches the line of the strength".to_owned(),
        }
    }

    /// What a reader must know, when the line is passed.
    pub fn warning(&self, points: &[Point]) -> Option<String> {
        let beyond: Vec<&str> = self
            .planes
            .iter()
            .zip(points)
            .filter(|(d, _)| d.si() < 0.0)
            .map(|(_, (called, _))| called.as_str())
            .collect();
        (self.circle.si() < 0.0).then(|| {
            let here = match (points.is_empty(), beyond.is_empty()) {
                (true, _) => String::new(),
                (_, true) => "; none of those shown is".to_owned(),
                _ => format!("; of those shown: {}", beyond.join(", ")),
            };
            format!("WARNING: planes of some directions are beyond the line of the strength{here}.")
        })
    }
}
