//! `Result`.

pub enum Result<T, E> {
    #[lang = "Ok"]
    Ok(T),
    #[lang = "Err"]
    Err(E),
}
impl<T: Copy, E: Copy> Copy for Result<T, E> {}
impl<T: Clone, E: Clone> Clone for Result<T, E> {
    fn clone(&self) -> Self { loop {} }
}
impl<T, E> Result<T, E> {
    pub fn is_ok(&self) -> bool { loop {} }
    pub fn is_err(&self) -> bool { loop {} }
    pub fn ok(self) -> Option<T> { loop {} }
    pub fn err(self) -> Option<E> { loop {} }
    pub fn as_ref(&self) -> Result<&T, &E> { loop {} }
    pub fn map<U, F: FnOnce(T) -> U>(self, op: F) -> Result<U, E> { loop {} }
    pub fn map_or<U, F: FnOnce(T) -> U>(self, default: U, f: F) -> U { loop {} }
    pub fn map_err<F, O: FnOnce(E) -> F>(self, op: O) -> Result<T, F> { loop {} }
    pub fn and<U>(self, res: Result<U, E>) -> Result<U, E> { loop {} }
    pub fn and_then<U, F: FnOnce(T) -> Result<U, E>>(self, op: F) -> Result<U, E> { loop {} }
    pub fn or<F>(self, res: Result<T, F>) -> Result<T, F> { loop {} }
    pub fn or_else<F, O: FnOnce(E) -> Result<T, F>>(self, op: O) -> Result<T, F> { loop {} }
    pub fn unwrap(self) -> T { loop {} }
    pub fn expect(self, msg: &str) -> T { loop {} }
    pub fn unwrap_err(self) -> E { loop {} }
    pub fn expect_err(self, msg: &str) -> E { loop {} }
    pub fn unwrap_or(self, default: T) -> T { loop {} }
    pub fn unwrap_or_else<F: FnOnce(E) -> T>(self, op: F) -> T { loop {} }
    pub fn unwrap_or_default(self) -> T where T: Default { loop {} }
}
