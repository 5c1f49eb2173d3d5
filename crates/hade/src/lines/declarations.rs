//! The lines `# key: value` above a table, which say what a table of numbers cannot: its north, its
//! units, its datum.

use std::io::Read;

use super::{Lines, number, shown};
use crate::error::Result;
use crate::units::Length;

/// The declarations of one file as they stand: key, line, value.
pub(crate) struct Declarations {
    keys: &'static [&'static str],
    found: Vec<(&'static str, usize, String)>,
}

impl Declarations {
    /// None yet. Only these keys mean something; every other `#` line is a remark.
    pub fn of(keys: &'static [&'static str]) -> Self {
        Declarations { keys, found: Vec::new() }
    }

    /// Takes in a line that begins with `#`.
    pub fn take<R: Read>(&mut self, lines: &Lines<R>, text: &str, above_table: bool) -> Result<()> {
        let Some((key, value)) = text.trim_start_matches('#').split_once(':') else { return Ok(()) };
        let key = key.trim().to_lowercase();
        let Some(key) = self.keys.iter().find(|k| **k == key) else { return Ok(()) };
        // A spreadsheet that saves the file again fills the line up with separators.
        let value = value.trim().trim_end_matches([',', ';']).trim();
        if !above_table {
            return Err(lines.bad(
                format!("\"{key}\" is declared below the column names"),
                "move every declaration above the column names",
            ));
        }
        if let Some((_, line, _)) = self.found.iter().find(|(k, ..)| k == key) {
            return Err(lines.bad(format!("\"{key}\" is declared again (first in line {line})"), "keep one of the two"));
        }
        if value.is_empty() {
            return Err(lines.bad(format!("\"{key}\" has no value"), "write the value after the colon"));
        }
        self.found.push((key, lines.number(), value.to_owned()));
        Ok(())
    }

    /// The line and the value of a key.
    pub fn get(&self, key: &str) -> Option<(usize, &str)> {
        self.found.iter().find(|(k, ..)| *k == key).map(|(_, line, value)| (*line, value.as_str()))
    }

    /// A length that carries its unit: "32.4 m".
    pub fn length<R: Read>(&self, lines: &Lines<R>, key: &str) -> Result<Option<Length>> {
        let Some((line, text)) = self.get(key) else { return Ok(None) };
        let lower = text.to_lowercase();
        let (digits, unit): (&str, fn(f64) -> Length) = match (lower.strip_suffix("ft"), lower.strip_suffix('m')) {
            (Some(digits), _) => (digits, Length::ft),
            (_, Some(digits)) => (digits, Length::m),
            _ => {
                return Err(lines.bad_at(
                    Some(line),
                    Some(key),
                    format!("\"{}\" has no unit", shown(text)),
                    "write the unit after the number, m or ft",
                ));
            }
        };
        let value = number(digits).map_err(|(why, fix)| lines.bad_at(Some(line), Some(key), why, fix))?;
        Ok(Some(unit(value)))
    }
}
