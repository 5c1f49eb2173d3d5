//! Field data: what an instrument measured, and what is computed from it alone.
//!
//! Files are read strictly, line by line, in bounded memory. Nothing is guessed: an unknown unit, an
//! undeclared datum, a gap or a missing top of the column is an error that says what to state.
//!
//! It does not correct logs for the hole's condition, nor match depths between logs.

mod column;
mod declared;
mod density_log;
mod las;
mod las_header;
mod overburden;
mod overburden_card;
mod overview;
mod profile;
mod reduce;

pub use column::DensityColumn;
pub(crate) use declared::{DEPTHS, MUD_WEIGHTS, PRESSURES, declared_datum, require_measured_depths};
pub use density_log::{DensityLog, Gap, LogSource};
pub use overburden::{Layer, Overburden, OverburdenInputs, OverburdenOutcome, OverburdenRecord, Top};
pub(crate) use profile::{InHole, ProfileRecord, TemperatureInHole, TemperatureRecord};
pub use profile::{
    PressureAtDepth, PressureAtDepthInputs, PressureAtDepthOutcome, PressureProfile, TemperatureProfile,
};
