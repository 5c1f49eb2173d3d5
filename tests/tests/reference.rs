//! Checks against values worked out outside this project.

#[path = "reference/stress.rs"]
mod stress;
