//! How a number is distributed.

use std::marker::PhantomData;

use serde::{Deserialize, Serialize};

use super::normal;
use crate::error::{Error, Result};
use crate::units::Quantity;

/// How a quantity is distributed. A constructor takes any numbers; what draws from it refuses bad ones.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Distribution<Q> {
    spread: Spread,
    #[serde(skip)]
    of: PhantomData<fn() -> Q>,
}

/// The same without its quantity, in SI.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub(crate) struct Spread {
    shape: Shape,
    /// Bounds outside of which a draw is no possible value.
    within: Option<[f64; 2]>,
}

#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "distribution", rename_all = "snake_case")]
enum Shape {
    Normal { mean: f64, deviation: f64 },
    Lognormal { mean: f64, deviation: f64 },
    Triangular { low: f64, mode: f64, high: f64 },
    Uniform { low: f64, high: f64 },
}

impl<Q: Quantity> Distribution<Q> {
    fn of(shape: Shape) -> Self {
        Distribution { spread: Spread { shape, within: None }, of: PhantomData }
    }

    /// Normal, by mean and standard deviation (above zero).
    pub fn normal(mean: Q, standard_deviation: Q) -> Self {
        Distribution::of(Shape::Normal { mean: mean.si(), deviation: standard_deviation.si() })
    }

    /// Lognormal, by the mean (above zero) and the standard deviation (above zero) of the quantity itself, not of its
    /// logarithm.
    pub fn lognormal(mean: Q, standard_deviation: Q) -> Self {
        Distribution::of(Shape::Lognormal { mean: mean.si(), deviation: standard_deviation.si() })
    }

    /// Triangular between two ends, most likely at the mode.
    pub fn triangular(low: Q, mode: Q, high: Q) -> Self {
        Distribution::of(Shape::Triangular { low: low.si(), mode: mode.si(), high: high.si() })
    }

    /// Uniform between two ends.
    pub fn uniform(low: Q, high: Q) -> Self {
        Distribution::of(Shape::Uniform { low: low.si(), high: high.si() })
    }

    /// With bounds. A draw outside them is no possible value: it is left out and counted, not moved to the bound and
    /// not drawn again.
    pub fn within(self, low: Q, high: Q) -> Self {
        Distribution { spread: Spread { within: Some([low.si(), high.si()]), ..self.spread }, ..self }
    }

    /// The number at or below which a share of it lies, before any bounds.
    ///
    /// # Errors
    /// When the share is not between 0 and 1, or the distribution is none.
    pub fn quantile(&self, share: f64) -> Result<Q> {
        if !(share > 0.0 && share < 1.0) {
            return Err(Error::out_of_range("share of a distribution", share.to_string(), "above 0 and below 1"));
        }
        self.spread.checked("a quantity", &|si| crate::units::with_typed_unit(Q::from_si(si)))?;
        Ok(Q::from_si(self.spread.at_share(share)))
    }

    pub(crate) fn plain(self) -> Spread {
        self.spread
    }
}

