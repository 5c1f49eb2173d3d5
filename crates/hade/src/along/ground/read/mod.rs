//! Reading layers from CSV, strictly and line by line: by their tops, or by intervals of measured depth.

mod intervals;
mod layers;
mod rock_columns;

pub(super) use intervals::read_intervals;
pub(super) use layers::read_layers;
