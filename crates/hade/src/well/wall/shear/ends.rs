//! The two ends of the safe pressures of one place of a wall, in closed form, round the hole.
//!
//! With σθ = A − p, σz = Z, τθz² = T² and b = UCS − (q − 1) P_p:
//! - closing in: (p − (A − b)/(1 + q)) (p − (Z − b)/q) ≥ T² / (q (1 + q)), above both roots;
//! - within the wall: |q (A − Z − p) − (q − 1) G / 2| ≤ ½ (1 + q) √(G² − 4 q T²), with
//!   G = UCS + (q − 1)(Z − P_p);
//! - pushed out: the first with the roles of the stress across the wall and of those in it changed.

use super::closed_form::ClosedForm;
use super::everywhere::everywhere;
use super::root::Root;
use super::shear_wall::Window;
use crate::rock::{Jet, MohrCoulomb};
use crate::well::wall::elastic::Kirsch;
use crate::well::wall::round::{OnCircle, Peak, SAME, Wave, greatest, smallest};

impl ClosedForm {
    /// The pressures between which the whole wall holds.
    pub fn window(&self) -> Window {
        if let Some((lower, upper)) = self.ends() {
            return Window::Open { lower: Some(lower), upper: Some(upper) };
        }
        // The two have a meaning by themselves only where no place is beyond help.
        let each = || everywhere(|c, s| self.interval_at(c, s)).is_some();
        let crossed = (self.holds_somewhere() && each())
            .then(|| (greatest(&self.lower_end(), self.scale).value, smallest(self.upper_end(), self.scale).value));
        Window::Closed { crossed }
    }

    /// Both ends, where any pressure is safe for the whole wall.
    pub fn ends(&self) -> Option<(Peak, Peak)> {
        let lower = self.plain_lower();
        // Mostly a closed wall shows it at one of few places.
        if lower.is_none() && self.is_closed_at_a_crest() {
            return None;
        }
        let upper = self.plain_upper();
        // Either end, where it is found plainly, shows that some pressure is safe.
        let shown = lower.is_some() || upper.is_some();
        if !shown && !self.holds_somewhere() {
            return None;
        }
        let lower = lower.unwrap_or_else(|| greatest(&self.lower_end(), self.scale));
        let upper = upper.unwrap_or_else(|| smallest(self.upper_end(), self.scale));
        (shown || lower.value <= upper.value).then_some((lower, upper))
    }

    /// The lower end alone.
    #[inline]
    pub fn lower(&self) -> Option<f64> {
        let plain = self.closing().highest(self.kirsch.hoop, self.swings[0], self.scale).map(|summit| summit.value);
        plain.filter(|p| self.only_closes(*p)).or_else(|| self.ends().map(|(lower, _)| lower.value))
    }

    /// Whether the ends at the crests and troughs of the hoop stress and of the shear stress already leave no pressure
    /// between them.
    fn is_closed_at_a_crest(&self) -> bool {
        let (ends, upper_ends) = (self.lower_end(), self.upper_end());
        let (within, discriminant) = (self.within(), self.discriminant());
        let (mut low, mut high) = (f64::NEG_INFINITY, f64::INFINITY);
        for wave in [self.kirsch.hoop, self.kirsch.shear_squared] {
            let swing = wave.amplitude();
            if swing <= SAME * self.scale {
                continue;
            }
            for sign in [1.0, -1.0] {
                let (c, s) = (sign * wave.cos / swing, sign * wave.sin / swing);
                if within.at(c, s) < 0.0 || discriminant.value(c, s) < 0.0 {
                    return true;
                }
                low = low.max(ends.value(c, s));
                high = high.min(upper_ends.value(c, s));
            }
        }
        low > high
    }

    /// Both ends at one place, where any pressure holds there.
    pub fn interval_at(&self, c: f64, s: f64) -> Option<(f64, f64)> {
        let (lower, upper) = (self.lower_end().value(c, s), self.upper_end().value(c, s));
        let can = self.within().at(c, s) >= 0.0 && self.discriminant().value(c, s) >= 0.0;
        (can && lower <= upper).then_some((lower, upper))
    }

    /// The lower end where the hole closes in, if nothing else fails at it by bounds on the whole
    /// wall: the safe pressures are an interval, so it is the end.
    #[inline]
    fn plain_lower(&self) -> Option<Peak> {
        let closing = self.closing();
        let peak = closing
            .highest(self.kirsch.hoop, self.swings[0], self.scale)
            .map_or_else(|| greatest(&closing.larger(), self.scale), |summit| summit.peak());
        self.only_closes(peak.value).then_some(peak)
    }

