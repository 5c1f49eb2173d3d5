//! Whether a fault slips or opens under a stress, and how far it is from that.

use serde::{Deserialize, Serialize};

use super::slip_check::slip_checks;
use super::strength::FaultStrength;
use crate::card::{Card, Check, Explain, Explanation};
use crate::error::{Error, Result};
use crate::frames::{Geographic, Plane};
use crate::stress::Stress;
use crate::units::{Angle, Pressure, Quantity};

/// A plane under a stress at a pore pressure, held against its strength.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FaultSlip {
    inputs: FaultSlipInputs,
    outcome: SlipOutcome,
}

/// The inputs.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct FaultSlipInputs {
    pub(super) stress: Stress<Geographic>,
    pub(super) plane: Plane,
    pub(super) strength: FaultStrength,
    pub(super) pore: Pressure,
}

/// What came out, in SI: pressures in Pa, the rake in radians.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct SlipOutcome {
    pub(super) normal: Pressure,
    pub(super) shear: Pressure,
    pub(super) rake: Option<Angle>,
    pub(super) effective_normal: Pressure,
    pub(super) slip_tendency: Option<f64>,
    pub(super) dilation_tendency: Option<f64>,
    pub(super) coulomb: Pressure,
    /// The pore pressure at which friction lets go, wherever it lies.
    pub(super) frictional_pore: Pressure,
    /// The same, but not above the normal stress, at which the fault opens.
    pub(super) critical_pore: Pressure,
}

/// How a fault stands under a stress.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[non_exhaustive]
pub enum FaultState {
    /// The shear stress is below the strength.
    Holds,
    /// The shear stress has reached the strength.
    Slips,
    /// The pore pressure has reached the normal stress: nothing presses the fault together.
    Open,
}

impl FaultState {
    /// "holds", "slips", "is open".
    pub fn words(self) -> &'static str {
        match self {
            FaultState::Holds => "holds",
            FaultState::Slips => "slips",
            FaultState::Open => "is open",
        }
    }
}

/// The largest and the least principal stress, found once for many planes.
#[derive(Clone, Copy, Debug)]
pub(super) struct Extremes {
    s1: f64,
    s3: f64,
    /// Whether they differ by more than rounding.
    differ: bool,
}

impl Extremes {
    pub fn of(stress: &Stress<Geographic>) -> Self {
        let principals = stress.principals();
        let [s1, _, s3] = principals.magnitudes().map(Quantity::si);
        Extremes { s1, s3, differ: principals.lines().iter().any(Option::is_some) }
    }
}

/// Rakes nearer than this to −180°, in radians, are written as 180°: they are the same slip, and
/// the sign would hang on rounding.
const SAME_END: f64 = 1e-9;

/// What a stress does on one plane.
pub(super) fn slip_of(
    stress: &Stress<Geographic>,
    extremes: Extremes,
    plane: Plane,
    strength: FaultStrength,
    pore: Pressure,
) -> Result<SlipOutcome> {
    let strength = strength.checked()?;
    pore.finite("pore pressure")?;
    let traction = stress.on(plane)?;
    let (normal, shear) = (traction.normal, traction.shear);
    let effective_normal = normal - pore;
    let half_turn = std::f64::consts::PI;
    let rake = traction
        .rake
        .map(|rake| if rake.si() < SAME_END - half_turn { Angle::from_si(rake.si() + 2.0 * half_turn) } else { rake });
    let frictional_pore = normal - (shear - strength.cohesion) / strength.friction;
    let outcome = SlipOutcome {
        normal,
        shear,
        rake,
        effective_normal,
        slip_tendency: (effective_normal.si() > 0.0).then(|| shear / effective_normal),
        dilation_tendency: extremes.differ.then(|| (extremes.s1 - normal.si()) / (extremes.s1 - extremes.s3)),
        coulomb: shear - strength.shear_strength(effective_normal),
        frictional_pore,
        critical_pore: if frictional_pore > normal { normal } else { frictional_pore },
    };
    let numbers = [outcome.coulomb.si(), frictional_pore.si(), outcome.slip_tendency.unwrap_or(0.0)];
    if numbers.iter().all(|n| n.is_finite()) {
        Ok(outcome)
    } else {
        Err(Error::not_physical(
            format!("The stress on the plane {} with {}", plane.words(), strength.words()),
            "the numbers are too large or too small to be worked with; check their units.",
        ))
    }
}

impl SlipOutcome {
    pub(super) fn state(&self) -> FaultState {
        if self.effective_normal.si() <= 0.0 {
            FaultState::Open
        } else if self.coulomb.si() >= 0.0 {
            FaultState::Slips
        } else {
            FaultState::Holds
        }
    }

