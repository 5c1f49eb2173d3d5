//! The planes nearest to slip: of all orientations those where shear exceeds friction the most.

use serde::{Deserialize, Serialize};

use super::slip::FaultState;
use super::strength::FaultStrength;
use crate::card::{Card, Check, Explain, Explanation};
use crate::error::Result;
use crate::frames::vector::{V3, add, dot, norm, scale};
use crate::frames::{Azimuth, Geographic, Plane};
use crate::stress::Stress;
use crate::stress::tensor::Tensor;
use crate::units::{Angle, Pressure, Quantity};

/// The conjugate pair of planes with the largest Coulomb stress. From [`Stress::critical_planes`].
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CriticalPlanes {
    inputs: CriticalInputs,
    outcome: CriticalOutcome,
}

/// The inputs.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct CriticalInputs {
    pub(super) stress: Stress<Geographic>,
    pub(super) strength: FaultStrength,
    pub(super) pore: Pressure,
}

/// What came out, in SI; the normals of the two planes in north, east, down, pointing down.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct CriticalOutcome {
    pub(super) normals: Option<[V3; 2]>,
    pub(super) effective_normal: Pressure,
    pub(super) shear: Pressure,
    pub(super) coulomb: Pressure,
    /// The pore pressure at which friction lets go on them.
    pub(super) frictional_pore: Pressure,
    /// The least pore pressure at which any plane slips or opens.
    pub(super) least_critical_pore: Pressure,
    /// The largest slip tendency of any plane.
    pub(super) largest_slip_tendency: Option<f64>,
}

/// Components of a unit normal smaller than this are rounding.
const ROUNDING: f64 = 1e-9;

/// The same normal pointing down; of a vertical plane the one whose strike is in 0–180°.
fn downward(n: V3) -> V3 {
    let vertical_plane = n[2].abs() < ROUNDING;
    let turn = match (vertical_plane, n[0].abs() < ROUNDING) {
        (false, _) => n[2] < 0.0,
        (true, false) => n[0] < 0.0,
        (true, true) => n[1] > 0.0,
    };
    let [x, y, z] = if turn { scale(n, -1.0) } else { n };
    [x, y, z.abs()]
}

/// The plane across a normal that points down: n = (sin s sin d, −cos s sin d, cos d). A horizontal
/// plane has strike 0.
pub(super) fn plane_across(n: V3) -> Plane {
    let [x, y, z] = downward(n);
    let level = x.hypot(y);
    let strike = if level < ROUNDING { 0.0 } else { x.atan2(-y).rem_euclid(std::f64::consts::TAU) };
    // Rounding just west of north is north.
    let strike = if std::f64::consts::TAU - strike < ROUNDING { 0.0 } else { strike };
    Plane { strike: Azimuth::from_true_north(Angle::from_si(strike)), dip: Angle::from_si(level.atan2(z)) }
}

/// Normal and shear stress on the plane across a unit normal, t = S n.
fn on(s: Tensor, n: V3) -> (f64, f64) {
    let t = s.times(n);
    let normal = dot(t, n);
    (normal, norm(add(t, scale(n, -normal))))
}

impl Stress<Geographic> {
    /// Of all orientations the two planes with the largest Coulomb stress: they contain S_2 and
    /// stand at 45° − φ/2 to S_1, φ = arctan μ. Those are the planes that slip first when the pore
    /// pressure rises.
    ///
    /// # Errors
    /// When the friction is not greater than zero, the cohesion is negative, or the pore pressure is
    /// not finite.
    pub fn critical_planes(&self, strength: FaultStrength, pore: Pressure) -> Result<CriticalPlanes> {
        CriticalPlanes::compute(CriticalInputs { stress: *self, strength, pore })
    }
}

impl CriticalPlanes {
    /// The conjugate pair, in rising order of strike. `None` when S_1 = S_2 or S_2 = S_3: then no
    /// two planes stand out.
    pub fn planes(&self) -> Option<[Plane; 2]> {
        self.outcome.normals.map(|pair| pair.map(plane_across))
    }
    /// The effective normal stress on them.
    pub fn effective_normal(&self) -> Pressure {
        self.outcome.effective_normal
    }
    /// The shear stress on them.
    pub fn shear(&self) -> Pressure {
        self.outcome.shear
    }
    /// Their Coulomb stress τ − (C + μ σ'_n), the largest of any plane.
    pub fn coulomb(&self) -> Pressure {
        self.outcome.coulomb
    }
    /// The least pore pressure at which a plane of any orientation slips or opens.
    pub fn least_critical_pore(&self) -> Pressure {
        self.outcome.least_critical_pore
    }
    /// The largest slip tendency τ / σ'_n of any plane; the tangent of the angle of friction that
    /// this stress mobilises. On planes at 45° − ψ/2 to S_1, tan ψ = it. `None` when S_3 does not
    /// exceed the pore pressure.
    pub fn largest_slip_tendency(&self) -> Option<f64> {
        self.outcome.largest_slip_tendency
    }

