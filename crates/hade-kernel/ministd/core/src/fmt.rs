//! Formatting.

pub struct Error;
pub type Result = crate::result::Result<(), Error>;
pub struct Formatter<'a> {
    buf: &'a (),
}
impl<'a> Formatter<'a> {
    pub fn write_str(&mut self, data: &str) -> Result { loop {} }
    pub fn write_fmt(&mut self, args: Arguments<'_>) -> Result { loop {} }
    pub fn alternate(&self) -> bool { loop {} }
    pub fn precision(&self) -> Option<usize> { loop {} }
    pub fn width(&self) -> Option<usize> { loop {} }
    pub fn pad(&mut self, s: &str) -> Result { loop {} }
}
#[lang = "format_arguments"]
pub struct Arguments<'a> {
    message: &'a str,
}
impl<'a> Copy for Arguments<'a> {}
impl<'a> Clone for Arguments<'a> {
    fn clone(&self) -> Self { loop {} }
}
pub trait Write {
    fn write_str(&mut self, s: &str) -> Result;
    fn write_char(&mut self, c: char) -> Result { loop {} }
    fn write_fmt(&mut self, args: Arguments<'_>) -> Result { loop {} }
}
pub trait Debug {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result;
}
pub trait Display {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result;
}
pub(crate) mod macros {
    #[rustc_builtin_macro]
    pub macro Debug($item:item) {}
}
pub use macros::Debug;
macro_rules! both {
    ($($t:ty)*) => { $(
        impl Debug for $t { fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} } }
        impl Display for $t { fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} } }
    )* }
}
both! {
    usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64 bool char str Arguments<'_> Error
    crate::num::ParseIntError crate::num::ParseFloatError crate::num::TryFromIntError crate::str::ParseBoolError
    crate::str::Utf8Error
}
impl<T: Debug + ?Sized> Debug for &T {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} }
}
impl<T: Display + ?Sized> Display for &T {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} }
}
impl<T: Debug> Debug for [T] {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} }
}
impl<T: Debug, const N: usize> Debug for [T; N] {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} }
}
impl<T: Debug> Debug for Option<T> {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} }
}
impl<T: Debug, E: Debug> Debug for crate::result::Result<T, E> {
    fn fmt(&self, f: &mut Formatter<'_>) -> Result { loop {} }
}
