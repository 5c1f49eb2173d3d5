//! How deep the rock round a hole fails at first.

mod check;
mod depth;
#[allow(clippy::module_inception)]
mod failure_depth;
mod figure;

pub use failure_depth::{DeepestFailure, DepthOutcome, FailureDepth};
