//! Operators.

use crate::marker::{PointeeSized, Tuple, Unsize};

macro_rules! binary {
    ($($lang:literal $Trait:ident $method:ident, $assign_lang:literal $Assign:ident $assign:ident: $($t:ty)*;)*) => { $(
        #[lang = $lang]
        pub trait $Trait<Rhs = Self> {
            type Output;
            fn $method(self, rhs: Rhs) -> Self::Output;
        }
        #[lang = $assign_lang]
        pub trait $Assign<Rhs = Self> {
            fn $assign(&mut self, rhs: Rhs);
        }
        $(
            impl $Trait for $t { type Output = $t; fn $method(self, rhs: $t) -> $t { loop {} } }
            impl $Trait<&$t> for $t { type Output = $t; fn $method(self, rhs: &$t) -> $t { loop {} } }
            impl $Trait<$t> for &$t { type Output = $t; fn $method(self, rhs: $t) -> $t { loop {} } }
            impl $Trait<&$t> for &$t { type Output = $t; fn $method(self, rhs: &$t) -> $t { loop {} } }
            impl $Assign for $t { fn $assign(&mut self, rhs: $t) { loop {} } }
            impl $Assign<&$t> for $t { fn $assign(&mut self, rhs: &$t) { loop {} } }
        )*
    )* }
}
binary! {
    "add" Add add, "add_assign" AddAssign add_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64;
    "sub" Sub sub, "sub_assign" SubAssign sub_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64;
    "mul" Mul mul, "mul_assign" MulAssign mul_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64;
    "div" Div div, "div_assign" DivAssign div_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64;
    "rem" Rem rem, "rem_assign" RemAssign rem_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64;
    "bitand" BitAnd bitand, "bitand_assign" BitAndAssign bitand_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 bool;
    "bitor" BitOr bitor, "bitor_assign" BitOrAssign bitor_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 bool;
    "bitxor" BitXor bitxor, "bitxor_assign" BitXorAssign bitxor_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 bool;
    "shl" Shl shl, "shl_assign" ShlAssign shl_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128;
    "shr" Shr shr, "shr_assign" ShrAssign shr_assign: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128;
}

macro_rules! unary {
    ($($lang:literal $Trait:ident $method:ident: $($t:ty)*;)*) => { $(
        #[lang = $lang]
        pub trait $Trait {
            type Output;
            fn $method(self) -> Self::Output;
        }
        $(
            impl $Trait for $t { type Output = $t; fn $method(self) -> $t { loop {} } }
            impl $Trait for &$t { type Output = $t; fn $method(self) -> $t { loop {} } }
        )*
    )* }
}
unary! {
    "neg" Neg neg: isize i8 i16 i32 i64 i128 f32 f64;
    "not" Not not: usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 bool;
}

#[lang = "drop"]
pub trait Drop {
    fn drop(&mut self);
}

#[lang = "deref"]
pub trait Deref: PointeeSized {
    #[lang = "deref_target"]
    type Target: ?Sized;
    fn deref(&self) -> &Self::Target;
}
#[lang = "deref_mut"]
pub trait DerefMut: Deref + PointeeSized {
    fn deref_mut(&mut self) -> &mut Self::Target;
}
impl<T: ?Sized> Deref for &T {
    type Target = T;
    fn deref(&self) -> &T { loop {} }
}
impl<T: ?Sized> Deref for &mut T {
    type Target = T;
    fn deref(&self) -> &T { loop {} }
}
impl<T: ?Sized> DerefMut for &mut T {
    fn deref_mut(&mut self) -> &mut T { loop {} }
}
#[lang = "receiver"]
pub trait Receiver: PointeeSized {
    #[lang = "receiver_target"]
    type Target: ?Sized;
}
impl<P: ?Sized + Deref<Target = T>, T: ?Sized> Receiver for P {
    type Target = T;
}

#[lang = "coerce_unsized"]
pub trait CoerceUnsized<T> {}
impl<'a, T: ?Sized + Unsize<U>, U: ?Sized> CoerceUnsized<&'a mut U> for &'a mut T {}
impl<'a, 'b: 'a, T: ?Sized + Unsize<U>, U: ?Sized> CoerceUnsized<&'a U> for &'b mut T {}
impl<'a, 'b: 'a, T: ?Sized + Unsize<U>, U: ?Sized> CoerceUnsized<&'a U> for &'b T {}
#[lang = "dispatch_from_dyn"]
pub trait DispatchFromDyn<T> {}

#[lang = "index"]
pub trait Index<Idx: ?Sized> {
    type Output: ?Sized;
    fn index(&self, index: Idx) -> &Self::Output;
}
#[lang = "index_mut"]
pub trait IndexMut<Idx: ?Sized>: Index<Idx> {
    fn index_mut(&mut self, index: Idx) -> &mut Self::Output;
}
impl<T, I: crate::slice::SliceIndex<[T]>> Index<I> for [T] {
    type Output = I::Output;
    fn index(&self, index: I) -> &I::Output { loop {} }
}
impl<T, I: crate::slice::SliceIndex<[T]>> IndexMut<I> for [T] {
    fn index_mut(&mut self, index: I) -> &mut I::Output { loop {} }
}
impl<T, I: crate::slice::SliceIndex<[T]>, const N: usize> Index<I> for [T; N] {
    type Output = I::Output;
    fn index(&self, index: I) -> &I::Output { loop {} }
}
impl<T, I: crate::slice::SliceIndex<[T]>, const N: usize> IndexMut<I> for [T; N] {
    fn index_mut(&mut self, index: I) -> &mut I::Output { loop {} }
}
impl<I: crate::slice::SliceIndex<str>> Index<I> for str {
    type Output = I::Output;
    fn index(&self, index: I) -> &I::Output { loop {} }
}

