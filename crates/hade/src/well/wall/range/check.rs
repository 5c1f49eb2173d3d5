//! The checks of a recommended range, by the second route.

use super::ends::{GovernedPressure, Governs, RangeEnd};
use super::raised;
use super::recommended::{RangeChoices, RangeInputs, RangeOutcome, WIDTHS};
use crate::card::Check;
use crate::units::{Angle, Pressure, Quantity};
use crate::well::wall::second_route::ByVectors;
use crate::well::wall::setup::WallSetup;

/// What the ends of a range are held against: the wall by the second route, and the choices.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Conditions {
    pub route: ByVectors,
    /// Pore pressure and tensile strength, Pa.
    pub pore: f64,
    pub tensile: f64,
    pub choices: RangeChoices,
}

/// So many pressures between zero and twice the largest stress are looked at, where no pressure keeps
/// the arcs within the allowed width.
pub(super) const MANY: u32 = 400;
/// The same where many walls are checked.
pub(super) const FEW: u32 = 40;

/// Each condition that sets an end, by the second route, just inside and just outside it.
pub(super) fn check(inputs: &RangeInputs, outcome: &RangeOutcome) -> Vec<Check> {
    let Some(conditions) = Conditions::new(&inputs.wall, &inputs.choices) else { return Vec::new() };
    let route = &conditions.route;
    let mut checks = Vec::new();
    if let Some(end) = outcome.bottom {
        checks.extend(conditions.bottom("bottom", end.pressure, end.governed_by));
        checks.push(check_weights(&inputs.choices, "bottom", &end));
    }
    let computed = if inputs.raised.is_some() { outcome.computed_top } else { outcome.top };
    if let Some(end) = computed {
        checks.extend(conditions.top("top", end.pressure));
        checks.push(check_weights(&inputs.choices, "top", &end));
    }
    if let (Some(raised), Some(end)) = (&inputs.raised, outcome.top) {
        checks.extend(raised::check(raised, end.pressure, computed.map(|c| c.pressure)));
        checks.push(check_weights(&inputs.choices, "raised top", &end));
    }
    if let (Some(bottom), Some(top), Some(breadth)) = (outcome.bottom, outcome.top, outcome.breadth) {
        checks.push(Check::compare(
            "bottom and breadth together make the top",
            &[(bottom.pressure + breadth).in_mpa()],
            &[top.pressure.in_mpa()],
            route.size() * 1e-6 * 1e-12,
            "MPa",
        ));
    }
    for (pressure, degrees) in outcome.at_widths.iter().zip(WIDTHS) {
        let Some(pressure) = pressure else { continue };
        checks.extend(conditions.lower(&format!("lower shear limit at {degrees}°"), *pressure, Angle::deg(degrees)));
    }
    if outcome.bottom.is_none() {
        checks.push(conditions.no_bottom("", MANY));
        let least = outcome.least_bad.map_or(f64::NAN, Quantity::si);
        let nudge = 1e-5 * route.size();
        let beside = route.worst(least - nudge).min(route.worst(least + nudge));
        checks.push(Check::holds(
            "the worst place fails no less at pressures beside the least bad one",
            (route.worst(least) - beside) * 1e-6,
            route.size() * 1e-6 * 1e-9,
            "MPa",
        ));
    }
    checks
}

impl Conditions {
    pub fn new(wall: &WallSetup, choices: &RangeChoices) -> Option<Self> {
        Some(Conditions {
            route: ByVectors::new(wall)?,
            pore: wall.inputs.pore.si(),
            tensile: wall.inputs.rock.tensile_strength.si(),
            choices: *choices,
        })
    }

    /// A lower shear limit at a width: arcs just above it are within the width, just below it not.
    pub fn lower(&self, name: &str, pressure: Pressure, width: Angle) -> [Check; 2] {
        let [inside, outside] = self.width_held(pressure.si(), width.si());
        [
            Check::holds(
                format!("{name}: arcs just above it are within the width, looking all round"),
                inside,
                1e-9,
                "rad",
            ),
            Check::holds(format!("{name}: arcs just below it are not"), outside, 0.0, "rad"),
        ]
    }

