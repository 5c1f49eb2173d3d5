//! The checks of a log by other routes: the depth of every printed row by quadrature, its stresses by
//! shares, its limits and ends by the second route of the wall; and what the log comes to from the rows.

use rayon::prelude::*;

use super::friction::FrictionAlong;
use super::limit_log::LogInputs;
use super::row::LogRow;
use super::section::{HoleSection, SectionEnd, SectionRange};
use super::summary::LogOutcome;
use crate::along::ground::{AtPlace, GroundInHole, Layer};
use crate::card::Check;
use crate::error::Result;
use crate::units::{Length, Pressure, Quantity, Warming};
use crate::well::{Conditions, GovernedPressure, MudState, Survey, nearest_to_failing};

/// The static gradient of a fluid of specific gravity 1 in psi/ft, from the definitions of both units.
const PSI_PER_FOOT: f64 = 0.433_527_504_001;
/// Depths that must meet may differ by this, metres.
const MEET: f64 = 1e-6;

pub(super) fn check(inputs: &LogInputs, outcome: &LogOutcome) -> Vec<Check> {
    let Ok((survey, ground)) = inputs.read() else { return Vec::new() };
    let Ok(in_hole) = GroundInHole::new(&ground, &survey) else { return Vec::new() };
    let Ok(states) = states(inputs, &survey, &in_hole) else { return Vec::new() };
    let mut checks = places(inputs, outcome, &survey, &in_hole);
    checks.push(stresses(inputs, outcome, &states, &in_hole));
    checks.extend(warming(inputs, outcome, &states, &in_hole));
    checks.extend(walls(inputs, outcome, &states));
    checks.extend(whole(outcome));
    checks.extend(sections(inputs, outcome));
    if let Some(friction) = inputs.friction {
        checks.extend(FrictionAlong::check(outcome.friction.as_ref(), &outcome.rows, friction));
    } else if outcome.friction.is_some() {
        checks.push(Check::holds("no coefficient of friction was stated, and something is said of it", 1.0, 0.0, ""));
    }
    checks
}

fn states(inputs: &LogInputs, survey: &Survey, in_hole: &GroundInHole<'_>) -> Result<Vec<AtPlace>> {
    inputs.printed.iter().map(|(md, layer)| in_hole.state(&survey.place(*md)?, *layer)).collect()
}

/// Measured depths as asked, true vertical depths by quadrature, layers by their tops.
fn places(inputs: &LogInputs, outcome: &LogOutcome, survey: &Survey, in_hole: &GroundInHole<'_>) -> Vec<Check> {
    let asked: Vec<f64> = inputs.printed.iter().map(|(md, _)| md.si()).collect();
    let got = |of: fn(&LogRow) -> Length| outcome.rows.iter().map(|row| of(row).si()).collect::<Vec<_>>();
    let strange = outcome.rows.iter().zip(&inputs.printed).filter(|(row, (md, _))| {
        let is = |layer: &Layer| layer.name == row.layer && layer.depletion.is_some() == row.depleted;
        !in_hole.layers_beside(survey, *md).into_iter().any(is)
    });
    vec![
        Check::compare("measured depth of every printed row", &got(|row| row.md), &asked, MEET, "m"),
        Check::compare(
            "TVD of every printed row by Simpson's rule over the turning direction",
            &got(|row| row.tvd),
            &survey.depths_by_quadrature(&asked),
            MEET,
            "m",
        ),
        Check::holds(
            "rows whose layer is not the one that tops and intervals give within 1 mm of hole",
            strange.count() as f64,
            0.0,
            "",
        ),
    ]
}

