//! Frames of reference and the turns between them.
//!
//! # Conventions
//!
//! - **Geographic**: x north, y east, z down, right-handed, *true* north. Azimuth clockwise from
//!   north seen from above. Plunge positive down. Strike by the right-hand rule: the plane dips to
//!   the right of its strike, dip direction = strike + 90°. Rake in a plane counts from the strike
//!   azimuth, up dip positive, as for the slip of a hanging wall.
//! - A **line** has no sign: either end is the same line, and a horizontal one has two equal trends.
//! - **Borehole** of inclination i (from vertical-down, 0–180°) and azimuth a: x = the top of the
//!   hole h = (cos i cos a, cos i sin a, −sin i); y = its right r = (−sin a, cos a, 0); z = along
//!   the hole, down, t = (sin i cos a, sin i sin a, cos i). Tool face θ clockwise from h looking
//!   down the hole: direction = cos θ h + sin θ r. At i = 0 the azimuth given stays the reference.
//! - **Wall** of a hole at tool face θ: radial = cos θ h + sin θ r, around = −sin θ h + cos θ r, along t.
//! - **Fault**: along strike s, down dip d, normal n = s × d pointing down into the footwall.
//! - **Local**: what the user states, a mine grid or two lines.
//! - A **turn** is a matrix Q whose rows are the new axes in the old frame: v' = Q v, S' = Q S Qᵀ.
//!
//! - **Norths**: declination D and grid convergence γ are the angles from true north to magnetic and
//!   to grid north, east positive: true azimuth = magnetic azimuth + D = grid azimuth + γ.
//!
//! Nothing here assumes a north: an azimuth from magnetic or grid north must be corrected before
//! it can be used, by a [`Site`] or by a stated angle.

mod attitude;
mod axes;
mod azimuth;
mod chain;
mod date;
mod datum;
mod declared_north;
mod declared_tie;
mod depth_conversion;
mod direction;
mod frame;
mod geometry;
mod hemisphere;
mod in_frame;
mod line;
mod local;
mod magnetic;
mod map_grid;
mod name;
pub(crate) mod net;
mod plane;
mod site;
mod turn;
pub(crate) mod vector;

pub(crate) use attitude::borehole_axes;
pub use attitude::{Attitude, NamedAttitude};
pub use axes::Axes;
pub(crate) use azimuth::three_figures;
pub use azimuth::{Azimuth, North};
pub(crate) use chain::bearing_item;
pub use chain::{CarriedBy, Chain, ChainInputs, Route};
pub use date::Date;
pub use datum::{Datum, DatumTie, Depth};
pub(crate) use declared_north::{DeclaredNorth, NORTH_KEYS};
pub(crate) use declared_tie::{LEVEL_KEYS, declared_tie};
pub use depth_conversion::{ConversionInputs, ConversionOutcome, DepthConversion, LevelSource};
pub(crate) use depth_conversion::{level_items, tvd_words};
pub(crate) use direction::chain_card;
pub use direction::{CarriedLine, Direction, DirectionInputs};
pub use frame::{Axis, Borehole, FaultAxes, Frame, Geographic, Local, Turned, WallAxes};
pub use geometry::{
    ApparentDip, ApparentDipInputs, BestRotation, BestRotationOutcome, DirectionPair, FittedAxes, FittedAxesOutcome,
    LineAtRake, LineAtRakeInputs, LineOutcome, MeasuredAxes, PlaneThroughLines, PlaneThroughLinesOutcome,
    PlanesIntersection, PlanesIntersectionOutcome, RakeOfLine, RakeOfLineInputs, RakeOfLineOutcome, TwoLines,
    TwoPlanes,
};
pub(crate) use geometry::{by_singular_values, nearest_orthonormal};
pub use hemisphere::{Drawn, HemisphereInputs, LowerHemisphere};
pub(crate) use in_frame::in_frame;
pub use line::Line;
pub use local::LocalAxes;
pub use magnetic::{Declination, DeclinationInputs, DeclinationOutcome, MagneticField};
pub use map_grid::{Convergence, ConvergenceInputs, ConvergenceOutcome, Ellipsoid, MapGrid, Projected};
pub use name::Name;
pub use plane::Plane;
pub use site::{Site, Stated};
pub(crate) use site::{correction_item, few_decimals};
pub use turn::Turn;
