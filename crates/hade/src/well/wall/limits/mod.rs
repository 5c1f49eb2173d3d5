//! The pressures that limit a wall: of shear, of parting, of the far field and the pore pressure.

mod card;
mod check;
mod limit;
#[allow(clippy::module_inception)]
mod limits;
mod worked;

pub(crate) use card::{capitalised, shown};
pub use limit::{Limit, LimitKind};
pub use limits::{Limits, LimitsInputs, LimitsOutcome};
