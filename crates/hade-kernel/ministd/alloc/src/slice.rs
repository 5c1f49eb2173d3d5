//! Slices that allocate.

use crate::string::String;
use crate::vec::Vec;
use core::cmp::Ordering;

impl<T> [T] {
    #[rustc_allow_incoherent_impl]
    pub fn sort(&mut self) where T: Ord { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn sort_by<F: FnMut(&T, &T) -> Ordering>(&mut self, compare: F) { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn sort_by_key<K: Ord, F: FnMut(&T) -> K>(&mut self, f: F) { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn to_vec(&self) -> Vec<T> where T: Clone { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn concat<Item: ?Sized>(&self) -> <Self as Concat<Item>>::Output where Self: Concat<Item> { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn join<Separator>(&self, sep: Separator) -> <Self as Join<Separator>>::Output where Self: Join<Separator> { loop {} }
}
pub trait Concat<Item: ?Sized> {
    type Output;
}
impl<S: core::borrow::Borrow<str>> Concat<str> for [S] {
    type Output = String;
}
impl<T: Clone, V: core::borrow::Borrow<[T]>> Concat<T> for [V] {
    type Output = Vec<T>;
}
pub trait Join<Separator> {
    type Output;
}
impl<S: core::borrow::Borrow<str>> Join<&str> for [S] {
    type Output = String;
}
impl str {
    #[rustc_allow_incoherent_impl]
    pub fn to_lowercase(&self) -> String { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn to_uppercase(&self) -> String { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn replace<P: core::str::Pattern>(&self, from: P, to: &str) -> String { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn repeat(&self, n: usize) -> String { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn to_ascii_uppercase(&self) -> String { loop {} }
    #[rustc_allow_incoherent_impl]
    pub fn to_ascii_lowercase(&self) -> String { loop {} }
}
