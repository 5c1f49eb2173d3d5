//! Pressure and stress against depth: a table or a gradient with its datum, and the value at one
//! depth with its card.

mod at_depth;
mod at_depth_card;
mod in_hole;
mod law;
mod pressure_profile;
mod read;

pub use at_depth::{PressureAtDepth, PressureAtDepthInputs, PressureAtDepthOutcome};
pub(crate) use in_hole::{InHole, ProfileRecord};
pub use pressure_profile::PressureProfile;
