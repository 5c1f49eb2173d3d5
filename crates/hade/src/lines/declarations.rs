//! The lines `# key: value` above a table, which say what a table of numbers cannot: its north, its
//! units, its datum.

use std::io::Read;

use super::table::NOT_READ;
use super::{Lines, number, shown, unreadable};
use crate::error::{Error, Result};
use crate::units::Length;

/// The declarations of one file as they stand: key, line, value.
pub(crate) struct Declarations {
    keys: &'static [&'static [&'static str]],
    /// What every such file declares, by any of some keys, and the line to write where it does not.
    always: Always,
    path: String,
    found: Vec<(&'static str, usize, String)>,
    /// The line of the column names, once it is reached.
    names_at: Option<usize>,
}

/// What every file of a kind declares: by any of these keys, and the line to write where it does not.
pub(crate) type Always = &'static [(&'static [&'static str], &'static str)];

/// Makes a quantity of a number in the unit of a file.
pub(crate) type Unit<Q> = fn(f64) -> Q;

/// The units in which a file may state a quantity.
pub(crate) struct Units<Q: 'static> {
    /// The key that declares the unit.
    pub key: &'static str,
    /// What a file without it does not say: "the unit of its depths".
    pub what: &'static str,
    /// Each unit as it is written, in any case, and what it makes of a number.
    pub known: &'static [(&'static str, Unit<Q>)],
    /// What to do about any other: "write m or ft".
    pub fix: &'static str,
}

impl Declarations {
    /// None yet. Only these keys mean something, and that of columns that are not to be read; every other `#` line is
    /// a remark.
    pub fn of(keys: &'static [&'static [&'static str]], always: Always, path: &str) -> Self {
        Declarations { keys, always, path: path.to_owned(), found: Vec::new(), names_at: None }
    }

    /// Takes in a line that begins with `#`. A value may be followed by further declarations:
    /// `# north: magnetic, declination: 2.5`.
    pub fn take<R: Read>(&mut self, lines: &Lines<R>, text: &str) -> Result<()> {
        let Some((key, value)) = self.declaration(text.trim_start_matches('#')) else { return Ok(()) };
        if self.names_at.is_some() {
            return Err(lines.bad(
                format!("\"{key}\" is declared below the column names"),
                "move every declaration above the column names",
            ));
        }
        // A spreadsheet that saves the file again fills the line up with separators.
        let value = value.trim().trim_end_matches([',', ';']);
        let (mut key, mut whole) = (key, String::new());
        for (n, piece) in value.split(',').enumerate() {
            // A comma that no key follows belongs to the value.
            match self.declaration(piece).filter(|_| n > 0) {
                Some((next, value)) => {
                    self.put(lines, key, &whole)?;
                    (key, whole) = (next, value.to_owned());
                }
                None if n == 0 => whole.push_str(piece),
                None => whole.extend([",", piece]),
            }
        }
        self.put(lines, key, &whole)
    }

    /// "key: value" by a key that means something.
    fn declaration<'a>(&self, text: &'a str) -> Option<(&'static str, &'a str)> {
        let (key, value) = text.split_once(':')?;
        let key = key.trim().to_lowercase();
        self.keys.iter().copied().flatten().chain(&[NOT_READ]).find(|k| **k == key).map(|k| (*k, value))
    }

    fn put<R: Read>(&mut self, lines: &Lines<R>, key: &'static str, value: &str) -> Result<()> {
        if let Some((_, line, _)) = self.found.iter().find(|(k, ..)| *k == key) {
            return Err(lines.bad(format!("\"{key}\" is declared again (first in line {line})"), "keep one of the two"));
        }
        let value = value.trim();
        if value.is_empty() {
            return Err(lines.bad(format!("\"{key}\" has no value"), "write the value after the colon"));
        }
        self.found.push((key, lines.number(), value.to_owned()));
        Ok(())
    }

    /// Says that the column names stand in this line: nothing is declared below it.
    pub(super) fn end_at(&mut self, line: usize) {
        self.names_at = Some(line);
    }

    /// The line of the column names, once it is reached.
    pub(super) fn names_at(&self) -> Option<usize> {
        self.names_at
    }

    /// The value of a key.
    pub fn get(&self, key: &str) -> Option<&str> {
        self.entry(key).map(|(_, value)| value)
    }

