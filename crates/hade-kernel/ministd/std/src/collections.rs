//! Hashed collections.

pub use alloc::collections::BTreeMap;

pub struct HashMap<K, V, S = RandomState> {
    key: *const K,
    value: *const V,
    state: S,
}
pub struct RandomState(());
impl<K, V> HashMap<K, V, RandomState> {
    pub fn new() -> HashMap<K, V, RandomState> { loop {} }
}
impl<K, V, S> HashMap<K, V, S> {
    pub fn len(&self) -> usize { loop {} }
    pub fn is_empty(&self) -> bool { loop {} }
    pub fn insert(&mut self, k: K, v: V) -> Option<V> { loop {} }
    pub fn get<Q: ?Sized>(&self, k: &Q) -> Option<&V> where K: core::borrow::Borrow<Q> { loop {} }
    pub fn contains_key<Q: ?Sized>(&self, k: &Q) -> bool where K: core::borrow::Borrow<Q> { loop {} }
}
impl<K, V> core::iter::FromIterator<(K, V)> for HashMap<K, V, RandomState> {
    fn from_iter<I: IntoIterator<Item = (K, V)>>(iter: I) -> Self { loop {} }
}
impl<K, V, const N: usize> From<[(K, V); N]> for HashMap<K, V, RandomState> {
    fn from(arr: [(K, V); N]) -> Self { loop {} }
}
