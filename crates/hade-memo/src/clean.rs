//! Judging what people wrote before it is typeset: sizes are bounded, invisible characters are
//! taken out, and a character that no font has is refused with its place, because Typst could name
//! only the template's line.

use serde_json::Value;

use crate::error::{Error, Result};
use crate::fonts;

/// Longest record.
const MOST_RECORD: usize = 64 << 20;
/// Longest text.
const MOST_TEXT: usize = 20_000;
/// Longest list that is typeset.
const MOST_LIST: usize = 20_000;
/// Places whose content is computed with and never typeset.
const NOT_TYPESET: [&str; 2] = ["/card/inputs", "/card/outcome"];

/// A value in which every text can be typeset, and what was taken out of it.
pub(crate) struct Cleaned {
    /// The value.
    pub value: Value,
    /// Bytes of the longest text that is typeset.
    pub longest: usize,
    /// Where something was taken out.
    pub warnings: Vec<String>,
}

/// Cleans the JSON text of a record.
pub(crate) fn record(json: &str) -> Result<Cleaned> {
    if json.len() > MOST_RECORD {
        return Err(Error::unsettable("it", format!("is {} bytes long; the most is {MOST_RECORD}", json.len())));
    }
    let mut value: Value =
        serde_json::from_str(json).map_err(|e| Error::unsettable("it", format!("is not JSON: {e}")))?;
    let mut cleaned = Cleaned { value: Value::Null, longest: 0, warnings: Vec::new() };
    walk(&mut value, &mut String::new(), &mut cleaned)?;
    Ok(Cleaned { value, ..cleaned })
}

/// Cleans one text that does not come from the record; `place` is what a message names.
pub(crate) fn text(place: &str, text: &str) -> Result<String> {
    let (clean, _) = one(place, text)?;
    Ok(clean)
}

fn walk(value: &mut Value, place: &mut String, found: &mut Cleaned) -> Result<()> {
    if place.matches('/').count() == 4 && NOT_TYPESET.iter().any(|end| place.ends_with(end)) {
        return Ok(());
    }
    let length = place.len();
    match value {
        Value::String(text) => {
            let (clean, removed) = one(place, text)?;
            if removed {
                found.warnings.push(format!("invisible characters were left out of the record's {place}"));
            }
            found.longest = found.longest.max(clean.len());
            *text = clean;
        }
        Value::Array(list) => {
            if list.len() > MOST_LIST {
                let why = format!("has {} entries; the most is {MOST_LIST}. Give a reduced table", list.len());
                return Err(Error::unsettable(place.clone(), why));
            }
            for (i, entry) in list.iter_mut().enumerate() {
                place.push_str(&format!("/{i}"));
                walk(entry, place, found)?;
                place.truncate(length);
            }
        }
        Value::Object(map) => {
            for (key, entry) in map.iter_mut() {
                place.push_str(&format!("/{}", key.replace('~', "~0").replace('/', "~1")));
                walk(entry, place, found)?;
                place.truncate(length);
            }
        }
        _ => {}
    }
    Ok(())
}

/// The text without invisible characters, and whether there were any.
fn one(place: &str, text: &str) -> Result<(String, bool)> {
    if text.len() > MOST_TEXT {
        let why = format!("is a text of {} bytes; the most is {MOST_TEXT}. Shorten it", text.len());
        return Err(Error::unsettable(place, why));
    }
    let mut clean = String::with_capacity(text.len());
    let mut removed = false;
    for c in text.chars() {
        if c.is_whitespace() && !matches!(c, '\u{a0}' | '\u{202f}' | '\u{2009}') {
            clean.push(' ');
        } else if c.is_control() || is_format(c) {
            removed = true;
        } else if c.is_whitespace() || fonts::covers(c) {
            clean.push(c);
        } else {
            let why = format!(
                "holds {c:?} (U+{:04X}), which none of the memo's fonts has. Write it in other characters",
                u32::from(c)
            );
            return Err(Error::unsettable(place, why));
        }
    }
    Ok((clean, removed))
}

/// Any text made fit to be typeset, without a message: for words that were made from a record that
/// has already been judged.
pub(crate) fn lossy(text: &str) -> String {
    text.chars()
        .take(MOST_TEXT)
        .filter_map(|c| match c {
            '\u{a0}' | '\u{202f}' | '\u{2009}' => Some(c),
            c if c.is_whitespace() => Some(' '),
            c if c.is_control() || is_format(c) => None,
            c if fonts::covers(c) => Some(c),
            _ => Some('?'),
        })
        .collect()
}

/// Unicode's format characters (general category Cf) and variation selectors: joiners, direction
/// marks and the like, which can make a text read otherwise than it is.
fn is_format(c: char) -> bool {
    matches!(u32::from(c),
        0xAD | 0x600..=0x605 | 0x61C | 0x6DD | 0x70F | 0x890..=0x891 | 0x8E2 | 0x180E | 0x200B..=0x200F
        | 0x202A..=0x202E | 0x2060..=0x206F | 0xFE00..=0xFE0F | 0xFEFF | 0xFFF9..=0xFFFB | 0x110BD | 0x110CD
        | 0x13430..=0x1343F | 0x1BCA0..=0x1BCA3 | 0x1D173..=0x1D17A | 0xE0001..=0xE01EF)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn markup_stays_as_it_is() {
        let probe = "#panic(\\\"x\\\") $x^2$ @ref <lab> \\\\ [ { <script> `r` // /* ~ --";
        let cleaned = record(&format!("{{\"title\":\"{probe}\"}}")).unwrap();
        assert_eq!(
            cleaned.value["title"].as_str().unwrap(),
            "#panic(\"x\") $x^2$ @ref <lab> \\ [ { <script> `r` // /* ~ --"
        );
        assert!(cleaned.warnings.is_empty());
    }

    #[test]
    fn invisible_characters_go_and_are_told() {
        let cleaned = record("{\"a\":[\"x\\u202ey\\u0007z\\nw\"]}").unwrap();
        assert_eq!(cleaned.value["a"][0], "xyz w");
        assert!(cleaned.warnings[0].contains("/a/0"));
    }

    #[test]
    fn a_character_without_a_font_is_named_with_its_place() {
        let message = record("{\"entries\":[{\"card\":{\"t/u\":\"漢\"}}]}").err().unwrap().to_string();
        assert!(message.contains("/entries/0/card/t~1u") && message.contains("U+6F22"), "{message}");
    }

    #[test]
    fn what_is_not_typeset_is_not_judged() {
        assert!(record("{\"entries\":[{\"card\":{\"inputs\":\"漢\",\"outcome\":[\"漢\"]}}]}").is_ok());
    }

    #[test]
    fn sizes_are_bounded() {
        let long = format!("{{\"a\":\"{}\"}}", "x".repeat(1 << 20));
        assert!(record(&long).err().unwrap().to_string().contains("/a is a text of 1048576 bytes"));
        let many = format!("{{\"a\":[{}0]}}", "0,".repeat(30_000));
        assert!(record(&many).is_err());
    }
}
