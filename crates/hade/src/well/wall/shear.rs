//! Shear failure of a wall by Mohr–Coulomb: the pressures between which the whole wall holds.
//!
//! With effective principal stresses e1 ≥ e2 in the wall and R = p − P_p across it, the rock holds
//! where each of these does:
//! - e1 ≤ UCS + q R (else the hole closes in: breakout),
//! - e1 − q e2 ≤ UCS (else it fails within the wall),
//! - R ≤ UCS + q e2 (else the hole is pushed out).
//!
//! Each is convex in p, so the safe pressures of one place are an interval, in closed form (see
//! [`super::ends`]), and so are those of the whole wall.

use super::circle::{Jet, OnCircle, Peak, greatest, smallest};
use super::ends::{Discriminant, LowerEnd, Root, UpperEnd};
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
    Open {
        lower: Peak,
        upper: Peak,
    },
    /// At no pressure does the whole wall hold. Where each place does at some, the two ends are
    /// given all the same, lower above upper: (lower, upper).
    Closed {
        crossed: Option<(f64, f64)>,
    },
}

/// The pressure at which the wall fails least.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct LeastBad {
    pub pressure: f64,
    /// By how much the worst place is still beyond what the rock bears.
    pub excess: f64,
    /// φ of the worst place.
    pub phi: f64,
    pub flat: bool,
}

impl ShearWall {
    pub fn scale(&self) -> f64 {
        self.kirsch.scale() + self.line.ucs + self.pore.abs()
    }

    /// Within the wall: UCS + (q − 1)(σz − P_p), which bounds what the axial stress lets it bear.
    fn within(&self) -> Wave {
        let q1 = self.line.q - 1.0;
        self.kirsch.axial.scaled(q1, self.line.ucs - q1 * self.pore)
    }

    fn discriminant(&self) -> Discriminant {
        Discriminant { within: self.within(), shear_squared: self.kirsch.shear_squared, q4: 4.0 * self.line.q }
    }

    /// The lowest pressure that holds at each place, where any does.
    pub fn lower_end(&self) -> LowerEnd {
        LowerEnd::new(&self.kirsch, self.line, self.pore, self.discriminant())
    }

    /// The highest pressure that holds at each place, where any does.
    pub fn upper_end(&self) -> UpperEnd {
        UpperEnd::new(&self.kirsch, self.line, self.pore, self.discriminant())
    }

    /// Both ends at one place, where any pressure holds there.
    pub fn interval_at(&self, c: f64, s: f64) -> Option<(f64, f64)> {
        let (lower, upper) = (self.lower_end().value(c, s), self.upper_end().value(c, s));
        let can = self.within().at(c, s) >= 0.0 && self.discriminant().value(c, s) >= 0.0;
        (can && lower <= upper).then_some((lower, upper))
    }

    /// Whether every place of the wall holds at some pressure.
    fn holds_somewhere(&self) -> bool {
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
        smallest(self.discriminant(), scale * scale).value >= 0.0
    }

    /// The pressures between which the whole wall holds, exact in the tool face.
    pub fn window(&self) -> Window {
        if !self.holds_somewhere() {
            return Window::Closed { crossed: None };
        }
        let scale = self.scale();
        let lower = greatest(&self.lower_end(), scale);
        let upper = smallest(self.upper_end(), scale);
        if lower.value <= upper.value {
            Window::Open { lower, upper }
        } else {
            Window::Closed { crossed: Some((lower.value, upper.value)) }
        }
    }

    fn excess(&self, pressure: f64) -> Excess {
        let hoop = self.kirsch.hoop.scaled(1.0, -pressure - self.pore);
        let axial = self.kirsch.axial.scaled(1.0, -self.pore);
        Excess {
            root: Root::new(hoop, axial, self.kirsch.shear_squared),
            radial: pressure - self.pore,
            q: self.line.q,
            ucs: self.line.ucs,
        }
    }

    /// By how much σ1' exceeds what the rock bears at one place (negative: it holds).
    pub fn excess_at(&self, pressure: f64, phi: f64) -> f64 {
        let (s, c) = phi.sin_cos();
        self.excess(pressure).value(c, s)
    }

