//! A table of a CSV file, row by row: declarations and remarks, the column names, the rows.

use std::cell::Cell;
use std::io::Read;

use super::{Declarations, Lines, number, shown};
use crate::error::{Error, Result};

/// What a reader expects of its files.
pub(crate) struct Expected {
    /// The keys of the declarations that mean something; every other `#` line is a remark.
    pub keys: &'static [&'static [&'static str]],
    /// What every such file declares, by any of some keys, and the line to write where it does not.
    pub always: &'static [(&'static [&'static str], &'static str)],
    /// What to give in place of an empty file: "a survey with columns md, inclination, azimuth".
    pub file: &'static str,
    /// The columns: "md, inclination, azimuth".
    pub names: &'static str,
    /// Columns that a file may have besides. Where there are any, a name that is none of the columns is refused,
    /// for it may be one of them misspelt.
    pub besides: &'static [&'static [&'static str]],
    /// Whether a column name may carry a unit: "tvd (m)".
    pub units_in_names: bool,
    /// What a row is, one and many: "station", "stations".
    pub rows: [&'static str; 2],
    /// No file holds more rows than this.
    pub most: usize,
    /// What to do about a file that holds more.
    pub fewer: &'static str,
}

/// A table that is read row by row, down to and with its column names at first.
pub(crate) struct Table<R> {
    lines: Lines<R>,
    expected: &'static Expected,
    declared: Declarations,
    headings: Vec<Heading>,
    rows: usize,
    /// Whether nothing but empty lines was read.
    blank: bool,
}

/// A column name as it is written, as it is compared, and the unit in it.
struct Heading {
    written: String,
    name: String,
    unit: Option<String>,
    /// Whether it was asked for.
    known: Cell<bool>,
}

/// A column that was found.
pub(crate) struct Column {
    place: usize,
    /// Its name as the file writes it, at most forty characters.
    pub name: String,
}

/// The cells of one row.
pub(crate) struct Row(Vec<String>);

impl<R: Read> Table<R> {
    /// Reads down to and with the column names.
    pub fn open(lines: Lines<R>, expected: &'static Expected) -> Result<Self> {
        let declared = Declarations::of(expected.keys, expected.always, lines.path());
        let mut table = Table { lines, expected, declared, headings: Vec::new(), rows: 0, blank: true };
        let Some(fields) = table.next_fields()? else {
            let Expected { file, names, rows: [_, rows], .. } = expected;
            return Err(match table.blank {
                true => table.bad_file("the file is empty", format!("give {file}")),
                false => table.bad_file(
                    "the file holds no table",
                    format!("add the line of column names ({names}) and the {rows} below it"),
                ),
            });
        };
        if let [one] = fields.as_slice()
            && one.contains([';', '\t'])
        {
            return Err(table.lines.bad(
                "the columns are not separated by commas",
                "save the table with commas between columns and points in decimals",
            ));
        }
        let heading = |written: String| {
            let (name, unit) = if expected.units_in_names { heading(&written) } else { (plain(&written), None) };
            Heading { written, name, unit, known: Cell::new(false) }
        };
        table.headings = fields.into_iter().map(heading).collect();
        table.declared.end_at(table.lines.number());
        Ok(table)
    }

    /// What the file declares.
    pub fn declared(&self) -> &Declarations {
        &self.declared
    }

    /// The number of the line read last, from 1.
    pub fn line(&self) -> usize {
        self.lines.number()
    }

    /// The path as it was given, and the SHA-256 of everything that was read so far.
    pub fn source(&self) -> (String, String) {
        (self.lines.path().to_owned(), self.lines.sha256())
    }

    /// A column by any of its names; `None` when the file has none of them.
    pub fn column_if_any(&self, names: &[&str]) -> Result<Option<Column>> {
        let names: Vec<String> = names.iter().map(|n| plain(n)).collect();
        let mut found = self.headings.iter().enumerate().filter(|(_, h)| names.contains(&h.name));
        found.clone().for_each(|(_, h)| h.known.set(true));
        let first = found.next().map(|(place, h)| Column { place, name: shown(&h.written) });
        match (first, found.next()) {
            (Some(column), Some(_)) => Err(self.bad_in(&column, "two columns have this name", "keep one of them")),
            (column, _) => Ok(column),
        }
    }

    /// A column by any of its names.
    pub fn column(&self, names: &[&str]) -> Result<Column> {
        self.column_if_any(names)?.ok_or_else(|| self.missing(names.first().copied().unwrap_or_default()))
    }

    /// A column by any of its names, with what to do when there is none.
    pub fn column_or(&self, names: &[&str], fix: &str) -> Result<Column> {
        self.column_if_any(names)?
            .ok_or_else(|| self.missing_with(names.first().copied().unwrap_or_default(), fix.to_owned()))
    }

    /// An error for a column that is missing.
    pub fn missing(&self, name: &str) -> Error {
        let names = self.expected.names;
        self.missing_with(name, format!("name the columns {names} in the first line that does not begin with #"))
    }

    fn missing_with(&self, name: &str, fix: String) -> Error {
        let all: Vec<&str> = self.headings.iter().map(|h| h.written.as_str()).collect();
        self.lines.bad_in(name, format!("the column is missing; there are: {}", listed(&all)), fix)
    }

    /// Whether a column goes by this name.
    pub fn is_named(&self, column: &Column, name: &str) -> bool {
        self.headings.get(column.place).is_some_and(|h| h.name == plain(name))
    }

    /// The unit in the name of a column.
    pub fn unit_in_name(&self, column: &Column) -> Option<&str> {
        self.headings.get(column.place).and_then(|h| h.unit.as_deref())
    }

    /// The next row, with no more cells than there are columns; `None` below the last.
    pub fn next_row(&mut self) -> Result<Option<Row>> {
        let Expected { rows: [row, rows], most, fewer, .. } = self.expected;
        if self.rows == 0 {
            self.require_known_names()?;
        }
        let Some(fields) = self.next_fields()? else {
            return match self.rows {
                0 => {
                    Err(self
                        .bad_file(format!("the file holds no {row}"), format!("add the {rows} below the column names")))
                }
                _ => Ok(None),
            };
        };
        if self.rows >= *most {
            return Err(self.lines.bad(format!("the file holds more than {most} {rows}"), *fewer));
        }
        self.rows += 1;
        if fields.len() > self.headings.len() {
            return Err(self.lines.bad(
                format!("the row has {} values for {} columns", fields.len(), self.headings.len()),
                "write decimals with a point (a decimal comma splits a number in two), and quote texts that hold commas",
            ));
        }
        Ok(Some(Row(fields)))
    }

    /// Refuses a column that nobody asked for, in a file some of whose columns need not be there.
    fn require_known_names(&self) -> Result<()> {
        let Expected { names, besides, .. } = self.expected;
        if besides.is_empty() {
            return Ok(());
        }
        let left_out = self.declared.get(NOT_READ).unwrap_or_default();
        let left_out: Vec<String> = left_out.split(',').map(plain).collect();
        let stray = |h: &&Heading| !h.known.get() && !REMARKS.contains(&h.name.as_str()) && !left_out.contains(&h.name);
        let Some(heading) = self.headings.iter().filter(|h| !h.name.is_empty()).find(stray) else { return Ok(()) };
        let besides = || besides.iter().copied().flatten();
        let meant = besides().map(|name| (strsim::levenshtein(&plain(name), &heading.name), name)).min();
        let written = shown(&heading.written);
        let fix = match meant {
            Some((away, name)) if 2 * away <= heading.name.chars().count() => format!(
                "write {name} if that is meant; if not, add a line \"# {NOT_READ}: {written}\" above the column names"
            ),
            _ => format!(
                "correct the name, or add a line \"# {NOT_READ}: {written}\" above the column names; the columns are {names}, and may be {}",
                besides().copied().collect::<Vec<_>>().join(", ")
            ),
        };
        Err(self.lines.bad_at(
            Some(self.declared.names_at().unwrap_or(self.lines.number())),
            Some(&written),
            "no column of this name is known here, and nothing of it would be read",
            fix,
        ))
    }

    /// The text of a cell.
    pub fn text<'a>(&self, row: &'a Row, column: &Column) -> Result<&'a str> {
        row.0.get(column.place).map(String::as_str).ok_or_else(|| {
            self.bad_in(column, "the row ends before this column", "fill the value in or remove the row")
        })
    }

