//! Text files line by line: in bounded memory, and hashed in the same pass, so that the hash is of
//! the very bytes that were read.

use std::fs::File;
use std::io::{BufRead, BufReader, Read};
use std::path::Path;

use sha2::{Digest, Sha256};

use crate::error::{Error, Result};

mod declarations;
mod table;

pub(crate) use declarations::{Declarations, Unit, Units};
pub(crate) use table::{Column, Expected, Row, Table, without_unit};

/// The longest line that is read, in bytes. Survey and log files keep far below it; a binary file
/// or a file without line ends does not.
const LONGEST: usize = 65_536;

/// A text file that is read line by line.
pub(crate) struct Lines<R> {
    reader: BufReader<R>,
    hasher: Sha256,
    path: String,
    number: usize,
    bytes: Vec<u8>,
}

impl Lines<File> {
    /// Opens a file.
    pub fn open(path: &Path) -> Result<Self> {
        let shown = path.display().to_string();
        match File::open(path) {
            Ok(file) => Ok(Lines::over(file, &shown)),
            Err(e) => Err(Error::Unreadable {
                path: shown,
                line: None,
                column: None,
                why: e.to_string(),
                fix: "give the path relative to the notebook's folder".to_owned(),
            }),
        }
    }
}

impl<R: Read> Lines<R> {
    /// Over any bytes, under the name that messages use.
    pub fn over(bytes: R, path: &str) -> Self {
        Lines {
            reader: BufReader::new(bytes),
            hasher: Sha256::new(),
            path: path.to_owned(),
            number: 0,
            bytes: Vec::new(),
        }
    }

    /// The next line as UTF-8 text, without its end and without a byte-order mark.
    pub fn line(&mut self) -> Result<Option<String>> {
        if !self.advance()? {
            return Ok(None);
        }
        match std::str::from_utf8(&self.bytes) {
            Ok(text) => Ok(Some(text.to_owned())),
            Err(_) => Err(self.bad("it is not UTF-8 text", "save the file as UTF-8")),
        }
    }

    /// The next line with whatever is not UTF-8 replaced: for files whose words may be in an older
    /// encoding but whose numbers are not.
    pub fn line_lossy(&mut self) -> Result<Option<String>> {
        Ok(self.advance()?.then(|| String::from_utf8_lossy(&self.bytes).into_owned()))
    }

    /// The number of the line read last, from 1.
    pub fn number(&self) -> usize {
        self.number
    }

    /// The path as messages show it.
    pub fn path(&self) -> &str {
        &self.path
    }

    /// The SHA-256 of everything that was read so far, lower-case hexadecimal.
    pub fn sha256(&self) -> String {
        self.hasher.clone().finalize().iter().map(|b| format!("{b:02x}")).collect()
    }

    /// An error at the line read last.
    pub fn bad(&self, why: impl Into<String>, fix: impl Into<String>) -> Error {
        self.bad_at(Some(self.number), None, why, fix)
    }

    /// An error in a column of the line read last.
    pub fn bad_in(&self, column: &str, why: impl Into<String>, fix: impl Into<String>) -> Error {
        self.bad_at(Some(self.number), Some(column), why, fix)
    }

    /// An error at any line, or of the whole file.
    pub fn bad_at(
        &self,
        line: Option<usize>,
        column: Option<&str>,
        why: impl Into<String>,
        fix: impl Into<String>,
    ) -> Error {
        unreadable(&self.path, line, column, why, fix)
    }

