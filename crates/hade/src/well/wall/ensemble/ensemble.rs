//! A wall whose numbers are drawn.

use std::sync::{Arc, OnceLock};

use serde::{Deserialize, Serialize};

use super::drawn::Drawn;
use super::effects::effects;
use super::first_order::first_order;
use super::numbers::{Base, Numbers};
use super::outcome::EnsembleOutcome;
use super::stand::{Left, Stand, stand_of, stands_by_numbers};
use crate::error::{Error, Result};
use crate::faults::frictional_ratio;
use crate::spread::{Draw, Draws, Quantiles, RankCorrelation, Sampler, for_each_four};
use crate::units::{Length, Pressure, Quantity, with_typed_unit};
use crate::well::wall::setup::WallSetup;
use crate::well::wall::wall::Wall;

/// The limits of a wall over many draws of its uncertain numbers. From [`Wall::ensemble`].
///
/// Copies are cheap: they share the draws.
#[derive(Clone, Debug, PartialEq)]
pub struct Ensemble {
    pub(super) inputs: EnsembleInputs,
    pub(super) stands: Arc<Vec<Stand>>,
    /// Worked out when it is first asked for.
    outcome: Arc<OnceLock<EnsembleOutcome>>,
}

/// The inputs: the wall, the distributions, how many draws from which start; not the draws themselves.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct EnsembleInputs {
    pub(super) wall: WallSetup,
    pub(super) drawn: Vec<Drawn>,
    pub(super) draws: Draws,
    pub(super) correlations: Vec<RankCorrelation>,
    /// The coefficient of friction of faults that no drawn stress may go beyond.
    pub(super) friction: Option<f64>,
    /// Where mud weights count.
    pub(super) tvd: Option<Length>,
}

impl Wall {
    /// The limits of this wall with some of its inputs drawn from distributions, again and again; everything else
    /// stays. The inputs are independent unless [`correlated`](Ensemble::correlated).
    ///
    /// A draw that no wall can have, that is outside stated bounds, or in which S_Hmax is less than S_hmin is left
    /// out and counted.
    ///
    /// # Errors
    /// When there are not 100 to 2 000 000 draws, no or too many inputs, an input stands twice or is none of this
    /// wall's, a distribution is none, or every draw would be left out.
    pub fn ensemble(&self, draws: Draws, drawn: &[Drawn]) -> Result<Ensemble> {
        self.ensemble_with(draws, drawn, &[])
    }

    /// The same with all rank correlations at once.
    pub(crate) fn ensemble_with(
        &self,
        draws: Draws,
        drawn: &[Drawn],
        correlations: &[RankCorrelation],
    ) -> Result<Ensemble> {
        Ensemble::build(EnsembleInputs {
            wall: self.setup,
            drawn: drawn.to_vec(),
            draws,
            correlations: correlations.to_vec(),
            friction: None,
            tvd: None,
        })
    }
}

/// An ensemble ready to be drawn.
pub(super) struct Prepared {
    pub base: Base,
    pub sampler: Sampler,
    /// The largest ratio of effective principal stresses that friction bears.
    pub ratio: Option<f64>,
}

impl EnsembleInputs {
    pub(super) fn prepared(&self) -> Result<Prepared> {
        self.draws.checked()?;
        let base = Base::of(&self.wall)?;
        for (k, one) in self.drawn.iter().enumerate() {
            one.spread.checked(one.name(), &|si| one.shown(si))?;
            one.input.by(1.0).value(&self.wall)?;
            if self.drawn.iter().take(k).any(|other| other.input == one.input) {
                return Err(Error::not_physical(
                    format!("The {} stands twice in an ensemble", one.name()),
                    "give each input once.",
                ));
            }
        }
        let symbols: Vec<&str> = self.drawn.iter().map(|one| one.symbol()).collect();
        let spreads = self.drawn.iter().map(|one| one.spread).collect();
        let sampler = Sampler::new(self.draws.start, &symbols, spreads, &self.correlations)?;
        let ratio = self.friction.map(frictional_ratio).transpose()?;
        Ok(Prepared { base, sampler, ratio })
    }

    /// The numbers of one draw.
    pub(super) fn numbers(&self, base: &Base, draw: &Draw) -> Numbers {
        let mut numbers = base.numbers;
        for (one, value) in self.drawn.iter().zip(draw.values()) {
            numbers.set(one.input, *value);
        }
        numbers
    }
}

impl Prepared {
    pub(super) fn stand(&self, inputs: &EnsembleInputs, draw: &Draw) -> Stand {
        let [stand, ..] = self.stands(inputs, &[*draw; 4]);
        stand
    }

