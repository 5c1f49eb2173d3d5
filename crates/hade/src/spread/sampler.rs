//! Draws of several uncertain numbers at once.

use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use super::correlation::{RankCorrelation, factor};
use super::distribution::Spread;
use super::normal;
use super::philox::{block, uniform};
use crate::error::{Error, Result};
use crate::progress::Progress;

/// How many draws, and where the random numbers start. The same start gives the same draws.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Draws {
    /// How many, 100 to 2 000 000.
    pub count: u32,
    /// Any whole number.
    pub start: u64,
}

/// Fewer draws say nothing of a tenth; more ask for more memory than a notebook should.
const COUNTS: std::ops::RangeInclusive<u32> = 100..=2_000_000;
/// Draws that a thread makes at a time, four by four.
const CHUNK: usize = 512;
/// More uncertain numbers than this are a mistake.
pub(super) const MOST: usize = 24;

impl Draws {
    pub(crate) fn checked(self) -> Result<Self> {
        if COUNTS.contains(&self.count) {
            return Ok(self);
        }
        Err(Error::out_of_range(
            "number of draws",
            self.count.to_string(),
            format!("between {} and {}", COUNTS.start(), COUNTS.end()),
        ))
    }
}

/// Draws of several numbers.
#[derive(Clone, Debug)]
pub(crate) struct Sampler {
    spreads: Vec<Spread>,
    /// Rows of the Cholesky factor, where any two go together.
    factor: Option<Vec<Vec<f64>>>,
    start: u64,
    /// The input that is held at its median.
    held: Option<usize>,
}

/// The values of one draw, in the order of the inputs, and whether each is a possible value.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Draw {
    values: [f64; MOST],
    count: usize,
    /// The first input whose value is outside its bounds.
    pub outside: Option<usize>,
}

impl Draw {
    #[inline]
    pub fn values(&self) -> &[f64] {
        self.values.get(..self.count).unwrap_or_default()
    }
}

impl Sampler {
    /// # Errors
    /// When the number of inputs is not between 1 and 24, or the correlations are refused.
    pub fn new(start: u64, symbols: &[&str], spreads: Vec<Spread>, pairs: &[RankCorrelation]) -> Result<Self> {
        if spreads.is_empty() || spreads.len() > MOST {
            return Err(Error::out_of_range(
                "number of uncertain inputs",
                spreads.len().to_string(),
                format!("1 to {MOST}: give each with its distribution"),
            ));
        }
        let factor = if pairs.is_empty() { None } else { Some(factor(symbols, pairs)?) };
        Ok(Sampler { spreads, factor, start, held: None })
    }

    /// With one input held at its median; the others are drawn as before.
    pub fn holding(&self, k: usize) -> Self {
        Sampler { held: Some(k), ..self.clone() }
    }

    /// A draw by its number: a function of the start and of that number alone.
    pub fn draw(&self, number: u64) -> Draw {
        let mut draw = self.no_draw();
        self.draw_into(number, &mut draw);
        draw
    }

    fn no_draw(&self) -> Draw {
        Draw { values: [0.0; MOST], count: self.spreads.len(), outside: None }
    }

    /// The same in the place of another draw.
    #[inline]
    fn draw_into(&self, number: u64, draw: &mut Draw) {
        let fours = draw.values.as_chunks_mut::<4>().0.iter_mut().zip(self.spreads.chunks(4));
        for (k, (values, spreads)) in fours.enumerate() {
            let shares = block([number, k as u64, 0, 0], [self.start, 0]).map(uniform);
            let scores = normal::quantiles(shares);
            if self.factor.is_some() {
                *values = scores;
                continue;
            }
            for ((value, spread), (share, score)) in values.iter_mut().zip(spreads).zip(shares.into_iter().zip(scores))
            {
                *value = spread.at(share, score);
            }
        }
        // Scores that go together: each row needs those before it only, so the last is the first to be replaced.
        if let Some(factor) = &self.factor {
            for (k, (row, spread)) in factor.iter().zip(&self.spreads).enumerate().rev() {
                let score = row.iter().zip(&draw.values).take(k + 1).map(|(l, z)| l * z).sum();
                if let Some(value) = draw.values.get_mut(k) {
                    *value = spread.at_score(score);
                }
            }
        }
        if let Some(k) = self.held
            && let (Some(value), Some(spread)) = (draw.values.get_mut(k), self.spreads.get(k))
        {
            *value = spread.median();
        }
        draw.outside = self.spreads.iter().zip(&draw.values).position(|(spread, value)| !spread.holds(*value));
    }
}

/// Something of every draw, in the order of the draws, shared out to the cores.
pub(crate) fn for_each_draw<T: Send + Copy + Default>(
    sampler: &Sampler,
    count: u32,
    of: impl Fn(&Draw) -> T + Sync,
) -> Vec<T> {
    for_each_four(sampler, count, |draws| draws.each_ref().map(&of))
}

