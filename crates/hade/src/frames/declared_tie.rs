//! The levels of a hole as a file declares them above its table.

use super::DatumTie;
use crate::error::{Error, Result};
use crate::lines::{Declarations, reason};

/// The keys that declare a level.
pub(crate) const LEVEL_KEYS: [&str; 3] = ["rotary_table_above_msl", "ground_above_msl", "mudline_above_msl"];

/// The levels that a file states; none when it has none of the three keys.
pub(crate) fn declared_tie(declared: &Declarations) -> Result<Option<DatumTie>> {
    let place = |key: &str, e: Error| declared.bad(key, reason(&e), "correct the elevation");
    let ground = declared.length("ground_above_msl")?;
    let mudline = declared.length("mudline_above_msl")?;
    let Some(rotary) = declared.length("rotary_table_above_msl")? else {
        return match (ground, mudline) {
            (None, None) => Ok(None),
            _ => Err(declared.bad_together(
                "the file states the level of the ground or mudline and not of the rotary table",
                "add a line \"# rotary_table_above_msl: … m\" above the column names",
            )),
        };
    };
    let mut tie = DatumTie::rotary_table_at(rotary).map_err(|e| place("rotary_table_above_msl", e))?;
    if let Some(ground) = ground {
        tie = tie.with_ground_at(ground).map_err(|e| place("ground_above_msl", e))?;
    }
    if let Some(mudline) = mudline {
        tie = tie.with_mudline_at(mudline).map_err(|e| place("mudline_above_msl", e))?;
    }
    Ok(Some(tie))
}
