//! Checks against published values, each with its citation.

#[path = "published/stress.rs"]
mod stress;