/// S_v, P_p, S_hmin and S_Hmax by shares.
fn stresses(inputs: &LogInputs, outcome: &LogOutcome, states: &[AtPlace], in_hole: &GroundInHole<'_>) -> Check {
    let got: Vec<f64> =
        outcome.rows.iter().flat_map(|row| [row.sv, row.pore, row.sh_min, row.sh_max]).map(Pressure::in_mpa).collect();
    let other = states.iter().zip(&inputs.printed).flat_map(|(state, (_, layer))| {
        in_hole.by_another_route(&state.place, *layer).unwrap_or([f64::NAN; 4]).map(|p| p * 1e-6)
    });
    let other: Vec<f64> = other.collect();
    let size = other.iter().fold(1.0_f64, |m, v| m.max(v.abs()));
    Check::compare(
        "S_v, P_p, S_hmin, S_Hmax by the distances to the points of the profiles, S = K S_v + (1 − K) P_p − κ ΔP_p",
        &got,
        &other,
        1e-9 * size,
        "MPa",
    )
}

/// ΔT of every row by the distances to the points of the temperatures, a gradient in °F per 100 ft.
fn warming(inputs: &LogInputs, outcome: &LogOutcome, states: &[AtPlace], in_hole: &GroundInHole<'_>) -> Option<Check> {
    let looks = states.iter().zip(&inputs.printed);
    let other: Vec<_> =
        looks.map(|(state, (_, layer))| in_hole.warming_by_another_route(&state.place, *layer)).collect();
    let got: Vec<_> = outcome.rows.iter().map(|row| row.warming).collect();
    let any = other.iter().chain(&got).any(Option::is_some);
    // No wall is cooled by 1000 K: it stands for one that is not warmed.
    let kelvin = |all: &[Option<Warming>]| all.iter().map(|w| w.map_or(-1e3, Warming::in_kelvin)).collect::<Vec<_>>();
    any.then(|| {
        Check::compare(
            "ΔT of every row by the distances to the points of the temperatures, a gradient in °F and feet",
            &kelvin(&got),
            &kelvin(&other),
            1e-9,
            "K",
        )
    })
}

/// Least stress, limits and ends of every row, by the second route of the wall under the row's stresses.
fn walls(inputs: &LogInputs, outcome: &LogOutcome, states: &[AtPlace]) -> Vec<Check> {
    let of_row = |(row, state): (&LogRow, &AtPlace)| -> Option<[Option<Check>; 5]> {
        let LogRow { sv, sh_max, sh_min, pore, .. } = *row;
        let wall = AtPlace { sv, sh_max, sh_min, pore, ..*state }.wall().ok()?;
        let conditions = Conditions::new(&wall, &inputs.choices.at(state.place.at[2]))?;
        let name = format!("MD {:.2} m", row.md.in_m());
        let [.., s3] = conditions.route.far().values_by_invariants();
        let least = Check::compare(
            "least stress",
            &[row.least_stress.in_mpa()],
            &[s3 * 1e-6],
            conditions.route.size() * 1e-6 * 1e-7,
            "MPa",
        );
        let [lower, initiation, upper] = conditions.limits(&name, [row.lower_shear, row.initiation, row.upper_shear]);
        let ends = conditions.ends(&name, row.bottom, row.top);
        Some([Some(least), lower, initiation, upper, Some(ends)])
    };
    let pairs: Vec<(&LogRow, &AtPlace)> = outcome.rows.iter().zip(states).collect();
    let found: Vec<Option<[Option<Check>; 5]>> = pairs.into_par_iter().map(of_row).collect();
    let broken = found.iter().any(Option::is_none) || outcome.rows.len() != states.len();
    let mut checks = vec![Check::holds("every printed row has a wall", if broken { f64::NAN } else { 0.0 }, 0.0, "")];
    let words = [
        "least stress of every row against the least root of the characteristic equation of S",
        "lower shear limit of every row: arcs are within the width just above it, and not just below",
        "initiation of every row: the least effective principal stress round the hole is −T₀",
        "upper shear limit of every row: nothing is pushed out just below it, and something is just above",
        "bottom and top of every row are held just inside and lost just outside",
    ];
    let mut columns: [Vec<Check>; 5] = Default::default();
    for row in found.into_iter().flatten() {
        for (column, check) in columns.iter_mut().zip(row) {
            column.extend(check);
        }
    }
    let filled = words.into_iter().zip(columns).filter(|(_, column)| !column.is_empty());
    checks.extend(filled.map(|(words, column)| nearest_to_failing(words.to_owned(), column)));
    checks
}