    /// The number in a cell.
    pub fn number(&self, row: &Row, column: &Column) -> Result<f64> {
        number(self.text(row, column)?).map_err(|(why, fix)| self.bad_in(column, why, fix))
    }

    /// The number in a cell that may be empty, of a column that need not be there.
    pub fn number_if_any(&self, row: &Row, column: Option<&Column>) -> Result<Option<f64>> {
        match column {
            Some(column) if row.0.get(column.place).is_some_and(|text| !text.is_empty()) => {
                self.number(row, column).map(Some)
            }
            _ => Ok(None),
        }
    }

    /// The angle in a cell, in degrees from 0 to `most`; azimuths are also read from −180°.
    pub fn degrees(&self, row: &Row, column: &Column, [least, most]: [f64; 2], fix: &str) -> Result<f64> {
        let value = self.number(row, column)?;
        if (least..=most).contains(&value) {
            return Ok(value);
        }
        Err(self.bad_in(column, format!("{value}° is not between 0° and {most}°"), fix))
    }

    /// An error at the line read last.
    pub fn bad(&self, why: impl Into<String>, fix: impl Into<String>) -> Error {
        self.lines.bad(why, fix)
    }

    /// An error in a column of the line read last.
    pub fn bad_in(&self, column: &Column, why: impl Into<String>, fix: impl Into<String>) -> Error {
        self.lines.bad_in(&column.name, why, fix)
    }

