//! The highest place of a function round the hole without a scan: Newton climbs to a summit, and a polynomial proves
//! that no other place is higher.

use super::circle::{Peak, on_circle};
use super::wave::Wave;
use crate::rock::Jet;

/// A summit: the function there, and cos φ and sin φ.
pub(crate) struct Summit {
    pub value: f64,
    pub c: f64,
    pub s: f64,
}

impl Summit {
    /// With its place as an angle.
    pub fn peak(&self) -> Peak {
        Peak { phi: on_circle(self.s.atan2(self.c)), value: self.value, flat: false }
    }
}

/// A step whose sine is below this ends the climb: the next would be of the size of its square.
const LAST: f64 = 1e-6;

/// Steps to the crest of the wave that has the same slope and bend here, from a place near the top of a hill; close to
/// the top they are Newton's. `None` where it is not on a hill, or does not settle.
#[inline(always)]
pub(crate) fn climbed(jet_at: impl Fn(f64, f64) -> Jet, (mut c, mut s): (f64, f64)) -> Option<Summit> {
    let mut jet = jet_at(c, s);
    for _ in 0..8 {
        if jet.bend >= 0.0 {
            return None;
        }
        let inverse = 1.0 / (jet.slope * jet.slope + jet.bend * jet.bend).sqrt();
        let (sin, cos) = (jet.slope * inverse, -jet.bend * inverse);
        (c, s) = (c * cos - s * sin, s * cos + c * sin);
        if sin.abs() < LAST {
            // What is left to rise over so short a step.
            return Some(Summit { value: jet.value + 0.5 * jet.slope * sin, c, s });
        }
        jet = jet_at(c, s);
    }
    None
}

/// Whether two waves f and g are above zero all round and f g − v nowhere below it, when it has a double zero at a
/// place: it is a trigonometric polynomial of degree two, (1 − cos ψ)(A + B cos ψ + C sin ψ) with ψ counted from there,
/// and is nowhere below zero when A ≥ √(B² + C²).
#[inline(always)]
pub(crate) fn only_touches(f: Wave, g: Wave, v_mean: f64, c: f64, s: f64) -> bool {
    let from_there = |w: Wave| [w.mean, w.cos * c + w.sin * s, w.sin * c - w.cos * s];
    let ([f0, f1, f2], [g0, g1, g2]) = (from_there(f), from_there(g));
    let constant = f0 * g0 + 0.5 * (f1 * g1 + f2 * g2) - v_mean;
    let (c2, s2) = (0.5 * (f1 * g1 - f2 * g2), 0.5 * (f1 * g2 + f2 * g1));
    let rest = constant - c2;
    let above = |[mean, cos, sin]: [f64; 3]| mean > 0.0 && mean * mean * (1.0 + 1e-12) >= cos * cos + sin * sin;
    let proved = rest > 0.0 && rest * rest > 4.0 * (c2 * c2 + s2 * s2) * (1.0 + 1e-9);
    proved && above([f0, f1, f2]) && above([g0, g1, g2])
}
