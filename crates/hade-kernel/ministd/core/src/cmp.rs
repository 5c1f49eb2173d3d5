//! Comparison.

#[lang = "eq"]
pub trait PartialEq<Rhs: ?Sized = Self> {
    fn eq(&self, other: &Rhs) -> bool;
    fn ne(&self, other: &Rhs) -> bool { loop {} }
}
pub trait Eq: PartialEq<Self> {}
#[lang = "partial_ord"]
pub trait PartialOrd<Rhs: ?Sized = Self>: PartialEq<Rhs> {
    fn partial_cmp(&self, other: &Rhs) -> Option<Ordering>;
    fn lt(&self, other: &Rhs) -> bool { loop {} }
    fn le(&self, other: &Rhs) -> bool { loop {} }
    fn gt(&self, other: &Rhs) -> bool { loop {} }
    fn ge(&self, other: &Rhs) -> bool { loop {} }
}
pub trait Ord: Eq + PartialOrd<Self> {
    fn cmp(&self, other: &Self) -> Ordering;
    fn max(self, other: Self) -> Self where Self: Sized { loop {} }
    fn min(self, other: Self) -> Self where Self: Sized { loop {} }
    fn clamp(self, min: Self, max: Self) -> Self where Self: Sized { loop {} }
}
#[rustc_builtin_macro]
pub macro PartialEq($item:item) {}
#[rustc_builtin_macro]
pub macro Eq($item:item) {}
#[rustc_builtin_macro]
pub macro PartialOrd($item:item) {}
#[rustc_builtin_macro]
pub macro Ord($item:item) {}

#[lang = "Ordering"]
pub enum Ordering {
    Less = -1,
    Equal = 0,
    Greater = 1,
}
impl Copy for Ordering {}
impl Clone for Ordering {
    fn clone(&self) -> Self { loop {} }
}
impl Ordering {
    pub fn reverse(self) -> Ordering { loop {} }
    pub fn then(self, other: Ordering) -> Ordering { loop {} }
    pub fn is_lt(self) -> bool { loop {} }
    pub fn is_gt(self) -> bool { loop {} }
    pub fn is_eq(self) -> bool { loop {} }
}
pub fn max<T: Ord>(a: T, b: T) -> T { loop {} }
pub fn min<T: Ord>(a: T, b: T) -> T { loop {} }

macro_rules! partial {
    ($($t:ty)*) => { $(
        impl PartialEq for $t { fn eq(&self, other: &$t) -> bool { loop {} } }
        impl PartialOrd for $t { fn partial_cmp(&self, other: &$t) -> Option<Ordering> { loop {} } }
    )* }
}
macro_rules! total {
    ($($t:ty)*) => { $(
        impl Eq for $t {}
        impl Ord for $t { fn cmp(&self, other: &$t) -> Ordering { loop {} } }
    )* }
}
partial! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64 bool char () str }
total! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 bool char () str }
impl<A: PartialEq<B> + ?Sized, B: ?Sized> PartialEq<&B> for &A {
    fn eq(&self, other: &&B) -> bool { loop {} }
}
impl<A: Eq + ?Sized> Eq for &A {}
impl<A: PartialOrd<B> + ?Sized, B: ?Sized> PartialOrd<&B> for &A {
    fn partial_cmp(&self, other: &&B) -> Option<Ordering> { loop {} }
}
impl<A: Ord + ?Sized> Ord for &A {
    fn cmp(&self, other: &Self) -> Ordering { loop {} }
}
impl<T: PartialEq<U>, U, const N: usize> PartialEq<[U; N]> for [T; N] {
    fn eq(&self, other: &[U; N]) -> bool { loop {} }
}
impl<T: Eq, const N: usize> Eq for [T; N] {}
impl<T: PartialEq<U>, U> PartialEq<[U]> for [T] {
    fn eq(&self, other: &[U]) -> bool { loop {} }
}
impl<T: PartialEq> PartialEq for Option<T> {
    fn eq(&self, other: &Self) -> bool { loop {} }
}
impl<T: Eq> Eq for Option<T> {}
impl<T: PartialOrd> PartialOrd for Option<T> {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> { loop {} }
}
