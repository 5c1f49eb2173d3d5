//! Memory.

pub fn drop<T>(value: T) {}
pub fn replace<T>(dest: &mut T, src: T) -> T { loop {} }
pub fn swap<T>(x: &mut T, y: &mut T) {}
pub fn take<T: Default>(dest: &mut T) -> T { loop {} }
pub fn size_of<T>() -> usize { loop {} }
#[lang = "manually_drop"]
pub struct ManuallyDrop<T: ?Sized> {
    value: T,
}
