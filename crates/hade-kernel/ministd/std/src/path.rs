//! Paths.

pub struct Path {
    inner: str,
}
impl Path {
    pub fn new<S: AsRef<str> + ?Sized>(s: &S) -> &Path { loop {} }
    pub fn join<P: AsRef<Path>>(&self, path: P) -> PathBuf { loop {} }
    pub fn exists(&self) -> bool { loop {} }
    pub fn is_file(&self) -> bool { loop {} }
    pub fn to_path_buf(&self) -> PathBuf { loop {} }
    pub fn display(&self) -> Display<'_> { loop {} }
}
pub struct Display<'a> {
    path: &'a Path,
}
impl core::fmt::Display for Display<'_> {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
pub struct PathBuf {
    inner: alloc::string::String,
}
impl core::ops::Deref for PathBuf {
    type Target = Path;
    fn deref(&self) -> &Path { loop {} }
}
impl Clone for PathBuf {
    fn clone(&self) -> Self { loop {} }
}
impl<T: ?Sized + AsRef<str>> From<&T> for PathBuf {
    fn from(s: &T) -> PathBuf { loop {} }
}
impl AsRef<Path> for str {
    fn as_ref(&self) -> &Path { loop {} }
}
impl AsRef<Path> for Path {
    fn as_ref(&self) -> &Path { loop {} }
}
impl AsRef<Path> for PathBuf {
    fn as_ref(&self) -> &Path { loop {} }
}
impl AsRef<Path> for alloc::string::String {
    fn as_ref(&self) -> &Path { loop {} }
}
impl<T: ?Sized + AsRef<Path>> AsRef<Path> for &T {
    fn as_ref(&self) -> &Path { loop {} }
}
