//! What an image of the wall should show: the wall unrolled, with what fails, what parts and the trace of
//! a plane.

mod figure;
mod image;
mod trace;

pub use image::{ImageInputs, ImageOutcome, PlaneTrace, WallImage};
