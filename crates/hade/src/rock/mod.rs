//! Rock as a wall needs it: elastic constant, tensile strength and shear strength. Strength is
//! judged on effective stress only ([`EffectiveStress`](crate::stress::EffectiveStress)), and each
//! criterion stands in a file of its own.
//!
//! It does not hold: anisotropy, creep, or strength that changes with time or water. Elastic limits
//! of a wall in salt or another creeping rock are not valid.

mod mohr_coulomb;
#[allow(clippy::module_inception)]
mod rock;
mod strength;

pub(crate) use mohr_coulomb::MohrCoulomb;
pub use rock::Rock;
pub use strength::Strength;
