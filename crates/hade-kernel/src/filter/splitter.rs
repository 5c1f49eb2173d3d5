//! Cuts the output of the cells into records.

use std::borrow::Cow;
use std::collections::BTreeMap;
use std::mem;
use std::path::PathBuf;

use super::overflow::Overflow;
use crate::record::Record;

/// The engine's words, each a line of its own.
const COMPLETE: &str = "EVCXR_EXECUTION_COMPLETE";
const PANIC: &str = "EVCXR_PANIC_NOTIFICATION";
const EARLY: &str = "EVCXR_ERROR_OCCURRED";
const BEGIN: &str = "EVCXR_BEGIN_CONTENT ";
const END: &str = "EVCXR_END_CONTENT";

/// Text a cell may print on both streams together; what is beyond goes to a file.
const TEXT_LIMIT: usize = 2 * 1024 * 1024;
/// What a cell may display in all.
const SHOW_LIMIT: usize = 64 * 1024 * 1024;
/// The plain text of one displayed value.
const PLAIN_LIMIT: usize = 1024 * 1024;
/// How many values a cell may display.
const SHOWN_LIMIT: usize = 1000;
/// The end of standard error is kept beyond the limit: it holds the message of a panic.
const LAST_WORDS: usize = 16 * 1024;
/// A line longer than this is passed on in pieces.
const LINE_LIMIT: usize = 64 * 1024;

/// What to write to the session.
#[derive(Debug, Default, PartialEq)]
pub(super) struct Passed {
    pub(super) out: Vec<u8>,
    pub(super) err: Vec<u8>,
}

impl Passed {
    pub(super) fn extend(&mut self, other: Passed) {
        self.out.extend(other.out);
        self.err.extend(other.err);
    }

    fn record(&mut self, record: &Record) {
        self.out.extend_from_slice(record.to_line().as_bytes());
    }

    fn raw(&mut self, line: &str) {
        self.out.extend_from_slice(line.as_bytes());
        self.out.push(b'\n');
    }
}

/// Cuts the output of the cells into records.
#[derive(Debug, Default)]
pub(super) struct Splitter {
    /// Output is cut into records; before the session is open it passes unchanged.
    open: bool,
    /// Standard output after the last line end.
    partial: Vec<u8>,
    /// Text of standard output not yet passed on.
    out: String,
    /// Standard error not yet passed on.
    err: Vec<u8>,
    /// The content block being read.
    block: Option<Block>,
    /// Blocks that belong to one displayed value.
    bundle: BTreeMap<String, String>,
    /// Text passed on, in bytes.
    passed: usize,
    /// Bytes displayed, and values.
    shown: usize,
    values: usize,
    /// Bytes of text and values not passed on.
    cut: u64,
    not_shown: usize,
    overflow: Overflow,
}

#[derive(Debug)]
struct Block {
    mime: String,
    content: String,
    lost: usize,
}

impl Splitter {
    /// Output passes unchanged until the first cell (the engine's own) has ended, unless `open`.
    pub(super) fn new(open: bool, outputs: Option<PathBuf>) -> Splitter {
        Splitter { open, overflow: Overflow::new(outputs), ..Splitter::default() }
    }

    /// Takes what was read from both streams. Unless it is `settled`, text that was written before the last of
    /// standard error may still come.
    pub(super) fn take(&mut self, out: &[u8], err: &[u8], settled: bool) -> Passed {
        let mut passed = Passed::default();
        let mut rest = out;
        if !self.open {
            passed.err.extend_from_slice(err);
            let end = self.pass_unchanged(rest, &mut passed);
            rest = &rest[end..];
            if !self.open {
                return passed;
            }
        } else {
            self.err.extend_from_slice(err);
        }
        // A long line comes in many pieces; each is looked at once.
        for piece in rest.split_inclusive(|&b| b == b'\n') {
            self.partial.extend_from_slice(piece);
            if self.partial.last() == Some(&b'\n') {
                let line = mem::take(&mut self.partial);
                let line = String::from_utf8_lossy(&line[..line.len() - 1]);
                self.line(&line, &mut passed);
            }
        }
        match &mut self.block {
            Some(block) if self.partial.len() > SHOW_LIMIT => block.lost += mem::take(&mut self.partial).len(),
            None if self.partial.len() > LINE_LIMIT => self.pass_partial(),
            _ => {}
        }
        self.pass_out(&mut passed);
        if settled || self.err.len() > LAST_WORDS {
            self.pass_err(&mut passed, false);
        }
        passed
    }