/// The same of four draws at once, in order; the last four may go beyond the count.
pub(crate) fn for_each_four<T: Send + Copy + Default>(
    sampler: &Sampler,
    count: u32,
    of: impl Fn(&[Draw; 4]) -> [T; 4] + Sync,
) -> Vec<T> {
    let mut out = vec![T::default(); count as usize];
    let progress = Progress::new(&format!("{count} draws"), out.len());
    out.par_chunks_mut(CHUNK).enumerate().for_each(|(chunk, cells)| {
        progress.advance(cells.len());
        let mut draws = [sampler.no_draw(); 4];
        for (k, cells) in cells.chunks_mut(4).enumerate() {
            for (number, draw) in (chunk * CHUNK + 4 * k..).zip(&mut draws) {
                sampler.draw_into(number as u64, draw);
            }
            let four = of(&draws);
            cells.copy_from_slice(four.get(..cells.len()).unwrap_or_default());
        }
    });
    out
}

#[cfg(test)]
mod tests {
    use super::super::{Distribution, mean_and_deviation, rank_correlation};
    use super::*;
    use crate::units::{Pressure, Units};

    fn spreads() -> Vec<Spread> {
        let of = |d: Distribution<Pressure>| d.plain();
        vec![
            of(Distribution::normal(30.mpa(), 4.mpa())),
            of(Distribution::lognormal(12.mpa(), 5.mpa())),
            of(Distribution::triangular(10.mpa(), 12.mpa(), 20.mpa())),
            of(Distribution::uniform(5.mpa(), 9.mpa())),
            of(Distribution::normal(3.mpa(), 1.mpa()).within(2.mpa(), 4.mpa())),
        ]
    }
    const SYMBOLS: [&str; 5] = ["a", "b", "c", "d", "e"];

    fn column(sampler: &Sampler, count: u32, k: usize) -> Vec<f64> {
        for_each_draw(sampler, count, |draw| draw.values()[k])
    }

    #[test]
    fn means_deviations_and_correlations_are_those_asked_for() {
        let pair = |one: &str, other: &str, rank| RankCorrelation { one: one.into(), other: other.into(), rank };
        let pairs = [pair("a", "c", 0.7), pair("b", "d", -0.4)];
        let count = 200_000;
        let sampler = Sampler::new(7, &SYMBOLS, spreads(), &pairs).unwrap();
        let columns: Vec<Vec<f64>> = (0..5).map(|k| column(&sampler, count, k)).collect();
        for (values, spread) in columns.iter().zip(spreads()) {
            let (mean, deviation) = mean_and_deviation(values);
            let (want, sd) = spread.moments();
            // Five standard errors of the mean; the deviation to 2 %.
            assert!((mean - want).abs() < 5.0 * sd / f64::from(count).sqrt(), "{mean} {want}");
            assert!((deviation / sd - 1.0).abs() < 0.02, "{deviation} {sd}");
        }
        let at = |i: usize, j: usize| rank_correlation(&columns[i], &columns[j]);
        // The standard error is about 1/√n = 0.0022.
        assert!((at(0, 2) - 0.7).abs() < 0.007 && (at(1, 3) + 0.4).abs() < 0.011, "{} {}", at(0, 2), at(1, 3));
        for (i, j) in [(0, 1), (0, 3), (2, 4), (1, 2)] {
            assert!(at(i, j).abs() < 0.011, "{i} {j} {}", at(i, j));
        }
    }

    #[test]
    fn the_draws_do_not_depend_on_the_number_of_threads() {
        let sampler = Sampler::new(u64::MAX, &SYMBOLS, spreads(), &[]).unwrap();
        let with = |threads: usize| {
            let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
            pool.install(|| column(&sampler, 5_000, 1))
        };
        let one = with(1);
        assert_eq!(one, with(2));
        assert_eq!(one, with(7));
        assert_eq!(one[4_321], sampler.draw(4_321).values()[1]);
        // Fewer draws are the first of more; another start gives others.
        assert_eq!(one[..100], column(&sampler, 100, 1)[..]);
        let other = Sampler::new(0, &SYMBOLS, spreads(), &[]).unwrap();
        assert!(column(&other, 100, 1).iter().zip(&one).all(|(a, b)| a != b));
    }

    #[test]
    fn a_draw_outside_its_bounds_is_marked_and_not_moved() {
        let sampler = Sampler::new(1, &SYMBOLS, spreads(), &[]).unwrap();
        let count = 100_000;
        let outside =
            for_each_draw(&sampler, count, |draw| draw.outside.map_or(0.0, |k| if k == 4 { 1.0 } else { 9.0 }));
        let share = outside.iter().sum::<f64>() / f64::from(count);
        // Beyond one standard deviation: 31.73 %.
        assert!((share - 0.3173).abs() < 0.0075, "{share}");
        assert!(column(&sampler, count, 4).iter().any(|v| *v > 5e6));
    }

    #[test]
    fn counts_and_lists_that_make_no_sense_are_refused() {
        for count in [0, 99, 2_000_001] {
            assert!(Draws { count, start: 1 }.checked().unwrap_err().to_string().contains("between 100 and 2000000"));
        }
        assert!(
            Sampler::new(1, &[], Vec::new(), &[])
                .unwrap_err()
                .to_string()
                .starts_with("number of uncertain inputs is 0")
        );
    }
}
