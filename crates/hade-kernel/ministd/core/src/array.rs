//! Arrays.

pub struct IntoIter<T, const N: usize> {
    data: [T; N],
}
impl<T, const N: usize> Iterator for IntoIter<T, N> {
    type Item = T;
    fn next(&mut self) -> Option<T> { loop {} }
}
impl<T, const N: usize> crate::iter::DoubleEndedIterator for IntoIter<T, N> {
    fn next_back(&mut self) -> Option<T> { loop {} }
}
impl<T, const N: usize> crate::iter::ExactSizeIterator for IntoIter<T, N> {}
impl<T, const N: usize> IntoIterator for [T; N] {
    type Item = T;
    type IntoIter = IntoIter<T, N>;
    fn into_iter(self) -> IntoIter<T, N> { loop {} }
}
impl<'a, T, const N: usize> IntoIterator for &'a [T; N] {
    type Item = &'a T;
    type IntoIter = crate::slice::Iter<'a, T>;
    fn into_iter(self) -> crate::slice::Iter<'a, T> { loop {} }
}
impl<T, const N: usize> [T; N] {
    pub fn map<F: FnMut(T) -> U, U>(self, f: F) -> [U; N] { loop {} }
    pub fn as_slice(&self) -> &[T] { loop {} }
}
pub fn from_fn<T, const N: usize, F: FnMut(usize) -> T>(f: F) -> [T; N] { loop {} }
