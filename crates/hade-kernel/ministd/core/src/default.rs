//! `Default`.

pub trait Default: Sized {
    fn default() -> Self;
}
#[rustc_builtin_macro(Default, attributes(default))]
pub macro Default($item:item) {}

macro_rules! impl_default {
    ($($t:ty)*) => { $( impl Default for $t { fn default() -> Self { loop {} } } )* }
}
impl_default! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64 bool char () &str }
