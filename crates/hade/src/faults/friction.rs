//! The frictional limit of the crust: how far apart the principal stresses can be before a
//! well-oriented fault slips.

use serde::{Deserialize, Serialize};

use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::{Error, Result};
use crate::frames::Geographic;
use crate::stress::Stress;
use crate::units::{Pressure, Quantity, as_typed, fixed, with_typed_unit};

/// The largest ratio of effective principal stresses that a cohesionless fault of friction μ bears:
/// (√(μ² + 1) + μ)² (Jaeger & Cook; Zoback 2007, eq. 4.45).
///
/// # Errors
/// When μ is not a finite number of zero or more.
pub fn frictional_ratio(mu: f64) -> Result<f64> {
    require_friction(mu)?;
    let root = (mu * mu + 1.0).sqrt() + mu;
    Ok(root * root)
}

/// No fault has more: a coefficient is the tangent of an angle, mostly 0.2 to 1 (Byerlee 1978, from memory).
const MOST_FRICTION: f64 = 5.0;

/// Refuses what no fault has.
fn require_friction(mu: f64) -> Result<f64> {
    if (0.0..=MOST_FRICTION).contains(&mu) {
        return Ok(mu);
    }
    Err(Error::out_of_range(
        "coefficient of friction",
        crate::units::as_typed(mu),
        format!("between 0 and {MOST_FRICTION}; of a friction angle it is the tangent, as 0.577 of 30°"),
    ))
}

/// A stress held against the frictional limit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FrictionLimit {
    inputs: FrictionInputs,
    outcome: FrictionOutcome,
}

/// The inputs.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct FrictionInputs {
    stress: Stress<Geographic>,
    pore: Pressure,
    friction: f64,
}

/// What came out: the ratio of this stress, the largest that friction allows, and the S1 at which
/// this S3 would be at the limit.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct FrictionOutcome {
    ratio: f64,
    allowed: f64,
    largest_s1: Pressure,
}

impl Stress<Geographic> {
    /// Holds the stress against the frictional limit at a pore pressure and a coefficient of
    /// friction. Stresses outside it are a value with a warning, not an error.
    ///
    /// # Errors
    /// When the friction is negative, or S3 does not exceed the pore pressure (then no effective
    /// ratio exists).
    pub fn frictional_limit(&self, pore: Pressure, friction: f64) -> Result<FrictionLimit> {
        FrictionLimit::compute(FrictionInputs { stress: *self, pore, friction })
    }
}

impl FrictionLimit {
    /// (S1 − Pp) / (S3 − Pp) of this stress.
    pub fn ratio(&self) -> f64 {
        self.outcome.ratio
    }
    /// The largest ratio that friction allows.
    pub fn allowed(&self) -> f64 {
        self.outcome.allowed
    }
    /// The S1 at which this S3 would be at the limit.
    pub fn largest_s1(&self) -> Pressure {
        self.outcome.largest_s1
    }
    /// Whether the stress is within the limit.
    pub fn is_within(&self) -> bool {
        self.outcome.ratio <= self.outcome.allowed
    }
}

impl Explain for FrictionLimit {
    const KIND: &'static str = "frictional-limit";
    type Inputs = FrictionInputs;
    type Outcome = FrictionOutcome;

    fn compute(inputs: FrictionInputs) -> Result<Self> {
        inputs.pore.finite("pore pressure")?;
        inputs.stress.tensor().finite("stress")?;
        let allowed = frictional_ratio(inputs.friction)?;
        let [s1, _, s3] = inputs.stress.principals().magnitudes();
        let smallest = s3 - inputs.pore;
        if smallest.si() <= 0.0 {
            return Err(Error::not_physical(
                format!("The least stress {s3} does not exceed the pore pressure {}", with_typed_unit(inputs.pore)),
                "rock in the earth does not bear that; check the pore pressure and the least stress.",
            ));
        }
        let outcome = FrictionOutcome {
            ratio: (s1 - inputs.pore) / smallest,
            allowed,
            largest_s1: inputs.pore + smallest * allowed,
        };
        Ok(FrictionLimit { inputs, outcome })
    }
    fn inputs(&self) -> FrictionInputs {
        self.inputs
    }
    fn outcome(&self) -> FrictionOutcome {
        self.outcome
    }

