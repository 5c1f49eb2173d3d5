//! The pressures that a mud makes, held against the recommended range: static density and swab against
//! the bottom, circulating density and surge against the top.

use serde::{Deserialize, Serialize};

use super::check::Conditions;
use super::ends::{GovernedPressure, Governs, RangeEnd};
use super::raised;
use super::recommended::{RangeInputs, RecommendedRange};
use crate::card::{Check, Explain};
use crate::error::{Error, Result};
use crate::units::{Density, Gradient, Length, Pressure, Quantity, require_not_negative, with_typed_unit};
use crate::well::wall::around::{ArcsOutcome, FailingArcs, check_arcs};

/// A mud and what moving pipe and pumps do to its pressure at the depth of the range. Nothing of it
/// is defaulted: what is not known is `None`, and the card says that it is not stated.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct MudPlan {
    /// The mud weight at rest, zero or more.
    pub static_density: Density,
    /// What pulling pipe takes from the pressure of the mud at rest, zero or more.
    pub swab: Option<Pressure>,
    /// The equivalent circulating density: the static one, with the friction of circulation.
    pub circulating_density: Option<Density>,
    /// What running pipe adds to the pressure of the mud at rest, zero or more. Where the pumps run
    /// meanwhile it is the whole addition.
    pub surge: Option<Pressure>,
}

/// What the mud does.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[non_exhaustive]
pub enum MudState {
    /// It is at rest. Held against both ends.
    Static,
    /// Pipe is pulled. Held against the bottom.
    Swabbed,
    /// It circulates. Held against the top.
    Circulating,
    /// Pipe is run. Held against the top.
    Surged,
}

impl MudState {
    pub(super) const ALL: [MudState; 4] =
        [MudState::Static, MudState::Swabbed, MudState::Circulating, MudState::Surged];

    /// "static less swab".
    pub fn words(self) -> &'static str {
        match self {
            MudState::Static => "static",
            MudState::Swabbed => "static less swab",
            MudState::Circulating => "circulating",
            MudState::Surged => "static and surge",
        }
    }

    /// Against which ends it is held: bottom, top.
    pub(super) fn held_against(self) -> [bool; 2] {
        match self {
            MudState::Static => [true, true],
            MudState::Swabbed => [true, false],
            MudState::Circulating | MudState::Surged => [false, true],
        }
    }
}

/// One pressure of the mud, with what is left to either end of the range.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct HeldPressure {
    /// What the mud does.
    pub state: MudState,
    /// The pressure at the depth of the range.
    pub pressure: Pressure,
    /// Its mean gradient from the rotary table.
    pub gradient: Gradient,
    /// The mud weight whose static column gives it.
    pub mud_weight: Density,
    /// How far it is above the bottom (negative: below it); `None` where there is no bottom.
    pub above_bottom: Option<Pressure>,
    /// How far it is below the top (negative: above it); `None` where there is no top.
    pub below_top: Option<Pressure>,
}

impl HeldPressure {
    fn new(state: MudState, pressure: Pressure, tvd: Length, range: &RecommendedRange) -> Self {
        HeldPressure {
            state,
            pressure,
            gradient: pressure.gradient_over(tvd),
            mud_weight: pressure.mud_weight_at(tvd),
            above_bottom: range.bottom.map(|end| pressure - end.pressure),
            below_top: range.top.map(|end| end.pressure - pressure),
        }
    }

    /// Whether it keeps to the ends that it is held against: false also where such an end is missing.
    pub fn is_inside(&self) -> bool {
        // A mud weight read off an end is at it, but for rounding.
        let slack = Pressure::from_si(1e-9 * self.pressure.si().abs());
        let [bottom, top] = self.state.held_against();
        let kept = |margin: Option<Pressure>| margin.is_some_and(|m| m >= -slack);
        (!bottom || kept(self.above_bottom)) && (!top || kept(self.below_top))
    }
}

/// A mud held against a recommended range.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MudHeld {
    pub(super) range: RecommendedRange,
    pub(super) plan: MudPlan,
    /// In the order of the states; `None` where the plan does not state it.
    pub(super) held: [Option<HeldPressure>; 4],
    /// What fails in shear at the static pressure.
    pub(super) arcs: ArcsOutcome,
}

/// The inputs of a held mud.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct HeldInputs {
    pub(super) range: RangeInputs,
    pub(super) plan: MudPlan,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct HeldOutcome {
    pub(super) bottom: Option<GovernedPressure>,
    pub(super) top: Option<GovernedPressure>,
    pub(super) held: [Option<HeldPressure>; 4],
    pub(super) static_arcs: ArcsOutcome,
}

impl RecommendedRange {
    /// Holds the pressures of a mud against this range: static density and swab against the bottom,
    /// circulating density and surge against the top (the static one against that too).
    ///
    /// # Errors
    /// When a density, the swab or the surge is negative or not finite, or the circulating density is
    /// below the static one.
    pub fn hold(&self, plan: MudPlan) -> Result<MudHeld> {
        require_not_negative("static mud weight", plan.static_density)?;
        for (what, value) in [("swab", plan.swab), ("surge", plan.surge)] {
            value.map_or(Ok(Pressure::default()), |value| require_not_negative(what, value))?;
        }
        if let Some(circulating) = plan.circulating_density {
            require_not_negative("circulating density", circulating)?;
            if circulating < plan.static_density {
                return Err(Error::not_physical(
                    format!(
                        "A circulating density of {} is below the static {}",
                        with_typed_unit(circulating),
                        with_typed_unit(plan.static_density)
                    ),
                    "friction of circulation only adds; exchange the two if they were mixed up.",
                ));
            }
        }
        let tvd = self.choices.tvd_below_rotary;
        let still = plan.static_density.column(tvd);
        let held = MudState::ALL.map(|state| {
            let pressure = match state {
                MudState::Static => Some(still),
                MudState::Swabbed => plan.swab.map(|swab| still - swab),
                MudState::Circulating => plan.circulating_density.map(|density| density.column(tvd)),
                MudState::Surged => plan.surge.map(|surge| still + surge),
            };
            pressure.map(|pressure| HeldPressure::new(state, pressure, tvd, self))
        });
        Ok(MudHeld { range: *self, plan, held, arcs: self.wall.arcs_outcome(still) })
    }
}

