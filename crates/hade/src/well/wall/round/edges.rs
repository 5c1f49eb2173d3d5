//! Where a function round the hole changes its sign.

use std::f64::consts::{PI, TAU};

use super::circle::{Below, CIRCLE, OnCircle, STEP, climb};

/// Places φ in no order.
pub(crate) struct Edges {
    pub places: [f64; Edges::MOST],
    pub count: usize,
}

impl Edges {
    /// More than the pieces of any excess have.
    pub const MOST: usize = 32;

    fn push(&mut self, place: f64) {
        if let Some(cell) = self.places.get_mut(self.count) {
            *cell = place;
            self.count += 1;
        }
    }
}

/// A sample farther from zero than this many times what lies between it and its neighbours has no zero beside it. A
/// round hill rises between two samples by an eighth of what lies between them at most, and the sharp hollow where two
/// principal stresses meet falls by half of it; this leaves a factor of eight.
const FAR: f64 = 4.0;

/// The zeros of every part of a function that has no edge; those of the function are among them, also where two of
/// its edges lie between two samples. A hill or a hollow of a part between samples of one sign is climbed where it may
/// reach zero, so that a narrow arc or gap is not missed.
pub(crate) fn edges(f: &impl OnCircle, scale: f64) -> Edges {
    let mut found = Edges { places: [0.0; Edges::MOST], count: 0 };
    for part in 0..f.parts() {
        let only = &Only(f, part);
        let values = f.scan_part(part, &CIRCLE);
        let [first, .., mut before] = values;
        for (k, here) in values.iter().copied().enumerate() {
            let after = values.get(k + 1).copied().unwrap_or(first);
            let [from_before, to_after] = [(here - before).abs(), (after - here).abs()];
            let x = k as f64 * STEP;
            let previous = Looked { x: x - STEP, value: before };
            before = here;
            if here.abs() > FAR * if from_before > to_after { from_before } else { to_after } {
                continue;
            }
            let [sample, next] = [Looked { x, value: here }, Looked { x: x + STEP, value: after }];
            if sample.other_sign(next) {
                found.push(root_between(only, sample, next));
            } else if !sample.other_sign(previous)
                && sample.is_nearest_to_zero([previous, next])
                && let Some(beside) = beyond_zero(only, sample, scale)
            {
                found.push(root_between(only, previous, beside));
                found.push(root_between(only, beside, next));
            }
        }
    }
    found
}

/// A place φ and the value there.
#[derive(Clone, Copy)]
struct Looked {
    x: f64,
    value: f64,
}

impl Looked {
    fn other_sign(self, other: Looked) -> bool {
        (self.value > 0.0) != (other.value > 0.0)
    }

    fn is_nearest_to_zero(self, neighbours: [Looked; 2]) -> bool {
        neighbours.iter().all(|neighbour| self.value.abs() <= neighbour.value.abs())
    }
}

/// The turning point beside a sample, if the function has the other sign there.
fn beyond_zero(f: impl OnCircle + Copy, sample: Looked, scale: f64) -> Option<Looked> {
    let (s, c) = sample.x.sin_cos();
    let jet = f.jet(0, c, s);
    let (phi, value) = if sample.value > 0.0 {
        let hill = climb(&Below(f), 0, sample.x, -jet, scale);
        (hill.phi, -hill.value)
    } else {
        let hill = climb(&f, 0, sample.x, jet, scale);
        (hill.phi, hill.value)
    };
    // The turning point, given round the circle, brought beside the sample.
    let x = sample.x + (phi - sample.x + PI).rem_euclid(TAU) - PI;
    let turn = Looked { x, value };
    (turn.other_sign(sample) && (x - sample.x).abs() <= STEP).then_some(turn)
}

/// One part of a function by itself.
struct Only<'a, F>(&'a F, usize);

impl<F: OnCircle> OnCircle for &Only<'_, F> {
    fn value(&self, c: f64, s: f64) -> f64 {
        self.0.part(self.1, c, s).value
    }
    fn jet(&self, _: usize, c: f64, s: f64) -> crate::rock::Jet {
        self.0.part(self.1, c, s)
    }
}

