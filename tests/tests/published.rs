//! Checks against published values, each with its citation.

#[path = "published/faults.rs"]
mod faults;
#[path = "published/norths.rs"]
mod norths;
#[path = "published/overburden.rs"]
mod overburden;
#[path = "published/planes.rs"]
mod planes;
#[path = "published/strength.rs"]
mod strength;
#[path = "published/stress.rs"]
mod stress;
#[path = "published/survey.rs"]
mod survey;
#[path = "published/wall.rs"]
mod wall;
#[path = "published/wall_field.rs"]
mod wall_field;
