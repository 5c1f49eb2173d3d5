//! Errors.

pub trait Error: crate::fmt::Debug + crate::fmt::Display {
    fn source(&self) -> Option<&(dyn Error + 'static)> { loop {} }
}
impl Error for crate::num::ParseIntError {}
impl Error for crate::num::ParseFloatError {}
impl Error for crate::num::TryFromIntError {}
impl Error for crate::str::Utf8Error {}