    /// Whether the cell prints much.
    pub(super) fn floods(&self) -> bool {
        self.passed > LINE_LIMIT
    }

    /// Nothing came for a while: what is held back is passed on.
    pub(super) fn idle(&mut self) -> Passed {
        let mut passed = Passed::default();
        if self.open && self.block.is_none() {
            self.pass_partial();
            if !self.out.is_empty() || !self.bundle.is_empty() {
                self.pass_bundle(&mut passed);
                self.pass_out(&mut passed);
            }
        }
        passed
    }

    /// The cells' process is gone.
    pub(super) fn end(&mut self) -> Passed {
        let mut passed = Passed::default();
        if self.open {
            if self.block.take().is_none() {
                self.pass_partial();
            }
            self.pass_bundle(&mut passed);
            self.pass_out(&mut passed);
            self.pass_err(&mut passed, true);
            self.pass_cut(&mut passed);
        }
        passed
    }

    /// Passes lines unchanged up to the end of the first cell; returns where that is.
    fn pass_unchanged(&mut self, bytes: &[u8], passed: &mut Passed) -> usize {
        for (at, &byte) in bytes.iter().enumerate() {
            passed.out.push(byte);
            if byte == b'\n' {
                self.open = mem::take(&mut self.partial) == COMPLETE.as_bytes();
                if self.open {
                    return at + 1;
                }
            } else {
                self.partial.push(byte);
            }
        }
        bytes.len()
    }

    fn line(&mut self, line: &str, passed: &mut Passed) {
        if let Some(block) = &mut self.block {
            match line {
                END => self.end_block(),
                // The display itself panicked: what it had written is no content.
                PANIC => {
                    self.block = None;
                    self.line(PANIC, passed);
                }
                _ if self.shown + block.content.len() + line.len() > SHOW_LIMIT => {
                    block.lost += line.len();
                }
                _ => {
                    if !block.content.is_empty() {
                        block.content.push('\n');
                    }
                    block.content.push_str(line);
                }
            }
            return;
        }
        if let Some((before, mime)) = begin_of_block(line) {
            self.text(before, passed);
            if self.bundle.contains_key(mime) {
                self.pass_bundle(passed);
            }
            self.pass_out(passed);
            self.block = Some(Block { mime: mime.to_owned(), content: String::new(), lost: 0 });
            return;
        }
        for (word, record) in [(PANIC, Record::Panic), (EARLY, Record::Early), (COMPLETE, Record::Done)] {
            if let Some(before) = line.strip_suffix(word) {
                self.text(before, passed);
                self.pass_bundle(passed);
                self.pass_out(passed);
                self.pass_err(passed, true);
                if word == COMPLETE {
                    self.pass_cut(passed);
                    let overflow = mem::take(&mut self.overflow);
                    *self = Splitter { open: true, overflow, ..Splitter::default() };
                }
                passed.record(&record);
                passed.raw(word);
                return;
            }
        }
        if line.starts_with("EVCXR_") {
            self.pass_bundle(passed);
            self.pass_out(passed);
            passed.raw(line);
            return;
        }
        self.text(line, passed);
        self.text("\n", passed);
    }

    fn end_block(&mut self) {
        if let Some(mut block) = self.block.take() {
            if block.lost > 0 {
                block.mime = "text/plain".to_owned();
                block.content = format!("[a display of more than {} MB was left out]", SHOW_LIMIT / 1024 / 1024);
            } else if block.mime == "text/plain" && block.content.len() > PLAIN_LIMIT {
                let end = block.content.floor_char_boundary(PLAIN_LIMIT);
                let left = block.content.len() - end;
                block.content.truncate(end);
                block.content.push_str(&format!("\n[{} kB more of this value are left out]", left.div_ceil(1024)));
            }
            self.shown += block.content.len();
            self.bundle.insert(block.mime, block.content);
        }
    }

    /// Takes text of standard output, within the limit.
    fn text(&mut self, text: &str, passed: &mut Passed) {
        if text.is_empty() {
            return;
        }
        if !self.bundle.is_empty() {
            self.pass_bundle(passed);
        }
        let kept = self.within_limit(text, 0);
        self.out.push_str(&kept);
    }