    /// By how much the widest arc just above a pressure is beyond a width, and just below it within.
    fn width_held(&self, pressure: f64, width: f64) -> [f64; 2] {
        let route = &self.route;
        let nudge = 1e-7 * route.size();
        // An arc too narrow for the looks still shows in the worst excess.
        let over = |p: f64| {
            let wider = (route.widest(p) - width).clamp(-10.0, 10.0);
            if width == 0.0 && wider <= 0.0 && route.worst(p) > 1e-11 * route.size() { 1e-9 } else { wider }
        };
        // What is just below must be wider, not merely no narrower.
        let below = over(pressure - nudge);
        [over(pressure + nudge), if below > 0.0 { -below } else { 1.0 - below }]
    }

    /// The bottom: where shear sets it, arcs are within the width just above it and not just below, and
    /// the margin is kept; where the pore pressure does, it is that with its margin, and what too
    /// little pressure makes fail there is within the width.
    pub fn bottom(&self, name: &str, bottom: Pressure, governs: Governs) -> [Check; 2] {
        let (bottom, width) = (bottom.si(), self.choices.allowed_width.si());
        let balance = self.pore + self.choices.margin_bottom.si();
        let unit = self.route.size() * 1e-6;
        if governs == Governs::PorePressure {
            return [
                Check::compare(
                    format!("{name}: pore pressure and its margin"),
                    &[bottom * 1e-6],
                    &[balance * 1e-6],
                    unit * 1e-12,
                    "MPa",
                ),
                Check::holds(
                    format!("{name}: arcs that too little pressure makes fail are within the allowed width"),
                    (self.route.widest_closing(bottom + 1e-7 * self.route.size()) - width).clamp(-10.0, 10.0),
                    1e-9,
                    "rad",
                ),
            ];
        }
        let [inside, outside] = self.width_held(bottom, width);
        [
            Check::holds(
                format!("{name}: arcs within the allowed width just above it, and not just below"),
                inside.max(outside),
                1e-9,
                "rad",
            ),
            Check::holds(
                format!("{name}: the margin over the pore pressure is kept"),
                (balance - bottom) * 1e-6,
                unit * 1e-12,
                "MPa",
            ),
        ]
    }

    /// The computed top with its margin holds the three upper conditions just below, and breaks one
    /// just above.
    pub fn top(&self, name: &str, top: Pressure) -> [Check; 2] {
        let route = &self.route;
        let size = route.size();
        let nudge = 1e-7 * size;
        let bare = top.si() + self.choices.margin_top.si();
        let [.., s3] = route.far().values_by_invariants();
        let broken = |p: f64| {
            ((p - s3) / size)
                .max((-self.tensile - route.least_in_wall_round(p)) / size)
                .max(route.worst_of_side(p, 1.0) / size)
        };
        [
            Check::holds(
                format!("{name}: S3, parting and shear all kept just below it (with its margin put back)"),
                broken(bare - nudge),
                1e-9,
                "",
            ),
            Check::holds(format!("{name}: one of the three lost just above it"), -broken(bare + nudge), 0.0, ""),
        ]
    }

    /// Either end, or that there is no bottom, as one check: the conditions of [`Conditions::bottom`] and
    /// [`Conditions::top`], with the numbers of the one nearest to failing.
    pub fn ends(&self, name: &str, bottom: Option<GovernedPressure>, top: Option<GovernedPressure>) -> Check {
        let mut checks = match bottom {
            Some(end) => self.bottom("bottom", end.pressure, end.governed_by).to_vec(),
            None => vec![self.no_bottom("", FEW)],
        };
        if let Some(end) = top {
            checks.extend(self.top("top", end.pressure));
        }
        let ends = match (bottom, top) {
            (Some(_), Some(_)) => "bottom and top are held just inside and lost just outside",
            (Some(_), None) => "bottom is held just inside and lost just outside",
            (None, Some(_)) => "no pressure of many is a bottom; top is held just inside and lost just outside",
            (None, None) => "no pressure of many is a bottom",
        };
        nearest_to_failing(format!("{name}: {ends}"), checks)
    }

