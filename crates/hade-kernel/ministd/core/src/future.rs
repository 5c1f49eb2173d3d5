//! Futures.

#[lang = "future_trait"]
pub trait Future {
    #[lang = "future_output"]
    type Output;
}
pub trait IntoFuture {
    type Output;
    type IntoFuture: Future<Output = Self::Output>;
    #[lang = "into_future"]
    fn into_future(self) -> Self::IntoFuture;
}
impl<F: Future> IntoFuture for F {
    type Output = F::Output;
    type IntoFuture = F;
    fn into_future(self) -> F { loop {} }
}