impl Spread {
    /// Refuses what is no distribution. `shown` writes a number with its unit.
    pub fn checked(self, name: &str, shown: &dyn Fn(f64) -> String) -> Result<Self> {
        let refuse = |what: &str, got: String, allowed: &str| {
            Err(Error::out_of_range(format!("{what} of the {name}"), got, allowed))
        };
        match self.shape {
            Shape::Normal { mean, deviation } | Shape::Lognormal { mean, deviation } => {
                if !(deviation.is_finite() && deviation > 0.0) {
                    return refuse(
                        "standard deviation",
                        shown(deviation),
                        "above zero; leave a number that is certain out",
                    );
                }
                let above_zero = !matches!(self.shape, Shape::Lognormal { .. }) || mean > 0.0;
                if !(mean.is_finite() && above_zero) {
                    return refuse("mean", shown(mean), "a finite number, and above zero for a lognormal distribution");
                }
            }
            Shape::Triangular { low, mode, high } => {
                let rising = low <= mode && mode <= high && low < high;
                if !(rising && low.is_finite() && high.is_finite()) {
                    let got = [low, mode, high].map(shown).join(", ");
                    return refuse("low, mode and high", got, "finite and in rising order");
                }
            }
            Shape::Uniform { low, high } => {
                if !(low < high && low.is_finite() && high.is_finite()) {
                    return refuse("low and high", [low, high].map(shown).join(", "), "finite and in rising order");
                }
            }
        }
        if let Some([low, high]) = self.within {
            let holds = |u: f64| (low..=high).contains(&self.at_share(u));
            if !(low < high && (1..100).any(|k| holds(f64::from(k) * 0.01))) {
                let got = [low, high].map(shown).join(" to ");
                return refuse("bounds", got, "in rising order, with more than 1 % of the distribution between them");
            }
        }
        Ok(self)
    }

    /// Whether a number is a possible value.
    #[inline]
    pub fn holds(&self, value: f64) -> bool {
        self.within.is_none_or(|[low, high]| value >= low && value <= high)
    }

    /// The number below which a share u lies.
    #[inline]
    pub fn at_share(&self, u: f64) -> f64 {
        match self.shape {
            Shape::Normal { .. } | Shape::Lognormal { .. } => self.at_score(normal::quantile(u)),
            Shape::Triangular { low, mode, high } => {
                let (width, left) = (high - low, mode - low);
                if u * width <= left {
                    low + (u * width * left).sqrt()
                } else {
                    high - ((1.0 - u) * width * (high - mode)).sqrt()
                }
            }
            Shape::Uniform { low, high } => low + u * (high - low),
        }
    }

    /// The number that has the place in this distribution which z has in the standard normal one.
    #[inline]
    pub fn at_score(&self, z: f64) -> f64 {
        match self.shape {
            Shape::Normal { mean, deviation } => mean + deviation * z,
            Shape::Lognormal { mean, deviation } => {
                let variance = (deviation / mean).powi(2).ln_1p();
                (mean.ln() - 0.5 * variance + variance.sqrt() * z).exp()
            }
            _ => self.at_share(normal::share_below(z)),
        }
    }

    /// The number below which a share u lies, with z below which it lies in the standard normal distribution.
    #[inline]
    pub fn at(&self, u: f64, z: f64) -> f64 {
        match self.shape {
            Shape::Normal { .. } | Shape::Lognormal { .. } => self.at_score(z),
            Shape::Triangular { .. } | Shape::Uniform { .. } => self.at_share(u),
        }
    }

    pub fn median(&self) -> f64 {
        self.at_share(0.5)
    }

    /// Mean and standard deviation, before any bounds.
    pub fn moments(&self) -> (f64, f64) {
        match self.shape {
            Shape::Normal { mean, deviation } | Shape::Lognormal { mean, deviation } => (mean, deviation),
            Shape::Triangular { low: a, mode: c, high: b } => {
                ((a + b + c) / 3.0, ((a * a + b * b + c * c - a * b - a * c - b * c) / 18.0).sqrt())
            }
            Shape::Uniform { low, high } => (0.5 * (low + high), (high - low) / 12.0_f64.sqrt()),
        }
    }

    /// "normal, mean 60 MPa, standard deviation 1.5 MPa".
    pub fn words(&self, shown: &dyn Fn(f64) -> String) -> String {
        let mut words = match self.shape {
            Shape::Normal { mean, deviation } => {
                format!("normal, mean {}, standard deviation {}", shown(mean), shown(deviation))
            }
            Shape::Lognormal { mean, deviation } => {
                format!("lognormal, mean {}, standard deviation {}", shown(mean), shown(deviation))
            }
            Shape::Triangular { low, mode, high } => {
                format!("triangular, {} to {}, most likely {}", shown(low), shown(high), shown(mode))
            }
            Shape::Uniform { low, high } => format!("uniform, {} to {}", shown(low), shown(high)),
        };
        if let Some([low, high]) = self.within {
            words.push_str(&format!(", possible from {} to {}", shown(low), shown(high)));
        }
        words
    }

