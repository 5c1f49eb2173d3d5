//! Rock as a wall needs it: elastic constant, tensile strength and shear strength. Strength is
//! judged on effective stress only ([`EffectiveStress`](crate::stress::EffectiveStress)), and each
//! criterion stands in a file of its own, with its constants, its domain and what happens outside.
//!
//! It does not hold: creep, or strength that changes with time or water. Elastic limits
//! of a wall in salt or another creeping rock are not valid.

mod account;
mod at_failure;
mod constants;
mod criterion;
mod doubts;
mod drucker_prager;
mod eigenvalues;
mod envelope;
mod hoek_brown;
mod law;
mod margin;
mod modified_lade;
mod mogi_coulomb;
mod mohr_coulomb;
mod number;
#[allow(clippy::module_inception)]
mod rock;
mod rock_mass;
mod rock_mass_check;
mod second_route;
mod strength;
mod strength_figure;
mod weak_rock;
mod weak_rock_check;

pub use constants::StrengthConstants;
pub(crate) use criterion::{Criterion, Order};
pub use envelope::{EnvelopeOutcome, FailureEnvelope};
pub use hoek_brown::HoekBrown;
pub(crate) use law::{Law, with_law};
pub use margin::{MarginInputs, MarginOutcome, StrengthMargin};
pub(crate) use mohr_coulomb::MohrCoulomb;
pub(crate) use number::{Jet, Number};
pub use rock::Rock;
pub use rock_mass::{RockMass, RockMassInputs, RockMassOutcome};
pub use strength::Strength;
pub(crate) use strength::StrengthNumber;
pub use weak_rock::{PlaneStrength, WeakRock, WeakRockInputs, WeakRockMode, WeakRockOutcome};
