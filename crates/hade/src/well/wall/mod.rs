//! The wall of a hole: its stresses, those behind it, the arcs of it that fail at a pressure and how deep,
//! its tensile cracks, what of it an image shows, the pressures that limit it, and the range of pressures
//! recommended for it.
//!
//! # Conventions
//!
//! Isotropic, linear elastic rock in plane strain along the hole; stresses in the hole's axes (see [`frames`](crate::frames)); tool face θ clockwise from the top of the hole
//! looking down it, from the hole's azimuth when it is vertical. Everything repeats after 180° of
//! tool face, only τθz changes its sign there; an arc or a limit is given by its tool face in
//! 0–180° and stands for both sides.
//!
//! Effective stress for failure is Terzaghi's: total stress less the pore pressure behind the wall.
//! That is the formation's at an impermeable wall, which a wall is until it is said to be permeable or
//! partly sealed.
//!
//! # Does not do
//!
//! Time, chemistry, pore pressure and temperature behind a wall that lets them pass (the field away from
//! such a wall is refused), stress changed by earlier failure, and rock that creeps (where that is said,
//! every result warns). A breakout is the arc that fails elastically at first; it deepens, and need not widen.

mod arcs;
mod around;
mod beside;
mod beside_card;
mod breakout;
mod by_force;
mod circle;
mod cracks;
mod depth;
mod direction;
mod direction_map;
mod edges;
mod effective;
mod elastic;
mod ends;
mod envelope_points;
mod every_criterion;
mod excess;
mod failure_depth;
mod failure_depth_check;
mod failure_depth_figure;
mod field;
mod field_method;
mod field_route;
#[cfg(test)]
mod field_tests;
mod kirsch;
mod limit;
mod limits;
mod limits_card;
mod limits_check;
mod method;
mod mistakes;
mod mud_held;
mod mud_held_card;
mod radial_profile;
mod raised;
mod range;
mod range_card;
mod range_check;
mod range_ends;
#[cfg(test)]
mod range_tests;
mod search;
mod second_route;
mod sensitivity;
mod sensitivity_card;
mod sensitivity_check;
#[cfg(test)]
mod sensitivity_tests;
mod setup;
mod shear;
mod slip;
mod spans;
mod stress_at;
mod tensile_cracks;
mod tensile_cracks_card;
mod tensile_cracks_check;
mod tension;
#[cfg(test)]
mod tests;
mod trace;
mod unrolled;
mod unrolled_figure;
mod varied_wall;
mod vary;
#[allow(clippy::module_inception)]
mod wall;
mod walls_at_random;
mod width;

pub use around::{AroundOutcome, WallAround};
pub use beside::{Alternative, BesideInputs, BesideOutcome, RangeBeside, RangesBeside};
pub use breakout::{ArcsOutcome, Breakout, FailingArcs};
pub use direction_map::{DirectionMap, MapInputs};
pub use failure_depth::{DeepestFailure, DepthOutcome, FailureDepth};
pub use field::{AtDistance, AtDistanceOutcome, FieldStress};
pub use limit::{Limit, LimitKind, Mode, WallDirection};
pub use limits::{Limits, LimitsInputs, LimitsOutcome};
pub use mud_held::{HeldInputs, HeldOutcome, HeldPressure, MudHeld, MudPlan, MudState};
pub use radial_profile::{AlongRadius, ProfileOutcome, RadialProfile};
pub use raised::RaisedTop;
pub use range::{RangeChoices, RangeInputs, RangeOutcome, RecommendedRange};
pub use range_ends::{GovernedPressure, Governs, RangeEnd};
pub use sensitivity::{ChangedEnds, ChangedRange, Sensitivity, SensitivityInputs, SensitivityOutcome};
pub use setup::{Thermal, WallInputs, WallSetup, WeakPlane};
pub use stress_at::{AtToolface, AtToolfaceOutcome, WallStress};
pub use tensile_cracks::{CrackArc, CrackPlace, CracksOutcome, TensileCracks};
pub use unrolled::{ImageInputs, ImageOutcome, PlaneTrace, WallImage};
pub use vary::Vary;
pub use wall::{AtPressure, Wall};