    pub(super) fn state(&self) -> FaultState {
        match (self.outcome.effective_normal.si() <= 0.0, self.outcome.coulomb.si() >= 0.0) {
            (true, _) => FaultState::Open,
            (_, true) => FaultState::Slips,
            _ => FaultState::Holds,
        }
    }
}

/// The angle from S_1 to the normals of the critical planes, 45° + φ/2.
pub(super) fn from_s1(phi: f64) -> f64 {
    std::f64::consts::FRAC_PI_4 + 0.5 * phi
}

impl Explain for CriticalPlanes {
    const KIND: &'static str = "critical-planes";
    type Inputs = CriticalInputs;
    type Outcome = CriticalOutcome;

    fn compute(inputs: CriticalInputs) -> Result<Self> {
        let CriticalInputs { stress, strength, pore } = inputs;
        let strength = strength.checked()?;
        pore.finite("pore pressure")?;
        let principals = stress.principals();
        let [s1, _, s3] = principals.magnitudes().map(|s| (s - pore).si());
        let phi = strength.friction.atan();
        let (centre, radius) = (0.5 * (s1 + s3), 0.5 * (s1 - s3));
        let (effective_normal, shear) = (centre - radius * phi.sin(), radius * phi.cos());
        let (effective_normal, shear) = (Pressure::from_si(effective_normal), Pressure::from_si(shear));
        let coulomb = shear - strength.shear_strength(effective_normal);
        let frictional_pore = pore - coulomb / strength.friction;
        let opening = Pressure::from_si(s3) + pore;
        let normals = principals.lines().iter().all(Option::is_some).then(|| {
            let [e1, _, e3] = stress.tensor().eigen().axes;
            let (sin, cos) = from_s1(phi).sin_cos();
            let pair = [1.0, -1.0].map(|side| downward(add(scale(e1, cos), scale(e3, side * sin))));
            let key = |n: &V3| {
                let plane = plane_across(*n);
                (plane.strike.measured().si(), plane.dip.si())
            };
            let [a, b] = [key(&pair[0]), key(&pair[1])];
            let later = if (a.0 - b.0).abs() < ROUNDING { a.1 > b.1 } else { a.0 > b.0 };
            if later { [pair[1], pair[0]] } else { pair }
        });
        let outcome = CriticalOutcome {
            normals,
            effective_normal,
            shear,
            coulomb,
            frictional_pore,
            least_critical_pore: if opening < frictional_pore { opening } else { frictional_pore },
            largest_slip_tendency: (s3 > 0.0).then(|| radius / (s1.sqrt() * s3.sqrt())),
        };
        crate::units::Quantity::finite(outcome.frictional_pore, "critical pore pressure")?;
        Ok(CriticalPlanes { inputs, outcome })
    }
    fn inputs(&self) -> CriticalInputs {
        self.inputs
    }
    fn outcome(&self) -> CriticalOutcome {
        self.outcome
    }

