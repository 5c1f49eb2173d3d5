//! Pressure, stress and temperature against depth: a table or a gradient with its datum, and the pressure at
//! one depth with its card.

mod about;
mod at_depth;
mod at_depth_card;
mod in_hole;
mod law;
mod points;
mod pressure_profile;
mod read;
mod temperature_in_hole;
mod temperature_profile;

pub use at_depth::{PressureAtDepth, PressureAtDepthInputs, PressureAtDepthOutcome};
pub(crate) use in_hole::{InHole, ProfileRecord};
pub use pressure_profile::PressureProfile;
pub(crate) use temperature_in_hole::{TemperatureInHole, TemperatureRecord};
pub use temperature_profile::TemperatureProfile;
