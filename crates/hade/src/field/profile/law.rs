//! The law a pressure follows with depth: straight lines between the points of a table, or one
//! gradient from a level down.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
use crate::frames::{Datum, DatumTie, Depth};
use crate::units::{
    Density, Gradient, Length, Pressure, Quantity, require_between, require_not_negative, with_typed_unit,
};

/// A point of a table: true vertical depth below its datum, and the pressure there.
pub(super) type Point = (Length, Pressure);

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "law", rename_all = "snake_case")]
pub(super) enum Law {
    /// Straight lines between points.
    Table {
        datum: Datum,
        /// The points, rising; of a long file only those around the depth asked for.
        points: Vec<Point>,
        /// How many points the whole table has.
        count: u64,
        /// The ends of the whole table.
        ends: [Length; 2],
    },
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

/// No table reaches deeper than this, metres; beyond it a unit was mistaken.
const DEEPEST: f64 = 20_000.0;
/// No pressure in the crust is greater than this, pascals; beyond it a unit was mistaken.
const GREATEST: f64 = 2.0e9;
/// Points of a table that lie closer than this, metres, are one.
const CLOSEST: f64 = 1e-3;
/// A file's card holds no more points than this on either side of the depth asked for.
const NEIGHBOURS: usize = 100;
/// Sea water and brine are neither lighter nor heavier than this, kg/m³.
const WATER: [f64; 2] = [990.0, 1300.0];

/// A depth and a pressure that can be a point of a table, below the one above it.
pub(super) fn require_point(above: Option<Length>, (depth, pressure): Point) -> Result<Point> {
    require_between("depth of the table", depth, Length::m(-DEEPEST), Length::m(DEEPEST))?;
    require_between("pressure of the table", pressure, Pressure::pa(-GREATEST), Pressure::pa(GREATEST))?;
    match above {
        Some(above) if (depth - above).abs().si() < CLOSEST => Err(Error::not_physical(
            format!("Depth {}", with_typed_unit(depth)),
            "it stands twice in the table (or less than 1 mm below the one before); keep one pressure for each depth.",
        )),
        Some(above) if depth < above => Err(Error::not_physical(
            format!("Depth {}", with_typed_unit(depth)),
            format!("it comes after {} in the table; sort the table by depth.", with_typed_unit(above)),
        )),
        _ => Ok((depth, pressure)),
    }
}

impl Law {
    /// A table from points in order of depth.
    pub fn table(datum: Datum, points: Vec<Point>) -> Result<Self> {
        let mut above = None;
        for point in &points {
            above = Some(require_point(above, *point)?.0);
        }
        match (points.first(), points.last()) {
            (Some(first), Some(last)) if points.len() >= 2 => {
                let (count, ends) = (points.len() as u64, [first.0, last.0]);
                Ok(Law::Table { datum, points, count, ends })
            }
            _ => Err(Error::out_of_range(
                "the number of points of a pressure table",
                points.len().to_string(),
                "two or more",
            )),
        }
    }

    /// A gradient from a level down.
    pub fn gradient(from: Depth, start: Start, gradient: Gradient) -> Result<Self> {
        require_between("the depth where the gradient begins", from.tvd, Length::m(-DEEPEST), Length::m(DEEPEST))?;
        require_not_negative("the gradient", gradient)?;
        match start {
            Start::Stated { pressure } => {
                let greatest = Pressure::pa(GREATEST);
                require_between("the pressure where the gradient begins", pressure, -greatest, greatest)?;
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
            Law::Table { datum, points, .. } => Law::table(*datum, points.clone()).map(|_| ()),
            Law::Gradient { from, start, gradient } => Law::gradient(*from, *start, *gradient).map(|_| ()),
        }
    }

    /// The level its depths count from.
    pub fn datum(&self) -> Datum {
        match self {
            Law::Table { datum, .. } => *datum,
            Law::Gradient { from, .. } => from.below,
        }
    }

    /// The law as the card of one depth holds it.
    pub fn near(&self, depth: Length, whole: bool) -> Self {
        match self {
            Law::Table { datum, points, count, ends } if !whole => {
                let here = points.partition_point(|p| p.0 < depth);
                let (from, to) = (here.saturating_sub(NEIGHBOURS), (here + NEIGHBOURS).min(points.len()));
                let points = points.get(from..to).unwrap_or_default().to_vec();
                Law::Table { datum: *datum, points, count: *count, ends: *ends }
            }
            other => other.clone(),
        }
    }

    /// The law as a record of many depths holds it: of a table the points next to each depth.
    pub fn about(&self, depths: &[f64]) -> Self {
        let Law::Table { datum, points, count, ends } = self else { return self.clone() };
        let mut wanted = std::collections::BTreeSet::new();
        for depth in depths {
            let here = points.partition_point(|p| p.0.si() < *depth);
            wanted.extend(here.saturating_sub(2)..(here + 3).min(points.len()));
        }
        let kept: Vec<Point> = wanted.into_iter().filter_map(|k| points.get(k).copied()).collect();
        // A record that is read again must be a table.
        let kept = if kept.len() < 2 { points.iter().take(2).copied().collect() } else { kept };
        Law::Table { datum: *datum, points: kept, count: *count, ends: *ends }
    }

    /// The point at a depth, or the two around it.
    pub fn around(&self, depth: Length) -> Result<(Point, Point)> {
        let Law::Table { points, ends: [first, last], datum, .. } = self else {
            return Err(Error::not_physical("A gradient", "it has no points."));
        };
        if depth < *first || depth > *last {
            return Err(Error::out_of_range(
                "the depth asked for",
                Depth { tvd: depth, below: *datum }.words(),
                format!(
                    "between {} and {}, the ends of the table (nothing is extrapolated)",
                    with_typed_unit(*first),
                    with_typed_unit(*last)
                ),
            ));
        }
        let below = points.partition_point(|p| p.0 < depth);
        match (below.checked_sub(1).and_then(|above| points.get(above)), points.get(below)) {
            (_, Some(here)) if here.0 == depth => Ok((*here, *here)),
            (Some(above), Some(below)) => Ok((*above, *below)),
            _ => Err(Error::not_physical(
                "The points of a pressure table",
                "they do not lie around the depth asked for; make the record again.",
            )),
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
            Law::Table { .. } => {
                let ((z1, p1), (z2, p2)) = self.around(depth)?;
                if z1 == z2 {
                    return Ok(p1);
                }
                Ok(p1 + (p2 - p1) * ((depth - z1) / (z2 - z1)))
            }
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