    /// As much of a text as may be shown, and its last bytes whatever comes; all of it is kept.
    fn within_limit<'a>(&mut self, text: &'a str, last: usize) -> Cow<'a, str> {
        let head = text.floor_char_boundary(TEXT_LIMIT.saturating_sub(self.passed));
        let tail = text.ceil_char_boundary(text.len().saturating_sub(last)).max(head);
        self.overflow.keep(text.as_bytes());
        if tail > head {
            self.overflow.spill();
        }
        self.cut += (tail - head) as u64;
        let kept = match tail == text.len() {
            true => Cow::from(&text[..head]),
            false => Cow::from([&text[..head], &text[tail..]].concat()),
        };
        self.passed += kept.len();
        kept
    }

    /// Passes an unfinished line on, unless it may be one of the engine's words.
    fn pass_partial(&mut self) {
        let whole = match std::str::from_utf8(&self.partial) {
            Ok(text) => text.len(),
            Err(error) if error.error_len().is_none() => error.valid_up_to(),
            Err(_) => self.partial.len(),
        };
        let text = String::from_utf8_lossy(&self.partial[..whole]).into_owned();
        if !text.contains("EVCXR_") && self.block.is_none() {
            self.partial.drain(..whole);
            // A bundle before it goes first; there is none while a line is unfinished.
            self.text(&text, &mut Passed::default());
        }
    }

    fn pass_out(&mut self, passed: &mut Passed) {
        if !self.out.is_empty() {
            passed.record(&Record::Out(mem::take(&mut self.out)));
        }
    }

    fn pass_bundle(&mut self, passed: &mut Passed) {
        if self.bundle.is_empty() {
            return;
        }
        let bundle = mem::take(&mut self.bundle);
        if bundle.len() == 1 && bundle.get("text/plain").is_some_and(|text| text == "()") {
            // What a cell that ends in no value shows.
            return;
        }
        self.values += 1;
        if self.values <= SHOWN_LIMIT {
            passed.record(&Record::Show(bundle));
        } else {
            self.not_shown += 1;
        }
    }

    fn pass_err(&mut self, passed: &mut Passed, at_marker: bool) {
        if self.err.is_empty() {
            return;
        }
        self.pass_bundle(passed);
        let mut bytes = mem::take(&mut self.err);
        if !at_marker && self.passed + bytes.len() > TEXT_LIMIT {
            // The end waits: it may be the message of a marker that has not come yet.
            let mut end = bytes.len().saturating_sub(LAST_WORDS);
            while bytes.get(end).is_some_and(|byte| byte & 0xc0 == 0x80) {
                end += 1;
            }
            self.err = bytes.split_off(end);
        }
        let text = String::from_utf8_lossy(&bytes).into_owned();
        let kept = self.within_limit(&text, if at_marker { LAST_WORDS } else { 0 });
        if !kept.is_empty() {
            passed.record(&Record::Err(kept.into_owned()));
        }
    }

    fn pass_cut(&mut self, passed: &mut Passed) {
        let kept = self.overflow.end();
        if self.not_shown > 0 {
            passed.record(&Record::NotShown(mem::take(&mut self.not_shown)));
        }
        if self.cut > 0 {
            let (file, whole) = kept.map_or((None, false), |(file, whole)| (Some(file), whole));
            passed.record(&Record::Cut { bytes: mem::take(&mut self.cut), file, whole });
        }
    }
}

