//! The highest place of a function round the hole without a scan: Newton climbs to a summit, and a polynomial proves
//! that no other place is higher.

use super::circle::{CIRCLE, OnCircle, Peak, SAMPLES, on_circle};
use super::wave::Wave;

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

/// Samples among which a climb begins that did not end from where it was first tried.
const FEW: usize = 12;

/// The highest place of a function of one piece, climbed to from `start`, and from where the function is highest among
/// a few samples where that is on no hill; `None` unless it is proved to be the highest of all.
///
/// `waves` gives, for a value of the function, two waves f and g with which f g − v is above zero where the function is
/// lower than the value, v being of this mean.
#[inline(always)]
pub(crate) fn highest(
    of: &impl OnCircle,
    start: (f64, f64),
    waves: impl Fn(f64) -> [Wave; 2],
    v_mean: f64,
) -> Option<Summit> {
    let proof = |summit: &Summit| {
        let [f, g] = waves(summit.value);
        touch(f, g, v_mean, summit.c, summit.s)
    };
    let first = climbed(of, start).or_else(|| climbed(of, highest_sample(of)))?;
    match proof(&first) {
        Touch::Only => Some(first),
        Touch::Below(place) => climbed(of, place).filter(|second| matches!(proof(second), Touch::Only)),
        Touch::Unknown => None,
    }
}

#[cold]
fn highest_sample(of: &impl OnCircle) -> (f64, f64) {
    let (mut best, mut place) = (f64::NEG_INFINITY, (1.0, 0.0));
    for (c, s) in CIRCLE.cos.iter().zip(&CIRCLE.sin).step_by(SAMPLES / FEW) {
        let value = of.value(*c, *s);
        if value > best {
            (best, place) = (value, (*c, *s));
        }
    }
    place
}

/// A step whose sine is below this ends the climb: the next would be of the size of its square.
const LAST: f64 = 1e-6;

/// Steps to the crest of the wave that has the same slope and bend here, from a place near the top of a hill; close to
/// the top they are Newton's. `None` where it is not on a hill, or does not settle.
#[inline(always)]
fn climbed(of: &impl OnCircle, (mut c, mut s): (f64, f64)) -> Option<Summit> {
    let mut jet = of.jet(0, c, s);
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
        jet = of.jet(0, c, s);
    }
    None
}

/// How f g − v lies beside zero, when it has a double zero at a place.
enum Touch {
    /// f and g are above zero all round and it is nowhere below zero.
    Only,
    /// It is below zero at this place.
    Below((f64, f64)),
    Unknown,
}

/// f g − v for two waves f and g is a trigonometric polynomial of degree two. With a double zero at a place it is
/// (1 − cos ψ)(A + B cos ψ + C sin ψ), ψ counted from there, and is nowhere below zero when A ≥ √(B² + C²).
#[inline(always)]
fn touch(f: Wave, g: Wave, v_mean: f64, c: f64, s: f64) -> Touch {
    let from_there = |w: Wave| [w.mean, w.cos * c + w.sin * s, w.sin * c - w.cos * s];
    let ([f0, f1, f2], [g0, g1, g2]) = (from_there(f), from_there(g));
    let constant = f0 * g0 + 0.5 * (f1 * g1 + f2 * g2) - v_mean;
    // B = −2 c2 and C = −2 s2.
    let (c2, s2) = (0.5 * (f1 * g1 - f2 * g2), 0.5 * (f1 * g2 + f2 * g1));
    let a = constant - c2;
    let above = |[mean, cos, sin]: [f64; 3]| mean > 0.0 && mean * mean * (1.0 + 1e-12) >= cos * cos + sin * sin;
    if !(above([f0, f1, f2]) && above([g0, g1, g2])) {
        return Touch::Unknown;
    }
    let square = c2 * c2 + s2 * s2;
    if a > 0.0 && a * a > 4.0 * square * (1.0 + 1e-9) {
        return Touch::Only;
    }
    let inverse = 1.0 / square.sqrt();
    let (cos, sin) = (c2 * inverse, s2 * inverse);
    Touch::Below((c * cos - s * sin, s * cos + c * sin))
}
