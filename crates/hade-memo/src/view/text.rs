//! Texts as the template sets them: symbols taken apart, long words made breakable.

use serde::Serialize;

use crate::clean::lossy;

/// Longest run of characters that need not break.
const UNBROKEN: usize = 24;
/// A place where a line may break, shown as nothing.
const BREAK: char = '\u{200b}';

/// A text that is set as it is. A word too long for a column may break after a separator, or
/// anywhere when it has none.
pub(crate) fn plain(text: &str) -> String {
    let text = lossy(text);
    if !text.split(' ').any(|word| word.chars().count() > UNBROKEN) {
        return text;
    }
    text.split(' ').map(breakable).collect::<Vec<_>>().join(" ")
}

fn breakable(word: &str) -> String {
    if word.chars().count() <= UNBROKEN {
        return word.to_owned();
    }
    let mut out = String::with_capacity(word.len() + 8);
    let mut since = 0;
    for c in word.chars() {
        out.push(c);
        since += 1;
        if (since > 5 && "/\\-_.,;:=&?".contains(c)) || since >= 16 {
            out.push(BREAK);
            since = 0;
        }
    }
    out
}

/// A text with true minus signs before its numbers ("-0.65" after a blank, a bracket or nothing).
pub(crate) fn with_minus(text: &str) -> String {
    let chars: Vec<char> = text.chars().collect();
    let is_sign = |at: usize| {
        let before = at.checked_sub(1).and_then(|i| chars.get(i));
        let starts = before.is_none_or(|c| c.is_whitespace() || "([{=·×/,;|".contains(*c));
        starts && chars.get(at + 1).is_some_and(char::is_ascii_digit)
    };
    chars.iter().enumerate().map(|(at, c)| if *c == '-' && is_sign(at) { '\u{2212}' } else { *c }).collect()
}

/// At most so many characters, with an ellipsis when some were left out.
pub(crate) fn shortened(text: &str, most: usize) -> String {
    let text = lossy(text);
    if text.chars().count() <= most {
        return text;
    }
    let kept: String = text.chars().take(most.saturating_sub(1)).collect();
    format!("{}\u{2026}", kept.trim_end())
}

/// The first sentence of a caption, for a list of captions.
pub(crate) fn first_sentence(text: &str) -> String {
    let ends = |(at, _): &(usize, &str)| text.get(at + 2..).is_some_and(|rest| rest.starts_with(char::is_uppercase));
    let end = text.match_indices(". ").find(ends).map_or(text.len(), |(at, _)| at);
    shortened(text.get(..end).unwrap_or(text).trim_end_matches('.'), LISTED)
}

/// Most characters of a caption in a list.
const LISTED: usize = 120;

/// A symbol: what stands on the line, what stands below it, and what follows.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize)]
pub(crate) struct Symbol {
    /// On the line.
    base: String,
    /// Below the line.
    sub: String,
    /// After both.
    tail: String,
    /// Whether the base is one letter, set in italics as a variable.
    variable: bool,
}

/// A symbol in plain text ("S_v", "σ_1'"); the first underscore begins the subscript.
pub(crate) fn symbol(text: &str) -> Symbol {
    let text = lossy(text.trim());
    let (base, rest) = text.split_once('_').unwrap_or((&text, ""));
    let (sub, tail) = match rest.split_once(' ') {
        Some((sub, tail)) => (sub, format!(" {tail}")),
        None => (rest, String::new()),
    };
    let primes = sub.chars().rev().take_while(|c| matches!(c, '\'' | '\u{2032}')).count();
    let keep = sub.chars().count() - primes;
    let sub_text: String = sub.chars().take(keep).filter(|c| !matches!(c, '{' | '}')).collect();
    let base = format!("{base}{}", "\u{2032}".repeat(primes)).replace('\'', "\u{2032}");
    let letters: Vec<char> = base.chars().filter(|c| *c != '\u{2032}').collect();
    Symbol {
        variable: matches!(letters.as_slice(), [one] if one.is_alphabetic()),
        base,
        sub: sub_text.replace('_', " "),
        tail,
    }
}

/// A piece of a text: words, or a symbol with its subscript.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
#[serde(untagged)]
pub(crate) enum Run {
    /// Words as they are.
    Words {
        /// The words.
        words: String,
    },
    /// A letter with a subscript.
    Symbol {
        /// The letter, perhaps primed.
        base: String,
        /// The subscript.
        sub: String,
    },
}

