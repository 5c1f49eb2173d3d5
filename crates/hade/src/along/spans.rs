//! Rows of a table that stand for stretches of the hole, each from one measured depth to another.

use std::io::Read;

use crate::error::Result;
use crate::field::{DEPTHS, require_measured_depths};
use crate::lines::{Column, Row, Table, Unit, shown};
use crate::units::{Length, Quantity, with_typed_unit};

/// The columns `from` and `to`.
pub(super) struct SpanColumns {
    from: Column,
    to: Column,
    depth: Unit<Length>,
}

/// No hole is longer than this, metres; beyond it a unit was mistaken.
const LONGEST: f64 = 25_000.0;
/// Depths that must meet may differ by this, metres.
const MEET: f64 = 1e-6;

impl SpanColumns {
    pub fn of<R: Read>(table: &Table<R>) -> Result<Self> {
        let (from, to) = (table.column(&["from", "from_md"])?, table.column(&["to", "to_md"])?);
        let depth = table.declared().unit(&DEPTHS, None)?;
        require_measured_depths(table.declared())?;
        Ok(SpanColumns { from, to, depth })
    }

    /// The stretch of a row, which begins where the one before ends.
    pub fn span<R: Read>(&self, table: &Table<R>, row: &Row, above: Option<Length>) -> Result<[Length; 2]> {
        let (from, to) = (self.md(table, row, &self.from)?, self.md(table, row, &self.to)?);
        if from >= to {
            return Err(table.bad_in(
                &self.to,
                format!("the end {} is not below the beginning, {}", with_typed_unit(to), with_typed_unit(from)),
                "give its measured depth further down the hole",
            ));
        }
        let Some(above) = above else { return Ok([from, to]) };
        let (begin, end) = (with_typed_unit(from), with_typed_unit(above));
        match (from - above).si() {
            apart if apart < -MEET => Err(table.bad_in(
                &self.from,
                format!("the beginning {begin} lies above the end of the row before, {end}"),
                "sort the rows by depth, and let none overlap",
            )),
            apart if apart > MEET => Err(table.bad_in(
                &self.from,
                format!("between the end of the row before, {end}, and the beginning {begin} lies a gap"),
                "begin each row where the one before ends, or add the row between",
            )),
            _ => Ok([above, to]),
        }
    }

    fn md<R: Read>(&self, table: &Table<R>, row: &Row, column: &Column) -> Result<Length> {
        let md = (self.depth)(table.number(row, column)?);
        if (0.0..=LONGEST).contains(&md.si()) {
            return Ok(md);
        }
        Err(table.bad_in(
            column,
            format!("measured depth {} is not between 0 and {LONGEST} m", shown(table.text(row, column)?)),
            "count it along the hole from the rotary table",
        ))
    }
}
