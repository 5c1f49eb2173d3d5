//! The checks of a hindcast: depths by quadrature, pressures by the trade's gradient of water, each limit
//! by another route.

use super::event::EventKind;
use super::hindcast::{Against, HindcastInputs, HindcastOutcome, HindcastRow};
use crate::along::ground::{AtPlace, GroundInHole};
use crate::card::Check;
use crate::units::{Pressure, Quantity};
use crate::well::Conditions;

/// The static gradient of a fluid of specific gravity 1 in psi/ft, from the definitions of both units.
const PSI_PER_FOOT: f64 = 0.433_527_504_001;

pub(super) fn check(inputs: &HindcastInputs, outcome: &HindcastOutcome) -> Vec<Check> {
    let Ok((survey, ground)) = inputs.log.read() else { return Vec::new() };
    let Ok(in_hole) = GroundInHole::new(&ground, &survey) else { return Vec::new() };
    let events = &inputs.events.events;
    let mut checks = vec![Check::compare(
        "a row for every event, at its depth, with its mud weights",
        &outcome.rows.iter().flat_map(|row| numbers(&row.event)).collect::<Vec<_>>(),
        &events.iter().flat_map(numbers).collect::<Vec<_>>(),
        1e-9,
        "m and kg/m³",
    )];
    let mut order: Vec<(f64, f64)> = outcome.rows.iter().map(|row| (row.event.md.si(), row.tvd.si())).collect();
    order.sort_by(|a, b| a.0.total_cmp(&b.0));
    let (mds, tvds): (Vec<f64>, Vec<f64>) = order.into_iter().unzip();
    checks.push(Check::compare(
        "TVD of every event by Simpson's rule over the turning direction",
        &tvds,
        &survey.depths_by_quadrature(&mds),
        1e-6,
        "m",
    ));
    for (row, event) in outcome.rows.iter().zip(events) {
        let name = format!("{} at MD {:.1} m", event.kind.words(), event.md.in_m());
        let state = survey.place(event.md).and_then(|place| in_hole.state(&place, in_hole.layer_at(&place)?));
        let Ok(state) = state else {
            checks.push(Check::holds(format!("{name}: the ground says what is there"), f64::NAN, 0.0, ""));
            continue;
        };
        checks.extend(pressures(&name, row, inputs.within));
        checks.push(limit(&name, row, &state, inputs, &in_hole));
    }
    checks
}

fn numbers(event: &super::event::DrillingEvent) -> Vec<f64> {
    let ecd = event.circulating_density.map(|density| density.in_kg_m3());
    [event.md.si(), event.mud_weight.in_kg_m3()].into_iter().chain(ecd).collect()
}

/// The pressure by psi, the distance to the limit by feet of head, and the verdict.
fn pressures(name: &str, row: &HindcastRow, within: Pressure) -> Vec<Check> {
    let density = match (row.event.kind, row.event.circulating_density) {
        (EventKind::Losses, Some(circulating)) => circulating,
        _ => row.event.mud_weight,
    };
    let psi = PSI_PER_FOOT * density.in_sg() * row.tvd.in_ft();
    let mut checks = vec![Check::compare(
        format!("{name}: pressure by 0.4335275 psi/ft · sg · feet"),
        &[row.pressure.in_psi()],
        &[psi],
        1e-8 * psi.abs().max(1.0),
        "psi",
    )];
    let (Some(limit), Some(beyond)) = (row.limit, row.beyond) else { return checks };
    let rising = match row.event.kind {
        EventKind::Losses | EventKind::InGauge => true,
        EventKind::LeakOff => beyond.si() * (psi - limit.in_psi()) >= 0.0,
        _ => false,
    };
    let apart = if rising { psi - limit.in_psi() } else { limit.in_psi() - psi };
    let tolerance = 1e-8 * psi.abs().max(limit.in_psi().abs()).max(1.0);
    checks.push(Check::compare(
        format!("{name}: pressure and limit are so far apart, in psi"),
        &[beyond.in_psi()],
        &[apart],
        tolerance,
        "psi",
    ));
    let hit = apart >= -within.in_psi() - tolerance;
    let near = (apart + within.in_psi()).abs() <= 2.0 * tolerance;
    let wrong = if hit == row.hit || near { 0.0 } else { 1.0 };
    checks.push(Check::holds(format!("{name}: a hit where that is not less than the tolerance"), wrong, 0.0, ""));
    checks
}

/// The limit by another route.
fn limit(name: &str, row: &HindcastRow, state: &AtPlace, inputs: &HindcastInputs, in_hole: &GroundInHole<'_>) -> Check {
    let what = format!("{name}: {} by another route", row.against.words());
    let place = &state.place;
    let conditions = state.wall().ok().and_then(|wall| Conditions::new(&wall, &inputs.log.choices.at(place.at[2])));
    let (Some(conditions), Some(limit)) = (conditions, row.limit) else {
        let missing = if row.limit.is_none() && row.beyond.is_none() { 0.0 } else { f64::NAN };
        return Check::holds(what, missing, 0.0, "");
    };
    let unit = conditions.route.size() * 1e-6;
    let compare =
        |other: f64, tolerance: f64| Check::compare(what.clone(), &[limit.in_mpa()], &[other * 1e-6], tolerance, "MPa");
    match row.against {
        Against::PorePressure => {
            let layer = in_hole.layer_at(place).ok();
            let other = layer.and_then(|layer| in_hole.by_another_route(place, layer));
            compare(other.map_or(f64::NAN, |[_, pore, ..]| pore), 1e-9 * unit)
        }
        Against::LeastStress => {
            let [.., s3] = conditions.route.far().values_by_invariants();
            compare(s3, 1e-7 * unit)
        }
        Against::LowerShear | Against::Initiation => {
            let limits =
                if row.against == Against::LowerShear { [Some(limit), None, None] } else { [None, Some(limit), None] };
            let found = conditions.limits(name, limits).into_iter().flatten().next();
            found.unwrap_or_else(|| Check::holds(what, f64::NAN, 0.0, ""))
        }
        Against::NoSafe | Against::AnySafe => Check::holds(what, f64::NAN, 0.0, ""),
    }
}