/// The text before a content block's first line, and the block's mime type.
fn begin_of_block(line: &str) -> Option<(&str, &str)> {
    let (before, mime) = line.split_once(BEGIN)?;
    let plausible = mime.contains('/') && !mime.contains(char::is_whitespace);
    plausible.then_some((before, mime))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn records(passed: &Passed) -> Vec<Record> {
        String::from_utf8_lossy(&passed.out).lines().filter_map(Record::from_line).collect()
    }

    fn show(pairs: &[(&str, &str)]) -> Record {
        Record::Show(pairs.iter().map(|(mime, content)| ((*mime).to_owned(), (*content).to_owned())).collect())
    }

    #[test]
    fn everything_passes_unchanged_until_the_first_cell_has_ended() {
        let start = b"EVCXR_BEGIN_CONTENT text/plain\n42\nEVCXR_END_CONTENT\nEVCXR_EXECUTION_COMPLETE\n";
        let mut splitter = Splitter::new(false, None);
        let mut passed = splitter.take(&start[..20], b"warning", true);
        passed.extend(splitter.take(&start[20..], b"", true));
        assert_eq!(passed.out, start);
        assert_eq!(passed.err, b"warning");
        let passed = splitter.take(b"hello\n", b"", true);
        assert_eq!(records(&passed), [Record::Out("hello\n".into())]);
    }

    #[test]
    fn displays_and_prints_keep_their_order() {
        let mut splitter = Splitter::new(true, None);
        let passed = splitter.take(
            b"a\nEVCXR_BEGIN_CONTENT text/html\n<b>\n</b>\nEVCXR_END_CONTENT\n\
              EVCXR_BEGIN_CONTENT text/plain\nb\nEVCXR_END_CONTENT\n\
              EVCXR_BEGIN_CONTENT text/plain\nc\nEVCXR_END_CONTENT\nno endEVCXR_BEGIN_CONTENT text/plain\nd\n\
              EVCXR_END_CONTENT\nEVCXR_EXECUTION_COMPLETE\n",
            b"",
            true,
        );
        assert_eq!(
            records(&passed),
            [
                Record::Out("a\n".into()),
                show(&[("text/html", "<b>\n</b>"), ("text/plain", "b")]),
                show(&[("text/plain", "c")]),
                Record::Out("no end".into()),
                show(&[("text/plain", "d")]),
                Record::Done,
            ]
        );
        assert!(passed.out.ends_with(b"\nEVCXR_EXECUTION_COMPLETE\n"));
    }

    #[test]
    fn a_marker_finds_the_message_written_before_it() {
        let mut splitter = Splitter::new(true, None);
        let passed = splitter.take(b"x\nEVCXR_ERROR_OCCURRED\nEVCXR_EXECUTION_COMPLETE\n", b"no such depth\n", true);
        assert_eq!(
            records(&passed),
            [Record::Out("x\n".into()), Record::Err("no such depth\n".into()), Record::Early, Record::Done,]
        );
    }

    #[test]
    fn a_message_waits_for_the_text_before_it() {
        let mut splitter = Splitter::new(true, None);
        let mut passed = splitter.take(b"before\n", b"no such depth\n", false);
        passed.extend(splitter.take(b"too\nEVCXR_ERROR_OCCURRED\n", b"", true));
        let out = |text: &str| Record::Out(text.into());
        assert_eq!(
            records(&passed),
            [out("before\n"), out("too\n"), Record::Err("no such depth\n".into()), Record::Early]
        );
    }

    #[test]
    fn a_message_after_a_flood_is_kept() {
        let mut splitter = Splitter::new(true, None);
        for _ in 0..100 {
            splitter.take(b"", &[b'x'; LINE_LIMIT], true);
        }
        splitter.take(b"", "the depth is negative\u{2026}\n".as_bytes(), true);
        let last = records(&splitter.take(b"EVCXR_ERROR_OCCURRED\n", b"", true));
        let [Record::Err(words), Record::Early] = last.as_slice() else { panic!("{last:?}") };
        assert!(words.ends_with("the depth is negative\u{2026}\n") && words.len() <= LAST_WORDS);
    }

    #[test]
    fn a_marker_after_unfinished_text_is_seen() {
        let mut splitter = Splitter::new(true, None);
        let passed = splitter.take(b"abcEVCXR_EXECUTION_COMPLETE\n", b"", true);
        assert_eq!(records(&passed), [Record::Out("abc".into()), Record::Done]);
    }

    #[test]
    fn a_flood_is_cut_and_the_next_cell_is_whole() {
        let mut splitter = Splitter::new(true, None);
        let line = [vec![b'x'; 1023], vec![b'\n']].concat();
        let mut got = 0;
        for _ in 0..4096 {
            for record in records(&splitter.take(&line, b"", true)) {
                if let Record::Out(text) = record {
                    got += text.len();
                }
            }
        }
        assert_eq!(got, TEXT_LIMIT);
        let end = records(&splitter.take(b"EVCXR_EXECUTION_COMPLETE\nnext\n", b"", true));
        let cut = Record::Cut { bytes: 2 * 1024 * 1024, file: None, whole: false };
        assert_eq!(end, [cut, Record::Done, Record::Out("next\n".into())]);
    }

    #[test]
    fn an_unfinished_line_passes_when_nothing_follows() {
        let mut splitter = Splitter::new(true, None);
        assert!(splitter.take("50 % \u{2026}".as_bytes(), b"", true).out.is_empty());
        assert_eq!(records(&splitter.idle()), [Record::Out("50 % \u{2026}".into())]);
        assert!(splitter.take(b"EVCXR_EXEC", b"", true).out.is_empty());
        assert!(splitter.idle().out.is_empty());
    }

    #[test]
    fn the_last_words_of_a_process_pass() {
        let mut splitter = Splitter::new(true, None);
        splitter.take(b"half", b"", true);
        assert_eq!(records(&splitter.end()), [Record::Out("half".into())]);
    }
}
