//! How far each input by itself moves the ends of the recommended range.

mod card;
mod check;
#[allow(clippy::module_inception)]
mod sensitivity;
mod varied_wall;
mod vary;

pub use sensitivity::{ChangedEnds, ChangedRange, Sensitivity, SensitivityInputs, SensitivityOutcome};
pub(crate) use vary::Varied;
pub use vary::Vary;