    fn entry(&self, key: &str) -> Option<(usize, &str)> {
        self.found.iter().find(|(k, ..)| *k == key).map(|(_, line, value)| (*line, value.as_str()))
    }

    /// An error in the declaration of a key; in the column names, where the key is not declared.
    pub fn bad(&self, key: &str, why: impl Into<String>, fix: impl Into<String>) -> Error {
        let line = self.entry(key).map(|(line, _)| line).or(self.names_at);
        unreadable(&self.path, line, Some(key), why, fix)
    }

    /// An error in what the declarations say together.
    pub fn bad_together(&self, why: impl Into<String>, fix: impl Into<String>) -> Error {
        unreadable(&self.path, self.names_at, None, why, fix)
    }

    /// An error for a declaration that is missing, with the line to write, and what else is missing.
    pub fn lacking(&self, what: &str, write: &str) -> Error {
        let (key, _) = write.split_once(':').unwrap_or((write, ""));
        let missing =
            |(keys, line): &&(&[&str], &str)| !line.starts_with(key) && keys.iter().all(|key| self.get(key).is_none());
        let others: Vec<String> = self.always.iter().filter(missing).map(|(_, line)| format!("\"{line}\"")).collect();
        let others = match others.is_empty() {
            true => String::new(),
            false => format!("; it lacks {} too", others.join(" and ")),
        };
        self.bad_together(
            format!("the file does not say {what}"),
            format!("add a line \"{write}\" above the column names{others}"),
        )
    }

    /// A length that carries its unit: "32.4 m".
    pub fn length(&self, key: &str) -> Result<Option<Length>> {
        let Some(text) = self.get(key) else { return Ok(None) };
        let lower = text.to_lowercase();
        let (digits, unit): (&str, Unit<Length>) = match (lower.strip_suffix("ft"), lower.strip_suffix('m')) {
            (Some(digits), _) => (digits, Length::ft),
            (_, Some(digits)) => (digits, Length::m),
            _ => {
                let why = format!("\"{}\" has no unit", shown(text));
                return Err(self.bad(key, why, "write the unit after the number, m or ft"));
            }
        };
        let value = number(digits).map_err(|(why, fix)| self.bad(key, why, fix))?;
        Ok(Some(unit(value)))
    }

    /// An angle in degrees, with or without "deg".
    pub fn degrees(&self, key: &str) -> Result<Option<f64>> {
        let Some(text) = self.get(key) else { return Ok(None) };
        let digits = text.trim_end_matches("degrees").trim_end_matches("deg").trim_end_matches('°');
        number(digits).map(Some).map_err(|(why, fix)| self.bad(key, why, fix))
    }

    /// Holds the file to angles in degrees, and to saying so.
    pub fn require_degrees(&self) -> Result<()> {
        match self.get("angle_unit") {
            None => Err(self.lacking("the unit of its angles", "# angle_unit: deg")),
            Some(unit) if ["deg", "degree", "degrees", "°"].contains(&unit.to_lowercase().as_str()) => Ok(()),
            Some(unit) => Err(self.bad(
                "angle_unit",
                format!("angles in \"{}\" are not read", shown(unit)),
                "convert them to degrees and write deg",
            )),
        }
    }

    /// The unit of a quantity, if the file declares it.
    pub fn unit_if_any<Q>(&self, units: &Units<Q>) -> Result<Option<Unit<Q>>> {
        self.get(units.key).map(|text| self.unit_named(units, text)).transpose()
    }

    /// The unit of a quantity: as the name of its column says, or as the file declares; the two must
    /// not differ.
    pub fn unit<Q>(&self, units: &Units<Q>, in_name: Option<&str>) -> Result<Unit<Q>> {
        match (in_name, self.get(units.key)) {
            (None, None) => {
                let known: Vec<&str> = units.known.iter().map(|(name, _)| *name).collect();
                Err(self.lacking(units.what, &format!("# {}: {}", units.key, known.join(" | "))))
            }
            (Some(name), Some(text)) if !name.eq_ignore_ascii_case(text) => Err(self.bad(
                units.key,
                format!("\"{}\" is declared, and the column name says \"{}\"", shown(text), shown(name)),
                "keep one of the two",
            )),
            (_, Some(text)) | (Some(text), None) => self.unit_named(units, text),
        }
    }

