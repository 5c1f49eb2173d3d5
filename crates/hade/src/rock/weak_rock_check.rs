//! Rock with a plane of weakness by other routes: the traction on the plane at failure against its
//! strength, and the intact criterion on the whole tensor.

use super::envelope::relative_tolerance;
use super::weak_rock::{WeakRockInputs, WeakRockMode, WeakRockOutcome};
use crate::card::Check;
use crate::frames::vector::dot;
use crate::stress::tensor::Tensor;
use crate::units::Quantity;

/// By how much the shear stress on the plane passes its strength, in Pa: traction t = S n, with σ1 along
/// the first axis and the normal at β to it.
fn passes(inputs: &WeakRockInputs, s1: f64, beta: f64) -> f64 {
    let s3 = inputs.sigma_3.si();
    let (sin, cos) = beta.sin_cos();
    let normal = [cos, 0.0, sin];
    let traction = Tensor([s1, s3, s3, 0.0, 0.0, 0.0]).times(normal);
    let (pressing, shear) = (dot(traction, normal), dot(traction, [sin, 0.0, -cos]));
    let phi = inputs.plane.friction_angle.si();
    // Times cos φw, which stays finite.
    shear * phi.cos() - inputs.plane.cohesion.si() * phi.cos() - pressing * phi.sin()
}

pub(super) fn checks(inputs: &WeakRockInputs, o: &WeakRockOutcome) -> Vec<Check> {
    let (beta, phi) = (inputs.beta.si(), inputs.plane.friction_angle.si());
    let s3 = inputs.sigma_3.si();
    let largest = [o.intact, o.strength, o.weakest, inputs.sigma_3, inputs.plane.cohesion]
        .map(|p| p.si().abs())
        .into_iter()
        .fold(1.0, f64::max);
    let zero = |what: &str, off: f64, size: f64| Check::compare(what, &[off * 1e-6], &[0.0], size * 1e-6, "MPa");
    let holds = |what: &str, true_: bool| Check::holds(what, if true_ { 0.0 } else { 1.0 }, 0.0, "");
    let again = inputs.intact.second_route();
    let breaks = again.excess(Tensor([o.intact.si(), s3, s3, 0.0, 0.0, 0.0]));
    let mut checks = vec![
        zero(
            "the intact rock at its strength, by the criterion on the whole tensor",
            breaks,
            10.0 * relative_tolerance(inputs.intact) * largest.max(inputs.intact.law().size()),
        ),
        zero(
            "the worst plane at its strength, by its traction",
            passes(inputs, o.weakest.si(), o.weakest_beta.si()),
            1e-12 * largest,
        ),
        Check::compare(
            "tangent of β of the worst plane against (1 + sin φ_w) / cos φ_w",
            &[o.weakest_beta.si().tan()],
            &[(1.0 + phi.sin()) / phi.cos()],
            1e-9 * (1.0 + phi.sin()) / phi.cos() / phi.cos(),
            "",
        ),
    ];
    // The plane can slip when ever larger σ1 passes its strength.
    let slope = passes(inputs, s3 + 1.0, beta) - passes(inputs, s3, beta);
    let can_slip = beta.cos() > 1e-12 && beta > phi;
    if slope.abs() > 1e-9 {
        checks.push(holds(
            "the plane slips where larger σ'_1 loads it more than it holds it",
            (slope > 0.0) == o.weak.is_some(),
        ));
    }
    if let Some(weak) = o.weak {
        let size = largest.max(weak.si().abs());
        checks.push(zero("the plane at its strength, by its traction", passes(inputs, weak.si(), beta), 1e-12 * size));
    }
    let slips = o.weak.filter(|w| can_slip && *w < o.intact);
    checks.push(Check::compare(
        "strength is the smaller of the two",
        &[o.strength.in_mpa()],
        &[slips.unwrap_or(o.intact).in_mpa()],
        0.0,
        "MPa",
    ));
    let mode = if slips.is_some() { WeakRockMode::SlipsOnPlane } else { WeakRockMode::BreaksIntact };
    checks.push(holds("mode of the smaller of the two", o.mode == mode));
    match o.governs {
        Some(ends) => {
            for (name, end) in ["first", "last"].into_iter().zip(ends) {
                checks.push(zero(
                    &format!("at the {name} β that the plane governs it slips as the rock breaks, by its traction"),
                    passes(inputs, o.intact.si(), end.si()),
                    1e-10 * largest,
                ));
            }
            let middle = 0.5 * (ends[0] + ends[1]).si();
            checks.push(holds("between the two it slips before", passes(inputs, o.intact.si(), middle) > 0.0));
        }
        None => checks.push(zero(
            "the rock breaks before the worst plane slips",
            passes(inputs, o.intact.si(), o.weakest_beta.si()).max(0.0),
            1e-10 * largest,
        )),
    }
    checks
}
