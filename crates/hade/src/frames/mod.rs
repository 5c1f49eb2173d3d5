//! Frames of reference and the turns between them.
//!
//! # Conventions
//!
//! - **Geographic**: x north, y east, z down, right-handed, *true* north. Azimuth clockwise from
//!   north seen from above. Plunge positive down. Strike by the right-hand rule: the plane dips to
//!   the right of its strike, dip direction = strike + 90°.
//! - **Borehole** of inclination i (from vertical-down, 0–180°) and azimuth a: x = the top of the
//!   hole h = (cos i cos a, cos i sin a, −sin i); y = its right r = (−sin a, cos a, 0); z = along
//!   the hole, down, t = (sin i cos a, sin i sin a, cos i). Tool face θ clockwise from h looking
//!   down the hole: direction = cos θ h + sin θ r. At i = 0 the azimuth given stays the reference.
//! - A **turn** is a matrix Q whose rows are the new axes in the old frame: v' = Q v, S' = Q S Qᵀ.
//!
//! Nothing here assumes a north: an azimuth from magnetic or grid north must be corrected before
//! it can be used.

mod attitude;
mod axes;
mod azimuth;
mod chain;
mod datum;
mod line;
mod name;
#[allow(dead_code)] // Cards draw with it as they come.
pub(crate) mod net;
mod plane;
pub(crate) mod vector;

pub use attitude::{Attitude, NamedAttitude};
pub use axes::{Axis, Borehole, FaultAxes, Frame, Geographic, Local, WallAxes};
pub(crate) use azimuth::three_figures;
pub use azimuth::{Azimuth, North};
pub use chain::{Chain, ChainInputs, Turn};
pub(crate) use chain::{bearing_item, frame_words};
pub use datum::{Datum, DatumTie, Depth};
pub use line::Line;
pub use name::Name;
pub use plane::Plane;
