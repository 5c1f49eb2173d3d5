//! What a notebook imports: `use hade::prelude::*;`. Neither `Result` nor `Error` is here, because
//! a notebook's own code means std's.

pub use crate::along::{
    Depletion, DrillingEvent, DrillingEvents, EventKind, FrictionAlong, Ground, GroundInputs, GroundState, Hindcast,
    HindcastRow, HoleSection, HorizontalProfiles, Layer, LayerIntervals, LayerShare, LimitLog, LogChoices, LogRow,
    MaxPath, MinPath, MudShare, Narrowest, PlanShare, SectionEnsemble, SectionRange, TopPlane,
};
pub use crate::card::{Card, Explain, Projection};
pub use crate::faults::{
    BoundsInputs, CriticalPlanes, Fault, FaultSet, FaultSlip, FaultState, FaultStrength, FrictionLimit,
    FrictionalBounds, RankedFault, RankedFaults,
};
pub use crate::field::{
    DensityLog, Overburden, OverburdenInputs, PressureAtDepth, PressureProfile, TemperatureProfile, Top,
};
pub use crate::frames::{
    ApparentDip, Attitude, Axes, Axis, Azimuth, BestRotation, Borehole, Chain, Convergence, Datum, DatumTie,
    Declination, Depth, DepthConversion, Direction, DirectionPair, Ellipsoid, FaultAxes, FittedAxes, Geographic, Line,
    LineAtRake, Local, LocalAxes, LowerHemisphere, MapGrid, MeasuredAxes, Plane, PlaneThroughLines, PlanesIntersection,
    RakeOfLine, Site, WallAxes,
};
pub use crate::rock::{
    FailureEnvelope, HoekBrown, PlaneStrength, Rock, RockMass, Strength, StrengthConstants, StrengthMargin, WeakRock,
    WeakRockInputs, WeakRockMode,
};
pub use crate::sheet::{Basis, Sheet, Source};
pub use crate::show::{NotebookDisplay, Show};
pub use crate::spread::{Distribution, Draws, Quantiles};
pub use crate::stress::{
    AxisComponents, Components, EffectiveStress, FaultingRegime, HorizontalStresses, Horizontals, Invariants,
    MohrCircles, Principals, Regime, Stress, Traction, TractionVector,
};
pub use crate::units::{
    Angle, Density, Expansion, FluxDensity, Gradient, Length, Pressure, Temperature, TemperatureGradient, Uncertain,
    Units, Warming,
};
pub use crate::well::{
    Alternative, Breakout, CrackArc, CrackPlace, DeepestFailure, DirectionMap, Drawn, Ensemble, FailingArcs,
    FailureDepth, FieldStress, Governs, Limit, LimitKind, Limits, MapInputs, MapOf, MappedDirection, MudColumn,
    MudHeld, MudPlan, MudPressure, MudState, PlaneTrace, Position, RadialProfile, RangeChoices, RangesBeside,
    RecommendedRange, Sensitivity, Station, Survey, TensileCracks, Thermal, TieIn, Vary, Wall, WallAround, WallImage,
    WallInputs, WallStress, WeakPlane,
};
