//! Sharing between threads.

pub use alloc::sync::Arc;

pub struct Mutex<T: ?Sized> {
    data: T,
}
impl<T> Mutex<T> {
    pub const fn new(t: T) -> Mutex<T> { loop {} }
}
