//! The nearest orthonormal set to three measured axes, from the geometry of lines.

pub(super) use crate::frames::{by_singular_values, nearest_orthonormal};
