//! The one error of the crate. A notebook shows only the `Display` text, so each message is one
//! complete sentence: what was wrong, what was given, what is allowed, what to do.

use std::fmt;

/// What the crate returns when an input cannot be used or an answer does not exist.
pub type Result<T> = std::result::Result<T, Error>;

/// Everything that can go wrong, in few shapes.
#[derive(Debug, Clone, PartialEq, Eq)]
#[non_exhaustive]
pub enum Error {
    /// A number outside what its quantity allows (also NaN and infinity).
    OutOfRange {
        /// The quantity, in the user's words ("Poisson's ratio", "inclination").
        what: String,
        /// What was given, with unit.
        got: String,
        /// What is allowed, with unit.
        allowed: String,
    },
    /// Two values that speak of different holes, depths or faults were brought together.
    FrameMismatch {
        /// What was being done ("adding two stresses").
        doing: String,
        /// The axes of the first value.
        left: String,
        /// The axes of the second value.
        right: String,
    },
    /// Numbers that are each in range but cannot be true together.
    NotPhysical {
        /// What was being made.
        what: String,
        /// Why it cannot be, and what to do.
        why: String,
    },
    /// A reference that nothing may assume is missing: a north, a datum, a unit, a sign.
    Undeclared {
        /// What lacks it.
        what: String,
        /// What to write.
        fix: String,
    },
    /// A search ended without an answer.
    NoSolution {
        /// What was looked for.
        what: String,
        /// Where it was looked for.
        tried: String,
    },
    /// A file, or a record, that cannot be read.
    Unreadable {
        /// The path, or the record's place.
        path: String,
        /// The line, where there is one (1-based).
        line: Option<usize>,
        /// The column's name, where there is one.
        column: Option<String>,
        /// What was found.
        why: String,
        /// What to change.
        fix: String,
    },
}

impl fmt::Display for Error {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Error::OutOfRange { what, got, allowed } => {
                write!(f, "{what} is {got}, but it must be {allowed}.")
            }
            Error::FrameMismatch { doing, left, right } => {
                write!(f, "{doing}: the first is in {left}, the second in {right}; carry both into one frame first.")
            }
            Error::NotPhysical { what, why } => write!(f, "{what}: {why}"),
            Error::Undeclared { what, fix } => write!(f, "{what}: {fix}"),
            Error::NoSolution { what, tried } => write!(f, "No {what} was found {tried}."),
            Error::Unreadable { path, line, column, why, fix } => {
                write!(f, "{path}")?;
                if let Some(line) = line {
                    write!(f, ", line {line}")?;
                }
                if let Some(column) = column {
                    write!(f, ", column \"{column}\"")?;
                }
                write!(f, ": {why}; {fix}.")
            }
        }
    }
}

impl std::error::Error for Error {}

impl Error {
    /// A quantity outside its range.
    pub fn out_of_range(what: impl Into<String>, got: impl Into<String>, allowed: impl Into<String>) -> Self {
        Error::OutOfRange { what: what.into(), got: got.into(), allowed: allowed.into() }
    }

    /// Numbers that cannot be true together.
    pub fn not_physical(what: impl Into<String>, why: impl Into<String>) -> Self {
        Error::NotPhysical { what: what.into(), why: why.into() }
    }

    /// A missing north, datum, unit or sign.
    pub fn undeclared(what: impl Into<String>, fix: impl Into<String>) -> Self {
        Error::Undeclared { what: what.into(), fix: fix.into() }
    }

    /// Whether a number was outside its range.
    pub fn is_range(&self) -> bool {
        matches!(self, Error::OutOfRange { .. })
    }
}