    /// The limits behind the ends, one check each: arcs are within the allowed width just above the lower
    /// shear limit and not just below; the least effective principal stress is −T₀ at initiation; nothing
    /// is pushed out just below the upper shear limit, and something is just above.
    pub fn limits(&self, name: &str, [lower, initiation, upper]: [Option<Pressure>; 3]) -> [Option<Check>; 3] {
        let route = &self.route;
        let size = route.size();
        let unit = (size * 1e-6).max(1e-6);
        let lower = lower.map(|lower| {
            nearest_to_failing(
                format!("{name}, lower shear limit: arcs are within the width just above it, and not just below"),
                self.lower("it", lower, self.choices.allowed_width).to_vec(),
            )
        });
        let initiation = initiation.map(|initiation| {
            Check::compare(
                format!("{name}, initiation: the least effective principal stress round the hole"),
                &[route.least_round(initiation.si()) * 1e-6],
                &[-self.tensile * 1e-6],
                unit * 1e-8,
                "MPa",
            )
        });
        let upper = upper.map(Quantity::si).map(|upper| {
            let nudge = 1e-7 * size;
            let [inside, outside] = [upper - nudge, upper + nudge].map(|p| route.worst_of_side(p, 1.0) * 1e-6);
            nearest_to_failing(
                format!("{name}, upper shear: nothing is pushed out just below it, and something is just above"),
                vec![
                    Check::holds("pushed out just below", inside, unit * 1e-9, "MPa"),
                    Check::holds("not pushed out just above", -outside, 0.0, "MPa"),
                ],
            )
        });
        [lower, initiation, upper]
    }

    /// No pressure of many keeps the arcs within the allowed width: by how much the tightest misses it.
    pub fn no_bottom(&self, name: &str, looks: u32) -> Check {
        let width = self.choices.allowed_width.si();
        let all = 2.0 * self.route.size() / f64::from(looks);
        let tightest =
            (0..=looks).map(|k| self.route.widest(f64::from(k) * all)).fold(f64::INFINITY, f64::min).min(10.0);
        Check::holds(
            format!("{name}no pressure between zero and twice the largest stress keeps the arcs within the width"),
            width - tightest,
            0.0,
            "rad",
        )
    }
}

/// ρ g TVD and gradient · TVD give the pressure back.
pub(super) fn check_weights(choices: &RangeChoices, name: &str, end: &RangeEnd) -> Check {
    let tvd = choices.tvd_below_rotary;
    let pressure = end.pressure.in_mpa();
    Check::compare(
        format!("{name}: the column of its mud weight, and its gradient times TVD, give the pressure back"),
        &[end.mud_weight.column(tvd).in_mpa(), (end.gradient * tvd).in_mpa()],
        &[pressure, pressure],
        1e-12 * pressure.abs().max(1e-6),
        "MPa",
    )
}

/// Several checks as one, with the numbers of the one nearest to failing; one that fails is named.
pub(crate) fn nearest_to_failing(what: String, checks: Vec<Check>) -> Check {
    let share = |check: &Check| match check.difference {
        _ if !check.passed => f64::INFINITY,
        Some(difference) if difference > 0.0 => difference / check.tolerance,
        _ => 0.0,
    };
    let nearest = checks.into_iter().reduce(|a, b| if share(&b) > share(&a) { b } else { a });
    match nearest {
        Some(check) if check.passed => Check { what, ..check },
        Some(check) => Check { what: format!("{what}; fails: {}", check.what), ..check },
        None => Check::holds(what, f64::NAN, 0.0, ""),
    }
}
