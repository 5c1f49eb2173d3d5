//! A quantity at points of depth, with straight lines between them.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
use crate::frames::{Datum, Depth};
use crate::units::{Length, Pressure, Quantity, Temperature, require_between, with_typed_unit};

/// A point: true vertical depth below the datum of its table, and the value there.
pub(super) type Point<Q> = (Length, Q);

/// What can stand against depth in a table.
pub(super) trait AgainstDepth: Quantity {
    /// The least and the greatest that is met in the crust; beyond it a unit was mistaken.
    fn possible() -> [Self; 2];
}

impl AgainstDepth for Pressure {
    fn possible() -> [Self; 2] {
        [Pressure::gpa(-2.0), Pressure::gpa(2.0)]
    }
}

impl AgainstDepth for Temperature {
    fn possible() -> [Self; 2] {
        [Temperature::celsius(-60.0), Temperature::celsius(600.0)]
    }
}

/// Straight lines between points, in order of depth.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct Points<Q> {
    pub datum: Datum,
    /// The points, rising; of a long file only those around the depth asked for.
    pub points: Vec<Point<Q>>,
    /// How many points the whole table has.
    pub count: u64,
    /// The ends of the whole table.
    pub ends: [Length; 2],
}

/// No table reaches deeper than this, metres; beyond it a unit was mistaken.
pub(super) const DEEPEST: f64 = 20_000.0;
/// Points of a table that lie closer than this, metres, are one.
const CLOSEST: f64 = 1e-3;
/// A file's card holds no more points than this on either side of the depth asked for.
const NEIGHBOURS: usize = 100;
/// Depths that must meet may differ by this, metres.
const MEET: f64 = 1e-6;

/// A depth and a value that can be a point of a table, below the one above it.
pub(super) fn require_point<Q: AgainstDepth>(above: Option<Length>, (depth, value): Point<Q>) -> Result<Point<Q>> {
    require_between("depth of the table", depth, Length::m(-DEEPEST), Length::m(DEEPEST))?;
    let [least, greatest] = Q::possible();
    require_between(&format!("{} of the table", Q::KIND), value, least, greatest)?;
    match above {
        Some(above) if (depth - above).abs().si() < CLOSEST => Err(Error::not_physical(
            format!("Depth {}", with_typed_unit(depth)),
            format!(
                "it stands twice in the table (or less than 1 mm below the one before); keep one {} for each depth.",
                Q::KIND
            ),
        )),
        Some(above) if depth < above => Err(Error::not_physical(
            format!("Depth {}", with_typed_unit(depth)),
            format!("it comes after {} in the table; sort the table by depth.", with_typed_unit(above)),
        )),
        _ => Ok((depth, value)),
    }
}

impl<Q: AgainstDepth> Points<Q> {
    /// A table from points in order of depth.
    pub fn new(datum: Datum, points: Vec<Point<Q>>) -> Result<Self> {
        let mut above = None;
        for point in &points {
            above = Some(require_point(above, *point)?.0);
        }
        match (points.first(), points.last()) {
            (Some(first), Some(last)) if points.len() >= 2 => {
                let (count, ends) = (points.len() as u64, [first.0, last.0]);
                Ok(Points { datum, points, count, ends })
            }
            _ => Err(Error::out_of_range(
                format!("the number of points of a {} table", Q::KIND),
                points.len().to_string(),
                "two or more",
            )),
        }
    }

    /// The table as the card of one depth holds it.
    pub fn near(&self, depth: Length) -> Self {
        let here = self.points.partition_point(|p| p.0 < depth);
        let (from, to) = (here.saturating_sub(NEIGHBOURS), (here + NEIGHBOURS).min(self.points.len()));
        Points { points: self.points.get(from..to).unwrap_or_default().to_vec(), ..*self }
    }

    /// The table as a record of many depths holds it: the points next to each.
    pub fn about(&self, depths: &[f64]) -> Self {
        let mut wanted = std::collections::BTreeSet::new();
        for depth in depths {
            let here = self.points.partition_point(|p| p.0.si() < *depth);
            wanted.extend(here.saturating_sub(2)..(here + 3).min(self.points.len()));
        }
        let kept: Vec<Point<Q>> = wanted.into_iter().filter_map(|k| self.points.get(k).copied()).collect();
        // A record that is read again must be a table.
        let points = if kept.len() < 2 { self.points.iter().take(2).copied().collect() } else { kept };
        Points { points, ..*self }
    }

    /// The point at a depth, or the two around it.
    pub fn around(&self, depth: Length) -> Result<(Point<Q>, Point<Q>)> {
        let Points { points, ends: [first, last], datum, .. } = self;
        if !(depth >= *first && depth <= *last) {
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
                format!("The points of a {} table", Q::KIND),
                "they do not lie around the depth asked for; make the record again.",
            )),
        }
    }

    /// The value at a depth below the datum.
    pub fn at(&self, depth: Length) -> Result<Q> {
        let ((z1, v1), (z2, v2)) = self.around(depth)?;
        if z1 == z2 {
            return Ok(v1);
        }
        Ok(Q::from_si(v1.si() + (v2.si() - v1.si()) * ((depth - z1) / (z2 - z1))))
    }

    /// The same by the distances to the two points, the ends of the segment found from the bottom up: for checks.
    pub fn by_distances(&self, depth: Length) -> Option<Q> {
        let (z1, v1) = *self.points.iter().rev().find(|p| p.0.si() <= depth.si() + MEET)?;
        let Some((z2, v2)) = self.points.iter().find(|p| p.0.si() > z1.si()) else { return Some(v1) };
        let (to_lower, to_upper, length) = (z2.si() - depth.si(), depth.si() - z1.si(), z2.si() - z1.si());
        Some(Q::from_si((v1.si() * to_lower + v2.si() * to_upper) / length))
    }
}
