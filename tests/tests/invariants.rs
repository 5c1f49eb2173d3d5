//! What must hold for every input, on random ones: many in a release build, fewer otherwise.

#[path = "invariants/azimuths.rs"]
mod azimuths;
#[path = "invariants/datums.rs"]
mod datums;
#[path = "invariants/strengths.rs"]
mod strengths;
#[path = "invariants/turns.rs"]
mod turns;

/// How many random inputs each property is tried on.
const CASES: u32 = if cfg!(debug_assertions) { 2_000 } else { 100_000 };
