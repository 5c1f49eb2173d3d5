//! A limit of the wall for holes in every direction, as a map over the lower hemisphere.

mod card;
mod check;
mod csv;
#[allow(clippy::module_inception)]
mod direction_map;
mod extremes;
mod figure;
mod grid;
mod map_of;
mod path;
mod tests;

pub use direction_map::{DirectionMap, DirectionMapInputs, MapInputs, MapOutcome, MappedDirection};
pub use map_of::MapOf;