    /// By the angle of friction: the limit is tan²(45° + φ/2), and at it the best oriented plane
    /// has shear = μ · normal stress.
    fn check(inputs: &FrictionInputs, outcome: &FrictionOutcome) -> Vec<Check> {
        let phi = inputs.friction.atan();
        let by_angle = (std::f64::consts::FRAC_PI_4 + 0.5 * phi).tan().powi(2);
        let [s1, _, s3] = inputs.stress.tensor().values_by_invariants().map(|v| v - inputs.pore.si());
        let at_limit = (outcome.largest_s1 - inputs.pore).si();
        let (centre, radius) = (0.5 * (at_limit + s3), 0.5 * (at_limit - s3));
        let (normal, shear) = (centre - radius * phi.sin(), radius * phi.cos());
        let largest = at_limit.abs().max(1.0) * 1e-6;
        vec![
            Check::compare(
                "largest ratio against tan²(45° + φ/2), φ = atan μ",
                &[outcome.allowed],
                &[by_angle],
                by_angle * 1e-12,
                "",
            ),
            Check::compare(
                "ratio from the roots of the characteristic equation",
                &[outcome.ratio],
                &[s1 / s3],
                // A double root of the characteristic equation is known to half the figures.
                s1.abs() / s3.abs() * 1e-7 * (inputs.stress.tensor().largest() / s3.abs()).max(1.0),
                "",
            ),
            Check::compare(
                "shear on the best oriented plane at the limit against μ times its normal stress",
                &[shear * 1e-6],
                &[inputs.friction * normal * 1e-6],
                largest * 1e-6,
                "MPa",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        let FrictionInputs { stress, pore, friction } = self.inputs;
        let [s1, _, s3] = stress.principals().magnitudes();
        let verdict = if self.is_within() { "within" } else { "OUTSIDE" };
        let mut notes = Vec::new();
        if !self.is_within() {
            notes.push(format!(
                "WARNING: the stress is outside the frictional limit; with S_3 {s3} and P_p {pore}, S_1 could be {} at most.",
                self.outcome.largest_s1
            ));
        }
        Explanation {
            title: format!("Stress{} against the frictional limit", stress.of_name()),
            headline: format!("ratio {} of at most {}: {verdict} the limit", fixed(self.outcome.ratio, 3), fixed(self.outcome.allowed, 3)),
            inputs: vec![
                stress.item("S", "stress in north, east, down"),
                Item::typed("P_p", "pore pressure", pore),
                Item::typed("μ", "coefficient of friction of faults", friction),
            ],
            results: vec![
                Item::new("r", "ratio of effective principal stresses", "ratio", vec![self.outcome.ratio], fixed(self.outcome.ratio, 3)),
                Item::new("r_max", "largest ratio that friction allows", "ratio", vec![self.outcome.allowed], fixed(self.outcome.allowed, 3)),
                Item::computed("S_1max", "S_1 at the limit with this S_3", self.outcome.largest_s1),
            ],
            method: Method {
                words: "A crust full of faults cannot hold a larger ratio of effective principal stresses than the best oriented one bears without cohesion.".to_owned(),
                formulas: vec![Formula::new(
                    "(S_1 - P_upright(p)) / (S_3 - P_upright(p)) <= (sqrt(mu^2 + 1) + mu)^2",
                    "(S_1 − P_p) / (S_3 − P_p) ≤ (√(μ² + 1) + μ)²",
                ), Formula::new(
                    "S_(1 upright(max)) = P_upright(p) + r_upright(max) (S_3 - P_upright(p))",
                    "S_1max = P_p + r_max (S_3 − P_p)",
                )],
                references: vec![Reference::new("Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, eq. 4.45, p. 133")],
                assumptions: vec!["Faults without cohesion exist in every orientation.".to_owned()],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!(
                    "r = ({} − {}) / ({} − {}) = {}",
                    fixed(s1.in_mpa(), 3), as_typed(pore.in_mpa()), fixed(s3.in_mpa(), 3), as_typed(pore.in_mpa()), fixed(self.outcome.ratio, 4)
                )),
                Step::worked(format!("r_max = (√({m}² + 1) + {m})² = {}", fixed(self.outcome.allowed, 4), m = as_typed(friction))),
                Step::worked(format!(
                    "S_1max = {pore} + {} · ({} − {pore}) = {} MPa",
                    fixed(self.outcome.allowed, 4), fixed(s3.in_mpa(), 3), fixed(self.outcome.largest_s1.in_mpa(), 3), pore = as_typed(pore.in_mpa())
                )),
            ],
            notes,
            topics: vec!["stress".to_owned(), "friction".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        cards
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn stress(sh_min: f64) -> Stress {
        Stress::from_horizontals(Horizontals {
            sv: 60.mpa(),
            sh_max: 55.mpa(),
            sh_min: sh_min.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(30.deg()),
        })
        .unwrap()
    }

    #[test]
    fn outside_is_a_warning_with_the_bound_and_open_fractures_are_refused() {
        let outside = stress(30.0).frictional_limit(20.mpa(), 0.6).unwrap();
        assert!(!outside.is_within());
        assert!(
            outside.card().explanation.notes[0].contains("S_1 could be 51.19 MPa at most"),
            "{:?}",
            outside.card().explanation.notes
        );
        assert!(stress(40.0).frictional_limit(20.mpa(), 0.6).unwrap().is_within());
        // Effective S3 of zero or less has no ratio.
        assert!(stress(18.0).frictional_limit(20.mpa(), 0.6).is_err());
    }
}
