//! Checks against values worked out outside this project.

#[path = "reference/axes.rs"]
mod axes;
#[path = "reference/depths.rs"]
mod depths;
#[path = "reference/eigen.rs"]
mod eigen;
#[path = "reference/faults.rs"]
mod faults;
#[path = "reference/norths.rs"]
mod norths;
#[path = "reference/overburden.rs"]
mod overburden;
#[path = "reference/strength.rs"]
mod strength;
#[path = "reference/strength_traps.rs"]
mod strength_traps;
#[path = "reference/stress.rs"]
mod stress;
#[path = "reference/survey.rs"]
mod survey;
#[path = "reference/tensor_measures.rs"]
mod tensor_measures;
#[path = "reference/tensor_traps.rs"]
mod tensor_traps;
#[path = "reference/turns.rs"]
mod turns;
#[path = "reference/two_layers.rs"]
mod two_layers;
#[path = "reference/wall.rs"]
mod wall;
#[path = "reference/wall_depth.rs"]
mod wall_depth;
#[path = "reference/wall_field.rs"]
mod wall_field;
#[path = "reference/wall_map.rs"]
mod wall_map;
#[path = "reference/wall_traps.rs"]
mod wall_traps;
