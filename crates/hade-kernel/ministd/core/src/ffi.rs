//! C types.
#[lang = "c_void"]
pub enum c_void {
    __variant1,
    __variant2,
}
pub type c_int = i32;
pub type c_char = i8;
