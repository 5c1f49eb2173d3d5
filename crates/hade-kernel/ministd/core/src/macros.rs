//! Macros of `core`.

#[macro_export]
#[rustc_builtin_macro(core_panic)]
macro_rules! panic {
    ($($arg:tt)*) => {};
}

#[macro_export]
macro_rules! assert_eq {
    ($left:expr, $right:expr $(, $($arg:tt)*)?) => {};
}

#[macro_export]
macro_rules! assert_ne {
    ($left:expr, $right:expr $(, $($arg:tt)*)?) => {};
}

#[macro_export]
macro_rules! debug_assert {
    ($($arg:tt)*) => {};
}

#[macro_export]
macro_rules! debug_assert_eq {
    ($($arg:tt)*) => {};
}

#[macro_export]
macro_rules! matches {
    ($expression:expr, $pattern:pat $(if $guard:expr)? $(,)?) => {
        match $expression {
            $pattern $(if $guard)? => true,
            _ => false,
        }
    };
}

#[macro_export]
macro_rules! write {
    ($dst:expr, $($arg:tt)*) => {
        $dst.write_fmt($crate::format_args!($($arg)*))
    };
}

#[macro_export]
macro_rules! writeln {
    ($dst:expr $(,)?) => {
        $crate::write!($dst, "\n")
    };
    ($dst:expr, $($arg:tt)*) => {
        $dst.write_fmt($crate::format_args!($($arg)*))
    };
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! unreachable {
    ($($arg:tt)*) => {};
}

#[macro_export]
macro_rules! unimplemented {
    ($($arg:tt)*) => { loop {} };
}

#[macro_export]
macro_rules! todo {
    ($($arg:tt)*) => { loop {} };
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! format_args {
    ($fmt:expr) => {};
    ($fmt:expr, $($args:tt)*) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! assert {
    ($cond:expr $(,)?) => {};
    ($cond:expr, $($arg:tt)+) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! stringify {
    ($($t:tt)*) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! concat {
    ($($e:expr),* $(,)?) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! include_str {
    ($file:expr $(,)?) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! include_bytes {
    ($file:expr $(,)?) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! env {
    ($name:expr $(,)?) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! option_env {
    ($name:expr $(,)?) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! cfg {
    ($($cfg:tt)*) => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! file {
    () => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! line {
    () => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! column {
    () => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! module_path {
    () => {};
}

#[macro_export]
#[rustc_builtin_macro]
macro_rules! compile_error {
    ($msg:expr $(,)?) => {};
}

#[rustc_builtin_macro]
pub macro derive($item:item) {}

#[rustc_builtin_macro]
pub macro test($item:item) {}