    /// Reads one line into `self.bytes`; false at the end of the file.
    fn advance(&mut self) -> Result<bool> {
        self.bytes.clear();
        self.number += 1;
        let mut any = false;
        loop {
            let piece = match self.reader.fill_buf() {
                Ok(piece) => piece,
                Err(e) if e.kind() == std::io::ErrorKind::Interrupted => continue,
                Err(e) => {
                    let why = e.to_string();
                    return Err(self.bad(why, "check that the path is a readable file"));
                }
            };
            if piece.is_empty() {
                break;
            }
            any = true;
            let end = piece.iter().position(|b| *b == b'\n');
            let taken = end.map_or(piece.len(), |n| n + 1);
            let part = piece.get(..taken).unwrap_or_default();
            self.hasher.update(part);
            self.bytes.extend_from_slice(part);
            self.reader.consume(taken);
            if self.bytes.len() > LONGEST {
                return Err(self.bad(
                    format!("the line is longer than {LONGEST} bytes, so this is no text table"),
                    "check that it is the right file and not a binary one",
                ));
            }
            if end.is_some() {
                break;
            }
        }
        if !any {
            self.number -= 1;
            return Ok(false);
        }
        while self.bytes.last().is_some_and(|b| *b == b'\n' || *b == b'\r') {
            self.bytes.pop();
        }
        if self.number == 1 {
            if self.bytes.starts_with(&[0xff, 0xfe]) || self.bytes.starts_with(&[0xfe, 0xff]) {
                return Err(self.bad("it is UTF-16 text", "save the file as UTF-8"));
            }
            if self.bytes.starts_with(&[0xef, 0xbb, 0xbf]) {
                self.bytes.drain(..3);
            }
        }
        if self.bytes.contains(&0) {
            return Err(self.bad("it holds a zero byte, so it is no text", "save the table as UTF-8 text"));
        }
        Ok(true)
    }
}

/// An error of a file: at a line and in a column where they are known.
fn unreadable(
    path: &str,
    line: Option<usize>,
    column: Option<&str>,
    why: impl Into<String>,
    fix: impl Into<String>,
) -> Error {
    Error::Unreadable {
        path: path.to_owned(),
        line: line.filter(|n| *n > 0),
        column: column.map(str::to_owned),
        why: why.into(),
        fix: fix.into(),
    }
}

/// A number of a table, finite; otherwise what is wrong and how to mend it.
pub(crate) fn number(text: &str) -> std::result::Result<f64, (String, String)> {
    let text = text.trim();
    match text.parse::<f64>() {
        Ok(value) if value.is_finite() => Ok(value),
        Ok(_) => Err((format!("\"{}\" is not a finite number", shown(text)), "leave such rows out".to_owned())),
        Err(_) if text.is_empty() => {
            Err(("the value is missing".to_owned(), "fill it in or remove the row".to_owned()))
        }
        Err(_) if text.replacen(',', ".", 1).parse::<f64>().is_ok() => {
            Err((format!("\"{}\" has a decimal comma", shown(text)), "write decimals with a point".to_owned()))
        }
        Err(_) => {
            Err((format!("\"{}\" is not a number", shown(text)), "write a number, with a decimal point".to_owned()))
        }
    }
}

/// What an error says, as the reason of another one.
pub(crate) fn reason(error: &Error) -> String {
    error.to_string().trim_end_matches('.').to_owned()
}

/// A text of a file for a message: at most forty characters.
pub(crate) fn shown(text: &str) -> String {
    let short: String = text.chars().take(40).collect();
    if short.len() < text.len() { format!("{short}…") } else { short }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn reads_any_line_end_and_hashes_what_it_read() {
        let mut lines = Lines::over(&b"\xef\xbb\xbfa\r\nb\n\nc"[..], "x");
        let mut got = Vec::new();
        while let Some(line) = lines.line().unwrap() {
            got.push((lines.number(), line));
        }
        assert_eq!(got, [(1, "a".to_owned()), (2, "b".to_owned()), (3, String::new()), (4, "c".to_owned())]);
        // sha256sum of "abc", FIPS 180-4 example.
        let mut lines = Lines::over(&b"abc"[..], "x");
        while lines.line().unwrap().is_some() {}
        assert_eq!(lines.sha256(), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    }

    #[test]
    fn endless_lines_and_other_encodings_are_refused_in_bounded_memory() {
        let mut lines = Lines::over(std::io::repeat(b'7'), "x");
        assert!(lines.line().unwrap_err().to_string().contains("longer than"));
        assert!(lines.bytes.len() < 2 * LONGEST);
        assert!(Lines::over(&b"\xff\xfem\0"[..], "x").line().unwrap_err().to_string().contains("UTF-16"));
        assert!(Lines::over(&b"\xb0"[..], "x").line().unwrap_err().to_string().contains("UTF-8"));
        assert!(Lines::over(&b"a\0b"[..], "x").line().unwrap_err().to_string().contains("zero byte"));
    }
}
