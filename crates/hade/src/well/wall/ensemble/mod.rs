//! The limits of a wall whose numbers are uncertain: many walls, each with numbers drawn anew.

mod card;
mod check;
mod drawn;
mod effects;
mod ends;
#[allow(clippy::module_inception)]
mod ensemble;
mod figures;
mod first_order;
mod numbers;
mod outcome;
mod stand;
mod tables;
mod tests;
mod whole;

pub use drawn::Drawn;
pub use effects::Effect;
pub use ensemble::{Ensemble, EnsembleInputs};
pub use first_order::FirstOrder;
pub use outcome::EnsembleOutcome;
