//! Iterators.

#[lang = "iterator"]
pub trait Iterator {
    type Item;
    #[lang = "next"]
    fn next(&mut self) -> Option<Self::Item>;
    fn size_hint(&self) -> (usize, Option<usize>) { loop {} }
    fn count(self) -> usize where Self: Sized { loop {} }
    fn last(self) -> Option<Self::Item> where Self: Sized { loop {} }
    fn nth(&mut self, n: usize) -> Option<Self::Item> { loop {} }
    fn step_by(self, step: usize) -> StepBy<Self> where Self: Sized { loop {} }
    fn chain<U: IntoIterator<Item = Self::Item>>(self, other: U) -> Chain<Self, U::IntoIter> where Self: Sized { loop {} }
    fn zip<U: IntoIterator>(self, other: U) -> Zip<Self, U::IntoIter> where Self: Sized { loop {} }
    fn map<B, F: FnMut(Self::Item) -> B>(self, f: F) -> Map<Self, F> where Self: Sized { loop {} }
    fn for_each<F: FnMut(Self::Item)>(self, f: F) where Self: Sized { loop {} }
    fn filter<P: FnMut(&Self::Item) -> bool>(self, predicate: P) -> Filter<Self, P> where Self: Sized { loop {} }
    fn filter_map<B, F: FnMut(Self::Item) -> Option<B>>(self, f: F) -> FilterMap<Self, F> where Self: Sized { loop {} }
    fn enumerate(self) -> Enumerate<Self> where Self: Sized { loop {} }
    fn peekable(self) -> Peekable<Self> where Self: Sized { loop {} }
    fn skip_while<P: FnMut(&Self::Item) -> bool>(self, predicate: P) -> SkipWhile<Self, P> where Self: Sized { loop {} }
    fn take_while<P: FnMut(&Self::Item) -> bool>(self, predicate: P) -> TakeWhile<Self, P> where Self: Sized { loop {} }
    fn skip(self, n: usize) -> Skip<Self> where Self: Sized { loop {} }
    fn take(self, n: usize) -> Take<Self> where Self: Sized { loop {} }
    fn flat_map<U: IntoIterator, F: FnMut(Self::Item) -> U>(self, f: F) -> FlatMap<Self, U, F> where Self: Sized { loop {} }
    fn inspect<F: FnMut(&Self::Item)>(self, f: F) -> Inspect<Self, F> where Self: Sized { loop {} }
    fn by_ref(&mut self) -> &mut Self where Self: Sized { loop {} }
    fn collect<B: FromIterator<Self::Item>>(self) -> B where Self: Sized { loop {} }
    fn partition<B: Default + Extend<Self::Item>, F: FnMut(&Self::Item) -> bool>(self, f: F) -> (B, B) where Self: Sized { loop {} }
    fn fold<B, F: FnMut(B, Self::Item) -> B>(self, init: B, f: F) -> B where Self: Sized { loop {} }
    fn reduce<F: FnMut(Self::Item, Self::Item) -> Self::Item>(self, f: F) -> Option<Self::Item> where Self: Sized { loop {} }
    fn all<F: FnMut(Self::Item) -> bool>(&mut self, f: F) -> bool where Self: Sized { loop {} }
    fn any<F: FnMut(Self::Item) -> bool>(&mut self, f: F) -> bool where Self: Sized { loop {} }
    fn find<P: FnMut(&Self::Item) -> bool>(&mut self, predicate: P) -> Option<Self::Item> where Self: Sized { loop {} }
    fn find_map<B, F: FnMut(Self::Item) -> Option<B>>(&mut self, f: F) -> Option<B> where Self: Sized { loop {} }
    fn position<P: FnMut(Self::Item) -> bool>(&mut self, predicate: P) -> Option<usize> where Self: Sized { loop {} }
    fn max(self) -> Option<Self::Item> where Self: Sized, Self::Item: Ord { loop {} }
    fn min(self) -> Option<Self::Item> where Self: Sized, Self::Item: Ord { loop {} }
    fn max_by<F: FnMut(&Self::Item, &Self::Item) -> crate::cmp::Ordering>(self, compare: F) -> Option<Self::Item> where Self: Sized { loop {} }
    fn min_by<F: FnMut(&Self::Item, &Self::Item) -> crate::cmp::Ordering>(self, compare: F) -> Option<Self::Item> where Self: Sized { loop {} }
    fn max_by_key<B: Ord, F: FnMut(&Self::Item) -> B>(self, f: F) -> Option<Self::Item> where Self: Sized { loop {} }
    fn min_by_key<B: Ord, F: FnMut(&Self::Item) -> B>(self, f: F) -> Option<Self::Item> where Self: Sized { loop {} }
    fn rev(self) -> Rev<Self> where Self: Sized { loop {} }
    fn unzip<A, B, FromA: Default + Extend<A>, FromB: Default + Extend<B>>(self) -> (FromA, FromB)
    where Self: Sized + Iterator<Item = (A, B)> { loop {} }
    fn copied<'a, T: 'a + Copy>(self) -> Copied<Self> where Self: Sized + Iterator<Item = &'a T> { loop {} }
    fn cloned<'a, T: 'a + Clone>(self) -> Cloned<Self> where Self: Sized + Iterator<Item = &'a T> { loop {} }
    fn sum<S: Sum<Self::Item>>(self) -> S where Self: Sized { loop {} }
    fn product<P: Product<Self::Item>>(self) -> P where Self: Sized { loop {} }
}
impl<I: Iterator + ?Sized> Iterator for &mut I {
    type Item = I::Item;
    fn next(&mut self) -> Option<I::Item> { loop {} }
}
pub trait DoubleEndedIterator: Iterator {
    fn next_back(&mut self) -> Option<Self::Item>;
}
pub trait ExactSizeIterator: Iterator {
    fn len(&self) -> usize { loop {} }
}
pub trait Extend<A> {
    fn extend<T: IntoIterator<Item = A>>(&mut self, iter: T);
}
pub trait FromIterator<A>: Sized {
    fn from_iter<T: IntoIterator<Item = A>>(iter: T) -> Self;
}
impl<A, E, V: FromIterator<A>> FromIterator<Result<A, E>> for Result<V, E> {
    fn from_iter<I: IntoIterator<Item = Result<A, E>>>(iter: I) -> Self { loop {} }
}
impl<A, V: FromIterator<A>> FromIterator<Option<A>> for Option<V> {
    fn from_iter<I: IntoIterator<Item = Option<A>>>(iter: I) -> Self { loop {} }
}
pub trait IntoIterator {
    type Item;
    type IntoIter: Iterator<Item = Self::Item>;
    #[lang = "into_iter"]
    fn into_iter(self) -> Self::IntoIter;
}
impl<I: Iterator> IntoIterator for I {
    type Item = I::Item;
    type IntoIter = I;
    fn into_iter(self) -> I { loop {} }
}
pub trait Sum<A = Self>: Sized {
    fn sum<I: Iterator<Item = A>>(iter: I) -> Self;
}
pub trait Product<A = Self>: Sized {
    fn product<I: Iterator<Item = A>>(iter: I) -> Self;
}
macro_rules! sums {
    ($($t:ty)*) => { $(
        impl Sum for $t { fn sum<I: Iterator<Item = $t>>(iter: I) -> $t { loop {} } }
        impl<'a> Sum<&'a $t> for $t { fn sum<I: Iterator<Item = &'a $t>>(iter: I) -> $t { loop {} } }
        impl Product for $t { fn product<I: Iterator<Item = $t>>(iter: I) -> $t { loop {} } }
        impl<'a> Product<&'a $t> for $t { fn product<I: Iterator<Item = &'a $t>>(iter: I) -> $t { loop {} } }
    )* }
}
sums! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64 }

macro_rules! same_item {
    ($($name:ident)*) => { $(
        pub struct $name<I> { iter: I }
        impl<I: Iterator> Iterator for $name<I> {
            type Item = I::Item;
            fn next(&mut self) -> Option<I::Item> { loop {} }
        }
        impl<I: DoubleEndedIterator> DoubleEndedIterator for $name<I> {
            fn next_back(&mut self) -> Option<I::Item> { loop {} }
        }
        impl<I: ExactSizeIterator> ExactSizeIterator for $name<I> {}
    )* }
}
same_item! { StepBy Skip Take Rev Peekable }
impl<I: Iterator> Peekable<I> {
    pub fn peek(&mut self) -> Option<&I::Item> { loop {} }
}
macro_rules! same_item_by {
    ($($name:ident)*) => { $(
        pub struct $name<I, P> { iter: I, predicate: P }
        impl<I: Iterator, P: FnMut(&I::Item) -> bool> Iterator for $name<I, P> {
            type Item = I::Item;
            fn next(&mut self) -> Option<I::Item> { loop {} }
        }
    )* }
}
same_item_by! { Filter SkipWhile TakeWhile }
impl<I: DoubleEndedIterator, P: FnMut(&I::Item) -> bool> DoubleEndedIterator for Filter<I, P> {
    fn next_back(&mut self) -> Option<I::Item> { loop {} }
}
pub struct Inspect<I, F> { iter: I, f: F }
impl<I: Iterator, F: FnMut(&I::Item)> Iterator for Inspect<I, F> {
    type Item = I::Item;
    fn next(&mut self) -> Option<I::Item> { loop {} }
}
pub struct Chain<A, B> { a: A, b: B }
impl<A: Iterator, B: Iterator<Item = A::Item>> Iterator for Chain<A, B> {
    type Item = A::Item;
    fn next(&mut self) -> Option<A::Item> { loop {} }
}
pub struct Zip<A, B> { a: A, b: B }
impl<A: Iterator, B: Iterator> Iterator for Zip<A, B> {
    type Item = (A::Item, B::Item);
    fn next(&mut self) -> Option<(A::Item, B::Item)> { loop {} }
}
pub struct Map<I, F> { iter: I, f: F }
impl<B, I: Iterator, F: FnMut(I::Item) -> B> Iterator for Map<I, F> {
    type Item = B;
    fn next(&mut self) -> Option<B> { loop {} }
}
impl<B, I: DoubleEndedIterator, F: FnMut(I::Item) -> B> DoubleEndedIterator for Map<I, F> {
    fn next_back(&mut self) -> Option<B> { loop {} }
}
impl<B, I: ExactSizeIterator, F: FnMut(I::Item) -> B> ExactSizeIterator for Map<I, F> {}
pub struct FilterMap<I, F> { iter: I, f: F }
impl<B, I: Iterator, F: FnMut(I::Item) -> Option<B>> Iterator for FilterMap<I, F> {
    type Item = B;
    fn next(&mut self) -> Option<B> { loop {} }
}
pub struct FlatMap<I, U, F> { iter: I, f: F, inner: Option<U> }
impl<I: Iterator, U: IntoIterator, F: FnMut(I::Item) -> U> Iterator for FlatMap<I, U, F> {
    type Item = U::Item;
    fn next(&mut self) -> Option<U::Item> { loop {} }
}
pub struct Enumerate<I> { iter: I }
impl<I: Iterator> Iterator for Enumerate<I> {
    type Item = (usize, I::Item);
    fn next(&mut self) -> Option<(usize, I::Item)> { loop {} }
}
impl<I: ExactSizeIterator + DoubleEndedIterator> DoubleEndedIterator for Enumerate<I> {
    fn next_back(&mut self) -> Option<(usize, I::Item)> { loop {} }
}
impl<I: ExactSizeIterator> ExactSizeIterator for Enumerate<I> {}
pub struct Copied<I> { it: I }
impl<'a, I: Iterator<Item = &'a T>, T: 'a + Copy> Iterator for Copied<I> {
    type Item = T;
    fn next(&mut self) -> Option<T> { loop {} }
}
impl<'a, I: DoubleEndedIterator<Item = &'a T>, T: 'a + Copy> DoubleEndedIterator for Copied<I> {
    fn next_back(&mut self) -> Option<T> { loop {} }
}
pub struct Cloned<I> { it: I }
impl<'a, I: Iterator<Item = &'a T>, T: 'a + Clone> Iterator for Cloned<I> {
    type Item = T;
    fn next(&mut self) -> Option<T> { loop {} }
}
pub fn repeat<T: Clone>(elt: T) -> Repeat<T> { loop {} }
pub struct Repeat<A> { element: A }
impl<A: Clone> Iterator for Repeat<A> {
    type Item = A;
    fn next(&mut self) -> Option<A> { loop {} }
}
pub fn once<T>(value: T) -> Once<T> { loop {} }
pub struct Once<T> { inner: T }
impl<T> Iterator for Once<T> {
    type Item = T;
    fn next(&mut self) -> Option<T> { loop {} }
}
