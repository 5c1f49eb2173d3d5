//! The Earth's magnetic field at a place and date, and from it the declination: the angle from true
//! north to magnetic north, east positive.
//!
//! Main-field models in spherical harmonics: WMM2025 from 2025.0 to 2030.0, IGRF-14 from 1900.0 to
//! 2025.0 (coefficients and their terms: `SOURCES.md` beside this file).
//!
//! It does not know the field of the crust (mineralised rock, lava, pipelines, casing), nor what the
//! sun does on the day (magnetic storms), nor the instrument. Where a survey company measured the
//! declination at the site, or had it modelled with the crust, its value is better:
//! [`Site::with_declination`](super::Site::with_declination).

mod declination;
mod declination_card;
mod harmonics;
mod models;
mod potential;

pub use declination::{Declination, DeclinationInputs, DeclinationOutcome, MagneticField};
