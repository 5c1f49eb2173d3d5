//! What is in scope everywhere.

pub mod v1 {
    //! The names of every edition.
    pub use crate::clone::Clone;
    pub use crate::cmp::{Eq, Ord, PartialEq, PartialOrd};
    pub use crate::convert::{AsMut, AsRef, From, Into};
    pub use crate::default::Default;
    pub use crate::fmt::macros::Debug;
    pub use crate::hash::macros::Hash;
    pub use crate::iter::{DoubleEndedIterator, ExactSizeIterator, Extend, IntoIterator, Iterator};
    pub use crate::macros::{derive, test};
    pub use crate::marker::{Copy, Send, Sized, Sync, Unpin};
    pub use crate::mem::drop;
    pub use crate::ops::{Drop, Fn, FnMut, FnOnce};
    pub use crate::option::Option::{self, None, Some};
    pub use crate::result::Result::{self, Err, Ok};
    pub use crate::{
        assert, assert_eq, assert_ne, cfg, column, compile_error, concat, debug_assert, debug_assert_eq, env, file,
        format_args, include_bytes, include_str, line, matches, module_path, option_env, panic, stringify, todo,
        unimplemented, unreachable, write, writeln,
    };
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
    pub use crate::convert::{TryFrom, TryInto};
    pub use crate::iter::FromIterator;
}

pub mod rust_2024 {
    //! Edition 2024.
    pub use super::rust_2021::*;
    pub use crate::future::{Future, IntoFuture};
}