    /// By the traction on the planes themselves, and by a sweep over all orientations.
    fn check(inputs: &CriticalInputs, outcome: &CriticalOutcome) -> Vec<Check> {
        let CriticalInputs { stress, strength, pore } = *inputs;
        let (s, e, pore) = (stress.tensor(), stress.tensor().eigen(), pore.si());
        let (mu, cohesion) = (strength.friction, strength.cohesion.si());
        let largest = s.largest().max(pore.abs()).max(cohesion).max(1.0);
        let angle = from_s1(mu.atan());
        let across = |angle: f64| add(scale(e.axes[0], angle.cos()), scale(e.axes[2], angle.sin()));
        let coulomb = |(normal, shear): (f64, f64)| shear - cohesion - mu * (normal - pore);
        let mpa = |list: &[f64]| list.iter().map(|v| v * 1e-6).collect::<Vec<_>>();
        let pair = outcome.normals.unwrap_or([across(angle), across(-angle)]);
        let on_them = pair.map(|n| on(s, n));
        let got = [outcome.effective_normal.si(), outcome.shear.si(), outcome.coulomb.si()];
        let fine = largest * 1e-11 * (1.0 + mu);
        let mut checks: Vec<Check> = on_them
            .iter()
            .zip(["one", "other"])
            .map(|(t, which)| {
                let what = format!("effective normal, shear and Coulomb stress from t = S n on the {which} plane");
                Check::compare(what, &mpa(&got), &mpa(&[t.0 - pore, t.1, coulomb(*t)]), fine * 1e-6, "MPa")
            })
            .collect();
        if let Some(normals) = outcome.normals {
            let cosines = normals.map(|n| [dot(n, n), dot(n, e.axes[1]), dot(n, e.axes[0]).abs()]);
            let lines = Check::compare(
                "each normal has length 1, is square to S_2 and stands at 45° + φ/2 to S_1 (cosines)",
                cosines.as_flattened(),
                [[1.0, 0.0, angle.cos()]; 2].as_flattened(),
                1e-11,
                "",
            );
            checks.push(lines);
        }
        let let_go = outcome.frictional_pore.si();
        let borne = cohesion + mu * (on_them[0].0 - let_go);
        checks.push(Check::compare(
            "at the pore pressure where friction lets go, the strength equals the shear stress",
            &mpa(&[borne]),
            &mpa(&[on_them[0].1]),
            (let_go.abs().max(largest) * 1e-11 * (1.0 + mu)) * 1e-6,
            "MPa",
        ));
        checks.push(Check::compare(
            "least critical pore pressure: that one, but not above the normal stress of the plane across S_3",
            &mpa(&[outcome.least_critical_pore.si()]),
            &mpa(&[on(s, e.axes[2]).0.min(let_go)]),
            let_go.abs().max(largest) * 1e-11 * 1e-6,
            "MPa",
        ));
        if let Some(tendency) = outcome.largest_slip_tendency {
            // The plane where the line from the origin touches the largest circle.
            let [s1, s3] = [e.values[0] - pore, e.values[2] - pore];
            let touching = on(s, across(from_s1(((s1 - s3) / (s1 + s3)).asin())));
            checks.push(Check::compare(
                "largest slip tendency from t = S n on the plane where a line from the origin touches the largest circle",
                &[tendency],
                &[touching.1 / (touching.0 - pore)],
                1e-11 * (largest / s3).max(1.0) * tendency.max(1e-3),
                "",
            ));
        }
        checks.extend(sweep_checks(s, pore, outcome, coulomb));
        checks
    }

    fn explain(&self) -> Explanation {
        super::critical_card::explain(self, &self.inputs, &self.outcome)
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        cards
    }
}

/// The step of the sweep over all orientations, degrees.
const STEP: f64 = 3.0;

/// No plane of a sweep over the half sphere passes the two maxima, and the sweep comes as near to
/// them as its step allows.
fn sweep_checks(s: Tensor, pore: f64, outcome: &CriticalOutcome, coulomb: impl Fn((f64, f64)) -> f64) -> Vec<Check> {
    let (mut most, mut steepest) = (f64::NEG_INFINITY, 0.0_f64);
    let (rings, turns) = ((90.0 / STEP) as u32, (360.0 / STEP) as u32);
    for ring in 0..=rings {
        let (sin, cos) = (f64::from(ring) * STEP).to_radians().sin_cos();
        for turn in 0..turns {
            let (east, north) = (f64::from(turn) * STEP).to_radians().sin_cos();
            let (normal, shear) = on(s, [sin * north, sin * east, cos]);
            most = most.max(coulomb((normal, shear)));
            if normal > pore {
                steepest = steepest.max(shear / (normal - pore));
            }
        }
    }
    // No direction is farther than this from one of the sweep; twice that on Mohr's circle.
    let far = (STEP / std::f64::consts::SQRT_2).to_radians();
    let ends = s.eigen().values;
    let radius = 0.5 * (ends[0] - ends[2]);
    let friction_slope = (outcome.shear.si() / radius.max(f64::MIN_POSITIVE)).clamp(1e-6, 1.0);
    let missed = radius / friction_slope * 2.0 * far * far;
    let fine = s.largest().max(pore.abs()).max(1.0) * 1e-11;
    let top = outcome.coulomb.si();
    let mut checks = vec![
        Check::holds(
            "no plane of a sweep over all orientations, every 3°, has a larger Coulomb stress",
            (most - top) * 1e-6,
            fine / friction_slope * 1e-6,
            "MPa",
        ),
        Check::holds(
            "the largest Coulomb stress of the sweep comes as near as its step allows",
            (top - most) * 1e-6,
            (missed + fine) * 1e-6,
            "MPa",
        ),
    ];
    if let Some(tendency) = outcome.largest_slip_tendency {
        let allowed = 1e-9 * tendency.max(1.0) * (1.0 + s.largest() / (ends[2] - pore));
        checks.push(Check::holds("no plane of the sweep has a larger slip tendency", steepest - tendency, allowed, ""));
    }
    checks
}
