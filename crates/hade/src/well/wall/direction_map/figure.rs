//! The picture: the limit over the lower hemisphere, each place the hole that goes down there.

use super::direction_map::{DirectionMap, MapOutcome, MappedDirection};
use super::extremes::Extremes;
use super::path::{apart, vector};
use crate::card::{Figure, Mark, Projection, Role};
use crate::frames::net::Net;
use crate::frames::vector::{V3, trend_plunge};

/// More directions that are equally good are not all marked.
const MOST_MARKS: usize = 4;
/// Between two directions of a path the line is drawn in steps of so many radians.
const STEP: f64 = 2.0 * std::f64::consts::PI / 180.0;

pub(super) fn figure(map: &DirectionMap, outcome: &MapOutcome, found: &Extremes) -> Figure {
    let of = map.shows();
    let net = Net::new(Projection::EqualArea);
    let label = format!("{} (MPa)", of.words());
    let value = |along| {
        let (azimuth, plunge) = trend_plunge(along);
        map.value((std::f64::consts::FRAC_PI_2 - plunge, azimuth)).map_or(f64::NAN, |p| p * 1e-6)
    };
    let blanks = map.values.iter().any(Option::is_none);
    let mut net = if blanks { net.contours_with_blanks(&label, value) } else { net.contours(&label, value) };
    if let Some(path) = &map.inputs.path {
        let name = path.name.clone().unwrap_or_else(|| "planned".to_owned());
        let along = path_points(&path.directions);
        if along.len() > 1 {
            net = net.path(Role::Limit, &along);
        }
        if let Some(end) = path.directions.last() {
            net = net.line(&name, Role::Limit, Mark::Square, vector(*end));
        }
    }
    for (numbers, mark, word) in [(&found.best, Mark::Diamond, "best"), (&found.worst, Mark::Cross, "worst")] {
        if numbers.len() > MOST_MARKS {
            continue;
        }
        for number in numbers {
            net = net.line(word, Role::Failing, mark, vector(map.grid.direction(*number)));
        }
    }
    let said = |direction: &Option<MappedDirection>| {
        direction.as_ref().map_or_else(
            || "none".to_owned(),
            |d| format!("{} MPa, {}", crate::units::fixed(d.limit.unwrap_or_default().in_mpa(), 2), words(d)),
        )
    };
    net.figure(
        format!(
            "{} of holes in every direction: each place of the net is the hole that goes down there, a vertical hole at the centre and level holes on the rim. Diamond: best; cross: worst; {}numbers on the lines in MPa. Blank where no pressure is safe.",
            crate::well::wall::limits::capitalised(of.words()),
            if map.inputs.path.is_some() { "square: the end of the path, or the planned direction; " } else { "" },
        ),
        format!(
            "Contours of the {} over hole directions. Best: {}; worst: {}.",
            of.words(),
            said(&outcome.best),
            said(&outcome.worst)
        ),
    )
}

/// "inclination 30.0°, azimuth 125.0°", "vertical", "level, towards azimuth 125.0° or back".
pub(super) fn words(direction: &MappedDirection) -> String {
    let degrees = direction.inclination.in_deg();
    if degrees < 1e-9 {
        return "vertical".to_owned();
    }
    if (degrees - 90.0).abs() < 1e-9 {
        let azimuth = crate::frames::three_figures(direction.azimuth);
        return format!("level, along azimuth {azimuth}°");
    }
    direction.attitude().words()
}

/// The path with places between directions that are far apart, on the great circle through them.
fn path_points(directions: &[(f64, f64)]) -> Vec<V3> {
    let mut points: Vec<V3> = directions.first().map(|first| vector(*first)).into_iter().collect();
    for (from, to) in directions.iter().zip(directions.iter().skip(1)) {
        let (a, b, angle) = (vector(*from), vector(*to), apart(*from, *to));
        let count = (angle / STEP).ceil().clamp(1.0, 90.0);
        for k in 1..=count as usize {
            let share = k as f64 / count;
            let (wa, wb) = match angle.sin() {
                sine if sine > 1e-9 => (((1.0 - share) * angle).sin() / sine, (share * angle).sin() / sine),
                _ => (1.0 - share, share),
            };
            points.push(std::array::from_fn(|i| wa * a[i] + wb * b[i]));
        }
    }
    points
}
