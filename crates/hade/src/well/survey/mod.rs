//! Where a hole is: stations joined by circular arcs (minimum curvature), the position and attitude
//! at any depth between them.
//!
//! Measured depth counts along the hole from the rotary table, true vertical depth straight down
//! from it. Nothing is extrapolated above the first station or below the last, and no north, unit
//! or datum is assumed.
//!
//! It does not correct for sag, magnetic interference or pipe stretch, nor does it carry the
//! uncertainty of the tool.

mod arc;
mod overview;
mod position;
mod position_card;
mod position_check;
mod read;
mod read_header;
mod station;
#[allow(clippy::module_inception)]
mod survey;
mod table;

pub(crate) use position::Place;
pub use position::{Asked, Position, PositionInputs, PositionOutcome};
pub(crate) use position_card::stated_items;
pub use station::{Station, TieIn};
pub use survey::{Survey, SurveySource};
pub use table::{StationPosition, SurveyTable, SurveyTableInputs, TablePlace};
