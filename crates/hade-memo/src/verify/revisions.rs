//! The file in time: the exported bytes, the revision with the fields, and what came after.

use lopdf::Document;

use super::permitted::{Fields, compare};
use super::report::{LaterRevision, Report};
use super::signature;
use crate::digest::sha256;
use crate::pdf;
use crate::sign_off::{self, Mark};
use crate::typeset::CREATOR;

/// Most revisions after the memo itself.
const MOST_LATER: usize = 32;

const EXPORTED: &str = "exported bytes";
const FIELDS: &str = "revision with the signature fields";
const LATER: &str = "later revisions";

/// Checks every revision and gives the memo as it was made; `None` when there is no telling what
/// that was.
pub(super) fn check(bytes: &[u8], mark: &Mark, report: &mut Report) -> Option<Document> {
    let exported = bytes.get(..mark.length).unwrap_or_default();
    let digest = sha256(exported);
    if exported.is_empty() || digest != mark.sha256 {
        let found = match exported.is_empty() {
            true => format!("the file is shorter than the {} bytes that were exported", mark.length),
            false => format!(
                "the SHA-256 of the first {} bytes is {digest}, and the memo was exported with {}",
                mark.length, mark.sha256
            ),
        };
        report.fails(EXPORTED, found);
        return None;
    }
    report.holds(EXPORTED, format!("the first {} bytes have the SHA-256 {digest} that was written down", mark.length));

    let made = match sign_off::add(exported) {
        Ok(made) => made,
        Err(why) => {
            report.fails(FIELDS, format!("it cannot be made again: {why}"));
            return None;
        }
    };
    if !bytes.starts_with(&made) {
        let other = match mark.program == CREATOR {
            true => String::new(),
            false => format!("; it was made by {}, and this is {CREATOR}: verify it with that version", mark.program),
        };
        report.fails(FIELDS, format!("it is not what this program adds to the exported bytes{other}"));
        return None;
    }
    report.holds(
        FIELDS,
        format!("bytes {} to {} are what this program adds to the exported ones", mark.length, made.len()),
    );

    let memo = match pdf::load(&made) {
        Ok(memo) => memo,
        Err(why) => {
            report.fails(FIELDS, format!("it cannot be read: {why}"));
            return None;
        }
    };
    later(bytes, made.len(), &memo, report);
    Some(memo)
}

/// Checks what follows the memo itself.
fn later(bytes: &[u8], start: usize, memo: &Document, report: &mut Report) {
    let ends = match ends(bytes, start) {
        Ok(ends) => ends,
        Err(why) => return report.fails(LATER, why),
    };
    if ends.is_empty() {
        return report.holds(LATER, "there is none: nothing was added after the memo was made");
    }
    let fields = Fields::of(memo);
    let mut before: Option<Document> = None;
    for (number, end) in ends.iter().enumerate() {
        let place = || format!("revision {}, which ends at byte {end}", number + 3);
        let after = match pdf::load(bytes.get(..*end).unwrap_or_default()) {
            Ok(after) => after,
            Err(why) => return report.fails(LATER, format!("{} cannot be read: {why}", place())),
        };
        if after.xref_section_count != number + 3 {
            return report.fails(LATER, format!("{} does not stand on the one before it", place()));
        }
        match compare(memo, before.as_ref().unwrap_or(memo), &after, &fields) {
            Err(why) => return report.fails(LATER, format!("{}: {why}", place())),
            Ok(change) => {
                for field in &change.signed {
                    match signature::look(bytes, *end, &after, *field) {
                        Ok(found) if found.agrees => report.signatures.push(found),
                        Ok(found) => {
                            let (name, covers) = (found.field.clone(), found.covers);
                            report.signatures.push(found);
                            report.fails(
                                format!("signature {name}"),
                                format!("the {covers} bytes it is over are not those that were signed"),
                            );
                        }
                        Err(why) => return report.fails(LATER, format!("{}: {why}", place())),
                    }
                }
                report.later_revisions.push(LaterRevision { end: *end, adds: change.words() });
            }
        }
        before = Some(after);
    }
    let count = ends.len();
    let are = if count == 1 { "one, and it adds".to_owned() } else { format!("{count}, and they add") };
    let all = report.later_revisions.iter().map(|r| r.adds.clone()).collect::<Vec<_>>().join("; ");
    report.holds(LATER, format!("{are} only what signing adds: {all}"));
    for found in report.signatures.clone().iter().filter(|found| found.agrees) {
        let whole = if found.whole_file { "the whole file" } else { "the file as it was then" };
        report.holds(
            format!("signature {}", found.field),
            format!(
                "it is over {whole} ({} bytes), whose {} digest it holds; no claim is made on its certificate",
                found.covers, found.algorithm
            ),
        );
    }
}

/// Where each later revision ends: after the words that close one, and the last at the file's end.
fn ends(bytes: &[u8], start: usize) -> Result<Vec<usize>, String> {
    const CLOSE: &[u8] = b"%%EOF";
    let tail = bytes.get(start..).unwrap_or_default();
    if tail.windows(8).any(|w| w == b"/XRefStm") {
        return Err("what was added has two tables of objects, of which readers may take either".to_owned());
    }
    let mut ends = Vec::new();
    let mut from = 0;
    while let Some(at) = tail.get(from..).and_then(|rest| rest.windows(CLOSE.len()).position(|w| w == CLOSE)) {
        let close = from + at;
        from = close + CLOSE.len();
        if !closes(tail.get(..close).unwrap_or_default()) {
            continue;
        }
        let end_of_line = match tail.get(from..).unwrap_or_default() {
            [b'\r', b'\n', ..] => 2,
            [b'\r' | b'\n', ..] => 1,
            _ => 0,
        };
        from += end_of_line;
        ends.push(start + from);
        if ends.len() > MOST_LATER {
            return Err(format!("there are more than {MOST_LATER}"));
        }
    }
    match ends.last() {
        Some(last) if *last != bytes.len() => Err(format!("{} bytes follow the last one", bytes.len() - last)),
        None if !tail.is_empty() => Err(format!("{} bytes follow the memo that belong to no revision", tail.len())),
        _ => Ok(ends),
    }
}

/// Whether text ends with `startxref`, a number and white space.
fn closes(text: &[u8]) -> bool {
    let back = text.len().saturating_sub(64);
    let text = text.get(back..).unwrap_or_default();
    let number = text.trim_ascii_end();
    let digits = number.iter().rev().take_while(|b| b.is_ascii_digit()).count();
    digits > 0
        && number.len() < text.len()
        && number.get(..number.len() - digits).unwrap_or_default().trim_ascii_end().ends_with(b"startxref")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_revision_ends_where_its_closing_words_do() {
        let one = b"memo1 0 obj (%%EOF) endobj\nxref\nstartxref\n12\n%%EOF\n";
        assert_eq!(ends(one, 4), Ok(vec![one.len()]));
        let two = b"memostartxref\n1\n%%EOF\r\nstartxref 2 %%EOF";
        assert_eq!(ends(two, 4), Ok(vec![23, two.len()]));
        assert_eq!(ends(b"memo", 4), Ok(vec![]));
        assert!(ends(b"memo\n", 4).is_err());
        assert!(ends(b"memostartxref\n1\n%%EOF\n\n", 4).is_err());
        assert!(ends(b"memo/XRefStm startxref\n1\n%%EOF\n", 4).is_err());
    }
}
