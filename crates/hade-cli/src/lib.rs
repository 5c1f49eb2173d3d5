//! hade-cli
