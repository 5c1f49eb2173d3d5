//! The checks of a map: the whole of it anew under a turned stress, and single directions by the wall of
//! each hole and by the second route.

use rayon::prelude::*;

use super::direction_map::{DirectionMapInputs, MapInputs, MapOutcome};
use super::extremes::extremes;
use super::grid::Grid;
use super::map_of::MapOf;
use crate::card::{Check, Explain};
use crate::error::Result;
use crate::frames::vector::{M3, transpose};
use crate::frames::{Attitude, Azimuth};
use crate::units::{Angle, Pressure, Quantity};
use crate::well::wall::limits::Limits;
use crate::well::wall::setup::WallInputs;
use crate::well::wall::wall::Wall;

/// So many directions in every part of the map are looked at one by one.
const LOOKS: usize = 5;

/// The wall of a hole of any direction, by the chain of its attitude.
pub(super) fn wall_of(inputs: &DirectionMapInputs, (inclination, azimuth): (f64, f64)) -> Result<Wall> {
    let azimuth = Azimuth::from_true_north(Angle::from_si(azimuth));
    let hole = Attitude { inclination: Angle::from_si(inclination), azimuth };
    let MapInputs { stress, pore, rock, .. } = inputs.map;
    let wall = Wall::new(WallInputs { stress: hole.chain()?.carry(&stress), pore, rock })?;
    inputs.thermal.map_or(Ok(wall), |thermal| wall.thermal(thermal))
}

/// What a map shows, from the limits of one wall.
fn of_limits(of: MapOf, limits: &Limits) -> Option<Pressure> {
    match of {
        MapOf::LowerShear => limits.lower_shear.pressure(),
        MapOf::UpperShear => limits.upper_shear.pressure(),
        MapOf::Initiation => limits.initiation.pressure(),
        MapOf::Width => {
            let tops = [limits.upper_shear.pressure()?, limits.initiation.pressure()?, limits.least_stress.pressure()?];
            let bottoms = [limits.lower_shear.pressure()?, limits.pore_pressure.pressure()?];
            let top = tops.into_iter().fold(f64::INFINITY, |m, p| m.min(p.si()));
            let bottom = bottoms.into_iter().fold(f64::NEG_INFINITY, |m, p| m.max(p.si()));
            Some(Pressure::from_si(top - bottom))
        }
    }
}

/// A number for what is missing, far from every limit, so that two lists can be compared.
fn number(value: Option<Pressure>) -> f64 {
    value.map_or(-1e9, Pressure::in_mpa)
}

pub(super) fn check(inputs: &DirectionMapInputs, outcome: &MapOutcome) -> Vec<Check> {
    let Ok(grid) = Grid::of(&inputs.map) else { return Vec::new() };
    let (map, of) = (&inputs.map, inputs.of);
    let values = by_turned_stress(&grid, inputs);
    let size = map.stress.tensor().largest() + map.pore.si().abs() + map.rock.strength.law().size();
    let unit = size * 1e-6;
    let found = extremes(&grid, &values, of);
    let mut checks = Vec::new();
    let mut looks: Vec<(String, (f64, f64), Option<Pressure>)> = Vec::new();
    for (word, stated, alike, numbers) in
        [("best", outcome.best, outcome.as_good, &found.best), ("worst", outcome.worst, outcome.as_bad, &found.worst)]
    {
        let first = numbers.first().map(|number| (grid.direction(*number), values.get(*number).copied().flatten()));
        match (stated, first) {
            (Some(stated), Some(((i, a), value))) => {
                checks.push(Check::compare(
                    format!("the {word} direction and how many are like it, from the map of the stress turned about the vertical"),
                    &[stated.inclination.in_deg(), stated.azimuth.in_deg(), alike],
                    &[i.to_degrees(), a.to_degrees(), numbers.len() as f64 - 1.0],
                    1e-9,
                    "°",
                ));
                checks.push(Check::compare(
                    format!("its value, from the same map ({word})"),
                    &[number(stated.limit)],
                    &[number(value)],
                    unit * 1e-9,
                    "MPa",
                ));
                looks.push((word.to_owned(), (stated.inclination.si(), stated.azimuth.si()), stated.limit));
            }
            (stated, first) => checks.push(Check::compare(
                format!("no {word} direction: none has a safe pressure"),
                &[f64::from(u8::from(stated.is_some())), alike],
                &[f64::from(u8::from(first.is_some())), 0.0],
                0.0,
                "",
            )),
        }
    }
    checks.push(Check::compare(
        "share of the hemisphere without a safe pressure, from the same map with the area of each direction by 2 sin i sin(step/2)",
        &[outcome.share_without],
        &[share_by_sines(&grid, &values, of)],
        1e-9,
        "",
    ));
    checks.push(level_holes(&grid, &values, unit));
    let path = inputs.path.iter().flat_map(|path| &path.directions);
    let on_path: Vec<Option<Pressure>> = path
        .clone()
        .map(|direction| wall_of(inputs, *direction).ok().and_then(|wall| of_limits(of, &wall.limits())))
        .collect();
    if !on_path.is_empty() || !outcome.on_path.is_empty() {
        let [stated, by_walls] =
            [&outcome.on_path, &on_path].map(|list| list.iter().copied().map(number).collect::<Vec<_>>());
        checks.push(Check::compare(
            "along the path, from the limits of the wall of each hole",
            &stated,
            &by_walls,
            unit * 1e-9,
            "MPa",
        ));
    }
    if let (Some(end), Some(value)) = (path.last(), outcome.on_path.last()) {
        let name = inputs.path.as_ref().map_or("", |path| path.last_words());
        looks.push((name.to_owned(), *end, *value));
    }
    for k in 1..=LOOKS {
        let at = ((k as f64 * 0.618_033_988_749_895).fract() * values.len() as f64) as usize;
        let (i, a) = grid.direction(at);
        let name = format!("inclination {:.1}°, azimuth {:.1}°", i.to_degrees(), a.to_degrees());
        looks.push((name, (i, a), values.get(at).copied().flatten()));
    }
    let by_walls: Vec<[Check; 2]> =
        looks.par_iter().map(|(name, direction, value)| look(inputs, name, *direction, *value, unit)).collect();
    checks.extend(by_walls.into_iter().flatten());
    checks
}

