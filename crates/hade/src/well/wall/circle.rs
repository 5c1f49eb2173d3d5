//! The greatest value of a smooth function round the hole.
//!
//! Everything at a wall repeats after 180° of tool face, so functions live on the circle of
//! φ = 2θ. A scan finds the hills, a guarded Newton iteration on the slope climbs each that can be
//! the highest; nothing is allocated.

use std::f64::consts::TAU;
use std::sync::LazyLock;

/// Samples of a scan: every 5° of φ, 2.5° of tool face.
pub(crate) const SAMPLES: usize = 72;
/// The distance of two samples in φ.
pub(crate) const STEP: f64 = TAU / SAMPLES as f64;

/// cos φ and sin φ of each sample.
pub(crate) static CIRCLE: LazyLock<[[f64; 2]; SAMPLES]> = LazyLock::new(|| {
    let mut table = [[0.0; 2]; SAMPLES];
    for (k, cell) in table.iter_mut().enumerate() {
        let (s, c) = (k as f64 * STEP).sin_cos();
        *cell = [c, s];
    }
    table
});

/// A value with its first and second derivative by φ.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Jet {
    pub value: f64,
    pub slope: f64,
    pub bend: f64,
}

impl Jet {
    #[inline(always)]
    pub fn negated(self) -> Jet {
        Jet { value: -self.value, slope: -self.slope, bend: -self.bend }
    }
    #[inline(always)]
    pub fn larger(self, other: Jet) -> Jet {
        if other.value > self.value { other } else { self }
    }
    #[inline(always)]
    pub fn smaller(self, other: Jet) -> Jet {
        if other.value < self.value { other } else { self }
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
const SAME: f64 = 1e-11;
/// A hill whose best sample is lower than the best of all by more than this share of the range
/// cannot hold the peak: between samples a wave rises by at most STEP²/8 of its amplitude, and this
/// leaves a factor of a hundred for sharper hills.
const SLACK: f64 = 0.05;

/// The greatest value of `f(cos φ, sin φ)`; `scale` is the size of the numbers in it.
#[inline]
pub(crate) fn greatest(f: impl Fn(f64, f64) -> Jet, scale: f64) -> Peak {
    let mut values = [0.0; SAMPLES];
    let (mut top, mut bottom) = (f64::NEG_INFINITY, f64::INFINITY);
    for (value, [c, s]) in values.iter_mut().zip(CIRCLE.iter()) {
        *value = f(*c, *s).value;
        top = top.max(*value);
        bottom = bottom.min(*value);
    }
    if top - bottom <= SAME * scale {
        return Peak { phi: 0.0, value: top, flat: true };
    }
    let enough = top - SLACK * (top - bottom);
    let mut best = Peak { phi: 0.0, value: f64::NEG_INFINITY, flat: false };
    let [mut before, ..] = values;
    if let Some(last) = values.last() {
        before = *last;
    }
    for (k, value) in values.iter().enumerate() {
        let after = values.get(k + 1).or(values.first()).copied().unwrap_or(f64::NAN);
        if *value >= enough && *value >= before && *value >= after {
            let hill = climb(&f, k as f64 * STEP);
            if hill.value > best.value + SAME * scale
                || (hill.value >= best.value - SAME * scale && hill.phi < best.phi)
            {
                best = hill;
            }
        }
        before = *value;
    }
    best
}

/// The top of the hill around a sample: Newton on the slope, halving where Newton leaves the hill.
#[inline]
fn climb(f: &impl Fn(f64, f64) -> Jet, start: f64) -> Peak {
    let (mut left, mut right, mut x) = (start - STEP, start + STEP, start);
    let mut best = Peak { phi: x, value: f64::NEG_INFINITY, flat: false };
    for _ in 0..60 {
        let (s, c) = x.sin_cos();
        let jet = f(c, s);
        if jet.value >= best.value {
            best = Peak { phi: x, value: jet.value, flat: false };
        }
        if jet.slope > 0.0 {
            left = x;
        } else if jet.slope < 0.0 {
            right = x;
        } else {
            break;
        }
        let newton = x - jet.slope / jet.bend;
        let next = if jet.bend < 0.0 && newton > left && newton < right { newton } else { 0.5 * (left + right) };
        let moved = (next - x).abs();
        x = next;
        // Newton doubles the digits: after a step this small the rest is below the last bit.
        if moved < 1e-9 {
            let (s, c) = x.sin_cos();
            best = Peak { phi: x, value: f(c, s).value.max(best.value), flat: false };
            break;
        }
    }
    Peak { phi: on_circle(best.phi), ..best }
}

/// φ brought to 0 ≤ φ < 2π; the last bits either side of zero are zero.
pub(crate) fn on_circle(phi: f64) -> f64 {
    let w = phi.rem_euclid(TAU);
    if w < 1e-11 || w > TAU - 1e-11 { 0.0 } else { w }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn wave(amplitude: f64, at: f64) -> impl Fn(f64, f64) -> Jet {
        let (s0, c0) = at.sin_cos();
        move |c, s| Jet {
            value: amplitude * (c * c0 + s * s0),
            slope: amplitude * (c * s0 - s * c0),
            bend: -amplitude * (c * c0 + s * s0),
        }
    }

    #[test]
    fn finds_a_peak_between_samples_to_the_last_bits() {
        for at in [0.0, 0.01, 1.234_567, 3.0, 6.28] {
            let peak = greatest(wave(40.0, at), 40.0);
            assert!((peak.phi - at).abs() < 1e-9, "{} {at}", peak.phi);
            assert!((peak.value - 40.0).abs() < 1e-13);
        }
    }

    #[test]
    fn equal_hills_give_the_first_and_a_flat_function_none() {
        let two = |c: f64, s: f64| Jet { value: 2.0 * s * c, slope: 2.0 * (c * c - s * s), bend: -8.0 * s * c };
        assert!((greatest(two, 1.0).phi - std::f64::consts::FRAC_PI_4).abs() < 1e-9);
        assert!(greatest(|_, _| Jet { value: 7.0, slope: 0.0, bend: 0.0 }, 7.0).flat);
    }
}
