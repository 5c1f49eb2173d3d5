//! Durations.

pub struct Duration {
    secs: u64,
    nanos: u32,
}
impl Copy for Duration {}
impl Clone for Duration {
    fn clone(&self) -> Self { loop {} }
}
impl Duration {
    pub const fn from_secs(secs: u64) -> Duration { loop {} }
    pub const fn from_millis(millis: u64) -> Duration { loop {} }
    pub fn from_secs_f64(secs: f64) -> Duration { loop {} }
    pub const fn as_secs(&self) -> u64 { loop {} }
    pub const fn as_millis(&self) -> u128 { loop {} }
    pub fn as_secs_f64(&self) -> f64 { loop {} }
}
impl crate::fmt::Debug for Duration {
    fn fmt(&self, f: &mut crate::fmt::Formatter<'_>) -> crate::fmt::Result { loop {} }
}
