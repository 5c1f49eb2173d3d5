//! Along the hole: the ground it goes through, and the pressures that limit its wall at every depth.
//!
//! A [`Ground`] says stress, pore pressure and rock by depth, in layers; a [`LimitLog`] joins it with
//! the path of a hole, and [`DrillingEvents`] are held against it. Nothing is extrapolated, nothing is
//! smeared over the contact of two layers, and what is stated by measured depth stays at that measured
//! depth. `events` and
//! `section_ensemble` import from `limit_log`, and that from `ground`.
//!
//! It does not follow time: how the ground changes while it is drilled or produced is what the
//! engineer states as depletion.

mod events;
mod ground;
mod limit_log;
mod readers_alike;
mod section_ensemble;
mod spans;
mod tests;

pub use events::{DrillingEvent, DrillingEvents, EventKind, Hindcast, HindcastInputs, HindcastOutcome, HindcastRow};
pub use ground::{
    Depletion, Ground, GroundInputs, GroundRecord, GroundState, GroundStateInputs, GroundStateOutcome,
    HorizontalProfiles, Layer, LayerIntervals, MaxPath, MinPath, TopPlane,
};
pub use limit_log::{
    FrictionAlong, HoleSection, LimitLog, LogChoices, LogInputs, LogOutcome, LogRow, Narrowest, SectionEnd, SectionMud,
    SectionRange,
};
pub use section_ensemble::{
    LayerShare, MudShare, PlanShare, SectionEnsemble, SectionEnsembleInputs, SectionEnsembleOutcome,
};