    /// An error of the whole file.
    pub fn bad_file(&self, why: impl Into<String>, fix: impl Into<String>) -> Error {
        self.lines.bad_at(None, None, why, fix)
    }

    /// The fields of the next line that is neither empty nor begins with `#`.
    fn next_fields(&mut self) -> Result<Option<Vec<String>>> {
        while let Some(text) = self.lines.line()? {
            let text = text.trim();
            self.blank &= text.is_empty();
            if text.trim_matches([',', ';', ' ', '\t']).is_empty() {
                continue;
            }
            // A spreadsheet may put a remark into quotation marks when it holds a comma. It then ends
            // with one too, before the separators that fill the line up.
            let bare = text.trim_start_matches('"');
            if bare.starts_with('#') {
                self.declared.take(&self.lines, bare.trim_end_matches([',', ';']).trim_end_matches('"'))?;
                continue;
            }
            return fields(&self.lines, text).map(Some);
        }
        Ok(None)
    }
}

/// Column names one after the other, of many the first twenty.
fn listed(names: &[&str]) -> String {
    const MOST: usize = 20;
    let mut words: Vec<String> = names.iter().take(MOST).map(|name| shown(name)).collect();
    if names.len() > MOST {
        words.push("…".to_owned());
    }
    words.join(", ")
}

/// The declaration that names columns which are not to be read.
pub(crate) const NOT_READ: &str = "not_read";
/// Columns for the reader of the file.
const REMARKS: [&str; 8] = ["remark", "remarks", "note", "notes", "comment", "comments", "source", "reference"];

/// A column name as it is compared: "Dip_Direction" → "dip direction".
fn plain(name: &str) -> String {
    name.trim().to_lowercase().replace('_', " ")
}

/// A column name as it is compared, without its unit, and the unit: "SHmin (psi)" → "shmin", "psi".
fn heading(text: &str) -> (String, Option<String>) {
    let name = without_unit(text);
    let unit = text.trim().get(name.len()..).map(|unit| unit.trim().trim_matches(['(', '[', ')', ']']).trim());
    (plain(name), unit.filter(|unit| !unit.is_empty()).map(str::to_owned))
}

/// A column name without the unit that stands in it: "SHmin (psi)" → "SHmin".
pub(crate) fn without_unit(text: &str) -> &str {
    let text = text.trim();
    let unit = text.find(['(', '[']).filter(|_| text.ends_with([')', ']']));
    unit.and_then(|at| text.get(..at)).unwrap_or(text).trim_end()
}

