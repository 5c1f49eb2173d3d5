//! Stress, pore pressure and rock by depth, in layers.
//!
//! Vertical stress and pore pressure are profiles. The horizontal stresses are profiles too, or each
//! layer states its ratios of effective stress K = (S_h − P_p) / (S_v − P_p). Between two points of a
//! table within one layer K runs straight, not the total stress; from the points nearest to a contact
//! it is held to the contact. Where the pore pressure has been drawn down, a stated path says what
//! that took from the horizontal stresses. Temperatures by depth warm or cool the wall.

mod at_place;
mod depletion;
mod doubts;
#[allow(clippy::module_inception)]
mod ground;
mod in_hole;
mod layer;
mod layer_intervals;
mod layer_items;
mod method;
mod overview;
mod read;
mod record;
mod second_route;
mod state;
mod state_card;
mod temperatures;
mod worked;

pub(crate) use at_place::AtPlace;
pub use depletion::{Depletion, MaxPath, MinPath};
pub(crate) use doubts::doubts_of_path;
pub use ground::{Ground, GroundInputs, HorizontalProfiles};
pub(crate) use in_hole::GroundInHole;
pub use layer::{Layer, TopPlane};
pub use layer_intervals::LayerIntervals;
pub use record::GroundRecord;
pub use state::{GroundState, GroundStateInputs, GroundStateOutcome};
