//! What a criterion calculates with: a plain number, or a value with its first and second
//! derivative, so that each criterion is written once and its slopes are exact.

use std::ops::{Add, Div, Mul, Neg, Sub};

/// A number, or a number with derivatives.
pub(crate) trait Number:
    Copy
    + Neg<Output = Self>
    + Add<Output = Self>
    + Sub<Output = Self>
    + Mul<Output = Self>
    + Div<Output = Self>
    + Add<f64, Output = Self>
    + Sub<f64, Output = Self>
    + Mul<f64, Output = Self>
{
    /// The value by itself.
    fn value(self) -> f64;
    /// The image under a function whose value and first two derivatives at this value are given.
    fn through(self, function: [f64; 3]) -> Self;
    /// The square root; zero (with zero slopes) below zero.
    fn sqrt(self) -> Self;
    /// A power; zero (with zero slopes) at and below zero.
    fn power(self, exponent: f64) -> Self;

    /// The larger; of two equal ones itself, as [`smaller`](Number::smaller) gives the other, so that the
    /// two together are both, with their slopes.
    #[inline(always)]
    fn larger(self, other: Self) -> Self {
        if self.value() >= other.value() { self } else { other }
    }
    #[inline(always)]
    fn smaller(self, other: Self) -> Self {
        if self.value() < other.value() { self } else { other }
    }
}

impl Number for f64 {
    #[inline(always)]
    fn value(self) -> f64 {
        self
    }
    #[inline(always)]
    fn through(self, [value, ..]: [f64; 3]) -> f64 {
        value
    }
    #[inline(always)]
    fn sqrt(self) -> f64 {
        f64::sqrt(if self > 0.0 { self } else { 0.0 })
    }
    #[inline(always)]
    fn power(self, exponent: f64) -> f64 {
        if self > 0.0 { self.powf(exponent) } else { 0.0 }
    }
}

/// A value with its first and second derivative by one variable.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Jet {
    pub value: f64,
    pub slope: f64,
    pub bend: f64,
}

impl Jet {
    /// Value, slope and bend.
    #[inline(always)]
    pub fn all(self) -> [f64; 3] {
        [self.value, self.slope, self.bend]
    }
}

impl Number for Jet {
    #[inline(always)]
    fn value(self) -> f64 {
        self.value
    }
    #[inline(always)]
    fn through(self, [value, first, second]: [f64; 3]) -> Jet {
        Jet { value, slope: first * self.slope, bend: first * self.bend + second * self.slope * self.slope }
    }
    #[inline(always)]
    fn sqrt(self) -> Jet {
        if self.value > 0.0 {
            let r = self.value.sqrt();
            let over = 1.0 / r;
            self.through([r, 0.5 * over, -0.25 * over * over * over])
        } else {
            Jet { value: 0.0, slope: 0.0, bend: 0.0 }
        }
    }
    #[inline(always)]
    fn power(self, exponent: f64) -> Jet {
        if self.value > 0.0 {
            let y = self.value.powf(exponent);
            let over = 1.0 / self.value;
            let first = exponent * y * over;
            self.through([y, first, (exponent - 1.0) * first * over])
        } else {
            Jet { value: 0.0, slope: 0.0, bend: 0.0 }
        }
    }
}

impl Neg for Jet {
    type Output = Jet;
    #[inline(always)]
    fn neg(self) -> Jet {
        Jet { value: -self.value, slope: -self.slope, bend: -self.bend }
    }
}
impl Add for Jet {
    type Output = Jet;
    #[inline(always)]
    fn add(self, o: Jet) -> Jet {
        Jet { value: self.value + o.value, slope: self.slope + o.slope, bend: self.bend + o.bend }
    }
}
impl Sub for Jet {
    type Output = Jet;
    #[inline(always)]
    fn sub(self, o: Jet) -> Jet {
        Jet { value: self.value - o.value, slope: self.slope - o.slope, bend: self.bend - o.bend }
    }
}
impl Mul for Jet {
    type Output = Jet;
    #[inline(always)]
    fn mul(self, o: Jet) -> Jet {
        Jet {
            value: self.value * o.value,
            slope: self.slope * o.value + self.value * o.slope,
            bend: self.bend * o.value + 2.0 * self.slope * o.slope + self.value * o.bend,
        }
    }
}
impl Div for Jet {
    type Output = Jet;
    #[inline(always)]
    fn div(self, o: Jet) -> Jet {
        let over = 1.0 / o.value;
        let value = self.value / o.value;
        let slope = (self.slope - value * o.slope) * over;
        Jet { value, slope, bend: (self.bend - 2.0 * slope * o.slope - value * o.bend) * over }
    }
}
impl Add<f64> for Jet {
    type Output = Jet;
    #[inline(always)]
    fn add(self, o: f64) -> Jet {
        Jet { value: self.value + o, ..self }
    }
}
impl Sub<f64> for Jet {
    type Output = Jet;
    #[inline(always)]
    fn sub(self, o: f64) -> Jet {
        Jet { value: self.value - o, ..self }
    }
}
impl Mul<f64> for Jet {
    type Output = Jet;
    #[inline(always)]
    fn mul(self, o: f64) -> Jet {
        Jet { value: self.value * o, slope: self.slope * o, bend: self.bend * o }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Every operation against differences of its value.
    #[test]
    fn derivatives_are_those_of_the_value() {
        let x = |at: f64| Jet { value: at, slope: 1.0, bend: 0.0 };
        let f = |at: f64| {
            let x = x(at);
            let wave = (x * x - 0.3) * 2.0 + 1.0;
            (wave.sqrt() / (x + 2.0) - x.power(1.3) + wave.power(0.4) * x) * wave - (-x)
        };
        for at in [0.9, 1.3, 2.2] {
            let h = 1e-4;
            let (a, b, c) = (f(at - h), f(at), f(at + h));
            assert!(((c.value - a.value) / (2.0 * h) - b.slope).abs() < 1e-6 * b.slope.abs().max(1.0));
            assert!(((c.slope - a.slope) / (2.0 * h) - b.bend).abs() < 1e-6 * b.bend.abs().max(1.0));
        }
    }
}
