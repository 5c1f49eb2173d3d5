//! Uncertain numbers: how they are distributed, draws of them, and what many draws say.
//!
//! It knows no physics. A draw is a function of its number and of the start alone, so the same start gives the same
//! draws on any machine and with any number of threads. Nothing is clamped: a draw outside the stated bounds of its
//! distribution is marked as such, and whoever uses it counts it.
//!
//! Quantiles: P90 is the number at or below which 90 % of the draws lie. Between two draws it is interpolated
//! (definition 7 of Hyndman, R.J. and Fan, Y. (1996) Sample quantiles in statistical packages, Am. Stat. 50, 361–365;
//! cited from memory).
//!
//! # Does not do
//!
//! Distributions fitted to data, dependence other than pairwise rank correlation under a Gaussian copula, and
//! stratified or importance sampling.

mod correlation;
mod distribution;
mod normal;
mod philox;
mod sampler;
mod statistics;

pub use correlation::RankCorrelation;
pub(crate) use correlation::normal_scores_correlation;
pub use distribution::Distribution;
pub(crate) use distribution::Spread;
pub use sampler::Draws;
pub(crate) use sampler::{Draw, Sampler, for_each_draw, for_each_four};
pub use statistics::Quantiles;
pub(crate) use statistics::{mean_and_deviation, quantile, rank_correlation, sorted};
