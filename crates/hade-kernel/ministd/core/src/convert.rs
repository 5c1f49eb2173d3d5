//! Conversions.

pub trait From<T>: Sized {
    fn from(value: T) -> Self;
}
pub trait Into<T>: Sized {
    fn into(self) -> T;
}
impl<T, U: From<T>> Into<U> for T {
    fn into(self) -> U { loop {} }
}
impl<T> From<T> for T {
    fn from(value: T) -> T { loop {} }
}
pub trait TryFrom<T>: Sized {
    type Error;
    fn try_from(value: T) -> Result<Self, Self::Error>;
}
pub trait TryInto<T>: Sized {
    type Error;
    fn try_into(self) -> Result<T, Self::Error>;
}
impl<T, U: TryFrom<T>> TryInto<U> for T {
    type Error = U::Error;
    fn try_into(self) -> Result<U, U::Error> { loop {} }
}
pub trait AsRef<T: ?Sized> {
    fn as_ref(&self) -> &T;
}
pub trait AsMut<T: ?Sized> {
    fn as_mut(&mut self) -> &mut T;
}
pub enum Infallible {}

macro_rules! lossless {
    ($($from:ty => $($to:ty)*;)*) => { $( $( impl From<$from> for $to { fn from(value: $from) -> $to { loop {} } } )* )* }
}
lossless! {
    u8 => u16 u32 u64 u128 usize i16 i32 i64 i128 isize f32 f64 char;
    u16 => u32 u64 u128 usize i32 i64 i128 f32 f64;
    u32 => u64 u128 i64 i128 f64;
    u64 => u128 i128;
    i8 => i16 i32 i64 i128 isize f32 f64;
    i16 => i32 i64 i128 isize f32 f64;
    i32 => i64 i128 f64;
    i64 => i128;
    f32 => f64;
    bool => u8 u16 u32 u64 usize i8 i16 i32 i64 isize;
    char => u32 u64;
}
macro_rules! fallible {
    ($($from:ty => $($to:ty)*;)*) => { $( $( impl TryFrom<$from> for $to {
        type Error = crate::num::TryFromIntError;
        fn try_from(value: $from) -> Result<$to, crate::num::TryFromIntError> { loop {} }
    } )* )* }
}
fallible! {
    usize => u8 u16 u32 u64 i8 i16 i32 i64 isize;
    u64 => u8 u16 u32 usize i8 i16 i32 i64 isize;
    u32 => u8 u16 usize i8 i16 i32 isize;
    i32 => u8 u16 u32 u64 usize i8 i16 isize;
    i64 => u8 u16 u32 u64 usize i8 i16 i32 isize;
}