/// The map of the stress turned clockwise about the vertical by some steps; each hole is then found that
/// many steps further on.
fn by_turned_stress(grid: &Grid, inputs: &DirectionMapInputs) -> Vec<Option<Pressure>> {
    let shift = (37 * grid.azimuths).div_ceil(360);
    let (s, c) = (shift as f64 * grid.step).sin_cos();
    let turn: M3 = [[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]];
    let far = inputs.map.stress.tensor().turned(&transpose(&turn));
    let mut values = grid.values(inputs, far);
    values.chunks_mut(grid.azimuths).for_each(|row| row.rotate_left(shift % row.len().max(1)));
    values
}

fn share_by_sines(grid: &Grid, values: &[Option<Pressure>], of: MapOf) -> f64 {
    let (half, count) = ((0.5 * grid.step).sin(), grid.azimuths as f64);
    let without = |value: &&Option<Pressure>| value.is_none_or(|p| of == MapOf::Width && p.si() <= 0.0);
    let rows = values.chunks(grid.azimuths).enumerate().map(|(row, cells)| {
        let area = match row {
            // The cap about the vertical, and the half band at the rim.
            0 => 2.0 * (0.25 * grid.step).sin().powi(2),
            _ if row + 1 == grid.rows => half,
            _ => 2.0 * (row as f64 * grid.step).sin() * half,
        };
        area / count * cells.iter().filter(without).count() as f64
    });
    rows.sum()
}

/// A level hole and the one the other way are one line.
fn level_holes(grid: &Grid, values: &[Option<Pressure>], unit: f64) -> Check {
    let level = values.get((grid.rows - 1) * grid.azimuths..).unwrap_or_default();
    let (there, back) = level.split_at(level.len() / 2);
    let [there, back] = [there, back].map(|half| half.iter().copied().map(number).collect::<Vec<_>>());
    Check::compare("level holes against those drilled the other way", &there, &back, unit * 1e-9, "MPa")
}

/// One direction: its value from the limits of its wall, and these limits by vectors and eigenvalues of whole tensors,
/// looking everywhere.
fn look(
    inputs: &DirectionMapInputs,
    name: &str,
    direction: (f64, f64),
    value: Option<Pressure>,
    unit: f64,
) -> [Check; 2] {
    let limits = wall_of(inputs, direction).map(|wall| wall.limits());
    let by_wall = limits.as_ref().map_or(f64::NAN, |limits| number(of_limits(inputs.of, limits)));
    let failed = limits.map_or(f64::NAN, |limits| {
        Limits::check(&limits.inputs(), &limits.outcome()).iter().filter(|check| !check.passed).count() as f64
    });
    [
        Check::compare(
            format!("{name}: against the limits of its wall"),
            &[number(value)],
            &[by_wall],
            unit * 1e-9,
            "MPa",
        ),
        Check::holds(
            format!("{name}: checks of these limits, by vectors and eigenvalues of the whole tensor, that fail"),
            failed,
            0.0,
            "",
        ),
    ]
}
