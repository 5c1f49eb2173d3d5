//! The depths of a section that are drawn: the rows that the log prints there, with their walls.

use crate::along::ground::GroundInHole;
use crate::along::limit_log::{HoleSection, LimitLog, LogRow, pressure_of};
use crate::error::{Error, Result};
use crate::spread::{Draws, RankCorrelation};
use crate::units::{Density, Length, Pressure, Quantity, with_typed_unit};
use crate::well::{Drawn, Ensemble, MudState, Vary, Wall};

/// One depth of the section.
#[derive(Clone, Debug)]
pub(super) struct SectionDepth {
    pub row: LogRow,
    pub wall: Wall,
    /// The lowest and the highest pressure of the planned mud there.
    pub planned: Option<[Pressure; 2]>,
}

/// The depths of a section, in order.
pub(super) fn depths(log: &LimitLog, section: &HoleSection) -> Result<Vec<SectionDepth>> {
    let in_hole = GroundInHole::new(log.ground(), log.survey())?;
    let rows: Vec<LogRow> = log.printed().iter().map(|(row, _)| *row).collect();
    let mut found = Vec::new();
    for row in section.rows(&rows) {
        let place = log.survey().place(row.md)?;
        let layer = log.printed().iter().find(|(known, _)| known == row).map_or(0, |(_, layer)| *layer);
        let wall = Wall::of(in_hole.state(&place, layer)?.wall()?)?;
        found.push(SectionDepth { row: *row, wall, planned: planned(section, row.tvd) });
    }
    if found.is_empty() {
        return Err(Error::not_physical(
            format!("The section {}", section.name()),
            "no depth of the log lies in it; begin the log higher or end it deeper.",
        ));
    }
    Ok(found)
}

fn planned(section: &HoleSection, tvd: Length) -> Option<[Pressure; 2]> {
    let mud = section.mud()?;
    let of = |state: MudState| pressure_of(&mud, state, tvd);
    let still = of(MudState::Static)?;
    let all = [Some(still), of(MudState::Swabbed), of(MudState::Circulating), of(MudState::Surged)];
    let all = || all.into_iter().flatten().map(Quantity::si);
    let (low, high) = (all().fold(still.si(), f64::min), all().fold(still.si(), f64::max));
    Some([low, high].map(Pressure::from_si))
}

impl SectionDepth {
    /// The limits of its wall, drawn: each input normal about what the ground states there.
    pub fn ensemble(&self, draws: Draws, spreads: &[Vary], correlations: &[RankCorrelation]) -> Result<Ensemble> {
        let drawn = spreads.iter().map(|spread| spread.drawn(&self.wall)).collect::<Result<Vec<Drawn>>>();
        drawn.and_then(|drawn| self.wall.ensemble_with(draws, &drawn, correlations)).map_err(|e| {
            Error::not_physical(
                format!("The ensemble at MD {} in {}", with_typed_unit(self.row.md), self.row.layer()),
                crate::lines::reason(&e) + ".",
            )
        })
    }

    /// A pressure there, in Pa, as a mud weight in kg/m³.
    pub fn weight(&self, pressure: f64) -> f64 {
        self.row.mud_weight(Pressure::from_si(pressure)).si()
    }

    /// The pressure of a mud weight there.
    pub fn pressure(&self, weight: Density) -> Pressure {
        weight.column(self.row.tvd)
    }
}
