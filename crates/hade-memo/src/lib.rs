//! hade-memo
