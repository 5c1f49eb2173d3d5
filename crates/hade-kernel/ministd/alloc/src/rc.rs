//! `Rc`.

pub struct Rc<T: ?Sized>(*const T);
impl<T> Rc<T> {
    pub fn new(value: T) -> Rc<T> { loop {} }
}
impl<T: ?Sized> core::ops::Deref for Rc<T> {
    type Target = T;
    fn deref(&self) -> &T { loop {} }
}
impl<T: ?Sized + core::marker::Unsize<U>, U: ?Sized> core::ops::CoerceUnsized<Rc<U>> for Rc<T> {}
impl<T: ?Sized> Clone for Rc<T> {
    fn clone(&self) -> Self { loop {} }
}
