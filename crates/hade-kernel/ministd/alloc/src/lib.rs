//! The part of `alloc` the analyser needs; see `core`.
#![no_std]
#![feature(lang_items, rustc_attrs)]

pub mod borrow;
pub mod boxed;
pub mod collections;
pub mod rc;
pub mod slice;
pub mod string;
pub mod sync;
pub mod vec;

pub use core::fmt;

#[doc(hidden)]
pub mod __export {
    pub use core::format_args;
}

#[macro_export]
macro_rules! vec {
    () => { $crate::vec::Vec::new() };
    ($elem:expr; $n:expr) => { $crate::vec::from_elem($elem, $n) };
    ($($x:expr),+ $(,)?) => { $crate::vec::from_array([$($x),+]) };
}

#[macro_export]
macro_rules! format {
    ($($arg:tt)*) => { $crate::string::format($crate::__export::format_args!($($arg)*)) };
}
