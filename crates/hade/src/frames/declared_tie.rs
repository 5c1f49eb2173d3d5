//! The levels of a hole as a file declares them above its table.

use std::io::Read;

use super::DatumTie;
use crate::error::{Error, Result};
use crate::lines::{Declarations, Lines};

/// The levels that `rotary_table_above_msl`, `ground_above_msl` and `mudline_above_msl` state; none
/// when the file has none of the three. `lines` stands at the column names.
pub(crate) fn declared_tie<R: Read>(declared: &Declarations, lines: &Lines<R>) -> Result<Option<DatumTie>> {
    let place = |key: &str, e: Error| {
        lines.bad_at(
            declared.get(key).map(|(line, _)| line),
            Some(key),
            e.to_string().trim_end_matches('.'),
            "correct the elevation",
        )
    };
    let ground = declared.length(lines, "ground_above_msl")?;
    let mudline = declared.length(lines, "mudline_above_msl")?;
    let Some(rotary) = declared.length(lines, "rotary_table_above_msl")? else {
        return match (ground, mudline) {
            (None, None) => Ok(None),
            _ => Err(lines.bad(
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
