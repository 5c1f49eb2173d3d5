//! Faults: what friction on them allows.

mod friction;

pub use friction::{FrictionInputs, FrictionLimit, FrictionOutcome, frictional_ratio};
