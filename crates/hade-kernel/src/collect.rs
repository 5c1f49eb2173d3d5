//! Gathers what a cell puts out while the engine runs it.

use std::collections::VecDeque;
use std::mem;
use std::sync::atomic::{AtomicBool, Ordering};
use std::sync::{Arc, Condvar, Mutex, MutexGuard, PoisonError};
use std::thread;
use std::time::{Duration, Instant};

use evcxr::EvalContextOutputs;

use crate::cell::{Output, Stream};
use crate::outcome;
use crate::record::Record;

/// Standard error waits so long before it is shown: the text just before a stop is the message.
const LAST_WORDS_WAIT: Duration = Duration::from_millis(150);

/// How a cell ended early.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Stop {
    /// It panicked; standard error just before.
    Panic(String),
    /// `?` met an `Err`; standard error just before.
    Early(String),
}

/// What one cell put out.
#[derive(Debug, Default)]
pub(crate) struct Gathered {
    pub(crate) outputs: Vec<Output>,
    pub(crate) stop: Option<Stop>,
    done: bool,
    /// When each piece of the standard error text at the end came, and its length.
    recent: VecDeque<(Instant, usize)>,
}

impl Gathered {
    fn take(&mut self, record: Record) {
        match record {
            Record::Out(text) => self.text(Stream::Stdout, &text),
            Record::Err(text) => {
                self.text(Stream::Stderr, &text);
                self.recent.push_back((Instant::now(), text.len()));
            }
            Record::Show(bundle) => {
                let unit = bundle.len() == 1 && bundle.get("text/plain").is_some_and(|text| text.trim() == "()");
                if !unit {
                    self.outputs.push(Output::Display(bundle));
                }
            }
            Record::Panic => self.stop = Some(Stop::Panic(self.panic_words())),
            Record::Early => self.stop = Some(Stop::Early(self.last_words())),
            Record::Cut { bytes, file, whole } => self.text(Stream::Stderr, &cut(bytes, file.as_deref(), whole)),
            Record::NotShown(values) => {
                self.text(Stream::Stderr, &format!("[{values} more values were displayed and are left out here]\n"));
            }
            Record::Begin => {}
            Record::Done => self.done = true,
        }
    }

    fn text(&mut self, stream: Stream, more: &str) {
        match self.outputs.last_mut() {
            Some(Output::Text { stream: last, text }) if *last == stream => text.push_str(more),
            _ => self.outputs.push(Output::Text { stream, text: more.to_owned() }),
        }
    }

    /// What may be shown while the cell still runs: everything but standard error text at the end that
    /// may yet become a message.
    fn ready(&mut self) -> Vec<Output> {
        let Some(Output::Text { stream: Stream::Stderr, text }) = self.outputs.last_mut() else {
            self.recent.clear();
            return mem::take(&mut self.outputs);
        };
        while self.recent.front().is_some_and(|(came, _)| came.elapsed() >= LAST_WORDS_WAIT) {
            self.recent.pop_front();
        }
        let young: usize = self.recent.iter().map(|(_, length)| length).sum();
        let old = text.floor_char_boundary(text.len().saturating_sub(young));
        let kept = text.split_off(outcome::fault_at(text).map_or(old, |fault| old.min(fault)));
        let mut ready = mem::take(&mut self.outputs);
        if matches!(ready.last(), Some(Output::Text { text, .. }) if text.is_empty()) {
            ready.pop();
        }
        if !kept.is_empty() {
            self.outputs.push(Output::Text { stream: Stream::Stderr, text: kept });
        }
        ready
    }

    /// The standard error text at the end of the outputs; it becomes the message.
    fn last_words(&mut self) -> String {
        match self.outputs.pop() {
            Some(Output::Text { stream: Stream::Stderr, text }) => text.trim_end().to_owned(),
            Some(other) => {
                self.outputs.push(other);
                String::new()
            }
            None => String::new(),
        }
    }

    /// The message of a panic: the end of the standard error text there. A cell that the library stops panics without
    /// one, and what it printed stays.
    fn panic_words(&mut self) -> String {
        let Some(Output::Text { stream: Stream::Stderr, text }) = self.outputs.last_mut() else {
            return String::new();
        };
        let Some(start) = text.rfind("' panicked at ").or_else(|| text.rfind(") panicked at ")) else {
            return String::new();
        };
        let line = text[..start].rfind('\n').map_or(0, |at| at + 1);
        let words = text.split_off(line).trim_end().to_owned();
        text.truncate(text.strip_suffix('\n').map_or(text.len(), str::len));
        if text.is_empty() {
            self.outputs.pop();
        }
        words
    }
}

/// What to say under a text that was cut.
fn cut(bytes: u64, file: Option<&str>, whole: bool) -> String {
    let left = format!("{} kB more were printed and are left out here", bytes.div_ceil(1024));
    match file {
        Some(file) if whole => format!("[{left}; the whole text is in {file}]\n"),
        Some(file) => format!("[{left}; the first part of the text is in {file}]\n"),
        None => format!("[{left}]\n"),
    }
}

/// Reads the engine's channels for as long as the session lives.
pub(crate) struct Collector {
    shared: Arc<(Mutex<Gathered>, Condvar)>,
    begun: Arc<AtomicBool>,
    nothing_waits: Box<dyn Fn() -> bool + Send>,
}