    /// The worst place of the wall at a pressure. Each of the three conditions is smooth round the
    /// hole; the worst of them can have two hills closer together than a look round would tell.
    pub fn worst(&self, pressure: f64) -> Peak {
        let (excess, scale) = (self.excess(pressure), self.scale());
        let peaks = [Worst::Closing, Worst::Within, Worst::Pushed]
            .map(|condition| greatest(&Condition { excess: &excess, condition }, scale));
        let highest = peaks.iter().map(|p| p.value).fold(f64::NEG_INFINITY, f64::max);
        let [first, ..] = peaks;
        // Of places that are equally bad the first.
        peaks
            .into_iter()
            .filter(|p| p.value >= highest - 1e-14 * scale)
            .min_by(|a, b| a.phi.total_cmp(&b.phi))
            .unwrap_or(first)
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
            let slope = self.excess(pressure).by_pressure(c, s);
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

/// By how much the worst pair of principal stresses exceeds what the rock bears, in terms of σ1'.
struct Excess {
    root: Root,
    radial: f64,
    q: f64,
    ucs: f64,
}

/// Which of the three conditions is worst.
#[derive(Clone, Copy)]
enum Worst {
    Closing,
    Within,
    Pushed,
}

impl Excess {
    /// Of e1, e2 at one place.
    #[inline(always)]
    fn worst(&self, e1: f64, e2: f64) -> (Worst, f64) {
        let closing = e1 - self.q * self.radial - self.ucs;
        let within = e1 - self.q * e2 - self.ucs;
        let pushed = self.radial - self.q * e2 - self.ucs;
        if pushed > within.max(closing) {
            (Worst::Pushed, pushed)
        } else if within > closing {
            (Worst::Within, within)
        } else {
            (Worst::Closing, closing)
        }
    }

    /// Its derivative by the pressure in the hole.
    fn by_pressure(&self, c: f64, s: f64) -> f64 {
        let (e1, e2) = self.root.both(c, s);
        // The hoop direction's share in the axis of e1.
        let share = self.root.share(c, s);
        match self.worst(e1, e2).0 {
            Worst::Closing => -share - self.q,
            Worst::Within => -share + self.q * (1.0 - share),
            Worst::Pushed => 1.0 + self.q * (1.0 - share),
        }
    }
}

/// One of the three conditions, round the hole.
struct Condition<'a> {
    excess: &'a Excess,
    condition: Worst,
}

impl OnCircle for Condition<'_> {
    fn value(&self, c: f64, s: f64) -> f64 {
        self.jet(c, s).value
    }
    fn jet(&self, c: f64, s: f64) -> Jet {
        let Excess { root, radial, q, ucs } = self.excess;
        let (e1, e2) = (root.jet(1.0, c, s), root.jet(-1.0, c, s));
        match self.condition {
            Worst::Closing => Jet { value: e1.value - q * radial - ucs, ..e1 },
            Worst::Within => Jet {
                value: e1.value - q * e2.value - ucs,
                slope: e1.slope - q * e2.slope,
                bend: e1.bend - q * e2.bend,
            },
            Worst::Pushed => Jet { value: radial - q * e2.value - ucs, slope: -q * e2.slope, bend: -q * e2.bend },
        }
    }
}

impl OnCircle for Excess {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        let (e1, e2) = self.root.both(c, s);
        let least = if e2 < self.radial { e2 } else { self.radial };
        let most = if e1 > self.radial { e1 } else { self.radial };
        most - self.q * least - self.ucs
    }
    fn jet(&self, c: f64, s: f64) -> Jet {
        let (e1, e2) = (self.root.jet(1.0, c, s), self.root.jet(-1.0, c, s));
        let q = self.q;
        let (worst, value) = self.worst(e1.value, e2.value);
        match worst {
            Worst::Closing => Jet { value, ..e1 },
            Worst::Within => Jet { value, slope: e1.slope - q * e2.slope, bend: e1.bend - q * e2.bend },
            Worst::Pushed => Jet { value, slope: -q * e2.slope, bend: -q * e2.bend },
        }
    }
}
