//! Hashing.

pub trait Hasher {
    fn finish(&self) -> u64;
    fn write(&mut self, bytes: &[u8]);
}
pub trait Hash {
    fn hash<H: Hasher>(&self, state: &mut H);
}
pub trait BuildHasher {
    type Hasher: Hasher;
    fn build_hasher(&self) -> Self::Hasher;
}
pub(crate) mod macros {
    #[rustc_builtin_macro]
    pub macro Hash($item:item) {}
}
pub use macros::Hash;
macro_rules! hashes {
    ($($t:ty)*) => { $( impl Hash for $t { fn hash<H: Hasher>(&self, state: &mut H) { loop {} } } )* }
}
hashes! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 bool char str () }
impl<T: Hash + ?Sized> Hash for &T {
    fn hash<H: Hasher>(&self, state: &mut H) { loop {} }
}