fn breadth(row: &LogRow) -> f64 {
    let mpa = |end: Option<GovernedPressure>| end.map_or(f64::NAN, |end| end.pressure.in_mpa());
    mpa(row.top) - mpa(row.bottom)
}

/// The narrowest place and the stretches without a range, from the rows.
fn whole(outcome: &LogOutcome) -> Vec<Check> {
    let mut checks = Vec::new();
    if let Some(narrowest) = outcome.narrowest {
        let here: Vec<f64> = outcome.rows.iter().filter(|row| row.md == narrowest.md).map(breadth).collect();
        let near = here.iter().map(|b| (b - narrowest.breadth.in_mpa()).abs()).fold(f64::NAN, f64::min);
        checks.push(Check::holds("a row at the narrowest depth is as narrow as stated", near, 1e-9, "MPa"));
        let least = outcome.rows.iter().map(breadth).fold(f64::INFINITY, f64::min);
        checks.push(Check::compare("narrowest of all rows", &[narrowest.breadth.in_mpa()], &[least], 1e-9, "MPa"));
    }
    // Not above zero, also where an end is missing.
    let empty: Vec<&LogRow> = outcome.rows.iter().collect();
    checks.push(same_stretches(
        "where no pressure is recommended: beginnings and ends, counted from below",
        &outcome.empty,
        &empty,
        |row| breadth(row).is_nan() || breadth(row) <= 0.0,
    ));
    checks
}

/// Runs of rows of which something holds, found from below.
pub(super) fn same_stretches(
    what: &str,
    stated: &[[Length; 2]],
    rows: &[&LogRow],
    holds: impl Fn(&LogRow) -> bool,
) -> Check {
    let mut other: Vec<f64> = Vec::new();
    let flags: Vec<bool> = rows.iter().map(|row| holds(row)).collect();
    for (k, row) in rows.iter().enumerate().rev() {
        if !flags.get(k).is_some_and(|flag| *flag) {
            continue;
        }
        let is = |k: Option<usize>| k.and_then(|k| flags.get(k)).is_some_and(|flag| *flag);
        if !is(Some(k + 1)) {
            other.push(row.md.si());
        }
        if !is(k.checked_sub(1)) {
            other.push(row.md.si());
        }
    }
    other.reverse();
    let got: Vec<f64> = stated.iter().flatten().map(|md| md.si()).collect();
    if got.is_empty() && other.is_empty() {
        return Check::holds(what, 0.0, 0.0, "");
    }
    Check::compare(what, &got, &other, MEET, "m")
}

/// Sections: ends in the trade's gradient of water, the mud in psi.
fn sections(inputs: &LogInputs, outcome: &LogOutcome) -> Vec<Check> {
    let (first, last) = (outcome.rows.first(), outcome.rows.last());
    let (Some(first), Some(last)) = (first, last) else { return Vec::new() };
    let whole = [HoleSection::between("whole log", first.md, last.md)];
    let stated = if inputs.sections.is_empty() { whole.as_slice() } else { inputs.sections.as_slice() };
    let mut checks = vec![Check::compare(
        "a common range for every section",
        &[outcome.sections.len() as f64],
        &[stated.len() as f64],
        0.0,
        "",
    )];
    for (section, range) in stated.iter().zip(&outcome.sections) {
        let rows: Vec<&LogRow> = section.rows(&outcome.rows).collect();
        checks.extend(section_checks(section, range, &rows));
    }
    checks
}

/// The mud weight of a pressure in sg by psi and feet.
fn sg(pressure: Pressure, row: &LogRow) -> f64 {
    pressure.in_psi() / (PSI_PER_FOOT * row.tvd.in_ft())
}

