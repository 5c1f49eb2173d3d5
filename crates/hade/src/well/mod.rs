//! The hole: where it is, the stress at its wall, where the wall fails, and the pressures between which it
//! stands.

mod mud;
mod survey;
mod wall;

pub use mud::{MudColumn, MudPressure};
pub use survey::{
    Asked, Position, PositionInputs, PositionOutcome, Station, StationPosition, Survey, SurveySource, SurveyTable,
    SurveyTableInputs, TablePlace, TieIn,
};
pub(crate) use survey::{Place, stated_items};
pub use wall::*;
