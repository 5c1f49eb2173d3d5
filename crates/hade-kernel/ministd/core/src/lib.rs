//! The part of `core` the analyser needs to know the types in a notebook: declarations only.
//!
//! Never compiled. A notebook session gives it to rust-analyzer in place of the real source, which
//! is not on every machine and takes seconds to read. A type that is not here is asked of the
//! compiler, so this may be incomplete but must not be wrong.
#![no_core]
#![rustc_coherence_is_core]
#![feature(lang_items, no_core, decl_macro, auto_traits, rustc_attrs)]
#![allow(internal_features)]

#[macro_use]
mod macros;

pub mod any;
pub mod array;
pub mod borrow;
pub mod cell;
pub mod clone;
pub mod cmp;
pub mod convert;
pub mod default;
pub mod error;
pub mod ffi;
pub mod fmt;
pub mod future;
pub mod hash;
pub mod iter;
pub mod marker;
pub mod mem;
pub mod num;
pub mod ops;
pub mod option;
pub mod prelude;
pub mod result;
pub mod slice;
pub mod str;
pub mod time;

pub mod f64 {
    //! Constants of `f64`.
    pub mod consts {
        //! Mathematical constants.
        pub const PI: f64 = 3.14159265358979323846264338327950288_f64;
        pub const TAU: f64 = 6.28318530717958647692528676655900577_f64;
        pub const E: f64 = 2.71828182845904523536028747135266250_f64;
        pub const LN_2: f64 = 0.693147180559945309417232121458176568_f64;
        pub const LN_10: f64 = 2.30258509299404568401799145468436421_f64;
        pub const SQRT_2: f64 = 1.41421356237309504880168872420969808_f64;
        pub const FRAC_PI_2: f64 = 1.57079632679489661923132169163975144_f64;
        pub const FRAC_PI_3: f64 = 1.04719755119659774615421446109316763_f64;
        pub const FRAC_PI_4: f64 = 0.785398163397448309615660845819875721_f64;
        pub const FRAC_PI_6: f64 = 0.52359877559829887307710723054658381_f64;
        pub const FRAC_PI_8: f64 = 0.39269908169872415480783042290993786_f64;
    }
    pub const EPSILON: f64 = 0.0;
    pub const INFINITY: f64 = 0.0;
    pub const NAN: f64 = 0.0;
}

pub use crate::prelude::rust_2024::*;
#[prelude_import]
#[allow(unused_imports)]
use crate::prelude::rust_2024::*;
