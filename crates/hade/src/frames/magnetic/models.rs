//! The models of the main field: which one holds for a date, and its coefficients on that date.

use std::sync::OnceLock;

use crate::error::{Error, Result};
use crate::frames::Date;

/// A model of the main field.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum FieldModel {
    /// International Geomagnetic Reference Field, 14th generation, used from 1900.0 to 2025.0.
    Igrf14,
    /// World Magnetic Model 2025, used from 2025.0 to 2030.0.
    Wmm2025,
}

/// The highest degree of either model.
pub(super) const HIGHEST: usize = 13;
/// The number of pairs g, h to that degree, with the degree 0 that is zero.
const PAIRS: usize = (HIGHEST + 1) * (HIGHEST + 2) / 2;

/// Gauss coefficients g, h (Schmidt semi-normalised) in nT, or their change in nT per year.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Coefficients {
    degree: usize,
    pairs: [[f64; 2]; PAIRS],
}

impl Coefficients {
    fn new(degree: usize) -> Self {
        Coefficients { degree, pairs: [[0.0; 2]; PAIRS] }
    }
    /// The highest degree.
    pub fn degree(&self) -> usize {
        self.degree
    }
    /// The highest degree with a coefficient that is not zero (10 before 1995).
    pub fn last_degree(&self) -> usize {
        (1..=self.degree).rev().find(|n| (0..=*n).any(|m| self.pair(*n, m) != [0.0; 2])).unwrap_or_default()
    }
    /// g and h of degree n and order m ≤ n ≤ 13.
    pub fn pair(&self, n: usize, m: usize) -> [f64; 2] {
        self.pairs.get(n * (n + 1) / 2 + m).copied().unwrap_or_default()
    }
    fn slot(&mut self, n: usize, m: usize) -> Option<&mut [f64; 2]> {
        if m > n { None } else { self.pairs.get_mut(n * (n + 1) / 2 + m) }
    }
    /// self + factor · other.
    pub fn plus(&self, factor: f64, other: &Coefficients) -> Self {
        let mut sum = *self;
        sum.degree = self.degree.max(other.degree);
        for (s, o) in sum.pairs.iter_mut().zip(&other.pairs) {
            *s = [s[0] + factor * o[0], s[1] + factor * o[1]];
        }
        sum
    }
}

/// The coefficients on a date: those of the last epoch before it, and their change per year.
#[derive(Clone, Copy, Debug)]
pub(super) struct OnDate {
    /// The epoch, decimal year.
    pub epoch: f64,
    /// The coefficients at the epoch.
    pub at_epoch: Coefficients,
    /// Their change per year.
    pub per_year: Coefficients,
    /// The coefficients on the date: at_epoch + (t − epoch) per_year.
    pub now: Coefficients,
}

const WMM2025: &str = include_str!("wmm2025.cof");
const IGRF14: &str = include_str!("igrf14.shc");
/// The first and last decimal year of the two models together.
const FIRST: f64 = 1900.0;
const CHANGE: f64 = 2025.0;
const LAST: f64 = 2030.0;

impl FieldModel {
    /// The model that holds on a date.
    ///
    /// # Errors
    /// Before 1900-01-01 and after 2030-01-01.
    pub fn on(date: Date) -> Result<Self> {
        let year = date.decimal_year();
        match year {
            _ if (FIRST..CHANGE).contains(&year) => Ok(FieldModel::Igrf14),
            _ if (CHANGE..=LAST).contains(&year) => Ok(FieldModel::Wmm2025),
            _ => Err(Error::out_of_range(
                "the date for the magnetic declination",
                date.to_string(),
                "between 1900-01-01 (IGRF-14, to 2024) and 2030-01-01 (WMM2025, from 2025); for another date state the surveyor's own value with site.with_declination(angle, source)?",
            )),
        }
    }

    /// "WMM2025", "IGRF-14".
    pub fn words(self) -> &'static str {
        match self {
            FieldModel::Igrf14 => "IGRF-14",
            FieldModel::Wmm2025 => "WMM2025",
        }
    }

    /// The coefficients at a decimal year within the model.
    ///
    /// # Errors
    /// When the year is outside the model.
    pub fn coefficients(self, year: f64) -> Result<OnDate> {
        let series = match self {
            FieldModel::Igrf14 => {
                static READ: OnceLock<Option<Series>> = OnceLock::new();
                READ.get_or_init(|| read_shc(IGRF14))
            }
            FieldModel::Wmm2025 => {
                static READ: OnceLock<Option<Series>> = OnceLock::new();
                READ.get_or_init(|| read_cof(WMM2025))
            }
        };
        series.as_ref().and_then(|s| s.at(year)).ok_or_else(|| {
            Error::out_of_range(
                format!("the decimal year for {}", self.words()),
                format!("{year}"),
                "within the years of the model",
            )
        })
    }
}

/// Coefficients at epochs, linear between them.
struct Series {
    epochs: Vec<(f64, Coefficients)>,
}

impl Series {
    fn at(&self, year: f64) -> Option<OnDate> {
        let pair = self
            .epochs
            .windows(2)
            .rev()
            .find(|pair| matches!(pair, [(from, _), (to, _)] if (*from..=*to).contains(&year)))?;
        let [(epoch, at_epoch), (next, at_next)] = pair else { return None };
        let years = next - epoch;
        let per_year = Coefficients::new(0).plus(1.0 / years, at_next).plus(-1.0 / years, at_epoch);
        let now = at_epoch.plus(year - epoch, &per_year);
        Some(OnDate { epoch: *epoch, at_epoch: *at_epoch, per_year, now })
    }
}

