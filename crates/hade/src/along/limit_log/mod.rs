//! The pressures that limit the wall of a hole, all along it.

mod card;
mod check;
mod choices;
mod csv;
mod figure;
mod friction;
#[allow(clippy::module_inception)]
mod limit_log;
mod printed;
mod read_sections;
mod row;
mod sample;
mod section;
mod steps;
mod summary;

pub use choices::LogChoices;
pub use friction::FrictionAlong;
pub use limit_log::{LimitLog, LogInputs};
pub use row::LogRow;
pub(crate) use section::pressure_of;
pub use section::{HoleSection, SectionEnd, SectionMud, SectionRange};
pub use summary::{LogOutcome, Narrowest};
