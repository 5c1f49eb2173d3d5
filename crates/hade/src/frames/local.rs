//! Axes that the user states: a mine grid, or an instrument's own lines.

use serde::{Deserialize, Serialize};

use super::turn::Turn;
use super::vector::{M3, V3, add, angle_between_lines, cross, dot, norm, scale};
use super::{Azimuth, Chain, Geographic, Line, Local, Name, by_singular_values, nearest_orthonormal};
use crate::card::{Card, Item};
use crate::error::{Error, Result};
use crate::units::{Angle, Quantity, fixed};

/// Axes that the user states, with a name for messages and cards.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LocalAxes {
    name: Name,
    by: Stated,
}

/// How local axes were stated.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "by", rename_all = "snake_case")]
enum Stated {
    /// North, east, down of a grid turned against true north.
    MineGridDown { north: Azimuth },
    /// East, north, up of such a grid.
    MineGridUp { north: Azimuth },
    /// The first axis along one line; the second in the plane of both, towards the other.
    TwoLines { first: Line, second: Line },
    /// Along the nearest orthonormal set to three measured lines.
    ThreeLines { lines: [Line; 3] },
}

/// Two lines closer than this do not fix axes, in degrees.
const TOO_CLOSE: f64 = 5.0;

impl LocalAxes {
    /// The axes mine north, mine east and down of a grid whose north lies at an azimuth.
    ///
    /// # Errors
    /// When the azimuth has no true north.
    pub fn mine_grid(name: &str, mine_north: Azimuth) -> Result<Self> {
        mine_north.true_north()?;
        Ok(LocalAxes { name: Name::new(name), by: Stated::MineGridDown { north: mine_north } })
    }

    /// The axes mine east, mine north and up of a grid whose north lies at an azimuth.
    ///
    /// # Errors
    /// When the azimuth has no true north.
    pub fn mine_grid_with_up(name: &str, mine_north: Azimuth) -> Result<Self> {
        mine_north.true_north()?;
        Ok(LocalAxes { name: Name::new(name), by: Stated::MineGridUp { north: mine_north } })
    }

    /// The first axis along one line, by the end its trend and plunge state; the third at right
    /// angles to both lines (first × second); the second completes the set, on the second line's
    /// side.
    ///
    /// # Errors
    /// When the lines are within 5° of each other, or one has no true north or a plunge beyond ±90°.
    pub fn along_lines(name: &str, first: Line, second: Line) -> Result<Self> {
        let stated = LocalAxes { name: Name::new(name), by: Stated::TwoLines { first, second } };
        stated.turns("")?;
        Ok(stated)
    }

    /// Along three lines measured as the axes of an instrument, which are replaced by the nearest set at
    /// right angles. Lines have no sign, so of a left-handed set the third is turned round.
    ///
    /// # Errors
    /// When two of them are more than 15° from a right angle, or one has no true north or a plunge
    /// beyond ±90°.
    pub fn along_measured_axes(name: &str, lines: [Line; 3]) -> Result<Self> {
        let stated = LocalAxes { name: Name::new(name), by: Stated::ThreeLines { lines } };
        stated.turns("")?;
        Ok(stated)
    }

    /// The name.
    pub fn name(self) -> Name {
        self.name
    }

    /// The chain of turns from the geographic frame to these axes.
    ///
    /// # Errors
    /// None that the constructors let through; a record that was tampered with is refused.
    pub fn chain(self) -> Result<Chain<Geographic, Local>> {
        Chain::between(super::Axes::NorthEastDown, super::Axes::Local { stated: self })
    }

    pub(super) fn axis_names(self) -> [&'static str; 3] {
        match self.by {
            Stated::MineGridDown { .. } => ["mine north", "mine east", "down"],
            Stated::MineGridUp { .. } => ["mine east", "mine north", "up"],
            Stated::TwoLines { .. } => ["along the first line", "towards the second line", "across both lines"],
            Stated::ThreeLines { .. } => ["along the first axis", "along the second axis", "along the third axis"],
        }
    }

    pub(super) fn words(self) -> String {
        match self.by {
            Stated::MineGridDown { north } | Stated::MineGridUp { north } => {
                let north = north.true_north().unwrap_or(north.measured());
                format!("{}; mine north at {}°", self.axis_names().join(", "), super::three_figures(north))
            }
            Stated::TwoLines { first, second } => {
                format!("first line {}; second line {}", first.words(), second.words())
            }
            Stated::ThreeLines { lines: [a, b, c] } => format!("{}; {}; {}", a.words(), b.words(), c.words()),
        }
    }

