//! `Clone`.

#[lang = "clone"]
pub trait Clone: Sized {
    fn clone(&self) -> Self;
    fn clone_from(&mut self, source: &Self) {}
}
#[rustc_builtin_macro]
pub macro Clone($item:item) {}

macro_rules! impl_clone {
    ($($t:ty)*) => { $( impl Clone for $t { fn clone(&self) -> Self { loop {} } } )* }
}
impl_clone! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64 bool char ! }
impl<T: ?Sized> Clone for &T {
    fn clone(&self) -> Self { loop {} }
}
impl<T: Clone, const N: usize> Clone for [T; N] {
    fn clone(&self) -> Self { loop {} }
}
impl<T: Copy, const N: usize> Copy for [T; N] {}
