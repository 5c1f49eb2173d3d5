//! What is in scope everywhere.

pub mod v1 {
    //! The names of every edition.
    pub use crate::{dbg, eprint, eprintln, print, println};
    pub use alloc::borrow::ToOwned;
    pub use alloc::boxed::Box;
    pub use alloc::string::{String, ToString};
    pub use alloc::vec::Vec;
    pub use alloc::{format, vec};
    pub use core::prelude::v1::*;
}
pub mod rust_2015 {
    //! Edition 2015.
    pub use super::v1::*;
}
pub mod rust_2018 {
    //! Edition 2018.
    pub use super::v1::*;
}
pub mod rust_2021 {
    //! Edition 2021.
    pub use super::v1::*;
    pub use core::prelude::rust_2021::*;
}
pub mod rust_2024 {
    //! Edition 2024.
    pub use super::rust_2021::*;
    pub use core::prelude::rust_2024::*;
}
