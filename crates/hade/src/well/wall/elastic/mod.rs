//! Elastic stress at the wall of a round hole and behind it, as plain numbers in Pa and radians.

mod effective;
mod field;
mod in_hole;
mod kirsch;

pub(crate) use effective::{EffectiveWall, Place};
pub(crate) use field::{AtPlace, ElasticField};
pub(crate) use in_hole::in_hole;
pub(crate) use kirsch::{AtWall, Kirsch};
