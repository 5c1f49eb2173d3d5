//! Methods of numbers.

pub struct TryFromIntError(());
pub struct ParseIntError(());
pub struct ParseFloatError(());

macro_rules! float {
    ($($t:ident $bits:ty;)*) => { $( impl $t {
        pub const EPSILON: $t = 0.0;
        pub const MIN: $t = 0.0;
        pub const MAX: $t = 0.0;
        pub const MIN_POSITIVE: $t = 0.0;
        pub const INFINITY: $t = 0.0;
        pub const NEG_INFINITY: $t = 0.0;
        pub const NAN: $t = 0.0;
        float_methods! { $t: floor ceil round trunc fract abs signum sqrt cbrt exp exp2 exp_m1 ln ln_1p log2 log10
            sin cos tan asin acos atan sinh cosh tanh asinh acosh atanh to_degrees to_radians recip round_ties_even;
            max min copysign div_euclid rem_euclid powf hypot atan2 log }
        pub fn powi(self, n: i32) -> $t { loop {} }
        pub fn mul_add(self, a: $t, b: $t) -> $t { loop {} }
        pub fn clamp(self, min: $t, max: $t) -> $t { loop {} }
        pub fn sin_cos(self) -> ($t, $t) { loop {} }
        pub fn is_nan(self) -> bool { loop {} }
        pub fn is_finite(self) -> bool { loop {} }
        pub fn is_infinite(self) -> bool { loop {} }
        pub fn is_sign_negative(self) -> bool { loop {} }
        pub fn is_sign_positive(self) -> bool { loop {} }
        pub fn to_bits(self) -> $bits { loop {} }
        pub fn from_bits(v: $bits) -> $t { loop {} }
        pub fn total_cmp(&self, other: &$t) -> crate::cmp::Ordering { loop {} }
    }
    impl crate::str::FromStr for $t {
        type Err = ParseFloatError;
        fn from_str(s: &str) -> Result<$t, ParseFloatError> { loop {} }
    } )* }
}
macro_rules! float_methods {
    ($t:ident: $($one:ident)*; $($two:ident)*) => {
        $( pub fn $one(self) -> $t { loop {} } )*
        $( pub fn $two(self, other: $t) -> $t { loop {} } )*
    }
}
float! { f64 u64; f32 u32; }

macro_rules! integer {
    ($($t:ident $unsigned:ident)*) => { $( impl $t {
        pub const MIN: $t = 0;
        pub const MAX: $t = 0;
        pub const BITS: u32 = 0;
        pub fn pow(self, exp: u32) -> $t { loop {} }
        pub fn rem_euclid(self, rhs: $t) -> $t { loop {} }
        pub fn div_euclid(self, rhs: $t) -> $t { loop {} }
        pub fn abs_diff(self, other: $t) -> $unsigned { loop {} }
        pub fn saturating_sub(self, rhs: $t) -> $t { loop {} }
        pub fn saturating_add(self, rhs: $t) -> $t { loop {} }
        pub fn wrapping_add(self, rhs: $t) -> $t { loop {} }
        pub fn wrapping_sub(self, rhs: $t) -> $t { loop {} }
        pub fn wrapping_mul(self, rhs: $t) -> $t { loop {} }
        pub fn checked_add(self, rhs: $t) -> Option<$t> { loop {} }
        pub fn checked_sub(self, rhs: $t) -> Option<$t> { loop {} }
        pub fn checked_mul(self, rhs: $t) -> Option<$t> { loop {} }
        pub fn checked_div(self, rhs: $t) -> Option<$t> { loop {} }
        pub fn count_ones(self) -> u32 { loop {} }
        pub fn leading_zeros(self) -> u32 { loop {} }
        pub fn trailing_zeros(self) -> u32 { loop {} }
        pub fn isqrt(self) -> $t { loop {} }
    }
    impl crate::str::FromStr for $t {
        type Err = ParseIntError;
        fn from_str(s: &str) -> Result<$t, ParseIntError> { loop {} }
    } )* }
}
integer! { usize usize u8 u8 u16 u16 u32 u32 u64 u64 u128 u128 isize usize i8 u8 i16 u16 i32 u32 i64 u64 i128 u128 }
macro_rules! signed {
    ($($t:ident $unsigned:ident)*) => { $( impl $t {
        pub fn abs(self) -> $t { loop {} }
        pub fn signum(self) -> $t { loop {} }
        pub fn is_negative(self) -> bool { loop {} }
        pub fn is_positive(self) -> bool { loop {} }
        pub fn unsigned_abs(self) -> $unsigned { loop {} }
    } )* }
}
signed! { isize usize i8 u8 i16 u16 i32 u32 i64 u64 i128 u128 }
macro_rules! unsigned {
    ($($t:ident)*) => { $( impl $t {
        pub fn div_ceil(self, rhs: $t) -> $t { loop {} }
        pub fn is_power_of_two(self) -> bool { loop {} }
        pub fn next_power_of_two(self) -> $t { loop {} }
    } )* }
}
unsigned! { usize u8 u16 u32 u64 u128 }

impl char {
    pub fn is_alphabetic(self) -> bool { loop {} }
    pub fn is_numeric(self) -> bool { loop {} }
    pub fn is_alphanumeric(self) -> bool { loop {} }
    pub fn is_whitespace(self) -> bool { loop {} }
    pub fn is_ascii_digit(&self) -> bool { loop {} }
    pub fn to_digit(self, radix: u32) -> Option<u32> { loop {} }
    pub fn to_ascii_uppercase(&self) -> char { loop {} }
    pub fn to_ascii_lowercase(&self) -> char { loop {} }
    pub fn len_utf8(self) -> usize { loop {} }
}
impl bool {
    pub fn then<T, F: FnOnce() -> T>(self, f: F) -> Option<T> { loop {} }
    pub fn then_some<T>(self, t: T) -> Option<T> { loop {} }
}
impl crate::str::FromStr for bool {
    type Err = crate::str::ParseBoolError;
    fn from_str(s: &str) -> Result<bool, crate::str::ParseBoolError> { loop {} }
}
