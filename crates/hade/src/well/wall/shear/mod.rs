//! Shear failure of a wall as plain numbers: by how much the strength is exceeded, the pressures between
//! which the whole wall holds, and the arcs that fail outside them.

mod arcs;
mod closed_form;
mod ends;
mod everywhere;
mod excess;
mod mode;
mod root;
mod search;
mod shear_wall;
mod slip;
mod spans;
mod width;

pub(crate) use arcs::{Arcs, MOST_ARCS, arcs_between};
pub(crate) use closed_form::ClosedForm;
pub(crate) use mode::mode_of;
pub use mode::{Mode, WallDirection};
pub(crate) use shear_wall::{LeastBad, ShearWall, Window};
pub(crate) use slip::PlaneAtWall;
pub(crate) use width::AtWidth;
