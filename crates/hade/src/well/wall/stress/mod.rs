//! Stress at one place: of the wall, at any distance from the hole, and along a radius.

mod field_at;
pub(crate) mod field_method;
mod radial_profile;
mod rock_round;
mod stress_at;

pub use field_at::{AtDistance, AtDistanceOutcome, FieldStress};
pub use radial_profile::{AlongRadius, ProfileOutcome, RadialProfile};
pub(crate) use rock_round::RockRound;
pub use stress_at::{AtToolface, AtToolfaceOutcome, WallStress};