    /// The same of four draws at once.
    pub(super) fn stands(&self, inputs: &EnsembleInputs, draws: &[Draw; 4]) -> [Stand; 4] {
        let numbers = draws.each_ref().map(|draw| inputs.numbers(&self.base, draw));
        let mut stands = stands_by_numbers(&self.base, &numbers, self.ratio);
        for (stand, draw) in stands.iter_mut().zip(draws) {
            if let Some(k) = draw.outside {
                *stand = Stand::left_out(Left::Outside(k as u8));
            }
        }
        stands
    }
}

impl Ensemble {
    pub(super) fn build(inputs: EnsembleInputs) -> Result<Self> {
        let ready = inputs.prepared()?;
        let stands = for_each_four(&ready.sampler, inputs.draws.count, |draws| ready.stands(&inputs, draws));
        if stands.iter().all(|stand| stand.left.is_some()) {
            return Err(Error::not_physical(
                "This ensemble",
                "every draw is left out, as no wall can have it; look at the distributions, their bounds and the frictional limit.",
            ));
        }
        Ok(Ensemble { inputs, stands: Arc::new(stands), outcome: Arc::default() })
    }

    /// With a rank correlation (Spearman's) between two inputs, named by their symbols ("S_Hmax"), under a Gaussian
    /// copula. The draws are made anew.
    ///
    /// # Errors
    /// When a symbol is none of the drawn inputs, a pair stands twice, the correlation is not between −1 and 1, or the
    /// correlations cannot be true together.
    pub fn correlated(&self, one: &str, other: &str, rank: f64) -> Result<Self> {
        let mut inputs = self.inputs.clone();
        inputs.correlations.push(RankCorrelation { one: one.to_owned(), other: other.to_owned(), rank });
        Ensemble::build(inputs)
    }

    /// Leaving out (and counting) draws whose stress goes beyond the frictional limit of faults with a coefficient of
    /// friction: (S1 − P_p) / (S3 − P_p) above (√(μ² + 1) + μ)².
    ///
    /// # Errors
    /// When the coefficient is negative or not finite, or every draw would be left out.
    pub fn within_friction(&self, friction: f64) -> Result<Self> {
        Ensemble::build(EnsembleInputs { friction: Some(friction), ..self.inputs.clone() })
    }

    /// With mud weights beside pressures: those of a static column of this height below the rotary table.
    ///
    /// # Errors
    /// When the depth is not above zero.
    pub fn at_tvd(&self, tvd_below_rotary: Length) -> Result<Self> {
        if !(tvd_below_rotary.si().is_finite() && tvd_below_rotary.si() > 0.0) {
            return Err(Error::out_of_range(
                "true vertical depth below the rotary table",
                with_typed_unit(tvd_below_rotary),
                "above zero",
            ));
        }
        let inputs = EnsembleInputs { tvd: Some(tvd_below_rotary), ..self.inputs.clone() };
        Ok(Ensemble { inputs, ..self.clone() })
    }

    /// P10, P50 and P90 of the bottom (the lower shear limit), of the draws that have one; `None` when none has.
    pub fn bottom(&self) -> Option<Quantiles> {
        EnsembleOutcome::quantiles(&self.stands, |stand| stand.bottom)
    }

    /// P10, P50 and P90 of the top (the lowest of upper shear limit, initiation and S3), of the draws that have one.
    pub fn top(&self) -> Option<Quantiles> {
        EnsembleOutcome::quantiles(&self.stands, |stand| stand.top)
    }

    /// The share of draws (0–1) whose wall neither fails in shear nor parts at a pressure, and is not above S3.
    ///
    /// # Errors
    /// When the pressure is not finite.
    pub fn stable_share(&self, pressure: Pressure) -> Result<f64> {
        pressure.finite("wall pressure")?;
        let counted = self.stands.iter().filter(|stand| stand.left.is_none());
        let stable = counted
            .clone()
            .filter(|stand| stand.range().is_some_and(|(bottom, top)| bottom <= pressure.si() && pressure.si() <= top));
        Ok(stable.count() as f64 / counted.count() as f64)
    }

    pub(super) fn worked_out(&self) -> &EnsembleOutcome {
        self.outcome.get_or_init(|| {
            let mut outcome = EnsembleOutcome::of(&self.stands, self.inputs.drawn.len());
            // The inputs were looked at when the draws were made.
            let Ok(ready) = self.inputs.prepared() else { return outcome };
            let count = self.inputs.draws.count;
            outcome.effects =
                effects(self.inputs.drawn.len(), &ready.sampler, count, &self.stands, |sampler, count| {
                    for_each_four(sampler, count, |draws| ready.stands(&self.inputs, draws))
                });
            outcome.first_order = first_order(&self.inputs, &ready.base.numbers, |numbers| {
                let (_, least) = ready.base.extremes(numbers);
                stand_of(&ready.base.wall(numbers, numbers.strength.law()), numbers.tensile, least).bottom
            });
            outcome
        })
    }
}
