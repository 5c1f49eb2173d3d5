//! A day of the calendar, as a survey report writes it.

use std::fmt;

use serde::{Deserialize, Deserializer, Serialize, Serializer};

use crate::error::{Error, Result};

/// A day of the Gregorian calendar. It is written as year-month-day ("2026-05-01", ISO 8601), because
/// other orders can be read two ways.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Date {
    year: u16,
    month: u8,
    day: u8,
}

impl Date {
    /// Reads a date written as year-month-day, such as "2026-05-01".
    ///
    /// # Errors
    /// For anything else, and for a day that the calendar does not have.
    pub fn read(text: &str) -> Result<Self> {
        let no_date = || {
            let shown: String = text.chars().take(40).collect();
            Error::undeclared(
                format!("The date \"{shown}\" cannot be read"),
                "write the year, the month and the day with hyphens, such as \"2026-05-01\".",
            )
        };
        let bytes = text.as_bytes();
        let digits = |from: usize, to: usize| -> Option<u16> {
            let part = bytes.get(from..to)?;
            part.iter().all(u8::is_ascii_digit).then(|| part.iter().fold(0, |n, d| 10 * n + u16::from(d - b'0')))
        };
        if bytes.len() != 10 || bytes.get(4) != Some(&b'-') || bytes.get(7) != Some(&b'-') {
            return Err(no_date());
        }
        let (Some(year), Some(month), Some(day)) = (digits(0, 4), digits(5, 7), digits(8, 10)) else {
            return Err(no_date());
        };
        let (month, day) = (month as u8, day as u8);
        if !(1..=12).contains(&month) || day < 1 || day > days_in_month(year, month) {
            return Err(Error::not_physical(
                format!("The date {text}"),
                "the calendar has no such day; write year-month-day, such as \"2026-05-01\".",
            ));
        }
        Ok(Date { year, month, day })
    }

    /// The year.
    pub fn year(self) -> u16 {
        self.year
    }

    /// The day of the year, from 1.
    pub fn day_of_year(self) -> u16 {
        (1..self.month).map(|m| u16::from(days_in_month(self.year, m))).sum::<u16>() + u16::from(self.day)
    }

    /// The days of its year, 365 or 366.
    pub fn days_in_year(self) -> u16 {
        if is_leap(self.year) { 366 } else { 365 }
    }

    /// The date as a decimal year, at the beginning of the day: year + (day of the year − 1) / days of
    /// the year. Models of the magnetic field are linear in it.
    pub fn decimal_year(self) -> f64 {
        f64::from(self.year) + f64::from(self.day_of_year() - 1) / f64::from(self.days_in_year())
    }
}

fn is_leap(year: u16) -> bool {
    year.is_multiple_of(4) && (!year.is_multiple_of(100) || year.is_multiple_of(400))
}

fn days_in_month(year: u16, month: u8) -> u8 {
    match month {
        2 if is_leap(year) => 29,
        2 => 28,
        4 | 6 | 9 | 11 => 30,
        _ => 31,
    }
}

impl fmt::Display for Date {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:04}-{:02}-{:02}", self.year, self.month, self.day)
    }
}
impl Serialize for Date {
    fn serialize<S: Serializer>(&self, s: S) -> std::result::Result<S::Ok, S::Error> {
        s.collect_str(self)
    }
}
impl<'de> Deserialize<'de> for Date {
    fn deserialize<D: Deserializer<'de>>(d: D) -> std::result::Result<Self, D::Error> {
        let text = String::deserialize(d)?;
        Date::read(&text).map_err(serde::de::Error::custom)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_year_is_counted_in_days() {
        let year = |text: &str| Date::read(text).unwrap().decimal_year();
        assert_eq!(year("2025-01-01"), 2025.0);
        assert_eq!(year("2024-07-02"), 2024.5, "day 184 of 366");
        assert_eq!(year("2023-12-31"), 2023.0 + 364.0 / 365.0);
        assert_eq!(year("2000-02-29"), 2000.0 + 59.0 / 366.0);
        assert_eq!(Date::read("1999-12-31").unwrap().day_of_year(), 365);
        assert!(Date::read("2025-10-01").unwrap() > Date::read("2025-09-30").unwrap());
    }

    #[test]
    fn what_is_no_date_is_refused_with_the_way_to_write_it() {
        for text in [
            "",
            "yesterday",
            "2026",
            "2026-5-1",
            "01-05-2026",
            "1.5.2026",
            "2026/05/01",
            "2026-05-01T00:00",
            "2026-05-0１",
            "-026-05-01",
            "2026-+5-01",
        ] {
            let e = Date::read(text).unwrap_err().to_string();
            assert!(e.contains("cannot be read") && e.contains("2026-05-01"), "{text}: {e}");
        }
        for text in ["2026-13-01", "2026-00-01", "2026-02-29", "1900-02-29", "2026-04-31", "2026-01-00"] {
            assert!(Date::read(text).unwrap_err().to_string().contains("no such day"), "{text}");
        }
        assert!(Date::read(&"9".repeat(1000)).unwrap_err().to_string().len() < 200);
    }

    #[test]
    fn is_written_as_it_is_read() {
        let date = Date::read("1953-08-07").unwrap();
        assert_eq!(date.to_string(), "1953-08-07");
        let json = serde_json::to_string(&date).unwrap();
        assert_eq!(json, "\"1953-08-07\"");
        assert_eq!(serde_json::from_str::<Date>(&json).unwrap(), date);
        assert!(serde_json::from_str::<Date>("\"1953-02-30\"").is_err());
    }
}
