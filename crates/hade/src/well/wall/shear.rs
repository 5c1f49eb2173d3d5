//! Shear failure of a wall by Mohr–Coulomb: the wall pressures between which one place of the wall
//! holds, in closed form, and the pressures between which all of it holds.
//!
//! With effective principal stresses e1 ≥ e2 in the wall and R = p − P_p across it, the rock holds
//! where each of these does:
//! - e1 ≤ UCS + q R (the hole closes in: breakout),
//! - e1 − q e2 ≤ UCS (failure within the wall),
//! - R ≤ UCS + q e2 (the hole is pushed out).
//!
//! Each is convex in p, so at one place the safe pressures are an interval.

use super::circle::{Jet, Peak, greatest};
use super::kirsch::{AtWall, Kirsch, Wave};
use crate::rock::MohrCoulomb;

/// A wall with its strength and pore pressure, in Pa.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ShearWall {
    pub kirsch: Kirsch,
    pub line: MohrCoulomb,
    pub pore: f64,
}

/// The pressures between which the whole wall holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Window {
    Open { lower: Peak, upper: Peak },
    /// At no pressure does the whole wall hold. Where each place does at some, the two ends are
    /// given all the same, lower above upper: (lower, upper).
    Closed { crossed: Option<(f64, f64)> },
}

/// The pressure at which the wall fails least.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct LeastBad {
    pub pressure: f64,
    /// By how much σ1' still exceeds what the rock bears, at the worst place.
    pub excess: f64,
    /// φ of the worst place.
    pub phi: f64,
    pub flat: bool,
}

/// ½ (x + y) ± √((½ (x − y))² + v) with derivatives, x, y, v as waves.
#[inline(always)]
fn root(x: Wave, y: Wave, v: Wave, sign: f64, c: f64, s: f64) -> Jet {
    let (m, m1, m2) = (
        0.5 * (x.at(c, s) - y.at(c, s)),
        0.5 * (x.slope(c, s) - y.slope(c, s)),
        0.5 * (x.bend(c, s) - y.bend(c, s)),
    );
    // The square of a shear is not negative; its wave may be by a last bit.
    let r = (m * m + v.at(c, s).max(0.0)).sqrt();
    let (r1, r2) = if r > 0.0 {
        let r1 = (m * m1 + 0.5 * v.slope(c, s)) / r;
        (r1, (m1 * m1 + m * m2 + 0.5 * v.bend(c, s) - r1 * r1) / r)
    } else {
        (0.0, 0.0)
    };
    Jet {
        value: 0.5 * (x.at(c, s) + y.at(c, s)) + sign * r,
        slope: 0.5 * (x.slope(c, s) + y.slope(c, s)) + sign * r1,
        bend: 0.5 * (x.bend(c, s) + y.bend(c, s)) + sign * r2,
    }
}

impl ShearWall {
    pub fn scale(&self) -> f64 {
        self.kirsch.scale() + self.line.ucs + self.pore.abs()
    }

    /// Within the wall: UCS + (q − 1)(σz − P_p), which bounds what the axial stress lets it bear.
    #[inline(always)]
    fn within(&self) -> Wave {
        let q1 = self.line.q - 1.0;
        self.kirsch.axial.scaled(q1, self.line.ucs - q1 * self.pore)
    }

    /// The discriminant of the failure within the wall: no pressure holds where it is negative.
    #[inline(always)]
    fn discriminant(&self, c: f64, s: f64) -> Jet {
        let (g, t, q4) = (self.within(), self.kirsch.shear_squared, 4.0 * self.line.q);
        let (g0, g1, g2) = (g.at(c, s), g.slope(c, s), g.bend(c, s));
        Jet {
            value: g0 * g0 - q4 * t.at(c, s),
            slope: 2.0 * g0 * g1 - q4 * t.slope(c, s),
            bend: 2.0 * (g1 * g1 + g0 * g2) - q4 * t.bend(c, s),
        }
    }

    /// Both ends of the interval for failure within the wall: sign −1 the lower, +1 the upper.
    #[inline(always)]
    fn within_end(&self, sign: f64, c: f64, s: f64) -> Jet {
        let (q, g, d) = (self.line.q, self.within(), self.discriminant(c, s));
        let r = d.value.max(0.0).sqrt();
        let (r1, r2) = if r > 0.0 {
            let r1 = 0.5 * d.slope / r;
            (r1, (0.5 * d.bend - r1 * r1) / r)
        } else {
            (0.0, 0.0)
        };
        let (a, z) = (self.kirsch.hoop, self.kirsch.axial);
        let (half_q1, root_share) = (0.5 * (q - 1.0) / q, sign * 0.5 * (1.0 + q) / q);
        Jet {
            value: a.at(c, s) - z.at(c, s) - half_q1 * g.at(c, s) + root_share * r,
            slope: a.slope(c, s) - z.slope(c, s) - half_q1 * g.slope(c, s) + root_share * r1,
            bend: a.bend(c, s) - z.bend(c, s) - half_q1 * g.bend(c, s) + root_share * r2,
        }
    }

    /// The lowest pressure that holds at one place, where any does.
    #[inline(always)]
    pub fn lower_at(&self, c: f64, s: f64) -> Jet {
        let q = self.line.q;
        let b = self.line.ucs - (q - 1.0) * self.pore;
        let k = &self.kirsch;
        let (by_hoop, by_axial) =
            (k.hoop.scaled(1.0 / (1.0 + q), -b / (1.0 + q)), k.axial.scaled(1.0 / q, -b / q));
        let closing = root(by_hoop, by_axial, k.shear_squared.scaled(1.0 / (q * (1.0 + q)), 0.0), 1.0, c, s);
        closing.larger(self.within_end(-1.0, c, s))
    }

