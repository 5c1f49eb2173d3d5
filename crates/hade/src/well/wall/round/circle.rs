//! The greatest value of a smooth function round the hole.
//!
//! Everything at a wall repeats after 180° of tool face, so functions live on the circle of
//! φ = 2θ. A scan finds the hills, a guarded Newton iteration on the slope climbs each that can be
//! the highest; nothing is allocated.

use std::f64::consts::TAU;
use std::sync::LazyLock;

use crate::rock::Jet;

/// Samples of a scan: every 5° of φ, 2.5° of tool face.
pub(crate) const SAMPLES: usize = 72;
/// The distance of two samples in φ.
pub(crate) const STEP: f64 = TAU / SAMPLES as f64;

/// cos φ and sin φ of every sample, each in a row of its own.
pub(crate) struct Circle {
    pub cos: [f64; SAMPLES],
    pub sin: [f64; SAMPLES],
}

impl Circle {
    /// What a function of cos φ and sin φ gives at every sample.
    #[inline(always)]
    pub fn each(&self, f: impl Fn(f64, f64) -> f64) -> [f64; SAMPLES] {
        let mut values = [0.0; SAMPLES];
        for ((value, c), s) in values.iter_mut().zip(&self.cos).zip(&self.sin) {
            *value = f(*c, *s);
        }
        values
    }
}

pub(crate) static CIRCLE: LazyLock<Circle> = LazyLock::new(|| {
    let mut circle = Circle { cos: [0.0; SAMPLES], sin: [0.0; SAMPLES] };
    for ((k, c), s) in circle.cos.iter_mut().enumerate().zip(&mut circle.sin) {
        (*s, *c) = (k as f64 * STEP).sin_cos();
    }
    circle
});

/// A function of cos φ and sin φ, everywhere the largest of a few smooth pieces (mostly one). The
/// value alone is what the scan asks for, seventy-two times; the derivatives by φ only the climb.
pub(crate) trait OnCircle {
    fn pieces(&self) -> usize {
        1
    }
    fn value(&self, c: f64, s: f64) -> f64;
    fn jet(&self, piece: usize, c: f64, s: f64) -> Jet;
    /// The value of one piece.
    #[inline(always)]
    fn piece(&self, piece: usize, c: f64, s: f64) -> f64 {
        self.jet(piece, c, s).value
    }
    /// Of how many functions without an edge it takes its values: its pieces, unless one of these is the smaller
    /// of two.
    fn parts(&self) -> usize {
        self.pieces()
    }
    /// One of them.
    fn part(&self, part: usize, c: f64, s: f64) -> Jet {
        self.jet(part, c, s)
    }
    /// The value of one of them at every sample, as exact as its jet's.
    #[inline(always)]
    fn scan_part(&self, part: usize, circle: &Circle) -> [f64; SAMPLES] {
        circle.each(|c, s| self.part(part, c, s).value)
    }
    /// The value at every sample, to a millionth of its size: enough to see where a climb may begin.
    #[inline(always)]
    fn scan(&self, circle: &Circle) -> [f64; SAMPLES] {
        circle.each(|c, s| self.value(c, s))
    }
}

/// The function turned upside down: the smallest of its pieces becomes the largest.
pub(crate) struct Below<F>(pub F);

impl<F: OnCircle> OnCircle for Below<F> {
    #[inline(always)]
    fn pieces(&self) -> usize {
        self.0.pieces()
    }
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        -self.0.value(c, s)
    }
    #[inline(always)]
    fn jet(&self, piece: usize, c: f64, s: f64) -> Jet {
        -self.0.jet(piece, c, s)
    }
    fn parts(&self) -> usize {
        self.0.parts()
    }
    fn part(&self, part: usize, c: f64, s: f64) -> Jet {
        -self.0.part(part, c, s)
    }
    fn scan_part(&self, part: usize, circle: &Circle) -> [f64; SAMPLES] {
        self.0.scan_part(part, circle).map(|value| -value)
    }
}

/// The greatest value and where it is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Peak {
    /// φ, 0 ≤ φ < 2π.
    pub phi: f64,
    pub value: f64,
    /// Whether the function is the same all round, so that the place means nothing.
    pub flat: bool,
}

