//! Elastic stress at the wall of a round hole and behind it, as plain numbers in Pa and radians.

mod effective;
mod field;
mod kirsch;

pub(crate) use effective::{EffectiveWall, Place};
pub(crate) use field::{AtPlace, ElasticField};
pub(crate) use kirsch::{AtWall, Kirsch};
