//! What a notebook imports: `use hade::prelude::*;`. Neither `Result` nor `Error` is here, because
//! a notebook's own code means std's.

pub use crate::card::{Card, Explain};
pub use crate::faults::FrictionLimit;
pub use crate::frames::{Attitude, Axis, Azimuth, Borehole, Chain, Geographic, Line, Plane};
pub use crate::sheet::{Basis, Sheet, Source};
pub use crate::show::{NotebookDisplay, Show};
pub use crate::stress::{Components, EffectiveStress, Horizontals, MohrCircles, Principals, Regime, Stress, Traction};
pub use crate::units::{Angle, Density, Gradient, Length, Pressure, Uncertain, Units, Warming};
