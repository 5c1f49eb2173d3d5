//! Roots on the circle of a trigonometric polynomial of degree two:
//! k + c1 cos φ + s1 sin φ + c2 cos 2φ + s2 sin 2φ.

use super::circle::{CIRCLE, SAMPLES, STEP};
use super::kirsch::Wave;

/// The polynomial by its coefficients.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Trigonometric {
    k: f64,
    c1: f64,
    s1: f64,
    c2: f64,
    s2: f64,
}

/// At most four roots.
pub(crate) type Roots = ([f64; 4], usize);

impl Trigonometric {
    /// a · b + factor · w.
    pub fn product_plus(a: Wave, b: Wave, w: Wave, factor: f64) -> Self {
        Trigonometric {
            k: a.mean * b.mean + 0.5 * (a.cos * b.cos + a.sin * b.sin) + factor * w.mean,
            c1: a.mean * b.cos + a.cos * b.mean + factor * w.cos,
            s1: a.mean * b.sin + a.sin * b.mean + factor * w.sin,
            c2: 0.5 * (a.cos * b.cos - a.sin * b.sin),
            s2: 0.5 * (a.cos * b.sin + a.sin * b.cos),
        }
    }

    /// self + factor · other.
    pub fn plus(self, other: Self, factor: f64) -> Self {
        Trigonometric {
            k: self.k + factor * other.k,
            c1: self.c1 + factor * other.c1,
            s1: self.s1 + factor * other.s1,
            c2: self.c2 + factor * other.c2,
            s2: self.s2 + factor * other.s2,
        }
    }

    #[inline(always)]
    fn at(&self, c: f64, s: f64) -> f64 {
        self.k + self.c1 * c + self.s1 * s + self.c2 * (c * c - s * s) + self.s2 * (2.0 * s * c)
    }
    fn slope(&self, c: f64, s: f64) -> f64 {
        self.s1 * c - self.c1 * s + 2.0 * (self.s2 * (c * c - s * s) - self.c2 * (2.0 * s * c))
    }
    fn derivative(&self) -> Self {
        Trigonometric { k: 0.0, c1: self.s1, s1: -self.c1, c2: 2.0 * self.s2, s2: -2.0 * self.c2 }
    }

    /// Its roots, in rising order. Between two samples of one sign it dips to zero and back only
    /// where a sample is within STEP²/8 of the greatest curvature; there its turning point is found
    /// and looked at.
    pub fn roots(&self) -> Roots {
        let mut found: Roots = ([0.0; 4], 0);
        let curvature = self.c1.hypot(self.s1) + 4.0 * self.c2.hypot(self.s2);
        let reach = 1.000_1 * curvature * STEP * STEP / 8.0;
        let mut previous: Option<(f64, f64)> = None;
        for k in 0..=SAMPLES {
            let (Some(c), Some(s)) = (CIRCLE.cos.get(k % SAMPLES), CIRCLE.sin.get(k % SAMPLES)) else { continue };
            let (x, value) = (k as f64 * STEP, self.at(*c, *s));
            if let Some((before_x, before)) = previous {
                if (before > 0.0) != (value > 0.0) {
                    push(&mut found, self.root_between(before_x, x));
                } else if before.abs().min(value.abs()) <= reach {
                    let derivative = self.derivative();
                    let ends = [before_x, x].map(|x| derivative.at(x.cos(), x.sin()));
                    if (ends[0] > 0.0) != (ends[1] > 0.0) {
                        let turn = derivative.root_between(before_x, x);
                        if (self.at(turn.cos(), turn.sin()) > 0.0) != (value > 0.0) {
                            push(&mut found, self.root_between(before_x, turn));
                            push(&mut found, self.root_between(turn, x));
                        }
                    }
                }
            }
            previous = Some((x, value));
        }
        found
    }

    /// The one root between two places of opposite sign: Newton, halving where it leaves them.
    fn root_between(&self, mut left: f64, mut right: f64) -> f64 {
        let left_positive = self.at(left.cos(), left.sin()) > 0.0;
        let mut x = 0.5 * (left + right);
        for _ in 0..80 {
            let (s, c) = x.sin_cos();
            let value = self.at(c, s);
            if (value > 0.0) == left_positive {
                left = x;
            } else {
                right = x;
            }
            let newton = x - value / self.slope(c, s);
            let next = if newton > left && newton < right { newton } else { 0.5 * (left + right) };
            let moved = (next - x).abs();
            x = next;
            if moved < 2e-16 * (1.0 + x.abs()) || right - left < 4e-16 * (1.0 + x.abs()) {
                break;
            }
        }
        x
    }
}

fn push(found: &mut Roots, root: f64) {
    if let Some(cell) = found.0.get_mut(found.1) {
        *cell = root;
        found.1 += 1;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn four_roots_and_a_narrow_pair() {
        // cos 2φ = 0.3
        let p = Trigonometric { k: -0.3, c1: 0.0, s1: 0.0, c2: 1.0, s2: 0.0 };
        let (roots, n) = p.roots();
        assert_eq!(n, 4);
        assert!(roots.iter().all(|r| ((2.0 * r).cos() - 0.3).abs() < 1e-14));
        // cos(φ − 1) just below its crest: two roots 2e-4 apart, between samples.
        let (s, c) = 1.0_f64.sin_cos();
        let p = Trigonometric { k: -(1e-4_f64).cos(), c1: c, s1: s, c2: 0.0, s2: 0.0 };
        let (roots, n) = p.roots();
        assert_eq!(n, 2);
        assert!((roots[0] - (1.0 - 1e-4)).abs() < 1e-10 && (roots[1] - (1.0 + 1e-4)).abs() < 1e-10);
    }

    #[test]
    fn no_root_where_it_stays_on_one_side() {
        let p = Trigonometric { k: 1.1, c1: 1.0, s1: 0.0, c2: 0.0, s2: 0.0 };
        assert_eq!(p.roots().1, 0);
    }
}
