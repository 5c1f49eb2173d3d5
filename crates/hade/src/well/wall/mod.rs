//! The wall of a hole: its stresses, the arcs of it that fail at a pressure, the pressures that
//! limit it, and the range of pressures recommended for it.
//!
//! # Conventions
//!
//! Isotropic, linear elastic rock in plane strain along the hole; an impermeable wall; stresses in
//! the hole's axes (see [`frames`](crate::frames)); tool face θ clockwise from the top of the hole
//! looking down it, from the hole's azimuth when it is vertical. Everything repeats after 180° of
//! tool face, only τθz changes its sign there; an arc or a limit is given by its tool face in
//! 0–180° and stands for both sides.
//!
//! Effective stress for failure is Terzaghi's: total stress less the pore pressure of the formation.
//!
//! # Does not do
//!
//! Time, temperature, chemistry, weak planes, stress changed by earlier failure, and rock that
//! creeps. A breakout is the arc that fails elastically at first; it deepens, and need not widen.

mod arcs;
mod around;
mod breakout;
mod circle;
mod direction;
mod ends;
mod kirsch;
mod limit;
mod limits;
mod limits_card;
mod limits_check;
mod method;
mod range;
mod range_card;
mod range_check;
mod second_route;
mod shear;
mod stress_at;
mod tension;
#[cfg(test)]
mod tests;
mod trigonometric;
#[allow(clippy::module_inception)]
mod wall;
mod width;

pub use around::{AroundOutcome, WallAround};
pub use breakout::{ArcsOutcome, Breakout, FailingArcs};
pub use limit::{Limit, LimitKind, Mode, WallDirection};
pub use limits::{Limits, LimitsInputs, LimitsOutcome};
pub use range::{Governs, RangeChoices, RangeEnd, RangeInputs, RangeOutcome, RecommendedRange};
pub use stress_at::{AtToolface, AtToolfaceOutcome, WallStress};
pub use wall::{AtPressure, Wall, WallInputs};
