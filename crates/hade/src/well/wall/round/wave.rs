//! A wave round the hole.

use super::circle::OnCircle;
use crate::lanes::Lanes;
use crate::rock::Jet;

/// A wave on the circle: mean + cos · cos φ + sin · sin φ.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Wave<N = f64> {
    pub mean: N,
    pub cos: N,
    pub sin: N,
}

impl<N: Lanes> Wave<N> {
    #[inline(always)]
    pub fn at(self, c: N, s: N) -> N {
        self.mean + self.cos * c + self.sin * s
    }
    /// Its derivative by φ.
    #[inline(always)]
    pub fn slope(self, c: N, s: N) -> N {
        self.sin * c - self.cos * s
    }
    /// Its second derivative by φ.
    #[inline(always)]
    pub fn bend(self, c: N, s: N) -> N {
        -self.cos * c - self.sin * s
    }
    /// Half its height from trough to crest.
    #[inline(always)]
    pub fn amplitude(self) -> N {
        (self.cos * self.cos + self.sin * self.sin).sqrt()
    }
    /// factor · (self + sign · other).
    #[inline(always)]
    pub fn joined(self, sign: f64, other: Wave<N>, factor: f64) -> Wave<N> {
        let (sign, factor) = (N::of(sign), N::of(factor));
        Wave {
            mean: factor * (self.mean + sign * other.mean),
            cos: factor * (self.cos + sign * other.cos),
            sin: factor * (self.sin + sign * other.sin),
        }
    }
    /// offset + factor · wave.
    #[inline(always)]
    pub fn scaled(self, factor: N, offset: N) -> Wave<N> {
        Wave { mean: offset + factor * self.mean, cos: factor * self.cos, sin: factor * self.sin }
    }
}

impl Wave {
    /// Its value with both derivatives.
    #[inline(always)]
    pub fn jet(self, c: f64, s: f64) -> Jet {
        Jet { value: self.at(c, s), slope: self.slope(c, s), bend: self.bend(c, s) }
    }
}

impl OnCircle for Wave {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        self.at(c, s)
    }
    #[inline(always)]
    fn jet(&self, _piece: usize, c: f64, s: f64) -> Jet {
        Wave::jet(*self, c, s)
    }
}