    pub(super) fn opens_first(&self) -> bool {
        self.frictional_pore > self.normal
    }
}

impl Stress<Geographic> {
    /// Whether a plane slips or opens at a pore pressure: its slip tendency, dilation tendency,
    /// Coulomb stress, rake of slip and critical pore pressure.
    ///
    /// # Errors
    /// When the dip is outside 0–90° or the strike has no true north, the friction is not greater
    /// than zero, the cohesion is negative, or the pore pressure is not finite.
    pub fn slip_on(&self, plane: Plane, strength: FaultStrength, pore: Pressure) -> Result<FaultSlip> {
        FaultSlip::compute(FaultSlipInputs { stress: *self, plane, strength, pore })
    }
}

impl FaultSlip {
    pub(super) fn from_parts(inputs: FaultSlipInputs, outcome: SlipOutcome) -> Self {
        FaultSlip { inputs, outcome }
    }
    /// The plane.
    pub fn plane(&self) -> Plane {
        self.inputs.plane
    }
    /// The strength.
    pub fn strength(&self) -> FaultStrength {
        self.inputs.strength
    }
    /// The pore pressure.
    pub fn pore(&self) -> Pressure {
        self.inputs.pore
    }
    /// The total normal stress on the plane, compression positive.
    pub fn normal(&self) -> Pressure {
        self.outcome.normal
    }
    /// The size of the shear stress on the plane.
    pub fn shear(&self) -> Pressure {
        self.outcome.shear
    }
    /// The effective normal stress: normal stress less pore pressure. Zero or less: the fault is open.
    pub fn effective_normal(&self) -> Pressure {
        self.outcome.effective_normal
    }
    /// The direction the hanging wall slips or would slip, in the plane from strike, up dip
    /// positive: −90° for a normal fault. `None` where there is no shear.
    pub fn rake(&self) -> Option<Angle> {
        self.outcome.rake
    }
    /// The slip tendency τ / σ'_n (Morris, Ferrill and Henderson 1996). `None` when the fault is
    /// open.
    pub fn slip_tendency(&self) -> Option<f64> {
        self.outcome.slip_tendency
    }
    /// The dilation tendency (S_1 − σ_n) / (S_1 − S_3), 0 to 1 (Ferrill et al. 1999). `None` when
    /// all principal stresses are equal.
    pub fn dilation_tendency(&self) -> Option<f64> {
        self.outcome.dilation_tendency
    }
    /// The Coulomb stress τ − (C + μ σ'_n): the shear stress beyond the strength; zero or more:
    /// the fault slips.
    pub fn coulomb(&self) -> Pressure {
        self.outcome.coulomb
    }
    /// The pore pressure at which the fault slips or opens, whichever comes first:
    /// σ_n − (τ − C)/μ, but not above σ_n.
    pub fn critical_pore(&self) -> Pressure {
        self.outcome.critical_pore
    }
    /// The pore pressure at which friction and cohesion let go, σ_n − (τ − C)/μ, also where it lies
    /// above σ_n and is not reached because the fault opens first.
    pub fn frictional_pore(&self) -> Pressure {
        self.outcome.frictional_pore
    }
    /// Whether rising pore pressure opens the fault before its strength is reached (τ < C).
    pub fn opens_first(&self) -> bool {
        self.outcome.opens_first()
    }
    /// How much the pore pressure may rise until the fault slips or opens: critical less present
    /// pore pressure. Zero or less: it does already.
    pub fn margin(&self) -> Pressure {
        self.outcome.critical_pore - self.inputs.pore
    }
    /// How the fault stands.
    pub fn state(&self) -> FaultState {
        self.outcome.state()
    }
}

impl Explain for FaultSlip {
    const KIND: &'static str = "fault-slip";
    type Inputs = FaultSlipInputs;
    type Outcome = SlipOutcome;

    fn compute(inputs: FaultSlipInputs) -> Result<Self> {
        let extremes = Extremes::of(&inputs.stress);
        let outcome = slip_of(&inputs.stress, extremes, inputs.plane, inputs.strength, inputs.pore)?;
        Ok(FaultSlip { inputs, outcome })
    }
    fn inputs(&self) -> FaultSlipInputs {
        self.inputs
    }
    fn outcome(&self) -> SlipOutcome {
        self.outcome
    }
    /// By the principal stresses and direction cosines.
    fn check(inputs: &FaultSlipInputs, outcome: &SlipOutcome) -> Vec<Check> {
        slip_checks(&inputs.stress, inputs.pore, &[(inputs.plane, inputs.strength, *outcome)])
    }
    fn explain(&self) -> Explanation {
        super::slip_card::explain(self, &self.inputs)
    }
    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        cards.extend(self.inputs.plane.strike.upstream());
        cards
    }
}
