//! Where a function round the hole changes its sign.

use super::circle::{Below, CIRCLE, OnCircle, SAMPLES, STEP, climb};

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

/// The zeros of every part of a function that has no edge; those of the function are among them, also where two of
/// its edges lie between two samples. A hill or a hollow of a part between samples of one sign is climbed, so that a
/// narrow arc or gap is not missed.
pub(crate) fn edges(f: &impl OnCircle, scale: f64) -> Edges {
    let mut found = Edges { places: [0.0; Edges::MOST], count: 0 };
    for part in 0..f.parts() {
        let only = &Only(f, part);
        let mut values = [0.0; SAMPLES];
        for ((value, c), s) in values.iter_mut().zip(&CIRCLE.cos).zip(&CIRCLE.sin) {
            *value = only.value(*c, *s);
        }
        let at = |k: usize| values.get(k % SAMPLES).copied().unwrap_or_default();
        for k in 0..SAMPLES {
            let (x, here, after) = (k as f64 * STEP, at(k), at(k + 1));
            if (here > 0.0) != (after > 0.0) {
                found.push(root_between(only, x, x + STEP));
            }
            let before = at(k + SAMPLES - 1);
            // A sample nearest to zero among neighbours of its own sign: does the part turn beyond zero?
            let alike = (here > 0.0) == (before > 0.0) && (here > 0.0) == (after > 0.0);
            if !alike || here.abs() > before.abs() || here.abs() > after.abs() {
                continue;
            }
            let (s, c) = x.sin_cos();
            let jet = only.jet(0, c, s);
            let turn = if here > 0.0 {
                let hill = climb(&Below(only), 0, x, -jet, scale);
                (hill.phi, -hill.value)
            } else {
                let hill = climb(&only, 0, x, jet, scale);
                (hill.phi, hill.value)
            };
            // The turning point, given round the circle, brought beside the sample.
            let beside =
                x + (turn.0 - x + std::f64::consts::PI).rem_euclid(std::f64::consts::TAU) - std::f64::consts::PI;
            if (turn.1 > 0.0) != (here > 0.0) && (beside - x).abs() <= STEP {
                found.push(root_between(only, x - STEP, beside));
                found.push(root_between(only, beside, x + STEP));
            }
        }
    }
    found
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

/// The one zero between two places of opposite sign: Newton, halving where it leaves them.
fn root_between(f: impl OnCircle, mut left: f64, mut right: f64) -> f64 {
    let at = |x: f64| {
        let (s, c) = x.sin_cos();
        f.jet(0, c, s)
    };
    let left_positive = at(left).value > 0.0;
    let mut x = 0.5 * (left + right);
    for _ in 0..80 {
        let jet = at(x);
        if (jet.value > 0.0) == left_positive {
            left = x;
        } else {
            right = x;
        }
        let newton = x - jet.value / jet.slope;
        let next = if newton > left && newton < right { newton } else { 0.5 * (left + right) };
        let moved = (next - x).abs();
        x = next;
        if moved < 2e-16 * (1.0 + x.abs()) || right - left < 4e-16 * (1.0 + x.abs()) {
            break;
        }
    }
    x
}

#[cfg(test)]
mod tests {
    use super::super::wave::Wave;
    use super::*;
    use crate::rock::Jet;

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
        assert_eq!(edges(&Wave { mean: 1.1, cos: 1.0, sin: 0.0 }, 1.0).count, 0);
    }
}
