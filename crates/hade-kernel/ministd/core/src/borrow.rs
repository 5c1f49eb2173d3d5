//! Borrowing.

pub trait Borrow<Borrowed: ?Sized> {
    fn borrow(&self) -> &Borrowed;
}
impl<T: ?Sized> Borrow<T> for T {
    fn borrow(&self) -> &T { loop {} }
}
impl<T: ?Sized> Borrow<T> for &T {
    fn borrow(&self) -> &T { loop {} }
}