    fn unit_named<Q>(&self, units: &Units<Q>, text: &str) -> Result<Unit<Q>> {
        let found = units.known.iter().find(|(name, _)| name.eq_ignore_ascii_case(text));
        found
            .map(|(_, unit)| *unit)
            .ok_or_else(|| self.bad(units.key, format!("\"{}\" is no unit that is known here", shown(text)), units.fix))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const KEYS: &[&[&str]] = &[&["north", "declination"], &["hole", "depth_unit"]];

    const ALWAYS: Always = &[(&["depth_unit"], "# depth_unit: m | ft")];

    fn taken(text: &str) -> Result<Declarations> {
        let mut lines = Lines::over(text.as_bytes(), "x.csv");
        let mut declared = Declarations::of(KEYS, ALWAYS, "x.csv");
        while let Some(line) = lines.line()? {
            declared.take(&lines, &line)?;
        }
        declared.end_at(9);
        Ok(declared)
    }

    #[test]
    fn declarations_may_share_a_line() {
        let declared =
            taken("# a remark, north: none\n# North: magnetic, Declination: 2,5 ,,;\n#hole:A, B: c\n").unwrap();
        let found = |key: &str| declared.get(key);
        assert_eq!((found("north"), found("declination")), (Some("magnetic"), Some("2,5")));
        assert_eq!((found("hole"), found("depth_unit")), (Some("A, B: c"), None));
        let said = |text: &str| taken(text).map(|_| ()).unwrap_err().to_string();
        assert_eq!(
            said("\n# north: true, north: grid"),
            "x.csv, line 2: \"north\" is declared again (first in line 2); keep one of the two."
        );
        assert_eq!(
            said("# north: , declination: 2"),
            "x.csv, line 1: \"north\" has no value; write the value after the colon."
        );
        assert!(said("# north: grid, declination:").contains("\"declination\" has no value"));
    }

    /// All at once, so that a file is mended once.
    #[test]
    fn everything_that_is_lacking_is_listed() {
        let said = |text: &str| taken(text).unwrap().lacking("its north", "# north: true").to_string();
        assert_eq!(
            said("# hole: A"),
            "x.csv, line 9: the file does not say its north; add a line \"# north: true\" above the column names; it lacks \"# depth_unit: m | ft\" too."
        );
        assert!(said("# depth_unit: m").ends_with("add a line \"# north: true\" above the column names."));
    }

    #[test]
    fn units_and_lengths_are_read_in_any_case_and_refused_with_their_line() {
        const UNITS: Units<Length> = Units {
            key: "depth_unit",
            what: "the unit of its depths",
            known: &[("m", Length::m), ("ft", Length::ft)],
            fix: "write m or ft",
        };
        let unit = |text: &str, in_name: Option<&str>| taken(text)?.unit(&UNITS, in_name).map(|unit| unit(1.0));
        let said = |text: &str, in_name: Option<&str>| unit(text, in_name).unwrap_err().to_string();
        assert_eq!(unit("# depth_unit: FT", None).unwrap(), Length::ft(1.0));
        assert_eq!(unit("# depth_unit: m", Some("M")).unwrap(), Length::m(1.0));
        assert_eq!(unit("", Some("ft")).unwrap(), Length::ft(1.0));
        assert_eq!(
            said("", None),
            "x.csv, line 9: the file does not say the unit of its depths; add a line \"# depth_unit: m | ft\" above the column names."
        );
        let unknown = "column \"depth_unit\": \"ell\" is no unit that is known here; write m or ft.";
        assert_eq!(said("# depth_unit: ell", None), format!("x.csv, line 1, {unknown}"));
        assert_eq!(said("", Some("ell")), format!("x.csv, line 9, {unknown}"));
        assert!(said("# depth_unit: m", Some("ft")).contains("\"m\" is declared, and the column name says \"ft\""));
        assert!(taken("").unwrap().unit_if_any(&UNITS).unwrap().is_none());
        assert_eq!(taken("# hole: 3 FT").unwrap().length("hole").unwrap(), Some(Length::ft(3.0)));
        assert!(taken("# hole: 3").unwrap().length("hole").unwrap_err().to_string().contains("has no unit"));
        assert_eq!(taken("# declination: 2.5 deg").unwrap().degrees("declination").unwrap(), Some(2.5));
    }
}
