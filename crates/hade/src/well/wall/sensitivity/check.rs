//! The checks of a sensitivity: each changed wall is built anew for the second route, and the ends of
//! its range are held against it.

use super::sensitivity::{ChangedEnds, SensitivityInputs, SensitivityOutcome};
use super::vary::{Route, Vary};
use crate::card::Check;
use crate::frames::vector::V3;
use crate::stress::tensor::Tensor;
use crate::well::wall::range::Conditions;
use crate::well::wall::second_route::ByVectors;
use crate::well::wall::setup::WallSetup;

/// The base and every changed range.
pub(super) fn check(inputs: &SensitivityInputs, outcome: &SensitivityOutcome) -> Vec<Check> {
    let setup = inputs.range.wall;
    let Some(base) = Conditions::new(&setup, &inputs.range.choices) else { return Vec::new() };
    let mut checks = vec![base.ends("nothing changed", outcome.bottom, outcome.top)];
    checks.push(Check::compare(
        "a changed range for every input",
        &[outcome.rows.len() as f64],
        &[inputs.vary.len() as f64],
        0.0,
        "",
    ));
    for (vary, row) in inputs.vary.iter().zip(&outcome.rows) {
        let name = vary.symbol();
        let value = beside(stated(&base.route, &setup, *vary), 0.5 * (row.less.value + row.more.value), *vary);
        let size = value.abs().max(vary.by());
        checks.push(Check::compare(
            format!("{name}: its less and more against what was stated and the amount, in SI"),
            &[row.less.value, row.more.value],
            &[value - vary.by(), value + vary.by()],
            1e-9 * size,
            "",
        ));
        for (side, ends, words) in [(-1.0, row.less, "less"), (1.0, row.more, "more")] {
            checks.extend(check_side(&base, &setup, *vary, side, &ends, &format!("{name} {words}")));
        }
    }
    checks
}

fn check_side(
    base: &Conditions,
    setup: &WallSetup,
    vary: Vary,
    side: f64,
    ends: &ChangedEnds,
    name: &str,
) -> Vec<Check> {
    let by = side * vary.by();
    let turned = |route: ByVectors| Some(Conditions { route, ..*base });
    let route = &base.route;
    const DOWN: V3 = [0.0, 0.0, 1.0];
    let conditions = match vary.route() {
        Route::Down => turned(route.with_far_along(DOWN, by)),
        Route::Along(which) => {
            let [larger, smaller] = route.level_axes();
            turned(route.with_far_along(if which == 0 { larger } else { smaller }, by))
        }
        // Turning the stress is turning everything else the other way.
        Route::StressTurns => turned(route.with_hole_turned(DOWN, -by).with_plane_turned(DOWN, -by)),
        Route::HoleTurns => turned(route.with_hole_turned(DOWN, by)),
        Route::HoleLeans => turned(route.with_hole_turned(route.direction(std::f64::consts::FRAC_PI_2), by)),
        Route::Number => vary.changed(setup, side).ok().and_then(|setup| Conditions::new(&setup, &base.choices)),
    };
    let Some(conditions) = conditions else {
        return vec![Check::holds(format!("{name}: the changed wall can be built"), f64::NAN, 0.0, "")];
    };
    let mut checks = vec![conditions.ends(name, ends.bottom, ends.top)];
    if vary.route() == Route::Number {
        checks.push(check_number(setup, vary, by, name));
    }
    checks
}

/// Of all numbers of a wall only the varied one is another, by the amount.
fn check_number(setup: &WallSetup, vary: Vary, by: f64, name: &str) -> Check {
    let numbers = |setup: &WallSetup| -> Vec<(String, Vec<f64>)> {
        setup.items().into_iter().map(|item| (item.symbol, item.si)).collect()
    };
    let expected: Vec<f64> = numbers(setup)
        .into_iter()
        .flat_map(|(symbol, si)| {
            let added = if symbol == vary.symbol() { by } else { 0.0 };
            si.into_iter().map(move |number| number + added)
        })
        .collect();
    let changed = vary.changed(setup, by.signum());
    let got: Vec<f64> = changed.iter().flat_map(numbers).flat_map(|(_, si)| si).collect();
    let size = expected.iter().fold(1e-6_f64, |m, v| m.max(v.abs()));
    Check::compare(
        format!("{name}: of all numbers of the wall only this one is changed, in SI"),
        &got,
        &expected,
        1e-15 * size,
        "",
    )
}

/// An azimuth written with another number of half turns (of a line) or turns, nearest to a value.
fn beside(number: f64, value: f64, vary: Vary) -> f64 {
    let turn = match vary.route() {
        Route::StressTurns => std::f64::consts::PI,
        Route::HoleTurns => std::f64::consts::TAU,
        _ => return number,
    };
    number + turn * ((value - number) / turn).round()
}

/// The input as it was stated, by another route.
fn stated(route: &ByVectors, setup: &WallSetup, vary: Vary) -> f64 {
    let far = route.far();
    let along = |axis: V3| crate::frames::vector::dot(axis, far.times(axis));
    let [larger, smaller] = route.level_axes();
    let hole = route.direction_along();
    match vary.route() {
        Route::Down => along([0.0, 0.0, 1.0]),
        Route::Along(which) => along(if which == 0 { larger } else { smaller }),
        Route::StressTurns => larger[1].atan2(larger[0]).rem_euclid(std::f64::consts::PI),
        Route::HoleLeans => hole[0].hypot(hole[1]).atan2(hole[2]),
        // The right of a hole is level, a right angle clockwise from its azimuth, also of a vertical one.
        Route::HoleTurns => {
            let [north, east, _] = route.direction(std::f64::consts::FRAC_PI_2);
            (-north).atan2(east).rem_euclid(std::f64::consts::TAU)
        }
        Route::Number => {
            let items = setup.items();
            let found = items.iter().find(|item| item.symbol == vary.symbol());
            found.and_then(|item| item.si.first().copied()).unwrap_or(f64::NAN)
        }
    }
}

/// Walls changed in one thing.
impl ByVectors {
    /// With that much more normal stress along a direction.
    fn with_far_along(&self, axis: V3, by: f64) -> Self {
        let [x, y, z] = axis;
        let dyad = Tensor([x * x, y * y, z * z, x * y, y * z, x * z]);
        self.with_far(self.far().add(dyad.scale(by)))
    }

    /// The level directions of the larger and the smaller horizontal normal stress, by the eigenvectors
    /// of the horizontal part of the tensor.
    fn level_axes(&self) -> [V3; 2] {
        let [nn, ee, _, ne, ..] = self.far().0;
        let aside = -10.0 * (nn.abs() + ee.abs() + ne.abs());
        let [larger, smaller, _] = Tensor([nn, ee, aside, ne, 0.0, 0.0]).eigen().axes;
        [larger, smaller]
    }
}
