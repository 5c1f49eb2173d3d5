//! Cells.

#[lang = "unsafe_cell"]
pub struct UnsafeCell<T: ?Sized> {
    value: T,
}
pub struct Cell<T: ?Sized> {
    value: UnsafeCell<T>,
}
impl<T> Cell<T> {
    pub const fn new(value: T) -> Cell<T> { loop {} }
    pub fn set(&self, value: T) {}
    pub fn replace(&self, value: T) -> T { loop {} }
    pub fn get(&self) -> T where T: Copy { loop {} }
}
pub struct RefCell<T: ?Sized> {
    value: UnsafeCell<T>,
}
impl<T> RefCell<T> {
    pub const fn new(value: T) -> RefCell<T> { loop {} }
    pub fn into_inner(self) -> T { loop {} }
    pub fn borrow(&self) -> Ref<'_, T> { loop {} }
    pub fn borrow_mut(&self) -> RefMut<'_, T> { loop {} }
}
pub struct Ref<'b, T: ?Sized> {
    value: &'b T,
}
pub struct RefMut<'b, T: ?Sized> {
    value: &'b mut T,
}
impl<T: ?Sized> crate::ops::Deref for Ref<'_, T> {
    type Target = T;
    fn deref(&self) -> &T { loop {} }
}
impl<T: ?Sized> crate::ops::Deref for RefMut<'_, T> {
    type Target = T;
    fn deref(&self) -> &T { loop {} }
}
impl<T: ?Sized> crate::ops::DerefMut for RefMut<'_, T> {
    fn deref_mut(&mut self) -> &mut T { loop {} }
}