#[lang = "RangeFull"]
pub struct RangeFull;
#[lang = "Range"]
pub struct Range<Idx> {
    pub start: Idx,
    pub end: Idx,
}
#[lang = "RangeFrom"]
pub struct RangeFrom<Idx> {
    pub start: Idx,
}
#[lang = "RangeTo"]
pub struct RangeTo<Idx> {
    pub end: Idx,
}
#[lang = "RangeInclusive"]
pub struct RangeInclusive<Idx> {
    pub(crate) start: Idx,
    pub(crate) end: Idx,
    pub(crate) exhausted: bool,
}
#[lang = "RangeToInclusive"]
pub struct RangeToInclusive<Idx> {
    pub end: Idx,
}
impl<Idx> RangeInclusive<Idx> {
    #[lang = "range_inclusive_new"]
    pub const fn new(start: Idx, end: Idx) -> Self { loop {} }
    pub const fn start(&self) -> &Idx { loop {} }
    pub const fn end(&self) -> &Idx { loop {} }
    pub fn contains(&self, item: &Idx) -> bool { loop {} }
}
impl<Idx> Range<Idx> {
    pub fn contains(&self, item: &Idx) -> bool { loop {} }
    pub fn is_empty(&self) -> bool { loop {} }
}
impl<T: Clone> Clone for Range<T> {
    fn clone(&self) -> Self { loop {} }
}
impl<T: Clone> Clone for RangeInclusive<T> {
    fn clone(&self) -> Self { loop {} }
}

pub trait Step: Clone + PartialOrd {}
macro_rules! step {
    ($($t:ty)*) => { $( impl Step for $t {} )* }
}
step! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 char }
impl<A: Step> Iterator for Range<A> {
    type Item = A;
    fn next(&mut self) -> Option<A> { loop {} }
}
impl<A: Step> Iterator for RangeInclusive<A> {
    type Item = A;
    fn next(&mut self) -> Option<A> { loop {} }
}
impl<A: Step> Iterator for RangeFrom<A> {
    type Item = A;
    fn next(&mut self) -> Option<A> { loop {} }
}
impl<A: Step> crate::iter::DoubleEndedIterator for Range<A> {
    fn next_back(&mut self) -> Option<A> { loop {} }
}
impl<A: Step> crate::iter::DoubleEndedIterator for RangeInclusive<A> {
    fn next_back(&mut self) -> Option<A> { loop {} }
}
impl<A: Step> crate::iter::ExactSizeIterator for Range<A> {}

#[lang = "fn_once"]
#[fundamental]
#[rustc_paren_sugar]
pub trait FnOnce<Args: Tuple> {
    #[lang = "fn_once_output"]
    type Output;
    extern "rust-call" fn call_once(self, args: Args) -> Self::Output;
}
#[lang = "fn_mut"]
#[fundamental]
#[rustc_paren_sugar]
pub trait FnMut<Args: Tuple>: FnOnce<Args> {
    extern "rust-call" fn call_mut(&mut self, args: Args) -> Self::Output;
}
#[lang = "fn"]
#[fundamental]
#[rustc_paren_sugar]
pub trait Fn<Args: Tuple>: FnMut<Args> {
    extern "rust-call" fn call(&self, args: Args) -> Self::Output;
}
impl<A: Tuple, F: Fn<A> + ?Sized> FnOnce<A> for &F {
    type Output = F::Output;
    extern "rust-call" fn call_once(self, args: A) -> F::Output { loop {} }
}
impl<A: Tuple, F: Fn<A> + ?Sized> FnMut<A> for &F {
    extern "rust-call" fn call_mut(&mut self, args: A) -> F::Output { loop {} }
}
impl<A: Tuple, F: Fn<A> + ?Sized> Fn<A> for &F {
    extern "rust-call" fn call(&self, args: A) -> F::Output { loop {} }
}

pub enum ControlFlow<B, C = ()> {
    #[lang = "Continue"]
    Continue(C),
    #[lang = "Break"]
    Break(B),
}
pub trait FromResidual<R = <Self as Try>::Residual> {
    #[lang = "from_residual"]
    fn from_residual(residual: R) -> Self;
}
pub trait Residual<O> {
    type TryType: Try<Output = O, Residual = Self>;
}
#[lang = "Try"]
pub trait Try: FromResidual<Self::Residual> {
    type Output;
    type Residual;
    #[lang = "from_output"]
    fn from_output(output: Self::Output) -> Self;
    #[lang = "branch"]
    fn branch(self) -> ControlFlow<Self::Residual, Self::Output>;
}
use crate::convert::Infallible;
impl<T> Try for Option<T> {
    type Output = T;
    type Residual = Option<Infallible>;
    fn from_output(output: T) -> Self { loop {} }
    fn branch(self) -> ControlFlow<Option<Infallible>, T> { loop {} }
}
impl<T> FromResidual<Option<Infallible>> for Option<T> {
    fn from_residual(residual: Option<Infallible>) -> Self { loop {} }
}
impl<T> Residual<T> for Option<Infallible> {
    type TryType = Option<T>;
}
impl<T, E> Try for Result<T, E> {
    type Output = T;
    type Residual = Result<Infallible, E>;
    fn from_output(output: T) -> Self { loop {} }
    fn branch(self) -> ControlFlow<Result<Infallible, E>, T> { loop {} }
}
impl<T, E, F: From<E>> FromResidual<Result<Infallible, E>> for Result<T, F> {
    fn from_residual(residual: Result<Infallible, E>) -> Self { loop {} }
}
impl<T, E> Residual<T> for Result<Infallible, E> {
    type TryType = Result<T, E>;
}
