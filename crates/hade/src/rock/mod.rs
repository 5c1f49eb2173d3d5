//! Rock as a wall needs it: elastic constant, tensile strength and shear strength. Strength is
//! judged on effective stress only ([`EffectiveStress`](crate::stress::EffectiveStress)), and each
//! criterion stands in a file of its own.
//!
//! It does not hold: anisotropy, creep, or strength that changes with time or water. Elastic limits
//! of a wall in salt or another creeping rock are not valid.

mod criterion;
mod drucker_prager;
mod hoek_brown;
mod law;
mod modified_lade;
mod mogi_coulomb;
mod mohr_coulomb;
mod number;
#[allow(clippy::module_inception)]
mod rock;
mod strength;

pub(crate) use criterion::{Criterion, Order};
pub(crate) use law::{Law, with_law};
pub(crate) use mohr_coulomb::MohrCoulomb;
pub(crate) use number::{Jet, Number};
pub use rock::Rock;
pub use strength::{HoekBrown, Strength};
