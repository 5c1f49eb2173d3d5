//! What happened while the hole was drilled, held against a log of its limits.

mod card;
mod check;
mod event;
mod hindcast;
mod overview;
mod read;

pub use event::{DrillingEvent, DrillingEvents, EventKind};
pub use hindcast::{Hindcast, HindcastInputs, HindcastOutcome, HindcastRow};
