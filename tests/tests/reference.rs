//! Checks against values worked out outside this project.

#[path = "reference/stress.rs"]
mod stress;
#[path = "reference/survey.rs"]
mod survey;
#[path = "reference/overburden.rs"]
mod overburden;
