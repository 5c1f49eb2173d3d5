//! `Box`.

#[lang = "owned_box"]
pub struct Box<T: ?Sized>(*const T);
impl<T> Box<T> {
    pub fn new(x: T) -> Self { loop {} }
}
impl<T: ?Sized> core::ops::Deref for Box<T> {
    type Target = T;
    fn deref(&self) -> &T { loop {} }
}
impl<T: ?Sized> core::ops::DerefMut for Box<T> {
    fn deref_mut(&mut self) -> &mut T { loop {} }
}
impl<T: ?Sized + core::marker::Unsize<U>, U: ?Sized> core::ops::CoerceUnsized<Box<U>> for Box<T> {}
impl<T: Clone> Clone for Box<T> {
    fn clone(&self) -> Self { loop {} }
}
impl<T> From<T> for Box<T> {
    fn from(t: T) -> Self { loop {} }
}
impl<'a, E: core::error::Error + 'a> From<E> for Box<dyn core::error::Error + 'a> {
    fn from(err: E) -> Self { loop {} }
}
impl<'a> From<&str> for Box<dyn core::error::Error + 'a> {
    fn from(err: &str) -> Self { loop {} }
}
impl<T: core::fmt::Debug + ?Sized> core::fmt::Debug for Box<T> {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
impl<T: core::fmt::Display + ?Sized> core::fmt::Display for Box<T> {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
impl<I: Iterator + ?Sized> Iterator for Box<I> {
    type Item = I::Item;
    fn next(&mut self) -> Option<I::Item> { loop {} }
}
