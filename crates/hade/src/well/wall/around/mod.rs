//! The wall all round at one pressure: its stresses, and the arcs of it that fail in shear.

mod breakout;
mod envelope_points;
mod wall_around;

pub(crate) use breakout::check_arcs;
pub use breakout::{ArcsOutcome, Breakout, FailingArcs};
pub use wall_around::{AroundOutcome, WallAround};