    /// The upper end where the hole is pushed out, likewise.
    fn plain_upper(&self) -> Option<Peak> {
        let pushed = self.upper_end().pushed;
        let hoop = self.kirsch.hoop.scaled(-1.0, 0.0);
        let peak = match pushed.turned_over().highest(hoop, self.swings[0], self.scale) {
            Some(summit) => Peak { value: -summit.value, ..summit.peak() },
            None => smallest(pushed.smaller(), self.scale),
        };
        let bounds = self.bounds(peak.value);
        (bounds.within && bounds.closing).then_some(peak)
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
        LowerEnd { closing: self.closing(), within: Within::new(&self.kirsch, self.line, self.discriminant(), -1.0) }
    }

    /// The highest pressure that holds at each place, where any does.
    pub fn upper_end(&self) -> UpperEnd {
        UpperEnd::new(&self.kirsch, self.line, self.pore, self.discriminant())
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
        smallest(self.discriminant(), self.scale * self.scale).value >= 0.0
    }
}

/// G² − 4 q T²: no pressure holds within the wall where it is negative.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Discriminant {
    pub within: Wave,
    pub shear_squared: Wave,
    pub q4: f64,
}

impl OnCircle for Discriminant {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        let g = self.within.at(c, s);
        g * g - self.q4 * self.shear_squared.at(c, s)
    }
    #[inline(always)]
    fn jet(&self, _piece: usize, c: f64, s: f64) -> Jet {
        let (g, t) = (self.within, self.shear_squared);
        let (g0, g1, g2) = (g.at(c, s), g.slope(c, s), g.bend(c, s));
        Jet {
            value: g0 * g0 - self.q4 * t.at(c, s),
            slope: 2.0 * g0 * g1 - self.q4 * t.slope(c, s),
            bend: 2.0 * (g1 * g1 + g0 * g2) - self.q4 * t.bend(c, s),
        }
    }
}

/// An end within the wall: middle ± share · √discriminant.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Within {
    middle: Wave,
    share: f64,
    discriminant: Discriminant,
}

impl Within {
    fn new(kirsch: &Kirsch, line: MohrCoulomb, discriminant: Discriminant, sign: f64) -> Self {
        let (a, z, g) = (kirsch.hoop, kirsch.axial, discriminant.within.scaled(0.5 * (line.q - 1.0) / line.q, 0.0));
        Within {
            middle: Wave { mean: a.mean - z.mean - g.mean, cos: a.cos - z.cos - g.cos, sin: a.sin - z.sin - g.sin },
            share: sign * 0.5 * (1.0 + line.q) / line.q,
            discriminant,
        }
    }

    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        let d = self.discriminant.value(c, s);
        self.middle.at(c, s) + self.share * (if d > 0.0 { d } else { 0.0 }).sqrt()
    }

    fn jet(&self, c: f64, s: f64) -> Jet {
        let d = self.discriminant.jet(0, c, s);
        let r = d.value.max(0.0).sqrt();
        let (r1, r2) = if r > 0.0 {
            let r1 = 0.5 * d.slope / r;
            (r1, (0.5 * d.bend - r1 * r1) / r)
        } else {
            (0.0, 0.0)
        };
        Jet {
            value: self.middle.at(c, s) + self.share * r,
            slope: self.middle.slope(c, s) + self.share * r1,
            bend: self.middle.bend(c, s) + self.share * r2,
        }
    }
}

/// The lowest pressure that holds: the larger of two lower ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct LowerEnd {
    closing: Root,
    within: Within,
}

impl OnCircle for LowerEnd {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        let (closing, within) = (self.closing.both(c, s).0, self.within.value(c, s));
        if within > closing { within } else { closing }
    }
    fn pieces(&self) -> usize {
        2
    }
    fn jet(&self, piece: usize, c: f64, s: f64) -> Jet {
        if piece == 0 { self.closing.larger().jet(0, c, s) } else { self.within.jet(c, s) }
    }
}

/// The highest pressure that holds: the smaller of two upper ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct UpperEnd {
    pushed: Root,
    within: Within,
}