    /// Its numbers, for an item of a card.
    pub fn numbers(&self) -> Vec<f64> {
        let mut numbers = match self.shape {
            Shape::Normal { mean, deviation } | Shape::Lognormal { mean, deviation } => vec![mean, deviation],
            Shape::Triangular { low, mode, high } => vec![low, mode, high],
            Shape::Uniform { low, high } => vec![low, high],
        };
        numbers.extend(self.within.into_iter().flatten());
        numbers
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::{Pressure, Units};

    fn every() -> [Distribution<Pressure>; 5] {
        [
            Distribution::normal(30.mpa(), 4.mpa()),
            Distribution::lognormal(12.mpa(), 5.mpa()),
            Distribution::triangular(10.mpa(), 12.mpa(), 20.mpa()),
            Distribution::triangular(10.mpa(), 10.mpa(), 20.mpa()),
            Distribution::uniform(5.mpa(), 9.mpa()),
        ]
    }

    /// scipy 1.17.1: stats.norm, lognorm(s, scale), triang(c, loc, scale) and uniform, ppf of 0.1 and 0.9.
    #[test]
    fn quantiles_are_those_of_scipy() {
        let want = [
            [24.8737937378216, 35.1262062621784],
            [6.63332710381554, 18.497237198131554],
            [11.414213562373096, 17.17157287525381],
            [10.513167019494862, 16.837722339831622],
            [5.4, 8.6],
        ];
        for (distribution, want) in every().iter().zip(want) {
            for (share, want) in [0.1, 0.9].into_iter().zip(want) {
                let got = distribution.quantile(share).unwrap().in_mpa();
                assert!((got - want).abs() < 1e-12 * want, "{distribution:?} {share}: {got}");
            }
        }
    }

    /// Mean and deviation by integrating the quantiles.
    #[test]
    fn moments_are_those_of_the_quantiles() {
        for distribution in every() {
            let spread = distribution.plain();
            let (mean, deviation) = spread.moments();
            let count = 400_000;
            let at = |k: i32| spread.at_share((f64::from(k) + 0.5) / f64::from(count));
            let sum: f64 = (0..count).map(at).sum::<f64>() / f64::from(count);
            let square: f64 = (0..count).map(|k| (at(k) - mean).powi(2)).sum::<f64>() / f64::from(count);
            assert!((sum / mean - 1.0).abs() < 1e-5, "{distribution:?}");
            assert!((square.sqrt() / deviation - 1.0).abs() < 2e-3, "{distribution:?} {}", square.sqrt() / deviation);
        }
    }

    #[test]
    fn bad_ones_are_refused_with_what_was_given() {
        let mpa = |d: Distribution<Pressure>| d.quantile(0.5).unwrap_err().to_string();
        let (a, b) = (3.mpa(), 5.mpa());
        for (bad, begins) in [
            (Distribution::normal(a, 0.mpa()), "standard deviation of the a quantity is 0 MPa"),
            (Distribution::normal(f64::NAN.mpa(), a), "mean of"),
            (Distribution::lognormal((-1).mpa(), a), "mean of the a quantity is -1 MPa"),
            (Distribution::triangular(a, b, a), "low, mode and high of the a quantity is 3 MPa, 5 MPa, 3 MPa"),
            (Distribution::uniform(b, a), "low and high"),
            (Distribution::normal(a, b).within(b, a), "bounds of"),
            (Distribution::uniform(a, b).within(6.mpa(), 7.mpa()), "bounds of"),
        ] {
            assert!(mpa(bad).starts_with(begins), "{}", mpa(bad));
        }
        assert!(Distribution::uniform(a, b).quantile(1.0).is_err());
    }
}