/// Steps of Newton shorter than this leave over what the bend says: their cubes are below the last bit.
const SHORT: f64 = 1e-6;

/// The one zero between two places of opposite sign: Newton from the chord's zero, halving where it leaves them.
fn root_between(f: impl OnCircle, left: Looked, right: Looked) -> f64 {
    let left_positive = left.value > 0.0;
    let chord = (left.x * right.value - right.x * left.value) / (right.value - left.value);
    let (mut left, mut right) = (left.x, right.x);
    let mut x = if chord > left && chord < right { chord } else { 0.5 * (left + right) };
    for _ in 0..80 {
        let (s, c) = x.sin_cos();
        let jet = f.jet(0, c, s);
        if (jet.value > 0.0) == left_positive {
            left = x;
        } else {
            right = x;
        }
        let (step, last) = (-jet.value / jet.slope, 2e-16 * (1.0 + x.abs()));
        let newton = x + step;
        let inside = newton > left && newton < right;
        let left_over = (0.5 * step * step * jet.bend / jet.slope).abs();
        if step.abs() < SHORT && left_over < last && (inside || step.abs() < last) {
            return newton;
        }
        x = if inside { newton } else { 0.5 * (left + right) };
        if right - left < 2.0 * last {
            break;
        }
    }
    x
}

#[cfg(test)]
mod tests {
    use super::super::wave::Wave;
    use super::*;
    use crate::rock::{Jet, Number};

    /// cos 2φ − 0.3
    struct Four;
    impl OnCircle for Four {
        fn value(&self, c: f64, s: f64) -> f64 {
            self.jet(0, c, s).value
        }
        fn jet(&self, _: usize, c: f64, s: f64) -> Jet {
            let (c2, s2) = (c * c - s * s, 2.0 * s * c);
            Jet { value: c2 - 0.3, slope: -2.0 * s2, bend: -4.0 * c2 }
        }
    }

    /// |sin ½(φ − at)| − 1e-6, a sharp hollow.
    struct Sharp {
        at: f64,
    }
    impl OnCircle for Sharp {
        fn value(&self, c: f64, s: f64) -> f64 {
            self.jet(0, c, s).value
        }
        fn jet(&self, _: usize, c: f64, s: f64) -> Jet {
            let (cos, sin) = (self.at.cos(), self.at.sin());
            Wave { mean: 0.5, cos: -0.5 * cos, sin: -0.5 * sin }.jet(c, s).sqrt() - 1e-6
        }
    }

    fn sorted(found: &Edges) -> Vec<f64> {
        let mut places: Vec<f64> =
            found.places.iter().take(found.count).map(|x| x.rem_euclid(std::f64::consts::TAU)).collect();
        places.sort_by(f64::total_cmp);
        places
    }

    #[test]
    fn four_edges_and_a_narrow_pair() {
        let found = sorted(&edges(&Four, 1.0));
        assert_eq!(found.len(), 4);
        assert!(found.iter().all(|x| ((2.0 * x).cos() - 0.3).abs() < 1e-14));
        // cos(φ − 1) just above its crest's foot: two edges 2e-4 apart, between samples; and the same
        // as a gap.
        let (s, c) = 1.0_f64.sin_cos();
        for sign in [1.0, -1.0] {
            let wave = Wave { mean: -sign * (1e-4_f64).cos(), cos: sign * c, sin: sign * s };
            let found = sorted(&edges(&wave, 1.0));
            assert_eq!(found.len(), 2, "{sign}");
            assert!((found[0] - (1.0 - 1e-4)).abs() < 1e-10 && (found[1] - (1.0 + 1e-4)).abs() < 1e-10);
        }
        // A sharp hollow anywhere between two samples.
        for k in 0..=20 {
            let at = 1.0 + f64::from(k) * STEP / 20.0;
            let found = sorted(&edges(&Sharp { at }, 1.0));
            assert_eq!(found.len(), 2, "{at}");
            assert!((found[0] - (at - 2e-6)).abs() < 1e-9 && (found[1] - (at + 2e-6)).abs() < 1e-9, "{at}");
        }
        assert_eq!(edges(&Wave { mean: 1.1, cos: 1.0, sin: 0.0 }, 1.0).count, 0);
    }
}
