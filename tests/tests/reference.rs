//! Checks against values worked out outside this project.

#[path = "reference/faults.rs"]
mod faults;
#[path = "reference/overburden.rs"]
mod overburden;
#[path = "reference/stress.rs"]
mod stress;
#[path = "reference/survey.rs"]
mod survey;
#[path = "reference/wall.rs"]
mod wall;
#[path = "reference/wall_traps.rs"]
mod wall_traps;
