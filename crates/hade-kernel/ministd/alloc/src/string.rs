//! `String`.

use crate::vec::Vec;

#[lang = "String"]
pub struct String {
    vec: Vec<u8>,
}
impl String {
    pub const fn new() -> String { loop {} }
    pub fn with_capacity(capacity: usize) -> String { loop {} }
    pub fn from_utf8(vec: Vec<u8>) -> Result<String, FromUtf8Error> { loop {} }
    pub fn push_str(&mut self, string: &str) { loop {} }
    pub fn push(&mut self, ch: char) { loop {} }
    pub fn pop(&mut self) -> Option<char> { loop {} }
    pub fn as_str(&self) -> &str { loop {} }
    pub fn clear(&mut self) { loop {} }
    pub fn truncate(&mut self, new_len: usize) { loop {} }
    pub fn len(&self) -> usize { loop {} }
    pub fn is_empty(&self) -> bool { loop {} }
    pub fn into_bytes(self) -> Vec<u8> { loop {} }
}
pub struct FromUtf8Error(());
impl core::ops::Deref for String {
    type Target = str;
    fn deref(&self) -> &str { loop {} }
}
impl Clone for String {
    fn clone(&self) -> Self { loop {} }
}
impl Default for String {
    fn default() -> Self { loop {} }
}
impl From<&str> for String {
    fn from(s: &str) -> String { loop {} }
}
impl From<char> for String {
    fn from(c: char) -> String { loop {} }
}
impl core::borrow::Borrow<str> for String {
    fn borrow(&self) -> &str { loop {} }
}
impl AsRef<str> for String {
    fn as_ref(&self) -> &str { loop {} }
}
impl core::ops::Add<&str> for String {
    type Output = String;
    fn add(self, other: &str) -> String { loop {} }
}
impl core::ops::AddAssign<&str> for String {
    fn add_assign(&mut self, other: &str) { loop {} }
}
impl PartialEq for String {
    fn eq(&self, other: &String) -> bool { loop {} }
}
impl PartialEq<str> for String {
    fn eq(&self, other: &str) -> bool { loop {} }
}
impl<'a> PartialEq<&'a str> for String {
    fn eq(&self, other: &&'a str) -> bool { loop {} }
}
impl Eq for String {}
impl PartialOrd for String {
    fn partial_cmp(&self, other: &String) -> Option<core::cmp::Ordering> { loop {} }
}
impl Ord for String {
    fn cmp(&self, other: &String) -> core::cmp::Ordering { loop {} }
}
impl core::hash::Hash for String {
    fn hash<H: core::hash::Hasher>(&self, state: &mut H) { loop {} }
}
impl core::fmt::Debug for String {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
impl core::fmt::Display for String {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
impl core::fmt::Write for String {
    fn write_str(&mut self, s: &str) -> core::fmt::Result { loop {} }
}
impl<I: core::slice::SliceIndex<str>> core::ops::Index<I> for String {
    type Output = I::Output;
    fn index(&self, index: I) -> &I::Output { loop {} }
}
impl core::iter::FromIterator<char> for String {
    fn from_iter<I: IntoIterator<Item = char>>(iter: I) -> String { loop {} }
}
impl core::iter::FromIterator<String> for String {
    fn from_iter<I: IntoIterator<Item = String>>(iter: I) -> String { loop {} }
}
impl<'a> core::iter::FromIterator<&'a str> for String {
    fn from_iter<I: IntoIterator<Item = &'a str>>(iter: I) -> String { loop {} }
}
pub trait ToString {
    fn to_string(&self) -> String;
}
impl<T: core::fmt::Display + ?Sized> ToString for T {
    fn to_string(&self) -> String { loop {} }
}
pub fn format(args: core::fmt::Arguments<'_>) -> String { loop {} }
