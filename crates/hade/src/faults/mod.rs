//! Faults: what friction on them allows, which of them slip or open, and how far each is from it.
//!
//! Effective normal stress is total normal stress less pore pressure. The strength of a fault is
//! friction and cohesion, both stated. Rake is the direction in which the hanging wall slips, in
//! the plane from strike, up dip positive: −90° for a normal fault, 90° for a reverse one.
//!
//! It does not know what slip does afterwards: no stress drop, no change of the stress around, no
//! flow of water, no time.

mod bounds;
mod critical;
mod critical_card;
mod figure;
mod friction;
mod names;
mod overview;
mod ranked;
mod ranked_card;
mod read;
mod set;
mod slip;
mod slip_card;
mod slip_check;
mod strength;
#[cfg(test)]
mod tests;

pub use bounds::{BoundsInputs, BoundsOutcome, FrictionalBounds};
pub use critical::{CriticalInputs, CriticalOutcome, CriticalPlanes};
pub use friction::{FrictionInputs, FrictionLimit, FrictionOutcome, frictional_ratio};
pub use ranked::{RankedFault, RankedFaults, RankedInputs};
pub use set::{Fault, FaultSet, FaultSource};
pub use slip::{FaultSlip, FaultSlipInputs, FaultState, SlipOutcome};
pub use strength::FaultStrength;
