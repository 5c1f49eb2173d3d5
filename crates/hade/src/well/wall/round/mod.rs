//! Functions round a hole, as plain numbers: waves, greatest values, and the edges of where they are
//! positive. Nothing here knows of stress.

mod between;
mod circle;
mod edges;
mod summit;
mod wave;

pub(crate) use between::{highest_between, root_between};
pub(crate) use circle::{
    Below, CIRCLE, Circle, OnCircle, Peak, SAME, SAMPLES, STEP, Top, greatest, greatest_beside, on_circle, smallest,
};
pub(crate) use edges::{Edges, edges};
pub(crate) use summit::{Summit, Touch, climbed, highest};
pub(crate) use wave::Wave;
