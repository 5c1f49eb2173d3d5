//! What a profile says about itself besides its numbers: its name, its file, and the levels that its depths
//! count from.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
use crate::frames::{Datum, DatumTie, Depth, Name};
use crate::units::{Length, Quantity};

/// What a profile says about itself besides its numbers.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct ProfileAbout {
    /// The symbol of the pressure ("S_hmin").
    pub symbol: String,
    /// What the pressure is.
    pub meaning: String,
    pub hole: Option<Name>,
    pub source: ProfileSource,
    /// The levels of the profile's own hole.
    pub tie: Option<DatumTie>,
    pub tie_in_file: bool,
    /// The levels of the hole that depths are asked in, when it is another one.
    pub other_hole: Option<DatumTie>,
    /// Whether a gradient was handed to the sheet as one given.
    pub one_given: bool,
}

/// Where the numbers of a profile came from.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "from", rename_all = "snake_case")]
pub(super) enum ProfileSource {
    Typed,
    File { path: String, sha256: String, column: String },
}

impl ProfileAbout {
    /// Of a profile that was typed, under a symbol and what it means.
    pub fn typed(symbol: &str, meaning: &str) -> Self {
        ProfileAbout {
            symbol: symbol.to_owned(),
            meaning: meaning.to_owned(),
            hole: None,
            source: ProfileSource::Typed,
            tie: None,
            tie_in_file: false,
            other_hole: None,
            one_given: false,
        }
    }

    /// The same, asked for depths of a hole with these levels: a profile that states levels of its own, of
    /// another hole, is carried over at equal elevation; one that states none is of this hole.
    pub fn in_hole(self, levels: Option<DatumTie>) -> Self {
        match (levels, self.tie) {
            (Some(levels), Some(own)) if own != levels => ProfileAbout { other_hole: Some(levels), ..self },
            (Some(levels), None) => ProfileAbout { tie: Some(levels), tie_in_file: false, ..self },
            _ => self,
        }
    }

    /// With the levels of its hole; refused where its file states others.
    pub fn tied(self, tie: DatumTie) -> Result<Self> {
        match self.tie {
            Some(stated) if stated == tie => Ok(self),
            Some(stated) if self.tie_in_file => Err(Error::not_physical(
                format!("The levels of the table's hole ({})", tie.words()),
                format!("its file states others: {}; correct one of the two.", stated.words()),
            )),
            _ => Ok(ProfileAbout { tie: Some(tie), tie_in_file: false, ..self }),
        }
    }

    /// What is added to a depth below the rotary table of the hole asked in to make it one below a datum of
    /// the profile.
    pub fn shift(&self, datum: Datum) -> Result<f64> {
        self.in_datum(Depth::below_rotary_table(Length::default()), datum).map(Quantity::si)
    }

    /// The levels of the hole that depths are asked in.
    pub fn hole_tie(&self) -> Option<DatumTie> {
        self.other_hole.or(self.tie)
    }

    /// A depth of the hole asked in, below the datum of the profile.
    pub fn in_datum(&self, depth: Depth, datum: Datum) -> Result<Length> {
        let untied = |from: Datum, to: Datum| {
            Error::undeclared(
                format!(
                    "Depths below {} and depths below {} are not tied together for this {}",
                    from.words(),
                    to.words(),
                    self.meaning
                ),
                "state the levels of the hole with .tied(DatumTie::rotary_table_at(…)?.with_ground_at(…)?)?, or .with_mudline_at(…)? at sea.",
            )
        };
        depth.tvd.finite("depth")?;
        match (self.other_hole, self.tie) {
            (None, _) if depth.below == datum => Ok(depth.tvd),
            (None, Some(tie)) => Ok(tie.convert(depth, datum)?.tvd),
            (None, None) => Err(untied(depth.below, datum)),
            (Some(hole), own) => {
                let sea = hole.convert(depth, Datum::MeanSeaLevel)?;
                match own {
                    Some(own) => Ok(own.convert(sea, datum)?.tvd),
                    None if datum == Datum::MeanSeaLevel => Ok(sea.tvd),
                    None => Err(untied(Datum::MeanSeaLevel, datum)),
                }
            }
        }
    }

    /// A depth of the hole asked in, below its rotary table, where that is known.
    pub fn below_rotary(&self, depth: Depth) -> Option<Length> {
        match self.hole_tie() {
            Some(tie) => tie.convert(depth, Datum::RotaryTable).ok().map(|d| d.tvd),
            None => (depth.below == Datum::RotaryTable).then_some(depth.tvd),
        }
    }
}
