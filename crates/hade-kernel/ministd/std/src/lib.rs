//! The part of `std` the analyser needs; see `core`.
#![no_std]
#![feature(rustc_attrs)]

pub mod collections;
pub mod io;
pub mod path;
pub mod prelude;
pub mod sync;
pub mod time;

pub mod fs {
    //! Files.
    use crate::io::Result;
    use alloc::string::String;
    use alloc::vec::Vec;
    pub fn read_to_string<P: AsRef<crate::path::Path>>(path: P) -> Result<String> { loop {} }
    pub fn read<P: AsRef<crate::path::Path>>(path: P) -> Result<Vec<u8>> { loop {} }
    pub fn write<P: AsRef<crate::path::Path>, C: AsRef<[u8]>>(path: P, contents: C) -> Result<()> { loop {} }
}
pub mod env {
    //! The surroundings of the process.
    pub enum VarError {
        NotPresent,
        NotUnicode(()),
    }
    pub fn var<K: AsRef<str>>(key: K) -> Result<alloc::string::String, VarError> { loop {} }
    pub fn current_dir() -> crate::io::Result<crate::path::PathBuf> { loop {} }
}
pub mod process {
    //! Processes.
    pub fn exit(code: i32) -> ! { loop {} }
    pub fn id() -> u32 { loop {} }
}
pub mod thread {
    //! Threads.
    pub fn sleep(dur: crate::time::Duration) { loop {} }
}
pub mod os {
    //! Foreign types.
    pub mod raw {
        //! C types.
        pub use core::ffi::*;
    }
}

pub use alloc::{borrow, boxed, rc, string, vec};
pub use alloc::{format, vec};
pub use core::{any, array, cell, clone, cmp, convert, default, error, f64, fmt, future, hash, iter, marker, mem, num, ops, option, result, slice, str};
pub use core::{
    assert, assert_eq, assert_ne, cfg, column, compile_error, concat, debug_assert, debug_assert_eq, env, file,
    format_args, include_bytes, include_str, line, matches, module_path, option_env, panic, stringify, todo,
    unimplemented, unreachable, write, writeln,
};

#[macro_export]
macro_rules! println {
    () => { $crate::io::print_text("") };
    ($($arg:tt)*) => { $crate::io::print($crate::format_args!($($arg)*)) };
}
#[macro_export]
macro_rules! print {
    ($($arg:tt)*) => { $crate::io::print($crate::format_args!($($arg)*)) };
}
#[macro_export]
macro_rules! eprintln {
    () => { $crate::io::print_text("") };
    ($($arg:tt)*) => { $crate::io::print($crate::format_args!($($arg)*)) };
}
#[macro_export]
macro_rules! eprint {
    ($($arg:tt)*) => { $crate::io::print($crate::format_args!($($arg)*)) };
}
#[macro_export]
macro_rules! dbg {
    ($val:expr $(,)?) => { $val };
}
