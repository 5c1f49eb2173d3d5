//! The trace of a plane on the unrolled wall of a hole.
//!
//! With the plane's normal (nx, ny, nz) in the hole's axes and R the hole's radius, the trace through a
//! point of the axis is z(θ) = −(R / nz)(nx cos θ + ny sin θ): one wave of half-height
//! R √(nx² + ny²) / |nz| whose lowest point is where the normal, taken down the hole, leans away from.

use crate::frames::vector::{V3, wrap};

/// The trace of a plane.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Trace {
    /// A wave: half its height, and the tool face where it is lowest; none for a plane across the hole.
    Wave { half_height: f64, lowest: Option<f64> },
    /// A plane along the hole leaves two straight lines, at this tool face, 0–180°, and at +180°.
    Along { toolface: f64 },
}

/// A share of the unit normal less than this is none.
const NONE: f64 = 1e-9;

impl Trace {
    /// Of a plane by its normal in the hole's axes, in a hole of this radius.
    pub fn of([x, y, z]: V3, radius: f64) -> Self {
        let across = x.hypot(y);
        if z.abs() < NONE * across {
            // The plane holds the axis; the line is square to the normal.
            let toolface = x.atan2(-y).rem_euclid(std::f64::consts::PI);
            return Trace::Along { toolface };
        }
        let down = if z < 0.0 { -1.0 } else { 1.0 };
        let lowest = (across > NONE * z.abs()).then(|| wrap((-down * y).atan2(-down * x)));
        Trace::Wave { half_height: radius * across / z.abs(), lowest }
    }

    /// How far down the hole the trace is at a tool face; none along the hole.
    pub fn at(&self, theta: f64) -> Option<f64> {
        match self {
            Trace::Wave { half_height, lowest: Some(lowest) } => Some(half_height * (theta - lowest).cos()),
            Trace::Wave { .. } => Some(0.0),
            Trace::Along { .. } => None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::vector::dot;

    #[test]
    fn every_point_of_a_trace_is_on_its_plane() {
        for n in [[0.3, -0.5, 0.8], [-0.6, 0.2, -0.7], [0.0, 0.9, 0.1], [0.0, 0.0, 1.0], [0.0, 0.0, -1.0]] {
            let trace = Trace::of(n, 0.108);
            let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
            for k in 0..72 {
                let theta = f64::from(k) * 5.0_f64.to_radians();
                let z = trace.at(theta).unwrap();
                assert!(dot(n, [0.108 * theta.cos(), 0.108 * theta.sin(), z]).abs() < 1e-15, "{n:?} {theta}");
                (low, high) = (low.min(z), high.max(z));
            }
            let Trace::Wave { half_height, lowest } = trace else { panic!() };
            assert!(high <= half_height + 1e-15 && (high + low).abs() < 1e-15);
            assert_eq!(lowest.is_none(), n[0] == 0.0 && n[1] == 0.0);
        }
        // A plane along the hole, across the top: its lines are to the right and left.
        let Trace::Along { toolface } = Trace::of([1.0, 0.0, 0.0], 0.108) else { panic!() };
        assert!((toolface - std::f64::consts::FRAC_PI_2).abs() < 1e-15);
        let Trace::Along { toolface } = Trace::of([0.6, 0.8, 0.0], 0.108) else { panic!() };
        assert!(dot([0.6, 0.8, 0.0], [toolface.cos(), toolface.sin(), 0.0]).abs() < 1e-15);
    }

    /// At 45° to the hole the wave is as high as the hole is wide, and its lowest point is down dip: a
    /// plane dipping east, in a hole straight down counted from north.
    #[test]
    fn a_plane_at_45_degrees_in_a_vertical_hole() {
        let half = std::f64::consts::FRAC_1_SQRT_2;
        // Dip 45° to the east: the normal points down and west.
        let Trace::Wave { half_height, lowest } = Trace::of([0.0, -half, half], 0.1) else { panic!() };
        assert!((half_height - 0.1).abs() < 1e-15);
        assert!((lowest.unwrap().to_degrees() - 90.0).abs() < 1e-12);
    }
}
