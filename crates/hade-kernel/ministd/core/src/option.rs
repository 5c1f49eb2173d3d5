//! `Option`.

#[lang = "Option"]
pub enum Option<T> {
    #[lang = "None"]
    None,
    #[lang = "Some"]
    Some(T),
}
impl<T: Copy> Copy for Option<T> {}
impl<T: Clone> Clone for Option<T> {
    fn clone(&self) -> Self { loop {} }
}
impl<T> Default for Option<T> {
    fn default() -> Self { loop {} }
}
impl<T> From<T> for Option<T> {
    fn from(value: T) -> Self { loop {} }
}
impl<T> Option<T> {
    pub fn is_some(&self) -> bool { loop {} }
    pub fn is_none(&self) -> bool { loop {} }
    pub fn is_some_and(self, f: impl FnOnce(T) -> bool) -> bool { loop {} }
    pub fn as_ref(&self) -> Option<&T> { loop {} }
    pub fn as_mut(&mut self) -> Option<&mut T> { loop {} }
    pub fn as_deref(&self) -> Option<&T::Target> where T: crate::ops::Deref { loop {} }
    pub fn expect(self, msg: &str) -> T { loop {} }
    pub fn unwrap(self) -> T { loop {} }
    pub fn unwrap_or(self, default: T) -> T { loop {} }
    pub fn unwrap_or_else<F: FnOnce() -> T>(self, f: F) -> T { loop {} }
    pub fn unwrap_or_default(self) -> T where T: Default { loop {} }
    pub fn map<U, F: FnOnce(T) -> U>(self, f: F) -> Option<U> { loop {} }
    pub fn map_or<U, F: FnOnce(T) -> U>(self, default: U, f: F) -> U { loop {} }
    pub fn map_or_else<U, D: FnOnce() -> U, F: FnOnce(T) -> U>(self, default: D, f: F) -> U { loop {} }
    pub fn ok_or<E>(self, err: E) -> Result<T, E> { loop {} }
    pub fn ok_or_else<E, F: FnOnce() -> E>(self, err: F) -> Result<T, E> { loop {} }
    pub fn and<U>(self, optb: Option<U>) -> Option<U> { loop {} }
    pub fn and_then<U, F: FnOnce(T) -> Option<U>>(self, f: F) -> Option<U> { loop {} }
    pub fn filter<P: FnOnce(&T) -> bool>(self, predicate: P) -> Self { loop {} }
    pub fn or(self, optb: Option<T>) -> Option<T> { loop {} }
    pub fn or_else<F: FnOnce() -> Option<T>>(self, f: F) -> Option<T> { loop {} }
    pub fn take(&mut self) -> Option<T> { loop {} }
    pub fn replace(&mut self, value: T) -> Option<T> { loop {} }
    pub fn zip<U>(self, other: Option<U>) -> Option<(T, U)> { loop {} }
    pub fn iter(&self) -> Iter<'_, T> { loop {} }
}
impl<T> Option<&T> {
    pub fn copied(self) -> Option<T> where T: Copy { loop {} }
    pub fn cloned(self) -> Option<T> where T: Clone { loop {} }
}
pub struct Iter<'a, A> {
    inner: &'a A,
}
impl<'a, A> Iterator for Iter<'a, A> {
    type Item = &'a A;
    fn next(&mut self) -> Option<&'a A> { loop {} }
}
pub struct IntoIter<A> {
    inner: A,
}
impl<A> Iterator for IntoIter<A> {
    type Item = A;
    fn next(&mut self) -> Option<A> { loop {} }
}
impl<T> IntoIterator for Option<T> {
    type Item = T;
    type IntoIter = IntoIter<T>;
    fn into_iter(self) -> IntoIter<T> { loop {} }
}