impl Collector {
    pub(crate) fn new(outputs: EvalContextOutputs) -> Collector {
        let shared = Arc::new((Mutex::new(Gathered::default()), Condvar::new()));
        let EvalContextOutputs { stdout, stderr } = outputs;
        let waiting = stdout.clone();
        let begun = Arc::new(AtomicBool::new(false));
        let cell_begins = Arc::clone(&begun);
        let out = Arc::clone(&shared);
        thread::spawn(move || {
            for line in stdout {
                let record = Record::from_line(&line).unwrap_or_else(|| Record::Out(format!("{line}\n")));
                if record == Record::Begin {
                    cell_begins.store(true, Ordering::Relaxed);
                    continue;
                }
                lock(&out.0).take(record);
                out.1.notify_all();
            }
        });
        let err = Arc::clone(&shared);
        thread::spawn(move || {
            for line in stderr {
                lock(&err.0).take(Record::Err(format!("{line}\n")));
            }
        });
        Collector { shared, begun, nothing_waits: Box::new(move || waiting.is_empty()) }
    }

    /// Becomes true when a cell has been compiled and begins to run.
    pub(crate) fn begun(&self) -> Arc<AtomicBool> {
        Arc::clone(&self.begun)
    }

    /// For showing outputs while the cell runs.
    pub(crate) fn live(&self) -> Live {
        Live(Arc::clone(&self.shared))
    }

    /// What has come since the last call, once the cell's last record is in. A cell whose process
    /// died, or that did not compile, has no last record.
    pub(crate) fn take(&self, wait_for_done: bool) -> Gathered {
        let limit = Instant::now() + Duration::from_secs(5);
        let mut gathered = lock(&self.shared.0);
        while wait_for_done && !gathered.done && Instant::now() < limit {
            gathered = self
                .shared
                .1
                .wait_timeout(gathered, Duration::from_millis(100))
                .unwrap_or_else(PoisonError::into_inner)
                .0;
        }
        if !wait_for_done {
            drop(gathered);
            while !(self.nothing_waits)() && Instant::now() < limit {
                thread::sleep(Duration::from_millis(1));
            }
            // The reader may still hold the line it took last.
            thread::sleep(Duration::from_millis(10));
            gathered = lock(&self.shared.0);
        }
        mem::take(&mut *gathered)
    }
}

/// Takes outputs out while the cell runs; what it leaves is in [`Collector::take`].
pub(crate) struct Live(Arc<(Mutex<Gathered>, Condvar)>);

impl Live {
    /// What may be shown by now.
    pub(crate) fn ready(&self) -> Vec<Output> {
        lock(&self.0.0).ready()
    }
}

fn lock(shared: &Mutex<Gathered>) -> MutexGuard<'_, Gathered> {
    shared.lock().unwrap_or_else(PoisonError::into_inner)
}

#[cfg(test)]
mod tests {
    use std::collections::BTreeMap;

    use super::*;

    #[test]
    fn the_text_before_a_stop_becomes_its_message() {
        let mut gathered = Gathered::default();
        gathered.take(Record::Out("a\n".into()));
        gathered.take(Record::Err("the depth is ".into()));
        gathered.take(Record::Err("negative\n".into()));
        gathered.take(Record::Early);
        assert_eq!(gathered.stop, Some(Stop::Early("the depth is negative".into())));
        assert_eq!(gathered.outputs.len(), 1);
    }

    #[test]
    fn what_was_printed_before_a_panic_stays() {
        let mut gathered = Gathered::default();
        gathered.take(Record::Err("mine\n\nthread 'main' (7) panicked at src/lib.rs:9:5:\nno rock\n".into()));
        gathered.take(Record::Panic);
        let text = |text: &str| Output::Text { stream: Stream::Stderr, text: text.to_owned() };
        assert_eq!(gathered.outputs, [text("mine\n")]);
        let words = "thread 'main' (7) panicked at src/lib.rs:9:5:\nno rock";
        assert_eq!(gathered.stop, Some(Stop::Panic(words.to_owned())));
        let mut gathered = Gathered::default();
        gathered.take(Record::Err("50 %\n".into()));
        gathered.take(Record::Panic);
        assert_eq!((gathered.outputs, gathered.stop), (vec![text("50 %\n")], Some(Stop::Panic(String::new()))));
    }

    #[test]
    fn outputs_are_ready_at_once_but_last_words_wait() {
        let text = |stream, text: &str| Output::Text { stream, text: text.to_owned() };
        let mut gathered = Gathered::default();
        gathered.take(Record::Out("a\n".into()));
        gathered.take(Record::Err("old\n".into()));
        assert_eq!(gathered.ready(), [text(Stream::Stdout, "a\n")]);
        thread::sleep(LAST_WORDS_WAIT);
        gathered.take(Record::Err("thread 'main' panicked at a\n".into()));
        assert_eq!(gathered.ready(), [text(Stream::Stderr, "old\n")]);
        assert!(gathered.ready().is_empty());
        gathered.take(Record::Panic);
        assert_eq!(gathered.stop, Some(Stop::Panic("thread 'main' panicked at a".into())));
        gathered.take(Record::Err("Segmentation fault.\n".into()));
        thread::sleep(LAST_WORDS_WAIT);
        assert!(gathered.ready().is_empty());
        gathered.take(Record::Out("b".into()));
        assert_eq!(gathered.ready().len(), 2);
    }

    #[test]
    fn a_unit_value_is_not_shown() {
        let mut gathered = Gathered::default();
        gathered.take(Record::Show(BTreeMap::from([("text/plain".to_owned(), "()".to_owned())])));
        assert!(gathered.outputs.is_empty());
    }
}