/// A file of the World Magnetic Model: epoch, then n, m, g, h and their change per year.
fn read_cof(text: &str) -> Option<Series> {
    let mut lines = text.lines();
    let epoch: f64 = lines.next()?.split_whitespace().next()?.parse().ok()?;
    let (mut main, mut change) = (Coefficients::new(12), Coefficients::new(12));
    for line in lines.take_while(|line| !line.starts_with("9999")) {
        let mut words = line.split_whitespace();
        let (n, m) = (words.next()?.parse().ok()?, words.next()?.parse().ok()?);
        let mut number = || -> Option<f64> { words.next()?.parse().ok() };
        *main.slot(n, m)? = [number()?, number()?];
        *change.slot(n, m)? = [number()?, number()?];
    }
    let years = LAST - epoch;
    Some(Series { epochs: vec![(epoch, main), (LAST, main.plus(years, &change))] })
}

/// A file of spherical-harmonic coefficients (SHC): a line of sizes, a line of epochs, then n, m and
/// a value for each epoch; a negative m is h.
fn read_shc(text: &str) -> Option<Series> {
    let mut lines = text.lines().filter(|line| !line.starts_with('#'));
    let degree: usize = lines.next()?.split_whitespace().nth(1)?.parse().ok()?;
    let years: Option<Vec<f64>> = lines.next()?.split_whitespace().map(|w| w.parse().ok()).collect();
    let mut epochs: Vec<(f64, Coefficients)> = years?.into_iter().map(|y| (y, Coefficients::new(degree))).collect();
    for line in lines {
        let mut words = line.split_whitespace();
        let Some(n) = words.next() else { continue };
        let (n, m): (usize, isize) = (n.parse().ok()?, words.next()?.parse().ok()?);
        for (_, coefficients) in &mut epochs {
            let value: f64 = words.next()?.parse().ok()?;
            *coefficients.slot(n, m.unsigned_abs())?.get_mut(usize::from(m < 0))? = value;
        }
    }
    Some(Series { epochs })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn on(text: &str) -> Result<FieldModel> {
        FieldModel::on(Date::read(text).unwrap())
    }

    #[test]
    fn each_date_has_its_model_and_none_is_used_outside() {
        assert_eq!(on("1900-01-01").unwrap(), FieldModel::Igrf14);
        assert_eq!(on("2024-12-31").unwrap(), FieldModel::Igrf14);
        assert_eq!(on("2025-01-01").unwrap(), FieldModel::Wmm2025);
        assert_eq!(on("2030-01-01").unwrap(), FieldModel::Wmm2025);
        for date in ["1899-12-31", "2030-01-02", "0001-01-01", "9999-12-31"] {
            let e = on(date).unwrap_err();
            assert!(e.is_range(), "{e}");
            assert!(e.to_string().contains(date) && e.to_string().contains("with_declination"), "{e}");
        }
        assert!(FieldModel::Wmm2025.coefficients(2024.9).is_err());
        assert!(FieldModel::Igrf14.coefficients(f64::NAN).is_err());
    }

    #[test]
    fn files_are_read_whole() {
        let wmm = FieldModel::Wmm2025.coefficients(2026.0).unwrap();
        assert_eq!((wmm.epoch, wmm.now.degree()), (2025.0, 12));
        assert_eq!(wmm.at_epoch.pair(1, 0), [-29351.8, 0.0]);
        assert_eq!(wmm.at_epoch.pair(12, 12), [-0.7, 0.2]);
        assert!((wmm.now.pair(1, 1)[1] - (4545.4 - 21.5)).abs() < 1e-9);
        let igrf = FieldModel::Igrf14.coefficients(2022.5).unwrap();
        assert_eq!((igrf.epoch, igrf.now.degree()), (2020.0, 13));
        assert_eq!(igrf.at_epoch.pair(1, 0), [-29403.41, 0.0]);
        assert!((igrf.now.pair(1, 0)[0] - 0.5 * (-29403.41 - 29350.0)).abs() < 1e-9);
        assert_eq!(FieldModel::Igrf14.coefficients(1900.0).unwrap().now.pair(1, 1), [-2298.0, 5922.0]);
        // Every pair of both models is there, and none beyond.
        let zero = |c: &Coefficients| {
            (1..=HIGHEST).flat_map(|n| (0..=n).map(move |m| (n, m))).filter(|(n, m)| c.pair(*n, *m) == [0.0; 2]).count()
        };
        assert_eq!(zero(&wmm.at_epoch), 14, "degree 13 only");
        assert_eq!(zero(&igrf.at_epoch), 0);
        assert_eq!(FieldModel::Igrf14.coefficients(1974.2).unwrap().now.last_degree(), 10);
        assert_eq!((wmm.now.last_degree(), igrf.now.last_degree()), (12, 13));
        assert!(read_cof("").is_none() && read_cof("2025.0\n 1 2 3 4 5 6\n").is_none());
        assert!(read_shc("1 1 2 2 1\n2000.0 2005.0\n1 0 5\n").is_none());
    }
}