/// Values closer than this share of the scale are one value: hills of equal height are reported by
/// the smallest φ, and a function that varies by no more is flat.
pub(crate) const SAME: f64 = 1e-11;
/// A value is not lower than another by this share of the scale.
const ROUNDING: f64 = 1e-14;
/// A hilltop among the samples that is lower than the best by more than this share of the range is
/// not the highest hill: within a step a wave rises by at most STEP²/2 of its amplitude, and this
/// leaves a factor of twenty-five for sharper hills.
const SLACK: f64 = 0.05;
/// On a slope a function of one piece has a hill between two samples only by its third derivative: no
/// sample lower than the best by more than this share of the range is beside the highest.
const BESIDE: f64 = 0.001;
/// One piece may hide a hill of another between two samples, however level the function is: half a step
/// away a wave has risen by STEP²/8, a thousandth, of its amplitude, which is a share of the scale; this
/// leaves a factor of two for criteria that take the stresses more than once.
const HIDDEN: f64 = 0.002;

/// A top of one piece that is already known.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Top {
    pub piece: usize,
    pub phi: f64,
    pub value: f64,
}

/// The most pieces a function has.
const PIECES: usize = 4;

/// Newton misses the top of a round hill a step away by no more than this share of the way; where it sees
/// another place there may be another hill.
const AGAIN: f64 = 0.25;

/// The greatest value of a function; `scale` is the size of the numbers in it.
#[inline]
pub(crate) fn greatest(f: &impl OnCircle, scale: f64) -> Peak {
    greatest_beside(f, scale, None)
}

/// The same where one top is known and need not be climbed again.
#[inline]
pub(crate) fn greatest_beside(f: &impl OnCircle, scale: f64, known: Option<Top>) -> Peak {
    let circle = &*CIRCLE;
    let values = f.scan(circle);
    let (mut top, mut bottom) = (f64::NEG_INFINITY, f64::INFINITY);
    for value in values {
        top = if value > top { value } else { top };
        bottom = if value < bottom { value } else { bottom };
    }
    let range = top - bottom;
    let several = f.pieces() > 1;
    let flat = range <= SAME * scale;
    // Where it is flat any place is as good, unless a piece has a hill between the samples.
    let level = Peak { phi: 0.0, value: f.value(1.0, 0.0), flat: true };
    if flat && !several {
        return level;
    }
    let mut best = if flat { level } else { Peak { phi: 0.0, value: f64::NEG_INFINITY, flat: false } };
    let beside = top - if several { HIDDEN * scale } else { BESIDE * range };
    let enough = beside.min(top - SLACK * range);
    // The last top that was found on every piece, nowhere at first.
    let mut tops = [f64::INFINITY; PIECES];
    if let Some(Top { piece, phi, value }) = known
        && let Some(top) = tops.get_mut(piece)
    {
        *top = phi;
        if value > best.value {
            best = Peak { phi, value, flat: false };
        }
    }
    // Two pieces may have a hill each between two samples, so a climb starts on every piece at every
    // high sample from which Newton sees a top of it within one step. Where that is its last top, it is
    // that hill again.
    let [first, .., last] = values;
    let mut before = last;
    for (((k, value), c), s) in values.iter().enumerate().zip(&circle.cos).zip(&circle.sin) {
        let after = values.get(k + 1).copied().unwrap_or(first);
        let highest_here = *value >= before && *value >= after;
        before = *value;
        if *value < if highest_here { enough } else { beside } {
            continue;
        }
        for (piece, top) in tops.iter_mut().take(f.pieces()).enumerate() {
            // Most pieces are far below the worst; their derivatives are not asked for.
            if several && f.piece(piece, *c, *s) < enough {
                continue;
            }
            let jet = f.jet(piece, *c, *s);
            if jet.value < enough {
                continue;
            }
            let start = k as f64 * STEP;
            let newton = jet.slope / jet.bend;
            let away = between(start, *top);
            if jet.bend < 0.0 && away.abs() <= STEP && (away + newton).abs() <= AGAIN * away.abs() + SAME {
                continue;
            }
            // Half of Newton's step times the slope is what a round hill still rises.
            let near = jet.bend < 0.0
                && newton.abs() <= STEP
                && jet.value + (jet.slope * newton).abs() > best.value + SAME * scale;
            if near || highest_here {
                let hill = climb(f, piece, start, jet, scale);
                *top = hill.phi;
                if hill.value > best.value + SAME * scale
                    || (hill.value >= best.value - SAME * scale && hill.phi < best.phi)
                {
                    best = hill;
                }
            }
        }
    }
    // What only roughly told samples from each other may have left none to climb from.
    if best.value > f64::NEG_INFINITY { best } else { best_sample(f, scale) }
}

