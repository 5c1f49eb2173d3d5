//! The header of a LAS file, line by line.

use std::io::Read;

use crate::error::Result;
use crate::lines::{Lines, shown};

/// One header line: `MNEM.UNIT value : description`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Entry {
    pub mnemonic: String,
    pub unit: String,
    pub value: String,
    pub line: usize,
}

/// The sections of a LAS 2.0 file.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Section {
    Version,
    Well,
    Curves,
    Parameters,
    Other,
    Data,
}

impl Section {
    /// By the first letter after the tilde.
    pub fn named(line: &str) -> Option<Section> {
        match line.trim_start().strip_prefix('~')?.chars().next()?.to_ascii_uppercase() {
            'V' => Some(Section::Version),
            'W' => Some(Section::Well),
            'C' => Some(Section::Curves),
            'P' => Some(Section::Parameters),
            'O' => Some(Section::Other),
            'A' => Some(Section::Data),
            _ => None,
        }
    }
}

/// Everything above the data.
#[derive(Default)]
pub(super) struct Header {
    pub version: Vec<Entry>,
    pub well: Vec<Entry>,
    pub curves: Vec<Entry>,
    pub parameters: Vec<Entry>,
}

/// More header lines than this belong to no log.
const MOST_LINES: usize = 20_000;

impl Header {
    /// Reads down to and with the line `~A`.
    pub fn read<R: Read>(lines: &mut Lines<R>) -> Result<Header> {
        let mut header = Header::default();
        let mut seen: Vec<Section> = Vec::new();
        while let Some(text) = lines.line_lossy()? {
            let line = text.trim();
            if line.is_empty() || line.starts_with('#') {
                continue;
            }
            if lines.number() > MOST_LINES {
                return Err(lines
                    .bad(format!("the header is longer than {MOST_LINES} lines"), "check that it is a LAS 2.0 file"));
            }
            if line.starts_with('~') {
                let Some(section) = Section::named(line) else {
                    return Err(lines.bad(
                        format!("\"{}\" is no section of LAS 2.0", shown(line)),
                        "keep ~V, ~W, ~C, ~P, ~O and ~A (LAS 3.0 is not read)",
                    ));
                };
                if seen.is_empty() && section != Section::Version {
                    return Err(not_las(lines));
                }
                if seen.contains(&section) {
                    return Err(
                        lines.bad(format!("the section \"{}\" stands twice", shown(line)), "keep one of the two")
                    );
                }
                seen.push(section);
                if section == Section::Data {
                    return Ok(header);
                }
                continue;
            }
            let list = match seen.last() {
                None => return Err(not_las(lines)),
                Some(Section::Version) => &mut header.version,
                Some(Section::Well) => &mut header.well,
                Some(Section::Curves) => &mut header.curves,
                Some(Section::Parameters) => &mut header.parameters,
                Some(Section::Other | Section::Data) => continue,
            };
            list.push(entry(lines, line)?);
        }
        if seen.is_empty() {
            return Err(lines.bad_at(None, None, "the file is empty", "give a LAS 2.0 file"));
        }
        Err(lines.bad_at(None, None, "the file ends before its data section ~A", "get the file again; it is cut short"))
    }
}

fn not_las<R: Read>(lines: &Lines<R>) -> crate::error::Error {
    lines.bad("this is not a LAS file, which begins with the section ~V", "give a LAS 2.0 file")
}

/// The entry of a name in a section.
pub(super) fn find<'a>(entries: &'a [Entry], mnemonic: &str) -> Option<&'a Entry> {
    entries.iter().find(|e| e.mnemonic.eq_ignore_ascii_case(mnemonic))
}

/// The delimiters of the standard: the first dot, the first space after it, the last colon.
fn entry<R: Read>(lines: &Lines<R>, line: &str) -> Result<Entry> {
    let broken = |what: &str| {
        lines.bad(format!("\"{}\" has no {what}", shown(line)), "write header lines as MNEM.UNIT value : description")
    };
    let (mnemonic, rest) = line.split_once('.').ok_or_else(|| broken("dot after its name"))?;
    let (rest, _) = rest.rsplit_once(':').ok_or_else(|| broken("colon before its description"))?;
    let (unit, value) = rest.split_once(char::is_whitespace).unwrap_or((rest, ""));
    Ok(Entry {
        mnemonic: mnemonic.trim().to_owned(),
        unit: unit.trim().to_owned(),
        value: value.trim().to_owned(),
        line: lines.number(),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn delimiters_are_the_first_dot_the_first_space_and_the_last_colon() {
        let lines = Lines::over(&b""[..], "x.las");
        let e = entry(&lines, "STRT .M      635.0000 : START 12:30").unwrap();
        assert_eq!((e.mnemonic.as_str(), e.unit.as_str(), e.value.as_str()), ("STRT", "M", "635.0000 : START 12"));
        let e = entry(&lines, "COMP.   ANY OIL COMPANY INC. : COMPANY").unwrap();
        assert_eq!((e.mnemonic.as_str(), e.unit.as_str(), e.value.as_str()), ("COMP", "", "ANY OIL COMPANY INC."));
        let e = entry(&lines, "RHOB.G/C3 45 350 02 00: BULK DENSITY").unwrap();
        assert_eq!((e.unit.as_str(), e.value.as_str()), ("G/C3", "45 350 02 00"));
        assert_eq!(entry(&lines, "DEPT.M:").unwrap().unit, "M");
        assert!(entry(&lines, "no dot : x").unwrap_err().to_string().contains("no dot"));
        assert!(entry(&lines, "X.M 3").unwrap_err().to_string().contains("no colon"));
    }
}