impl UpperEnd {
    pub fn new(kirsch: &Kirsch, line: MohrCoulomb, pore: f64, discriminant: Discriminant) -> Self {
        let q = line.q;
        let h = (pore + line.ucs) / q - pore;
        let share = q / (1.0 + q);
        UpperEnd {
            pushed: Root::new(
                kirsch.hoop.scaled(share, h * share),
                kirsch.axial.scaled(q, h * q),
                kirsch.shear_squared.scaled(q * share, 0.0),
            ),
            within: Within::new(kirsch, line, discriminant, 1.0),
        }
    }
}

impl OnCircle for UpperEnd {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        let (pushed, within) = (self.pushed.both(c, s).1, self.within.value(c, s));
        if within < pushed { within } else { pushed }
    }
    fn pieces(&self) -> usize {
        2
    }
    fn jet(&self, piece: usize, c: f64, s: f64) -> Jet {
        if piece == 0 { self.pushed.smaller().jet(0, c, s) } else { self.within.jet(c, s) }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::stress::tensor::Tensor;

    fn wall(ucs: f64, q: f64) -> ClosedForm {
        let kirsch = Kirsch::new(Tensor([52.0, 44.0, 63.0, 3.0, 5.0, -4.0]), 0.27);
        ClosedForm::new(kirsch, MohrCoulomb { ucs, q }, 21.0, kirsch.scale() + ucs + 21.0)
    }

    /// Each end is where the criterion, by eigenvalues of the wall's tensor, is just met.
    #[test]
    fn the_ends_meet_the_criterion_and_hold_between() {
        let wall = wall(40.0, 3.2);
        let excess = |phi: f64, p: f64| {
            let [s1, _, s3] = wall.kirsch.at(0.5 * phi, p).tensor().eigen().values;
            s1 - 21.0 - 3.2 * (s3 - 21.0) - 40.0
        };
        for k in 0..72 {
            let phi = f64::from(k) * 0.09;
            let (s, c) = phi.sin_cos();
            let (lower, upper) = wall.interval_at(c, s).unwrap();
            assert!(excess(phi, lower).abs() < 1e-11 && excess(phi, upper).abs() < 1e-11, "{phi}");
            assert!(excess(phi, 0.5 * (lower + upper)) < 0.0);
            assert!(excess(phi, lower - 1e-6) > 0.0 && excess(phi, upper + 1e-6) > 0.0);
        }
    }

    /// The bounds only say what the whole search says too.
    #[test]
    fn the_short_way_is_the_long_way() {
        for (ucs, q) in [(40.0, 3.2), (10.0, 2.5), (25.0, 4.0), (60.0, 2.0)] {
            let wall = wall(ucs, q);
            let (lower, upper) =
                (greatest(&wall.lower_end(), wall.scale).value, smallest(wall.upper_end(), wall.scale).value);
            if let Some(short) = wall.plain_lower() {
                assert!(lower <= upper && (short.value - lower).abs() < 1e-12, "{ucs} {q}");
            }
            if let Some(short) = wall.plain_upper() {
                assert!(lower <= upper && (short.value - upper).abs() < 1e-12, "{ucs} {q}");
            }
        }
        // And it is there to be taken.
        assert!([40.0, 60.0, 80.0].iter().any(|ucs| wall(*ucs, 3.2).plain_lower().is_some()));
        assert!([40.0, 60.0, 80.0].iter().any(|ucs| wall(*ucs, 3.2).plain_upper().is_some()));
    }

    #[test]
    fn jets_are_the_derivatives() {
        let wall = wall(10.0, 2.5);
        let (lower, upper) = (wall.lower_end(), wall.upper_end());
        for k in 0..40 {
            let (x, h) = (f64::from(k) * 0.157, 1e-4);
            for (end, sign) in [(&lower as &dyn OnCircle, 1.0), (&upper, -1.0)] {
                let whole = |x: f64| {
                    let all = (0..end.pieces()).map(|piece| sign * end.jet(piece, x.cos(), x.sin()).value);
                    sign * all.fold(f64::NEG_INFINITY, f64::max)
                };
                assert!((whole(x) - end.value(x.cos(), x.sin())).abs() < 1e-12);
                for piece in 0..end.pieces() {
                    let at = |x: f64| end.jet(piece, x.cos(), x.sin());
                    let (a, b, c) = (at(x - h), at(x), at(x + h));
                    let slope = (c.value - a.value) / (2.0 * h);
                    assert!((slope - b.slope).abs() < 1e-5, "{x}: {slope} {}", b.slope);
                    let bend = (c.slope - a.slope) / (2.0 * h);
                    assert!((bend - b.bend).abs() < 1e-4, "{x}: {bend} {}", b.bend);
                }
            }
        }
    }
}
