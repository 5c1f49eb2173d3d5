//! Checks of positions by another route: the unit tangent turned about the axis of each arc
//! (Rodrigues) and summed numerically, where the computation uses the ratio factor.

use super::position::{Asked, PositionInputs, PositionOutcome, SEVERITY_LENGTH, VERTICAL};
use super::station::Direct;
use super::survey::Survey;
use crate::card::Check;
use crate::frames::vector::{V3, add, cross, dot, norm, scale};
use crate::frames::{Datum, Depth};
use crate::units::{Length, Quantity};

/// What a length may differ by, in metres.
const LENGTH: f64 = 1e-6;
/// What an angle may differ by, in degrees.
const ANGLE: f64 = 1e-8;

/// A direction turned from one station's towards the other's, by a share of the angle between.
fn turned(from: V3, to: V3, share: f64) -> V3 {
    let axis = cross(from, to);
    let sine = norm(axis);
    if sine < 1e-15 {
        return from;
    }
    let angle = share * sine.atan2(dot(from, to));
    let k = scale(axis, 1.0 / sine);
    // The axis is at right angles to the direction, so Rodrigues' third term is nothing.
    add(scale(from, angle.cos()), scale(cross(k, from), angle.sin()))
}

fn angle(a: V3, b: V3) -> f64 {
    norm(cross(a, b)).atan2(dot(a, b))
}

/// The way along a part of an arc by Simpson's rule over the turning tangent.
fn along(from: V3, to: V3, length: f64, share: f64) -> V3 {
    let panels = 2 * (8 + (64.0 * angle(from, to) * share) as usize);
    let mut sum = [0.0; 3];
    for k in 0..=panels {
        let weight = if k == 0 || k == panels {
            1.0
        } else if k % 2 == 1 {
            4.0
        } else {
            2.0
        };
        sum = add(sum, scale(turned(from, to, share * k as f64 / panels as f64), weight));
    }
    scale(sum, share * length / (3.0 * panels as f64))
}

/// Places of every station and, after them, of a depth below the last station that lies above it.
pub(super) fn places_by_quadrature(stations: &[Direct], start: V3, md: f64) -> Vec<V3> {
    let mut places = vec![start];
    let mut here = start;
    for pair in stations.windows(2) {
        let [top, bottom] = pair else { continue };
        let length = bottom.md - top.md;
        if bottom.md < md {
            here = add(here, along(top.t, bottom.t, length, 1.0));
            places.push(here);
        } else {
            places.push(add(here, along(top.t, bottom.t, length, (md - top.md) / length)));
            break;
        }
    }
    places
}

impl Survey {
    /// The true vertical depths at measured depths that do not fall, by Simpson's rule over the turning
    /// direction; not a number outside the stations.
    pub(crate) fn depths_by_quadrature(&self, mds: &[f64]) -> Vec<f64> {
        let data = self.data();
        let mut here = data.places.first().map_or(f64::NAN, |place| place[2]);
        let mut legs = data.direct.windows(2).peekable();
        let mut depths = Vec::with_capacity(mds.len());
        for md in mds {
            while let Some([top, bottom]) = legs.next_if(|leg| matches!(leg, [_, bottom] if bottom.md < *md)) {
                here += along(top.t, bottom.t, bottom.md - top.md, 1.0)[2];
            }
            depths.push(match legs.peek() {
                Some([top, bottom]) if top.md <= *md => {
                    let length = bottom.md - top.md;
                    here + along(top.t, bottom.t, length, (md - top.md) / length)[2]
                }
                _ => f64::NAN,
            });
        }
        depths
    }
}

pub(super) fn check(inputs: &PositionInputs, outcome: &PositionOutcome) -> Vec<Check> {
    let Ok(stations) = inputs.stations.iter().map(|s| s.direct()).collect::<Result<Vec<_>, _>>() else {
        return Vec::new();
    };
    let start = inputs.survey.tie_in.map_or([0.0; 3], |t| [t.north.si(), t.east.si(), t.tvd.si()]);
    let md = outcome.md.si();
    let below = stations.partition_point(|s| s.md < md).clamp(1, stations.len().saturating_sub(1).max(1));
    let (Some(top), Some(bottom)) = (stations.get(below - 1), stations.get(below)) else { return Vec::new() };
    let length = bottom.md - top.md;
    let share = (md - top.md) / length;
    let place = places_by_quadrature(&stations, start, md).last().copied().unwrap_or([f64::NAN; 3]);
    let t = turned(top.t, bottom.t, share);
    let (i, a) = (outcome.inclination.si(), outcome.azimuth.si());
    let level = t[0].hypot(t[1]);
    let bearing = if level < VERTICAL {
        let nearer = if share <= 0.5 { top.a } else { bottom.a };
        [nearer.cos(), nearer.sin()]
    } else {
        [t[0] / level, t[1] / level]
    };
    let asked = match inputs.asked {
        Asked::MeasuredDepth(asked) => (outcome.md, asked),
        Asked::TrueVerticalDepth(asked) => (outcome.tvd, asked),
    };
    let degrees = [outcome.dogleg, outcome.dogleg_in_30_m].map(|x| x.in_deg());
    let other = [angle(top.t, t), angle(top.t, bottom.t) * SEVERITY_LENGTH / length].map(f64::to_degrees);
    let mut checks = vec![
        Check::compare("the depth asked for", &[asked.0.si()], &[asked.1.si()], LENGTH, "m"),
        Check::compare(
            "north, east, TVD by Simpson's rule over the turning direction of every arc",
            &[outcome.north.si(), outcome.east.si(), outcome.tvd.si()],
            &place,
            LENGTH,
            "m",
        ),
        Check::compare(
            "direction (north, east, down) by turning the upper station's about the axis of the arc",
            &[i.sin() * a.cos(), i.sin() * a.sin(), i.cos()],
            &t,
            1e-9,
            "",
        ),
        Check::compare(
            "azimuth as a unit vector (north, east)",
            &[a.cos(), a.sin()],
            &bearing,
            1e-9 + 1e-12 / level.max(1e-6),
            "",
        ),
        Check::compare("dogleg and severity from the vector product of the directions", &degrees, &other, ANGLE, "°"),
    ];
    if outcome.rotary_table.is_some() || outcome.below_sea.is_some() {
        let tie = inputs.survey.tie;
        let level = tie.and_then(|t| t.elevation(Datum::RotaryTable).ok()).map_or(f64::NAN, Quantity::si);
        checks.push(Check::compare(
            "elevation of the rotary table as stated",
            &[outcome.rotary_table.map_or(f64::NAN, Quantity::si)],
            &[level],
            LENGTH,
            "m",
        ));
        if let Some(below_sea) = outcome.below_sea {
            let sea = Depth::below_mean_sea_level(below_sea);
            let back = tie.and_then(|t| t.convert(sea, Datum::RotaryTable).ok());
            checks.push(Check::compare(
                "TVD below mean sea level, brought back to the rotary table, against the sum of the arcs",
                &[back.map_or(f64::NAN, |d| d.tvd.si())],
                &[place[2]],
                LENGTH,
                "m",
            ));
        }
    }
    checks
}

/// A length for messages of the table's check.
pub(super) fn metres(values: &[Length]) -> Vec<f64> {
    values.iter().map(|v| v.si()).collect()
}
