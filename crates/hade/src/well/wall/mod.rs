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
//!
//! # Where things are
//!
//! Plain numbers in `round`, `elastic` and `shear`; what a user states in `setup.rs` and `wall.rs`; words and
//! steps that cards share in `direction.rs` and `method.rs`; the routes of the checks in `second_route`. Then
//! the results, a folder each, with card, check and figure beside them. A folder imports only from those before it:
//! `direction, round ← elastic ← shear ← setup ← wall, second_route ← method ← stress, around, tension ←
//! failure_depth, limits, unrolled ← direction_map, range ← sensitivity ← ensemble`.

mod around;
mod direction;
mod direction_map;
mod elastic;
mod ensemble;
mod failure_depth;
mod limits;
mod method;
mod range;
mod round;
mod second_route;
mod sensitivity;
mod setup;
mod shear;
mod stress;
mod tension;
mod tests;
mod unrolled;
#[allow(clippy::module_inception)]
mod wall;

pub use around::{ArcsOutcome, AroundOutcome, Breakout, FailingArcs, WallAround};
pub use direction_map::{DirectionMap, DirectionMapInputs, MapInputs, MapOf, MapOutcome, MappedDirection};
pub use ensemble::{Drawn, Effect, Ensemble, EnsembleInputs, EnsembleOutcome, FirstOrder};
pub use failure_depth::{DeepestFailure, DepthOutcome, FailureDepth};
pub(crate) use limits::shown as limit_shown;
pub use limits::{Limit, LimitKind, Limits, LimitsInputs, LimitsOutcome};
pub use range::{
    Alternative, BesideInputs, BesideOutcome, GovernedPressure, Governs, HeldInputs, HeldOutcome, HeldPressure,
    MudHeld, MudPlan, MudState, RaisedTop, RangeBeside, RangeChoices, RangeEnd, RangeInputs, RangeOutcome,
    RangesBeside, RecommendedRange,
};
pub(crate) use range::{Conditions, Ends, nearest_to_failing, pushed_out_above};
pub use sensitivity::{ChangedEnds, ChangedRange, Sensitivity, SensitivityInputs, SensitivityOutcome, Vary};
pub(crate) use setup::{Seepage, items_beside_rock, require_expansion};
pub use setup::{Thermal, WallInputs, WallSetup, WeakPlane};
pub use shear::{Mode, WallDirection};
pub use stress::{
    AlongRadius, AtDistance, AtDistanceOutcome, AtToolface, AtToolfaceOutcome, FieldStress, ProfileOutcome,
    RadialProfile, WallStress,
};
pub use tension::{CrackArc, CrackPlace, CracksOutcome, TensileCracks};
pub use unrolled::{ImageInputs, ImageOutcome, PlaneTrace, WallImage};
use wall::pressure_item;
pub use wall::{AtPressure, Wall};
