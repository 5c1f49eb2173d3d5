//! The other ways by which the checks go, from the geographic tensor and the hole's axis vectors; nothing
//! of what they check is used.

mod by_potentials;
mod by_vectors;
mod toolface;

pub(crate) use by_potentials::{ByPotentials, along_ray};
pub(crate) use by_vectors::ByVectors;
pub(crate) use toolface::{bearing_check, outside};