/// A text in which symbols such as "S_v" and "σ_1" are set with true subscripts; everything else
/// stays as it is.
pub(crate) fn rich(text: &str) -> Vec<Run> {
    let chars: Vec<char> = with_minus(&lossy(text)).chars().collect();
    let mut runs = Vec::new();
    let mut words = String::new();
    let mut at = 0;
    while let Some(&c) = chars.get(at) {
        let before = at.checked_sub(1).and_then(|i| chars.get(i));
        // A change of something is written before its letter.
        let is_part = |b: &char| *b != 'Δ' && (b.is_alphanumeric() || "_./\\-@#".contains(*b));
        match symbol_at(&chars, at).filter(|_| !before.is_some_and(is_part)) {
            Some((base, sub, next)) => {
                if !words.is_empty() {
                    runs.push(Run::Words { words: plain(&std::mem::take(&mut words)) });
                }
                runs.push(Run::Symbol { base, sub });
                at = next;
            }
            None => {
                words.push(c);
                at += 1;
            }
        }
    }
    if !words.is_empty() {
        runs.push(Run::Words { words: plain(&words) });
    }
    runs
}

/// A letter, perhaps primed, an underscore and a short subscript that ends the word.
fn symbol_at(chars: &[char], at: usize) -> Option<(String, String, usize)> {
    let letter = chars.get(at).filter(|c| c.is_alphabetic())?;
    let mut base = letter.to_string();
    let mut next = at + 1;
    if let Some('\'' | '\u{2032}') = chars.get(next) {
        base.push('\u{2032}');
        next += 1;
    }
    if chars.get(next) != Some(&'_') {
        return None;
    }
    next += 1;
    let raised = |c: char| matches!(c, '²' | '³' | '¹' | '\u{2070}'..='\u{207f}');
    let sub: String = chars.get(next..)?.iter().take_while(|c| c.is_alphanumeric() && !raised(**c)).take(11).collect();
    next += sub.chars().count();
    if sub.is_empty() || sub.chars().count() > 10 {
        return None;
    }
    if let Some('\'' | '\u{2032}') = chars.get(next) {
        base.push('\u{2032}');
        next += 1;
    }
    let ends = match chars.get(next) {
        Some('.' | '/' | '\\' | '-' | ':') => !chars.get(next + 1).is_some_and(|c| c.is_alphanumeric()),
        Some('_' | '(') => false,
        _ => true,
    };
    ends.then_some((base, sub, next))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn spelled(text: &str) -> String {
        rich(text)
            .into_iter()
            .map(|run| match run {
                Run::Words { words } => words,
                Run::Symbol { base, sub } => format!("<{base}|{sub}>"),
            })
            .collect()
    }

    #[test]
    fn symbols_in_a_sentence_get_their_subscripts() {
        assert_eq!(spelled("S_v = 66.9 MPa, σ_1' > T_0."), "<S|v> = 66.9 MPa, <σ′|1> > <T|0>.");
        assert_eq!(spelled("Δp_b = 1 MPa"), "Δ<p|b> = 1 MPa");
        assert_eq!(spelled("(S_1 − P_p) / r_max"), "(<S|1> − <P|p>) / <r|max>");
        for same in [
            "kf3_survey.csv",
            "a_b.csv",
            "x _e_ y",
            "S_",
            "my_name",
            "data/a_b/c",
            "A_verylongsubscript",
            "read_csv()",
            "f_x(1)",
        ] {
            assert_eq!(spelled(same), same);
        }
    }

    #[test]
    fn symbols_are_taken_apart() {
        let s = symbol("S_v");
        assert_eq!((s.base.as_str(), s.sub.as_str(), s.variable), ("S", "v", true));
        let s = symbol("σ_1'");
        assert_eq!((s.base.as_str(), s.sub.as_str()), ("σ′", "1"));
        let s = symbol("p_lower_shear at 60°");
        assert_eq!((s.base.as_str(), s.sub.as_str(), s.tail.as_str()), ("p", "lower shear", " at 60°"));
    }

    #[test]
    fn numbers_get_their_minus_and_dates_keep_their_hyphens() {
        assert_eq!(
            with_minus("-0.65 MPa (-2.5°) at 2026-05-14, KF-3, a - 1, 5-6"),
            "−0.65 MPa (−2.5°) at 2026-05-14, KF-3, a - 1, 5-6"
        );
    }

    #[test]
    fn long_words_can_break_and_short_ones_cannot() {
        assert_eq!(plain("a short text"), "a short text");
        let hash = plain(&"a".repeat(64));
        assert_eq!(hash.matches(BREAK).count(), 4);
        assert_eq!(
            plain("data/of/this/very/long/path/file.csv").replace(BREAK, ""),
            "data/of/this/very/long/path/file.csv"
        );
    }

    #[test]
    fn a_caption_is_listed_by_its_first_sentence() {
        assert_eq!(first_sentence("Side view, vert. exaggerated. The dot is KF-3."), "Side view, vert. exaggerated");
        assert_eq!(first_sentence("Limits of 0.5 m."), "Limits of 0.5 m");
        assert_eq!(first_sentence(""), "");
        assert_eq!(first_sentence(&"x".repeat(500)).chars().count(), LISTED);
    }

    #[test]
    fn titles_are_shortened() {
        assert_eq!(shortened("abcdef", 4), "abc…");
        assert_eq!(shortened("abcd", 4), "abcd");
    }
}