    pub(super) fn turns(self, suffix: &str) -> Result<Vec<Turn>> {
        let grid = |north: Azimuth| {
            let symbol = format!("g{suffix}");
            Ok::<_, Error>(Turn::about(2, "the azimuth of mine north", &symbol, north.true_north()?, "down"))
        };
        Ok(match self.by {
            Stated::MineGridDown { north } => vec![grid(north)?],
            Stated::MineGridUp { north } => {
                let exchange = [[0.0, 1.0, 0.0], [1.0, 0.0, 0.0], [0.0, 0.0, -1.0]];
                let half = Turn {
                    words: "by 180° about the level line halfway between mine north and mine east".to_owned(),
                    axis: "the level line halfway between mine north and mine east".to_owned(),
                    ..Turn::by_rows("", exchange)
                };
                vec![grid(north)?, half]
            }
            Stated::TwoLines { first, second } => {
                let x = first.vector()?;
                let apart = angle_between_lines(x, second.vector()?).to_degrees();
                if apart < TOO_CLOSE {
                    return Err(Error::not_physical(
                        format!("The two lines of {} stand at {}° to each other", self.name, fixed(apart, 1)),
                        format!("they must be at least {TOO_CLOSE}° apart to fix axes; check trends and plunges."),
                    ));
                }
                let z = unit(cross(x, second.vector()?));
                vec![Turn::by_rows("to the axes along the first line, and across both", [x, cross(z, x), z])]
            }
            Stated::ThreeLines { lines } => {
                let fitted = nearest_orthonormal(&vectors(lines)?)?;
                vec![Turn::by_rows("to the nearest axes at right angles", fitted.axes)]
            }
        })
    }

    /// The axes from their definitions: grid axes by their azimuths, line axes by taking from the
    /// second line its part along the first.
    pub(super) fn by_definition(self) -> Result<M3> {
        Ok(match self.by {
            Stated::MineGridDown { north } => {
                let [n, e] = grid_axes(north)?;
                [n, e, [0.0, 0.0, 1.0]]
            }
            Stated::MineGridUp { north } => {
                let [n, e] = grid_axes(north)?;
                [e, n, [0.0, 0.0, -1.0]]
            }
            Stated::TwoLines { first, second } => {
                let (x, towards) = (first.vector()?, second.vector()?);
                let y = unit(add(towards, scale(x, -dot(x, towards))));
                [x, y, cross(x, y)]
            }
            Stated::ThreeLines { lines } => {
                let lines = vectors(lines)?;
                by_singular_values(&lines).map_or_else(|| nearest_orthonormal(&lines).map(|f| f.axes), Ok)?
            }
        })
    }

    pub(super) fn items(self, suffix: &str) -> Vec<Item> {
        match self.by {
            Stated::MineGridDown { north } | Stated::MineGridUp { north } => {
                let symbol = format!("g{suffix}");
                vec![north.item(&symbol, "azimuth of mine north")]
            }
            Stated::TwoLines { first, second } => line_items(&[first, second]),
            Stated::ThreeLines { lines } => line_items(&lines),
        }
    }

    pub(super) fn note(self) -> Option<String> {
        if let Stated::ThreeLines { lines } = self.by {
            let misfit = Angle::from_si(nearest_orthonormal(&vectors(lines).ok()?).ok()?.misfit);
            return Some(format!(
                "The measured axes were replaced by the nearest set at right angles; the largest angle from a measured line to its axis is {misfit}. Lines have no sign: of a left-handed set the third is turned round."
            ));
        }
        let Stated::TwoLines { first, second } = self.by else { return None };
        let apart = angle_between_lines(first.vector().ok()?, second.vector().ok()?);
        Some(format!(
            "The two lines stand at {} to each other; only the plane of the second one counts.",
            Angle::from_si(apart)
        ))
    }

    pub(super) fn upstream(self) -> Vec<Card> {
        match self.by {
            Stated::MineGridDown { north } | Stated::MineGridUp { north } => north.upstream(),
            Stated::TwoLines { first, second } => {
                first.trend.upstream().into_iter().chain(second.trend.upstream()).collect()
            }
            Stated::ThreeLines { lines } => lines.iter().flat_map(|line| line.trend.upstream()).collect(),
        }
    }
}

fn vectors([a, b, c]: [Line; 3]) -> Result<M3> {
    Ok([a.vector()?, b.vector()?, c.vector()?])
}

fn line_items(lines: &[Line]) -> Vec<Item> {
    lines
        .iter()
        .zip([("first", 1), ("second", 2), ("third", 3)])
        .flat_map(|(line, (which, n))| {
            [
                line.trend.item(&format!("T_{n}"), &format!("trend of the {which} line")),
                Item::typed(&format!("P_{n}"), format!("plunge of the {which} line, down positive"), line.plunge),
            ]
        })
        .collect()
}

fn unit(v: V3) -> V3 {
    scale(v, 1.0 / norm(v))
}

/// Mine north and mine east as level lines of their azimuths.
fn grid_axes(north: Azimuth) -> Result<[V3; 2]> {
    let level = |azimuth: Azimuth| Line { trend: azimuth, plunge: Angle::default() }.vector();
    Ok([level(north)?, level(north.turned_by(Angle::deg(90.0)))?])
}
