//! `Arc`.

pub struct Arc<T: ?Sized>(*const T);
impl<T> Arc<T> {
    pub fn new(value: T) -> Arc<T> { loop {} }
}
impl<T: ?Sized> core::ops::Deref for Arc<T> {
    type Target = T;
    fn deref(&self) -> &T { loop {} }
}
impl<T: ?Sized + core::marker::Unsize<U>, U: ?Sized> core::ops::CoerceUnsized<Arc<U>> for Arc<T> {}
impl<T: ?Sized> Clone for Arc<T> {
    fn clone(&self) -> Self { loop {} }
}
