//! `Vec`.

pub struct Vec<T> {
    items: *const T,
}
pub fn from_elem<T: Clone>(elem: T, n: usize) -> Vec<T> { loop {} }
pub fn from_array<T, const N: usize>(items: [T; N]) -> Vec<T> { loop {} }
impl<T> Vec<T> {
    pub const fn new() -> Self { loop {} }
    pub fn with_capacity(capacity: usize) -> Self { loop {} }
    pub fn push(&mut self, value: T) { loop {} }
    pub fn pop(&mut self) -> Option<T> { loop {} }
    pub fn len(&self) -> usize { loop {} }
    pub fn is_empty(&self) -> bool { loop {} }
    pub fn clear(&mut self) { loop {} }
    pub fn truncate(&mut self, len: usize) { loop {} }
    pub fn insert(&mut self, index: usize, element: T) { loop {} }
    pub fn remove(&mut self, index: usize) -> T { loop {} }
    pub fn retain<F: FnMut(&T) -> bool>(&mut self, f: F) { loop {} }
    pub fn append(&mut self, other: &mut Self) { loop {} }
    pub fn extend_from_slice(&mut self, other: &[T]) where T: Clone { loop {} }
    pub fn resize(&mut self, new_len: usize, value: T) where T: Clone { loop {} }
    pub fn dedup(&mut self) where T: PartialEq { loop {} }
    pub fn as_slice(&self) -> &[T] { loop {} }
}
impl<T> core::ops::Deref for Vec<T> {
    type Target = [T];
    fn deref(&self) -> &[T] { loop {} }
}
impl<T> core::ops::DerefMut for Vec<T> {
    fn deref_mut(&mut self) -> &mut [T] { loop {} }
}
impl<T, I: core::slice::SliceIndex<[T]>> core::ops::Index<I> for Vec<T> {
    type Output = I::Output;
    fn index(&self, index: I) -> &I::Output { loop {} }
}
impl<T, I: core::slice::SliceIndex<[T]>> core::ops::IndexMut<I> for Vec<T> {
    fn index_mut(&mut self, index: I) -> &mut I::Output { loop {} }
}
impl<T: Clone> Clone for Vec<T> {
    fn clone(&self) -> Self { loop {} }
}
impl<T> Default for Vec<T> {
    fn default() -> Self { loop {} }
}
impl<T: PartialEq> PartialEq for Vec<T> {
    fn eq(&self, other: &Vec<T>) -> bool { loop {} }
}
impl<T: Eq> Eq for Vec<T> {}
impl<T: core::fmt::Debug> core::fmt::Debug for Vec<T> {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
impl<T> core::borrow::Borrow<[T]> for Vec<T> {
    fn borrow(&self) -> &[T] { loop {} }
}
impl<T> core::iter::FromIterator<T> for Vec<T> {
    fn from_iter<I: IntoIterator<Item = T>>(iter: I) -> Vec<T> { loop {} }
}
impl<T> core::iter::Extend<T> for Vec<T> {
    fn extend<I: IntoIterator<Item = T>>(&mut self, iter: I) { loop {} }
}
impl<'a, T: Copy + 'a> core::iter::Extend<&'a T> for Vec<T> {
    fn extend<I: IntoIterator<Item = &'a T>>(&mut self, iter: I) { loop {} }
}
impl<T: Clone> From<&[T]> for Vec<T> {
    fn from(s: &[T]) -> Vec<T> { loop {} }
}
impl<T, const N: usize> From<[T; N]> for Vec<T> {
    fn from(s: [T; N]) -> Vec<T> { loop {} }
}
pub struct IntoIter<T> {
    items: *const T,
}
impl<T> Iterator for IntoIter<T> {
    type Item = T;
    fn next(&mut self) -> Option<T> { loop {} }
}
impl<T> core::iter::DoubleEndedIterator for IntoIter<T> {
    fn next_back(&mut self) -> Option<T> { loop {} }
}
impl<T> core::iter::ExactSizeIterator for IntoIter<T> {}
impl<T> IntoIterator for Vec<T> {
    type Item = T;
    type IntoIter = IntoIter<T>;
    fn into_iter(self) -> IntoIter<T> { loop {} }
}
impl<'a, T> IntoIterator for &'a Vec<T> {
    type Item = &'a T;
    type IntoIter = core::slice::Iter<'a, T>;
    fn into_iter(self) -> core::slice::Iter<'a, T> { loop {} }
}
impl<'a, T> IntoIterator for &'a mut Vec<T> {
    type Item = &'a mut T;
    type IntoIter = core::slice::IterMut<'a, T>;
    fn into_iter(self) -> core::slice::IterMut<'a, T> { loop {} }
}