/// The best of the samples, for a function that hardly varies.
#[cold]
fn best_sample(f: &impl OnCircle, scale: f64) -> Peak {
    let mut best = Peak { phi: 0.0, value: f64::NEG_INFINITY, flat: false };
    let mut least = f64::INFINITY;
    for (k, (c, s)) in CIRCLE.cos.iter().zip(&CIRCLE.sin).enumerate() {
        let value = f.value(*c, *s);
        least = least.min(value);
        if value > best.value {
            best = Peak { phi: k as f64 * STEP, value, flat: false };
        }
    }
    if best.value - least <= SAME * scale { Peak { phi: 0.0, flat: true, ..best } } else { best }
}

/// The smallest value of a function.
#[inline]
pub(crate) fn smallest(f: impl OnCircle, scale: f64) -> Peak {
    let peak = greatest(&Below(f), scale);
    Peak { value: -peak.value, ..peak }
}

/// The top of a piece's hill around a sample: Newton on the slope, halving where Newton leaves the hill. No
/// step goes down, since beyond a dip another hill may begin.
pub(crate) fn climb(f: &impl OnCircle, piece: usize, start: f64, mut jet: Jet, scale: f64) -> Peak {
    let at = |x: f64| {
        let (s, c) = x.sin_cos();
        f.jet(piece, c, s)
    };
    let (mut left, mut right, mut x) = (start - STEP, start + STEP, start);
    for _ in 0..60 {
        if jet.slope > 0.0 {
            left = x;
        } else if jet.slope < 0.0 {
            right = x;
        } else {
            break;
        }
        let newton = x - jet.slope / jet.bend;
        let step = if jet.bend < 0.0 && newton > left && newton < right { newton } else { 0.5 * (left + right) } - x;
        // Newton doubles the digits: after a step this small the rest is below the last bit, in the
        // place as in the value.
        if step.abs() < 1e-9 {
            x += step;
            break;
        }
        let mut share = 1.0;
        let mut next = at(x + step);
        while next.value < jet.value - ROUNDING * scale && share > 1e-6 {
            share *= 0.5;
            next = at(x + share * step);
        }
        x += share * step;
        jet = next;
    }
    Peak { phi: on_circle(x), value: jet.value, flat: false }
}

/// The way from one φ to another, −π to π.
#[inline(always)]
fn between(from: f64, to: f64) -> f64 {
    let way = to - from;
    way - TAU * (way / TAU).round()
}

/// φ brought to 0 ≤ φ < 2π; the last bits either side of zero are zero.
pub(crate) fn on_circle(phi: f64) -> f64 {
    let w = phi.rem_euclid(TAU);
    if (1e-11..=TAU - 1e-11).contains(&w) { w } else { 0.0 }
}

#[cfg(test)]
mod tests {
    use super::super::wave::Wave;
    use super::*;

    fn wave(amplitude: f64, at: f64) -> Wave {
        Wave { mean: 0.0, cos: amplitude * at.cos(), sin: amplitude * at.sin() }
    }

    /// sin 2φ, with two hills of one height.
    struct Two;
    impl OnCircle for Two {
        fn value(&self, c: f64, s: f64) -> f64 {
            2.0 * s * c
        }
        fn jet(&self, _: usize, c: f64, s: f64) -> Jet {
            Jet { value: 2.0 * s * c, slope: 2.0 * (c * c - s * s), bend: -8.0 * s * c }
        }
    }

    #[test]
    fn finds_a_peak_between_samples_to_the_last_bits() {
        for at in [0.0, 0.01, 1.234_567, 3.0, 6.2] {
            let peak = greatest(&wave(40.0, at), 40.0);
            assert!((peak.phi - at).abs() < 1e-9, "{} {at}", peak.phi);
            assert!((peak.value - 40.0).abs() < 1e-13);
        }
    }

    #[test]
    fn equal_hills_give_the_first_and_a_flat_function_none() {
        assert!((greatest(&Two, 1.0).phi - std::f64::consts::FRAC_PI_4).abs() < 1e-9);
        assert!((smallest(Two, 1.0).phi - 3.0 * std::f64::consts::FRAC_PI_4).abs() < 1e-9);
        assert!(greatest(&Wave { mean: 7.0, cos: 0.0, sin: 0.0 }, 7.0).flat);
    }
}