    /// The highest pressure that holds at one place, where any does.
    #[inline(always)]
    pub fn upper_at(&self, c: f64, s: f64) -> Jet {
        let q = self.line.q;
        let h = (self.pore + self.line.ucs) / q - self.pore;
        let k = &self.kirsch;
        let share = q / (1.0 + q);
        let (by_hoop, by_axial) = (k.hoop.scaled(share, h * share), k.axial.scaled(q, h * q));
        let pushed = root(by_hoop, by_axial, k.shear_squared.scaled(q * share, 0.0), -1.0, c, s);
        pushed.smaller(self.within_end(1.0, c, s))
    }

    /// Both ends at one place, where any pressure holds there.
    pub fn interval_at(&self, c: f64, s: f64) -> Option<(f64, f64)> {
        let (lower, upper) = (self.lower_at(c, s).value, self.upper_at(c, s).value);
        let can = self.within().at(c, s) >= 0.0 && self.discriminant(c, s).value >= 0.0;
        (can && lower <= upper).then_some((lower, upper))
    }

    /// Whether every place of the wall holds at some pressure.
    pub fn holds_somewhere(&self) -> bool {
        let g = self.within();
        let t = self.kirsch.shear_squared;
        let least = g.mean - g.amplitude();
        if least < 0.0 {
            return false;
        }
        if least * least >= 4.0 * self.line.q * (t.mean + t.amplitude()) {
            return true;
        }
        let scale = self.scale();
        let worst = greatest(|c, s| self.discriminant(c, s).negated(), scale * scale);
        worst.value <= 0.0
    }

    /// The pressures between which the whole wall holds, exact in the tool face.
    pub fn window(&self) -> Window {
        if !self.holds_somewhere() {
            return Window::Closed { crossed: None };
        }
        let lower = self.lowest();
        let upper = self.highest();
        if lower.value <= upper.value {
            Window::Open { lower, upper }
        } else {
            Window::Closed { crossed: Some((lower.value, upper.value)) }
        }
    }

    /// The greatest of the lower ends round the wall.
    pub fn lowest(&self) -> Peak {
        greatest(|c, s| self.lower_at(c, s), self.scale())
    }

    /// The smallest of the upper ends round the wall.
    pub fn highest(&self) -> Peak {
        let peak = greatest(|c, s| self.upper_at(c, s).negated(), self.scale());
        Peak { value: -peak.value, ..peak }
    }

    /// By how much the worst pair of principal stresses exceeds what the rock bears at one place,
    /// in terms of σ1' (negative: it holds), with derivatives by φ; and the derivative by p.
    #[inline(always)]
    fn excess(&self, pressure: f64, c: f64, s: f64) -> (Jet, f64) {
        let (q, ucs, pore) = (self.line.q, self.line.ucs, self.pore);
        let hoop = self.kirsch.hoop.scaled(1.0, -pressure - pore);
        let axial = self.kirsch.axial.scaled(1.0, -pore);
        let e1 = root(hoop, axial, self.kirsch.shear_squared, 1.0, c, s);
        let e2 = root(hoop, axial, self.kirsch.shear_squared, -1.0, c, s);
        let radial = pressure - pore;
        let r = 0.5 * (e1.value - e2.value);
        let share = if r > 0.0 { 0.5 * (1.0 + 0.5 * (hoop.at(c, s) - axial.at(c, s)) / r) } else { 0.5 };
        let closing = (Jet { value: e1.value - q * radial - ucs, ..e1 }, -share - q);
        let within = (
            Jet {
                value: e1.value - q * e2.value - ucs,
                slope: e1.slope - q * e2.slope,
                bend: e1.bend - q * e2.bend,
            },
            -share + q * (1.0 - share),
        );
        let pushed = (
            Jet { value: radial - q * e2.value - ucs, slope: -q * e2.slope, bend: -q * e2.bend },
            1.0 + q * (1.0 - share),
        );
        let worse = if within.0.value > closing.0.value { within } else { closing };
        if pushed.0.value > worse.0.value { pushed } else { worse }
    }

    /// The excess at one place.
    pub fn excess_at(&self, pressure: f64, phi: f64) -> f64 {
        let (s, c) = phi.sin_cos();
        self.excess(pressure, c, s).0.value
    }

    /// The worst place of the wall at a pressure.
    pub fn worst(&self, pressure: f64) -> Peak {
        greatest(|c, s| self.excess(pressure, c, s).0, self.scale())
    }

    /// The pressure at which the worst place is least bad. The worst excess is convex in p, so the
    /// sign of its slope decides every step.
    pub fn least_bad(&self) -> LeastBad {
        let reach = 8.0 * (1.0 + self.line.q) * self.scale().max(1.0);
        let (mut low, mut high) = (-reach, reach);
        let mut found = LeastBad { pressure: 0.0, excess: f64::INFINITY, phi: 0.0, flat: false };
        for _ in 0..120 {
            let pressure = 0.5 * (low + high);
            let worst = self.worst(pressure);
            let (s, c) = worst.phi.sin_cos();
            let slope = self.excess(pressure, c, s).1;
            found = LeastBad { pressure, excess: worst.value, phi: worst.phi, flat: worst.flat };
            if slope < 0.0 {
                low = pressure;
            } else if slope > 0.0 {
                high = pressure;
            } else {
                break;
            }
            if high - low <= 1e-15 * reach {
                break;
            }
        }
        found
    }

    /// The stresses at one place.
    pub fn at(&self, phi: f64, pressure: f64) -> AtWall {
        self.kirsch.at(0.5 * phi, pressure)
    }
}
