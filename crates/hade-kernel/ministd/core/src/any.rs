//! Types at run time.

pub trait Any: 'static {}
impl<T: 'static + ?Sized> Any for T {}
pub fn type_name<T: ?Sized>() -> &'static str { loop {} }
pub fn type_name_of_val<T: ?Sized>(value: &T) -> &'static str { loop {} }
