//! Owned and borrowed.

pub use core::borrow::Borrow;

pub trait ToOwned {
    type Owned: Borrow<Self>;
    fn to_owned(&self) -> Self::Owned;
}
impl<T: Clone> ToOwned for T {
    type Owned = T;
    fn to_owned(&self) -> T { loop {} }
}
impl ToOwned for str {
    type Owned = crate::string::String;
    fn to_owned(&self) -> crate::string::String { loop {} }
}
impl<T: Clone> ToOwned for [T] {
    type Owned = crate::vec::Vec<T>;
    fn to_owned(&self) -> crate::vec::Vec<T> { loop {} }
}
pub enum Cow<'a, B: ?Sized + ToOwned + 'a> {
    Borrowed(&'a B),
    Owned(<B as ToOwned>::Owned),
}
impl<B: ?Sized + ToOwned> core::ops::Deref for Cow<'_, B> {
    type Target = B;
    fn deref(&self) -> &B { loop {} }
}
impl<B: ?Sized + ToOwned> Cow<'_, B> {
    pub fn into_owned(self) -> <B as ToOwned>::Owned { loop {} }
}
