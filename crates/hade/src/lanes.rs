//! One number, or four side by side, each of another wall: what is written for any of them works out four walls at
//! once, as the processor can.

use std::ops::{Add, BitAnd, Div, Mul, Neg, Sub};

use wide::f64x4;

/// A number, or four.
pub(crate) trait Lanes:
    Copy + Neg<Output = Self> + Add<Output = Self> + Sub<Output = Self> + Mul<Output = Self> + Div<Output = Self>
{
    /// The answer to a question, of each.
    type Mask: Copy + BitAnd<Output = Self::Mask>;

    /// One number in every lane.
    fn of(value: f64) -> Self;
    fn sqrt(self) -> Self;
    fn abs(self) -> Self;
    fn larger(self, other: Self) -> Self;
    fn smaller(self, other: Self) -> Self;
    fn above(self, other: Self) -> Self::Mask;
    fn at_least(self, other: Self) -> Self::Mask;
    /// The first where the answer is yes, the second where it is no.
    fn where_so(mask: Self::Mask, yes: Self, no: Self) -> Self;
    /// Whether the answer is yes in all lanes.
    fn all(mask: Self::Mask) -> bool;
}

impl Lanes for f64 {
    type Mask = bool;

    #[inline(always)]
    fn of(value: f64) -> f64 {
        value
    }
    #[inline(always)]
    fn sqrt(self) -> f64 {
        f64::sqrt(self)
    }
    #[inline(always)]
    fn abs(self) -> f64 {
        f64::abs(self)
    }
    #[inline(always)]
    fn larger(self, other: f64) -> f64 {
        if self > other { self } else { other }
    }
    #[inline(always)]
    fn smaller(self, other: f64) -> f64 {
        if self < other { self } else { other }
    }
    #[inline(always)]
    fn above(self, other: f64) -> bool {
        self > other
    }
    #[inline(always)]
    fn at_least(self, other: f64) -> bool {
        self >= other
    }
    #[inline(always)]
    fn where_so(mask: bool, yes: f64, no: f64) -> f64 {
        if mask { yes } else { no }
    }
    #[inline(always)]
    fn all(mask: bool) -> bool {
        mask
    }
}

/// Where the answer is yes all bits are set.
impl Lanes for f64x4 {
    type Mask = f64x4;

    #[inline(always)]
    fn of(value: f64) -> f64x4 {
        f64x4::splat(value)
    }
    #[inline(always)]
    fn sqrt(self) -> f64x4 {
        f64x4::sqrt(self)
    }
    #[inline(always)]
    fn abs(self) -> f64x4 {
        f64x4::abs(self)
    }
    #[inline(always)]
    fn larger(self, other: f64x4) -> f64x4 {
        self.fast_max(other)
    }
    #[inline(always)]
    fn smaller(self, other: f64x4) -> f64x4 {
        self.fast_min(other)
    }
    #[inline(always)]
    fn above(self, other: f64x4) -> f64x4 {
        self.simd_gt(other)
    }
    #[inline(always)]
    fn at_least(self, other: f64x4) -> f64x4 {
        self.simd_ge(other)
    }
    #[inline(always)]
    fn where_so(mask: f64x4, yes: f64x4, no: f64x4) -> f64x4 {
        mask.select(yes, no)
    }
    #[inline(always)]
    fn all(mask: f64x4) -> bool {
        mask.all()
    }
}