/// The fields of a line by the rules of CSV: separated by commas, trimmed, in quotation marks where
/// they hold a comma.
fn fields<R: Read>(lines: &Lines<R>, text: &str) -> Result<Vec<String>> {
    if !text.contains('"') {
        return Ok(text.split(',').map(|field| field.trim().to_owned()).collect());
    }
    let mut reader = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .trim(csv::Trim::All)
        .buffer_capacity(text.len() + 2)
        .from_reader(text.as_bytes());
    let mut record = csv::StringRecord::new();
    match reader.read_record(&mut record) {
        Ok(_) => Ok(record.iter().map(str::to_owned).collect()),
        Err(e) => Err(lines.bad(e.to_string(), "write the line as comma-separated values")),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const EXPECTED: Expected = Expected {
        keys: &[&["north"]],
        always: &[],
        file: "a table with columns name, dip",
        names: "name, dip",
        besides: &[],
        units_in_names: true,
        rows: ["plane", "planes"],
        most: 3,
        fewer: "keep three",
    };

    fn open(text: &str) -> Result<Table<&[u8]>> {
        Table::open(Lines::over(text.as_bytes(), "x.csv"), &EXPECTED)
    }
    fn dips(text: &str) -> Result<Vec<f64>> {
        let mut table = open(text)?;
        let dip = table.column(&["dip", "dip_angle"])?;
        let mut dips = Vec::new();
        while let Some(row) = table.next_row()? {
            dips.push(table.degrees(&row, &dip, [0.0, 90.0], "turn it")?);
        }
        Ok(dips)
    }
    fn refused(text: &str) -> String {
        dips(text).unwrap_err().to_string()
    }

    #[test]
    fn any_spelling_order_quotation_and_line_end_is_read() {
        let text = "\u{feff}\"# a, remark\",,\r\n# north: true,,\r\n\r\nName, DIP_Angle [deg],\r\n\"a, b\",\" 10 \",\r\n# another\r\n,,\r\nc,20\r\n";
        assert_eq!(dips(text).unwrap(), [10.0, 20.0]);
        let table = open(text).unwrap();
        assert_eq!((table.declared().get("north"), table.line()), (Some("true"), 4));
        let dip = table.column(&["dip angle"]).unwrap();
        assert_eq!((dip.name.as_str(), table.unit_in_name(&dip)), ("DIP_Angle [deg]", Some("deg")));
        assert!(table.is_named(&dip, "dip_angle") && !table.is_named(&dip, "dip"));
        assert_eq!(heading("SHmin (psi)"), ("shmin".to_owned(), Some("psi".to_owned())));
        assert_eq!(heading("a) (b"), ("a) (b".to_owned(), None));
    }

    /// A misspelt column that need not be there would be lost without a word.
    #[test]
    fn a_name_that_is_no_column_is_refused_where_columns_may_be_left_out() {
        const MAY: Expected = Expected { besides: &[&["drawdown", "path_min"]], ..EXPECTED };
        let read = |text: &str| -> Result<()> {
            let mut table = Table::open(Lines::over(text.as_bytes(), "x.csv"), &MAY)?;
            table.column(&["dip"])?;
            for name in MAY.besides.iter().copied().flatten() {
                table.column_if_any(&[name])?;
            }
            while table.next_row()?.is_some() {}
            Ok(())
        };
        let said = |text: &str| read(text).unwrap_err().to_string();
        assert_eq!(
            said("Dip,Draw_Down\n1,2\n"),
            "x.csv, line 1, column \"Draw_Down\": no column of this name is known here, and nothing of it would be read; write drawdown if that is meant; if not, add a line \"# not_read: Draw_Down\" above the column names."
        );
        assert!(said("# a\nDip,colour\n1,2\n").starts_with("x.csv, line 2, column \"colour\""));
        assert!(said("Dip,colour\n1,2\n").contains("the columns are name, dip, and may be drawdown, path_min"));
        read("# not_read: colour, Bed\nDip,Colour,bed,Remark,,PATH_MIN\n1,2\n").unwrap();
    }

    #[test]
    fn messages_name_the_column_as_the_file_does() {
        assert_eq!(
            refused("Name,Dip\na,\"4,5\"\n"),
            "x.csv, line 2, column \"Dip\": \"4,5\" has a decimal comma; write decimals with a point."
        );
        assert_eq!(
            refused("Name,Dip\na,95\n"),
            "x.csv, line 2, column \"Dip\": 95° is not between 0° and 90°; turn it."
        );
        assert_eq!(
            refused("name\na\n"),
            "x.csv, line 1, column \"dip\": the column is missing; there are: name; name the columns name, dip in the first line that does not begin with #."
        );
        assert_eq!(
            refused("Dip,dip_angle\n"),
            "x.csv, line 1, column \"Dip\": two columns have this name; keep one of them."
        );
        assert_eq!(
            refused("# north: true\n"),
            "x.csv: the file holds no table; add the line of column names (name, dip) and the planes below it."
        );
        assert_eq!(refused("\n \n"), "x.csv: the file is empty; give a table with columns name, dip.");
        assert_eq!(refused("dip\n"), "x.csv: the file holds no plane; add the planes below the column names.");
        assert_eq!(refused("dip\n1\n2\n3\n4\n"), "x.csv, line 5: the file holds more than 3 planes; keep three.");
        assert!(refused("name;dip\n").contains("not separated by commas"));
        assert!(refused("name\tdip\n").contains("not separated by commas"));
        assert!(refused("name,dip\na,1,2\n").contains("3 values for 2 columns"));
        assert!(refused("name,dip\na\n").contains("ends before this column"));
        assert!(refused("dip\n1\n# north: true\n").starts_with("x.csv, line 3: \"north\" is declared below"));
    }
}
