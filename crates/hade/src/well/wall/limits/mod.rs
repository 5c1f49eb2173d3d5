//! The pressures that limit a wall: of shear, of parting, of the far field and the pore pressure; and the
//! lower one of shear for holes in every direction.

mod card;
mod check;
mod direction_map;
mod limit;
#[allow(clippy::module_inception)]
mod limits;
mod worked;

pub(crate) use card::{capitalised, shown};
pub use direction_map::{DirectionMap, MapInputs};
pub use limit::{Limit, LimitKind};
pub use limits::{Limits, LimitsInputs, LimitsOutcome};
