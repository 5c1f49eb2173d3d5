//! Slices.

use crate::cmp::Ordering;

pub unsafe trait SliceIndex<T: ?Sized> {
    type Output: ?Sized;
}
unsafe impl<T> SliceIndex<[T]> for usize {
    type Output = T;
}
macro_rules! ranges {
    ($($range:ty)*) => { $(
        unsafe impl<T> SliceIndex<[T]> for $range { type Output = [T]; }
        unsafe impl SliceIndex<str> for $range { type Output = str; }
    )* }
}
ranges! {
    crate::ops::RangeFull crate::ops::Range<usize> crate::ops::RangeFrom<usize> crate::ops::RangeTo<usize>
    crate::ops::RangeInclusive<usize> crate::ops::RangeToInclusive<usize>
}

impl<T> [T] {
    #[lang = "slice_len_fn"]
    pub fn len(&self) -> usize { loop {} }
    pub fn is_empty(&self) -> bool { loop {} }
    pub fn first(&self) -> Option<&T> { loop {} }
    pub fn last(&self) -> Option<&T> { loop {} }
    pub fn first_mut(&mut self) -> Option<&mut T> { loop {} }
    pub fn last_mut(&mut self) -> Option<&mut T> { loop {} }
    pub fn get<I: SliceIndex<[T]>>(&self, index: I) -> Option<&I::Output> { loop {} }
    pub fn get_mut<I: SliceIndex<[T]>>(&mut self, index: I) -> Option<&mut I::Output> { loop {} }
    pub fn swap(&mut self, a: usize, b: usize) { loop {} }
    pub fn reverse(&mut self) { loop {} }
    pub fn fill(&mut self, value: T) where T: Clone { loop {} }
    pub fn iter(&self) -> Iter<'_, T> { loop {} }
    pub fn iter_mut(&mut self) -> IterMut<'_, T> { loop {} }
    pub fn windows(&self, size: usize) -> Windows<'_, T> { loop {} }
    pub fn chunks(&self, size: usize) -> Chunks<'_, T> { loop {} }
    pub fn split_at(&self, mid: usize) -> (&[T], &[T]) { loop {} }
    pub fn contains(&self, x: &T) -> bool where T: PartialEq { loop {} }
    pub fn starts_with(&self, needle: &[T]) -> bool where T: PartialEq { loop {} }
    pub fn binary_search(&self, x: &T) -> Result<usize, usize> where T: Ord { loop {} }
    pub fn partition_point<P: FnMut(&T) -> bool>(&self, pred: P) -> usize { loop {} }
    pub fn sort_unstable_by<F: FnMut(&T, &T) -> Ordering>(&mut self, compare: F) { loop {} }
    pub fn copy_from_slice(&mut self, src: &[T]) where T: Copy { loop {} }
}
impl<T> Default for &[T] {
    fn default() -> Self { loop {} }
}
macro_rules! iterators {
    ($($name:ident $item:ty;)*) => { $(
        pub struct $name<'a, T> { slice: &'a [T] }
        impl<'a, T> Iterator for $name<'a, T> {
            type Item = $item;
            fn next(&mut self) -> Option<$item> { loop {} }
        }
        impl<'a, T> crate::iter::DoubleEndedIterator for $name<'a, T> {
            fn next_back(&mut self) -> Option<$item> { loop {} }
        }
        impl<'a, T> crate::iter::ExactSizeIterator for $name<'a, T> {}
    )* }
}
iterators! { Iter &'a T; IterMut &'a mut T; Windows &'a [T]; Chunks &'a [T]; }
impl<'a, T> IntoIterator for &'a [T] {
    type Item = &'a T;
    type IntoIter = Iter<'a, T>;
    fn into_iter(self) -> Iter<'a, T> { loop {} }
}
impl<'a, T> IntoIterator for &'a mut [T] {
    type Item = &'a mut T;
    type IntoIter = IterMut<'a, T>;
    fn into_iter(self) -> IterMut<'a, T> { loop {} }
}
