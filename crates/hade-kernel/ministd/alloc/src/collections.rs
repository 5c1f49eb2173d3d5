//! Ordered collections.

pub struct BTreeMap<K, V> {
    key: *const K,
    value: *const V,
}
impl<K, V> BTreeMap<K, V> {
    pub const fn new() -> BTreeMap<K, V> { loop {} }
    pub fn insert(&mut self, key: K, value: V) -> Option<V> where K: Ord { loop {} }
    pub fn get<Q: ?Sized + Ord>(&self, key: &Q) -> Option<&V> where K: core::borrow::Borrow<Q> + Ord { loop {} }
    pub fn contains_key<Q: ?Sized + Ord>(&self, key: &Q) -> bool where K: core::borrow::Borrow<Q> + Ord { loop {} }
    pub fn len(&self) -> usize { loop {} }
    pub fn is_empty(&self) -> bool { loop {} }
}
impl<K: Ord, V> core::iter::FromIterator<(K, V)> for BTreeMap<K, V> {
    fn from_iter<I: IntoIterator<Item = (K, V)>>(iter: I) -> Self { loop {} }
}
impl<K: Ord, V, const N: usize> From<[(K, V); N]> for BTreeMap<K, V> {
    fn from(arr: [(K, V); N]) -> Self { loop {} }
}
impl<K: Clone, V: Clone> Clone for BTreeMap<K, V> {
    fn clone(&self) -> Self { loop {} }
}
