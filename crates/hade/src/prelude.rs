//! What a notebook imports: `use hade::prelude::*;`. Neither `Result` nor `Error` is here, because
//! a notebook's own code means std's.

pub use crate::card::{Card, Explain};
pub use crate::faults::{
    BoundsInputs, CriticalPlanes, Fault, FaultSet, FaultSlip, FaultState, FaultStrength, FrictionLimit,
    FrictionalBounds, RankedFault, RankedFaults,
};
pub use crate::field::{DensityLog, Overburden, OverburdenInputs, Top};
pub use crate::frames::{
    Attitude, Axis, Azimuth, Borehole, Chain, Datum, DatumTie, Depth, Geographic, Line, Plane, WallAxes,
};
pub use crate::rock::{Rock, Strength};
pub use crate::sheet::{Basis, Sheet, Source};
pub use crate::show::{NotebookDisplay, Show};
pub use crate::stress::{Components, EffectiveStress, Horizontals, MohrCircles, Principals, Regime, Stress, Traction};
pub use crate::units::{Angle, Density, Gradient, Length, Pressure, Uncertain, Units, Warming};
pub use crate::well::{
    Breakout, FailingArcs, Limit, Limits, MudColumn, MudPressure, Position, RangeChoices, RecommendedRange, Station,
    Survey, Wall, WallAround, WallInputs, WallStress,
};
