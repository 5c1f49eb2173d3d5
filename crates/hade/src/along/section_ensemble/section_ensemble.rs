//! A section of a log whose inputs are drawn.

use serde::{Deserialize, Serialize};

use super::common::by_layers;
use super::depths::depths;
use super::outcome::{LayerShare, MudShare, PlanShare, SectionEnsembleOutcome, best};
use crate::along::limit_log::{HoleSection, LimitLog, LogInputs};
use crate::card::Explain as _;
use crate::error::{Error, Result};
use crate::spread::{Draws, RankCorrelation};
use crate::units::Density;
use crate::well::Vary;

/// How sure it is that one mud weight keeps a section, from [`LimitLog::section_ensemble`].
#[derive(Clone, Debug, PartialEq)]
pub struct SectionEnsemble {
    pub(super) log: LimitLog,
    pub(super) section: HoleSection,
    pub(super) draws: Draws,
    pub(super) spreads: Vec<Vary>,
    pub(super) correlations: Vec<RankCorrelation>,
    pub(super) outcome: SectionEnsembleOutcome,
}

/// The inputs: the log as its record holds it, the section, and what is drawn; not the draws themselves.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SectionEnsembleInputs {
    pub(super) log: LogInputs,
    pub(super) section: String,
    pub(super) draws: Draws,
    pub(super) spreads: Vec<Vary>,
    pub(super) correlations: Vec<RankCorrelation>,
}

/// Draws times depths; more take more time than a notebook should.
const MOST: usize = 20_000_000;

impl LimitLog {
    /// The depths of one of the log's sections drawn together, each input normal about what the ground states at the
    /// depth, with the standard deviations that are given: `Vary::sh_max(4.mpa())`. Everything else stays. A draw
    /// moves every depth of a layer by as many standard deviations; over the layers the share of draws is given both
    /// with all moved alike and with each moved by itself.
    ///
    /// The limits are bare: nothing is allowed to fail and no margin is kept, whatever the log allows.
    ///
    /// # Errors
    /// When the log has no such section, there are not 100 to 2 000 000 draws or more than 20 000 000 with all depths,
    /// no or too many inputs, an input stands twice or is none of a layer's wall, or every draw would be left out.
    pub fn section_ensemble(&self, section: &str, draws: Draws, spreads: &[Vary]) -> Result<SectionEnsemble> {
        SectionEnsemble::build(self, section, draws, spreads.to_vec(), Vec::new())
    }
}

impl SectionEnsemble {
    pub(super) fn build(
        log: &LimitLog,
        name: &str,
        draws: Draws,
        spreads: Vec<Vary>,
        correlations: Vec<RankCorrelation>,
    ) -> Result<Self> {
        let Some(section) = log.sections().iter().find(|section| section.name() == name.trim()) else {
            let known: Vec<&str> = log.sections().iter().map(HoleSection::name).collect();
            let fix = match known.as_slice() {
                [] => {
                    "the log has no sections; state them with .with_sections(&[HoleSection::between(…)])?.".to_owned()
                }
                _ => format!("the log has no such section; it has {}.", known.join(", ")),
            };
            return Err(Error::undeclared(format!("The section \"{name}\""), fix));
        };
        let depths = depths(log, section)?;
        if depths.len() * draws.count as usize > MOST {
            return Err(Error::out_of_range(
                format!("the number of draws at {} depths", depths.len()),
                draws.count.to_string(),
                format!("at most {}", MOST / depths.len()),
            ));
        }
        let layers = by_layers(&depths, draws, &spreads, &correlations)?;
        let outcome = SectionEnsembleOutcome::of(&layers, section.mud().is_some());
        if outcome.counted == 0.0 {
            return Err(Error::not_physical(
                format!("The ensemble of the section {name}"),
                "every draw is left out at some depth, as no wall can have it; look at the standard deviations.",
            ));
        }
        Ok(SectionEnsemble { log: log.clone(), section: *section, draws, spreads, correlations, outcome })
    }

    /// With a rank correlation (Spearman's) between two inputs at one depth, named by their symbols ("S_Hmax"), under a
    /// Gaussian copula. The draws are made anew.
    ///
    /// # Errors
    /// When a symbol is none of the drawn inputs, a pair stands twice, the correlation is not between −1 and 1, or the
    /// correlations cannot be true together.
    pub fn correlated(&self, one: &str, other: &str, rank: f64) -> Result<Self> {
        let mut correlations = self.correlations.clone();
        correlations.push(RankCorrelation { one: one.to_owned(), other: other.to_owned(), rank });
        SectionEnsemble::build(&self.log, self.section.name(), self.draws, self.spreads.clone(), correlations)
    }

    /// The share of draws that keep the section, at mud weights a round step apart.
    pub fn shares(&self) -> Vec<MudShare> {
        self.outcome.curve.clone()
    }

    /// The mud weight that keeps it in most draws when all layers move alike, of those looked at; `None` when some depth
    /// has no range in any draw.
    pub fn best(&self) -> Option<MudShare> {
        best(&self.outcome.curve)
    }

    /// The share of draws in which the planned mud keeps it; `None` when the section has no mud.
    pub fn planned(&self) -> Option<PlanShare> {
        self.outcome.planned
    }

    /// The layers of the section, each with its own shares.
    pub fn layers(&self) -> Vec<LayerShare> {
        self.outcome.layers.clone()
    }

    /// P10, P50 and P90 of the highest bottom of the section, of the draws that have one at every depth.
    pub fn bottom(&self) -> Option<[Density; 3]> {
        self.outcome.bottom
    }

    /// P10, P50 and P90 of the lowest top of the section.
    pub fn top(&self) -> Option<[Density; 3]> {
        self.outcome.top
    }

    pub(super) fn record(&self) -> SectionEnsembleInputs {
        SectionEnsembleInputs {
            log: self.log.inputs(),
            section: self.section.name().to_owned(),
            draws: self.draws,
            spreads: self.spreads.clone(),
            correlations: self.correlations.clone(),
        }
    }

    pub(super) fn from_record(inputs: SectionEnsembleInputs) -> Result<Self> {
        let log = LimitLog::compute(inputs.log)?;
        SectionEnsemble::build(&log, &inputs.section, inputs.draws, inputs.spreads, inputs.correlations)
    }
}
