//! Tension at the wall: the pressure at which it parts, and its tensile cracks at a pressure.

mod card;
mod check;
mod cracks;
mod parting;
mod tensile_cracks;

pub(crate) use card::{crack_method, place_items, worked_tilt};
pub(crate) use parting::{Parting, at_place, parting};
pub use tensile_cracks::{CrackArc, CrackPlace, CracksOutcome, TensileCracks};
