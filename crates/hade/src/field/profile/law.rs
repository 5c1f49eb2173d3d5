//! The law a pressure follows with depth: straight lines between the points of a table, or one
//! gradient from a level down.

use serde::{Deserialize, Serialize};

use super::points::{AgainstDepth, DEEPEST, Points};
use crate::error::{Error, Result};
use crate::frames::{Datum, DatumTie, Depth};
use crate::units::{Density, Gradient, Length, Pressure, require_between, require_not_negative, with_typed_unit};

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "law", rename_all = "snake_case")]
pub(super) enum Law {
    /// Straight lines between points.
    Table(Points<Pressure>),
    /// A gradient from a level down.
    Gradient {
        /// Where it begins.
        from: Depth,
        /// The pressure there.
        start: Start,
        gradient: Gradient,
    },
}

/// The pressure where a gradient begins.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "start", rename_all = "snake_case")]
pub(super) enum Start {
    /// As it was stated.
    Stated { pressure: Pressure },
    /// The weight of the sea on the mudline.
    Sea { density: Density },
}

/// Sea water and brine are neither lighter nor heavier than this, kg/m³.
const WATER: [f64; 2] = [990.0, 1300.0];

impl Law {
    /// A gradient from a level down.
    pub fn gradient(from: Depth, start: Start, gradient: Gradient) -> Result<Self> {
        require_between("the depth where the gradient begins", from.tvd, Length::m(-DEEPEST), Length::m(DEEPEST))?;
        require_not_negative("the gradient", gradient)?;
        match start {
            Start::Stated { pressure } => {
                let [least, greatest] = Pressure::possible();
                require_between("the pressure where the gradient begins", pressure, least, greatest)?;
            }
            Start::Sea { density } => {
                let [light, heavy] = WATER.map(Density::kg_m3);
                require_between("the density of the sea water", density, light, heavy)?;
            }
        }
        Ok(Law::Gradient { from, start, gradient })
    }

    /// The same law, held against what a table or gradient may be.
    pub fn checked(&self) -> Result<()> {
        match self {
            Law::Table(table) => Points::new(table.datum, table.points.clone()).map(|_| ()),
            Law::Gradient { from, start, gradient } => Law::gradient(*from, *start, *gradient).map(|_| ()),
        }
    }

    /// The level its depths count from.
    pub fn datum(&self) -> Datum {
        match self {
            Law::Table(table) => table.datum,
            Law::Gradient { from, .. } => from.below,
        }
    }

    /// The law as the card of one depth holds it.
    pub fn near(&self, depth: Length, whole: bool) -> Self {
        match self {
            Law::Table(table) if !whole => Law::Table(table.near(depth)),
            other => other.clone(),
        }
    }

    /// The law as a record of many depths holds it: of a table the points next to each depth.
    pub fn about(&self, depths: &[f64]) -> Self {
        match self {
            Law::Table(table) => Law::Table(table.about(depths)),
            other => other.clone(),
        }
    }

    /// The pressure where a gradient begins.
    pub fn start_pressure(start: Start, tie: Option<DatumTie>) -> Result<Pressure> {
        match start {
            Start::Stated { pressure } => Ok(pressure),
            Start::Sea { density } => {
                let tie = tie.ok_or_else(|| {
                    Error::undeclared(
                        "This gradient begins under the weight of the sea, and nothing says how deep the sea is",
                        "add .tied(DatumTie::rotary_table_at(…)?.with_mudline_at(…)?)?.",
                    )
                })?;
                Ok(density.column(-tie.elevation(Datum::Mudline)?))
            }
        }
    }

    /// The pressure at a depth below its datum.
    pub fn pressure(&self, depth: Length, tie: Option<DatumTie>) -> Result<Pressure> {
        match self {
            Law::Table(table) => table.at(depth),
            Law::Gradient { from, start, gradient } => {
                if depth < from.tvd {
                    return Err(Error::out_of_range(
                        "the depth asked for",
                        Depth { tvd: depth, below: from.below }.words(),
                        format!(
                            "at or below {}, where the gradient begins (nothing is extrapolated)",
                            with_typed_unit(from.tvd)
                        ),
                    ));
                }
                Ok(Law::start_pressure(*start, tie)? + *gradient * (depth - from.tvd))
            }
        }
    }
}
