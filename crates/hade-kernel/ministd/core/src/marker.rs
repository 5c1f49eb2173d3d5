//! Marker traits.

#[lang = "pointee_sized"]
#[fundamental]
#[rustc_coinductive]
pub trait PointeeSized {}

#[lang = "meta_sized"]
#[fundamental]
#[rustc_coinductive]
pub trait MetaSized: PointeeSized {}

#[lang = "sized"]
#[fundamental]
#[rustc_coinductive]
pub trait Sized: MetaSized {}

pub unsafe auto trait Send {}
pub unsafe auto trait Sync {}

#[lang = "unsize"]
pub trait Unsize<T: PointeeSized>: PointeeSized {}

#[lang = "unpin"]
pub auto trait Unpin {}

#[lang = "copy"]
pub trait Copy: Clone {}
#[rustc_builtin_macro]
pub macro Copy($item:item) {}

macro_rules! impl_copy {
    ($($t:ty)*) => { $( impl Copy for $t {} )* }
}
impl_copy! { usize u8 u16 u32 u64 u128 isize i8 i16 i32 i64 i128 f32 f64 bool char ! }
impl<T: PointeeSized> Copy for *const T {}
impl<T: PointeeSized> Copy for *mut T {}
impl<T: PointeeSized> Copy for &T {}

#[lang = "tuple_trait"]
pub trait Tuple {}

#[lang = "phantom_data"]
pub struct PhantomData<T: PointeeSized>;

impl<T: PointeeSized> Clone for PhantomData<T> {
    fn clone(&self) -> Self { loop {} }
}
impl<T: PointeeSized> Copy for PhantomData<T> {}
impl<T: PointeeSized> Default for PhantomData<T> {
    fn default() -> Self { loop {} }
}

#[lang = "discriminant_kind"]
pub trait DiscriminantKind {
    #[lang = "discriminant_type"]
    type Discriminant;
}
