//! Input and output.

pub struct Error {
    kind: ErrorKind,
}
pub enum ErrorKind {
    NotFound,
    PermissionDenied,
    Other,
}
impl Error {
    pub fn kind(&self) -> ErrorKind { loop {} }
}
impl core::fmt::Debug for Error {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
impl core::fmt::Display for Error {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result { loop {} }
}
impl core::error::Error for Error {}
pub type Result<T> = core::result::Result<T, Error>;
pub trait Write {
    fn write(&mut self, buf: &[u8]) -> Result<usize>;
    fn flush(&mut self) -> Result<()>;
    fn write_all(&mut self, buf: &[u8]) -> Result<()> { loop {} }
    fn write_fmt(&mut self, args: core::fmt::Arguments<'_>) -> Result<()> { loop {} }
}
pub struct Stdout(());
impl Write for Stdout {
    fn write(&mut self, buf: &[u8]) -> Result<usize> { loop {} }
    fn flush(&mut self) -> Result<()> { loop {} }
}
pub fn stdout() -> Stdout { loop {} }
#[doc(hidden)]
pub fn print(args: core::fmt::Arguments<'_>) { loop {} }
#[doc(hidden)]
pub fn print_text(text: &str) { loop {} }
