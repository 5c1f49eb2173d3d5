//! Stress in rock: from where it was measured to where it acts, whether the rock fails there, and
//! results that explain themselves. Conventions: compression positive; north, east, down; see
//! [`frames`].

pub mod along;
pub mod card;
pub mod error;
pub mod faults;
pub mod field;
pub mod frames;
pub mod interrupt;
mod lanes;
mod lines;
pub mod prelude;
pub mod progress;
pub mod replay;
pub mod rock;
#[cfg(any(test, feature = "samples"))]
#[doc(hidden)]
pub mod samples;
pub mod sheet;
pub mod show;
pub mod spread;
pub mod stress;
pub mod units;
pub mod well;
