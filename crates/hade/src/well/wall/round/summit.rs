//! The highest place of a function round the hole without a scan: Newton climbs to a summit, and a polynomial proves
//! that no other place is higher.

use super::circle::{CIRCLE, OnCircle, Peak, SAMPLES, on_circle};
use super::wave::Wave;
use crate::lanes::Lanes;

/// A summit: the function there, and cos φ and sin φ.
pub(crate) struct Summit<N = f64> {
    pub value: N,
    pub c: N,
    pub s: N,
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
    let climb = |start| {
        let (summit, settled) = climbed(|c, s| of.jet(0, c, s).all(), start);
        settled.then_some(summit)
    };
    let first = climb(start).or_else(|| climb(highest_sample(of)))?;
    let touch = |summit: &Summit| Touch::of(waves(summit.value), v_mean, summit);
    let proof = touch(&first);
    if proof.only() {
        return Some(first);
    }
    climb(proof.lowest(&first)?).filter(|second| touch(second).only())
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
/// the top they are Newton's. With it whether it settled on a hill.
#[inline(always)]
pub(crate) fn climbed<N: Lanes>(jet_at: impl Fn(N, N) -> [N; 3], (mut c, mut s): (N, N)) -> (Summit<N>, N::Mask) {
    let (zero, last) = (N::of(0.0), N::of(LAST));
    let mut steps = 0;
    loop {
        let [value, slope, bend] = jet_at(c, s);
        let inverse = N::of(1.0) / (slope * slope + bend * bend).sqrt();
        let (sin, cos) = (slope * inverse, -bend * inverse);
        (c, s) = (c * cos - s * sin, s * cos + c * sin);
        let (on_hill, step) = (zero.above(bend), sin.abs());
        steps += 1;
        // Where there is no hill nothing is waited for.
        if steps == 8 || N::all(last.above(N::where_so(on_hill, step, zero))) {
            // With what is left to rise over so short a step.
            return (Summit { value: value + N::of(0.5) * slope * sin, c, s }, on_hill & last.above(step));
        }
    }
}

/// How f g − v, two waves multiplied less a third, lies beside zero when it has a double zero at a place: it is a
/// trigonometric polynomial of degree two, (1 − cos ψ)(A + B cos ψ + C sin ψ) with ψ counted from there, and is nowhere
/// below zero when A ≥ √(B² + C²).
pub(crate) struct Touch<N: Lanes = f64> {
    /// Whether f and g are above zero all round.
    above: N::Mask,
    a: N,
    /// −B / 2 and −C / 2.
    b: N,
    c: N,
}

impl<N: Lanes> Touch<N> {
    #[inline(always)]
    pub fn of([f, g]: [Wave<N>; 2], v_mean: N, at: &Summit<N>) -> Self {
        let (half, zero) = (N::of(0.5), N::of(0.0));
        let from_there = |w: Wave<N>| [w.mean, w.cos * at.c + w.sin * at.s, w.sin * at.c - w.cos * at.s];
        let ([f0, f1, f2], [g0, g1, g2]) = (from_there(f), from_there(g));
        let constant = f0 * g0 + half * (f1 * g1 + f2 * g2) - v_mean;
        let (b, c) = (half * (f1 * g1 - f2 * g2), half * (f1 * g2 + f2 * g1));
        let above = |[mean, cos, sin]: [N; 3]| {
            mean.above(zero) & (mean * mean * N::of(1.0 + 1e-12)).at_least(cos * cos + sin * sin)
        };
        Touch { above: above([f0, f1, f2]) & above([g0, g1, g2]), a: constant - b, b, c }
    }

    /// Whether it is nowhere below zero, and the two waves above it.
    #[inline(always)]
    pub fn only(&self) -> N::Mask {
        let Touch { above, a, b, c } = *self;
        above & a.above(N::of(0.0)) & (a * a).above(N::of(4.0 * (1.0 + 1e-9)) * (b * b + c * c))
    }
}

impl Touch {
    /// Where it is lowest, if the two waves are above zero.
    fn lowest(&self, at: &Summit) -> Option<(f64, f64)> {
        let inverse = 1.0 / (self.b * self.b + self.c * self.c).sqrt();
        let (cos, sin) = (self.b * inverse, self.c * inverse);
        self.above.then_some((at.c * cos - at.s * sin, at.s * cos + at.c * sin))
    }
}
