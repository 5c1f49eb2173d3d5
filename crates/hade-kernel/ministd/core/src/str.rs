//! Text slices.

pub trait FromStr: Sized {
    type Err;
    fn from_str(s: &str) -> Result<Self, Self::Err>;
}
pub struct ParseBoolError(());
pub struct Utf8Error(());

pub trait Pattern {}
impl Pattern for char {}
impl<'b> Pattern for &'b str {}
impl<const N: usize> Pattern for [char; N] {}
impl<'b> Pattern for &'b [char] {}
impl<F: FnMut(char) -> bool> Pattern for F {}

impl str {
    pub fn len(&self) -> usize { loop {} }
    pub fn is_empty(&self) -> bool { loop {} }
    pub fn as_bytes(&self) -> &[u8] { loop {} }
    pub fn chars(&self) -> Chars<'_> { loop {} }
    pub fn bytes(&self) -> Bytes<'_> { loop {} }
    pub fn lines(&self) -> Lines<'_> { loop {} }
    pub fn split_whitespace(&self) -> SplitWhitespace<'_> { loop {} }
    pub fn contains<P: Pattern>(&self, pat: P) -> bool { loop {} }
    pub fn starts_with<P: Pattern>(&self, pat: P) -> bool { loop {} }
    pub fn ends_with<P: Pattern>(&self, pat: P) -> bool { loop {} }
    pub fn find<P: Pattern>(&self, pat: P) -> Option<usize> { loop {} }
    pub fn rfind<P: Pattern>(&self, pat: P) -> Option<usize> { loop {} }
    pub fn split<P: Pattern>(&self, pat: P) -> Split<'_, P> { loop {} }
    pub fn split_once<P: Pattern>(&self, delimiter: P) -> Option<(&str, &str)> { loop {} }
    pub fn rsplit_once<P: Pattern>(&self, delimiter: P) -> Option<(&str, &str)> { loop {} }
    pub fn trim(&self) -> &str { loop {} }
    pub fn trim_start(&self) -> &str { loop {} }
    pub fn trim_end(&self) -> &str { loop {} }
    pub fn trim_matches<P: Pattern>(&self, pat: P) -> &str { loop {} }
    pub fn strip_prefix<P: Pattern>(&self, prefix: P) -> Option<&str> { loop {} }
    pub fn strip_suffix<P: Pattern>(&self, suffix: P) -> Option<&str> { loop {} }
    pub fn parse<F: FromStr>(&self) -> Result<F, F::Err> { loop {} }
    pub fn is_char_boundary(&self, index: usize) -> bool { loop {} }
    pub fn eq_ignore_ascii_case(&self, other: &str) -> bool { loop {} }
}
macro_rules! iterators {
    ($($name:ident $item:ty;)*) => { $(
        pub struct $name<'a> { text: &'a str }
        impl<'a> Iterator for $name<'a> {
            type Item = $item;
            fn next(&mut self) -> Option<$item> { loop {} }
        }
        impl<'a> crate::iter::DoubleEndedIterator for $name<'a> {
            fn next_back(&mut self) -> Option<$item> { loop {} }
        }
    )* }
}
iterators! { Chars char; Bytes u8; Lines &'a str; SplitWhitespace &'a str; }
pub struct Split<'a, P> { text: &'a str, pattern: P }
impl<'a, P: Pattern> Iterator for Split<'a, P> {
    type Item = &'a str;
    fn next(&mut self) -> Option<&'a str> { loop {} }
}
pub fn from_utf8(v: &[u8]) -> Result<&str, Utf8Error> { loop {} }
