//! hade-kernel