fn section_checks(section: &HoleSection, range: &SectionRange, rows: &[&LogRow]) -> Vec<Check> {
    let name = &range.name;
    let end_md = |row: Option<&&LogRow>| row.map_or(f64::NAN, |row| row.md.si());
    let mut checks = vec![Check::compare(
        format!("{name}: first and last row within it"),
        &[range.from.si(), range.to.si()],
        &[end_md(rows.first()), end_md(rows.last())],
        MEET,
        "m",
    )];
    let of = |row: &LogRow, bottom: bool| if bottom { row.bottom } else { row.top };
    for (end, bottom, words) in [(range.bottom, true, "highest bottom"), (range.top, false, "lowest top")] {
        let all: Vec<f64> =
            rows.iter().map(|row| of(row, bottom).map_or(f64::NAN, |end| sg(end.pressure, row))).collect();
        let extreme = match all.iter().any(|v| v.is_nan()) {
            true => f64::NAN,
            false if bottom => all.iter().copied().fold(f64::NEG_INFINITY, f64::max),
            false => all.iter().copied().fold(f64::INFINITY, f64::min),
        };
        let Some(SectionEnd { mud_weight, md, .. }) = end else {
            let broken = if extreme.is_nan() { 0.0 } else { 1.0 };
            checks.push(Check::holds(format!("{name}: no {words}, as some row has none"), broken, 0.0, ""));
            continue;
        };
        let there =
            rows.iter().zip(&all).filter(|(row, _)| row.md == md).map(|(_, sg)| (sg - mud_weight.in_sg()).abs());
        checks.push(Check::compare(
            format!("{name}: {words} of all rows by psi = 0.4335275 · sg · feet, and the depth where it is"),
            &[mud_weight.in_sg(), there.fold(f64::NAN, f64::min)],
            &[extreme, 0.0],
            1e-8,
            "sg",
        ));
    }
    if let Some(bottom) = range.bottom {
        checks.push(same_stretches(
            &format!("{name}: where its highest bottom is above the top, counted from below"),
            &range.conflicts,
            rows,
            |row| row.top.is_none_or(|top| sg(top.pressure, row) <= bottom.mud_weight.in_sg() * (1.0 + 1e-12)),
        ));
    } else {
        checks.push(same_stretches(
            &format!("{name}: where no pressure is recommended, counted from below"),
            &range.conflicts,
            rows,
            |row| breadth(row).is_nan() || breadth(row) <= 0.0,
        ));
    }
    for held in &range.mud {
        let Some(mud) = section.mud else {
            return vec![Check::holds(format!("{name}: no mud was stated"), 1.0, 0.0, "")];
        };
        let psi = |row: &LogRow| {
            let column = |sg: f64| PSI_PER_FOOT * sg * row.tvd.in_ft();
            let still = column(mud.static_density.in_sg());
            match held.state {
                MudState::Swabbed => mud.swab.map_or(f64::NAN, |swab| still - swab.in_psi()),
                MudState::Circulating => mud.circulating_density.map_or(f64::NAN, |density| column(density.in_sg())),
                MudState::Surged => mud.surge.map_or(f64::NAN, |surge| still + surge.in_psi()),
                _ => still,
            }
        };
        let margin = |row: &LogRow| {
            let end = of(row, held.against_bottom).map_or(f64::NAN, |end| end.pressure.in_psi());
            if held.against_bottom { psi(row) - end } else { end - psi(row) }
        };
        let all = rows.iter().map(|row| margin(row)).fold(f64::INFINITY, f64::min);
        let here = rows.iter().filter(|row| row.md == held.md).map(|row| margin(row)).fold(f64::NAN, f64::min);
        let size = rows.iter().map(|row| psi(row).abs()).fold(1.0, f64::max);
        checks.push(Check::compare(
            format!(
                "{name}: least left of the mud {} to the {}, in psi, of all rows and at its depth",
                held.state.words(),
                if held.against_bottom { "bottom" } else { "top" }
            ),
            &[held.margin.in_psi(), held.margin.in_psi()],
            &[all, here],
            1e-8 * size,
            "psi",
        ));
    }
    checks
}