impl MudHeld {
    /// The pressures that were stated: at rest, swabbed, circulating, surged.
    pub fn pressures(&self) -> Vec<HeldPressure> {
        self.held.iter().flatten().copied().collect()
    }

    /// What the plan does not state, so that it was not held against anything.
    pub fn not_stated(&self) -> Vec<MudState> {
        MudState::ALL.into_iter().zip(self.held).filter(|(_, held)| held.is_none()).map(|(state, _)| state).collect()
    }

    /// Whether every pressure that was stated keeps to the ends it is held against, and the range is
    /// not empty.
    pub fn is_inside(&self) -> bool {
        !self.range.is_empty() && self.held.iter().flatten().all(HeldPressure::is_inside)
    }

    /// The range it is held against.
    pub fn range(&self) -> RecommendedRange {
        self.range
    }

    /// What fails in shear at the pressure of the mud at rest.
    ///
    /// # Errors
    /// As [`Wall::failing_arcs`](crate::well::Wall::failing_arcs).
    pub fn static_arcs(&self) -> Result<FailingArcs> {
        self.range.wall.failing_arcs(self.plan.static_density.column(self.range.choices.tvd_below_rotary))
    }

    pub(super) fn outcome_now(&self) -> HeldOutcome {
        let end = |end: RangeEnd| GovernedPressure { pressure: end.pressure, governed_by: end.governed_by };
        HeldOutcome {
            bottom: self.range.bottom.map(end),
            top: self.range.top.map(end),
            held: self.held,
            static_arcs: self.arcs,
        }
    }
}

/// Pressures by the trade's gradient of water, margins back to the ends, ends and arcs by the second
/// route.
pub(super) fn check(inputs: &HeldInputs, outcome: &HeldOutcome) -> Vec<Check> {
    let RangeInputs { wall, choices, raised } = inputs.range;
    let Some(conditions) = Conditions::new(&wall, &choices) else { return Vec::new() };
    let plan = inputs.plan;
    let tvd = choices.tvd_below_rotary;
    let column = |density: Density| Pressure::psi(0.433_527_504_001 * density.in_sg() * tvd.in_ft()).in_mpa();
    let still = column(plan.static_density);
    let mut checks = Vec::new();
    for (state, held) in MudState::ALL.into_iter().zip(outcome.held) {
        let expected = match state {
            MudState::Static => Some(still),
            MudState::Swabbed => plan.swab.map(|swab| still - swab.in_mpa()),
            MudState::Circulating => plan.circulating_density.map(column),
            MudState::Surged => plan.surge.map(|surge| still + surge.in_mpa()),
        };
        let name = state.words();
        let (Some(held), Some(expected)) = (held, expected) else {
            let unlike = if held.is_some() == expected.is_some() { 0.0 } else { 1.0 };
            checks.push(Check::holds(format!("{name}: held where it is stated, and only there"), unlike, 0.0, ""));
            continue;
        };
        let p = held.pressure.in_mpa();
        let unit = still.abs().max(p.abs()).max(1e-6);
        checks.push(Check::compare(
            format!("{name}: pressure by 0.4335275 psi/ft · sg · feet"),
            &[p],
            &[expected],
            1e-9 * unit,
            "MPa",
        ));
        checks.push(Check::compare(
            format!("{name}: the column of its mud weight, and its gradient times TVD, give the pressure back"),
            &[held.mud_weight.column(tvd).in_mpa(), (held.gradient * tvd).in_mpa()],
            &[p, p],
            1e-12 * unit,
            "MPa",
        ));
        for (margin, end, sense, of) in
            [(held.above_bottom, outcome.bottom, 1.0, "bottom"), (held.below_top, outcome.top, -1.0, "top")]
        {
            if let (Some(margin), Some(end)) = (margin, end) {
                checks.push(Check::compare(
                    format!("{name}: {of} and what is left to it make the pressure"),
                    &[end.pressure.in_mpa() + sense * margin.in_mpa()],
                    &[p],
                    1e-12 * (conditions.route.size() * 1e-6 + unit),
                    "MPa",
                ));
            }
        }
    }
    if let Some(end) = outcome.bottom {
        checks.extend(conditions.bottom("bottom", end.pressure, end.governed_by));
    }
    match (outcome.top, raised) {
        (Some(end), Some(raised)) if end.governed_by == Governs::Engineer => {
            let computed = RecommendedRange::compute(RangeInputs { raised: None, ..inputs.range }).ok();
            let below = computed.and_then(|range| range.computed_top).map(|top| top.pressure);
            checks.extend(raised::check(&raised, end.pressure, below));
        }
        (Some(end), _) => checks.extend(conditions.top("top", end.pressure)),
        (None, _) => {}
    }
    let pressure = plan.static_density.column(tvd).si();
    checks.extend(check_arcs(&conditions.route, pressure, &outcome.static_arcs));
    checks
}
