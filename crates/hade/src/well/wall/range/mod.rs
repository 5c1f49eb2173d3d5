//! The recommended range of pressures: the limits with the engineer's choices, a top that was raised, the
//! range beside those of other criteria and walls, and a mud held against it.

mod beside;
mod beside_card;
mod card;
mod check;
mod ends;
mod mud_held;
mod mud_held_card;
mod parts;
mod raised;
mod recommended;

pub use beside::{Alternative, BesideInputs, BesideOutcome, RangeBeside, RangesBeside};
pub(crate) use check::{Conditions, nearest_to_failing};
pub(crate) use ends::{Ends, pushed_out_above};
pub use ends::{GovernedPressure, Governs, RangeEnd};
pub use mud_held::{HeldInputs, HeldOutcome, HeldPressure, MudHeld, MudPlan, MudState};
pub(crate) use parts::{rule, rule_symbols, signed};
pub use raised::RaisedTop;
pub use recommended::{RangeChoices, RangeInputs, RangeOutcome, RecommendedRange};
