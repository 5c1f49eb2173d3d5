//! The arc between two survey stations: geometry of minimum curvature.

use crate::frames::vector::{V3, add, scale};

/// The direction of a hole with inclination i and azimuth a (radians), in north, east, down.
pub(super) fn direction(i: f64, a: f64) -> V3 {
    let ((si, ci), (sa, ca)) = (i.sin_cos(), a.sin_cos());
    [si * ca, si * sa, ci]
}

/// The dogleg β between two directions, by the half-angle form sin²(β/2) = sin²(Δi/2) + sin i₁
/// sin i₂ sin²(Δa/2): it keeps its digits for tiny angles, where an arc cosine gives zero, and
/// needs no wrapping of azimuths.
pub(super) fn dogleg([i1, a1]: [f64; 2], [i2, a2]: [f64; 2]) -> f64 {
    let (across, around) = ((0.5 * (i2 - i1)).sin(), (0.5 * (a2 - a1)).sin());
    let square = (across * across + i1.sin() * i2.sin() * around * around).clamp(0.0, 1.0);
    2.0 * square.sqrt().atan2((1.0 - square).sqrt())
}

/// The ratio factor RF = (2/β) tan(β/2), one where there is no dogleg.
pub(super) fn ratio_factor(beta: f64) -> f64 {
    let half = 0.5 * beta;
    if half < 1e-9 { 1.0 } else { half.tan() / half }
}

/// One arc: its end directions, the dogleg between them, and its length in metres.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Arc {
    pub from: V3,
    pub to: V3,
    pub beta: f64,
    pub length: f64,
}

impl Arc {
    /// The way along the whole arc in north, east, down: half the length times the sum of the end
    /// directions times the ratio factor.
    pub fn displacement(&self) -> V3 {
        scale(add(self.from, self.to), 0.5 * self.length * ratio_factor(self.beta))
    }

    /// The direction after a share of the arc (0–1), on the great circle between the ends.
    pub fn direction_at(&self, share: f64) -> V3 {
        let whole = self.beta.sin();
        if self.beta < 1e-9 {
            return add(scale(self.from, 1.0 - share), scale(self.to, share));
        }
        let (k, l) = (((1.0 - share) * self.beta).sin() / whole, (share * self.beta).sin() / whole);
        add(scale(self.from, k), scale(self.to, l))
    }

    /// The part of the arc up to a share of it; it lies on the same circle.
    pub fn up_to(&self, share: f64) -> Arc {
        Arc { from: self.from, to: self.direction_at(share), beta: share * self.beta, length: share * self.length }
    }

    /// The share at which the hole is horizontal, if it turns from descending to rising or back
    /// within the arc. There is at most one, since the arc is shorter than half a circle.
    pub fn turning_share(&self) -> Option<f64> {
        let (down, up) = (self.from[2], self.to[2]);
        if down * up >= 0.0 || self.beta < 1e-9 {
            return None;
        }
        let angle = (self.beta.sin() * down).atan2(self.beta.cos() * down - up).rem_euclid(std::f64::consts::PI);
        let share = angle / self.beta;
        (share > 0.0 && share < 1.0).then_some(share)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn tiny_doglegs_and_wrapped_azimuths() {
        // An arc cosine loses 2e-7° altogether.
        let tiny = dogleg([0.0, 0.0], [2e-7_f64.to_radians(), 0.0]).to_degrees();
        assert!((tiny - 2e-7).abs() < 1e-16, "{tiny:e}");
        // 359.9° to 0.1° in a horizontal hole is 0.2°, not 359.8°.
        let right = std::f64::consts::FRAC_PI_2;
        let wrapped = dogleg([right, 359.9_f64.to_radians()], [right, 0.1_f64.to_radians()]).to_degrees();
        assert!((wrapped - 0.2).abs() < 1e-11, "{wrapped}");
        assert_eq!(ratio_factor(0.0), 1.0);
        assert!((ratio_factor(1e-4) - (1.0 + 1e-8 / 12.0)).abs() < 1e-15);
    }

    #[test]
    fn the_quarter_circle_is_a_circle_all_along() {
        let right = std::f64::consts::FRAC_PI_2;
        let arc = Arc { from: direction(0.0, 0.0), to: direction(right, 0.0), beta: right, length: 1000.0 * right };
        for share in [0.0, 0.1, 0.5, 0.9, 1.0] {
            let [n, e, d] = arc.up_to(share).displacement();
            let angle = share * right;
            assert!((n - 1000.0 * (1.0 - angle.cos())).abs() < 1e-9 && e.abs() < 1e-9);
            assert!((d - 1000.0 * angle.sin()).abs() < 1e-9);
        }
    }

    #[test]
    fn the_turning_point_is_where_the_hole_is_horizontal() {
        let arc = Arc {
            from: direction(1.3, 0.4),
            to: direction(1.9, 0.6),
            beta: dogleg([1.3, 0.4], [1.9, 0.6]),
            length: 30.0,
        };
        let share = arc.turning_share().unwrap();
        assert!(arc.direction_at(share)[2].abs() < 1e-14);
        let rising = Arc { from: direction(1.9, 0.6), to: direction(1.3, 0.4), ..arc };
        assert!(rising.direction_at(rising.turning_share().unwrap())[2].abs() < 1e-14);
        assert!(Arc { to: direction(1.5, 0.4), ..arc }.turning_share().is_none());
    }
}
