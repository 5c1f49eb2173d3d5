//! Map grids on a transverse Mercator projection (UTM and most national grids), and from them the
//! grid convergence: the angle from true north to grid north, east positive.
//!
//! It does not shift latitudes and longitudes from one geodetic datum to another: they must be on the
//! grid's own. Other projections (Lambert, oblique Mercator, polar grids) and mine grids that were
//! turned have no formula here; state their convergence with
//! [`Site::with_convergence`](super::Site::with_convergence).

mod complex_latitude;
mod convergence;
mod convergence_card;
mod grid;
mod transverse_mercator;

pub use convergence::{Convergence, ConvergenceInputs, ConvergenceOutcome};
pub use grid::{Ellipsoid, MapGrid};
pub use transverse_mercator::Projected;
