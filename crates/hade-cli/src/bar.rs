//! Progress on the terminal.

use std::io::IsTerminal as _;
use std::time::Duration;

use hade_kernel::{Progress, Step};
use indicatif::{ProgressBar, ProgressStyle};

/// Shows the steps of a session on standard error: a bar on a terminal, otherwise a line for each
/// step that takes long.
pub struct Bar {
    bar: ProgressBar,
    live: bool,
    said: String,
}

impl Bar {
    /// A bar that shows nothing yet.
    pub fn new() -> Bar {
        let bar = ProgressBar::new_spinner();
        bar.set_style(style("{spinner} {msg}"));
        Bar { bar, live: std::io::stderr().is_terminal(), said: String::new() }
    }

    /// Shows a message of the caller's own.
    pub fn say(&mut self, message: &str) {
        if self.live {
            self.bar.set_style(style("{spinner} {msg}"));
            self.bar.set_message(message.to_owned());
            self.bar.enable_steady_tick(Duration::from_millis(120));
        } else if self.said != message {
            eprintln!("{message}");
        }
        self.said = message.to_owned();
    }

    /// Removes the bar.
    pub fn clear(&mut self) {
        self.bar.finish_and_clear();
        self.bar.reset();
    }

    fn count(&mut self, done: usize, total: usize, message: &str, line: &str) {
        if self.live {
            self.bar.disable_steady_tick();
            self.bar.set_style(style("{bar:24} {pos}/{len} {msg}"));
            self.bar.set_length(total as u64);
            self.bar.set_position(done as u64);
            self.bar.set_message(message.to_owned());
        } else if !line.is_empty() && self.said != line {
            eprintln!("{line}");
            self.said = line.to_owned();
        }
    }
}

impl Default for Bar {
    fn default() -> Self {
        Bar::new()
    }
}

impl Progress for Bar {
    fn step(&mut self, step: Step<'_>) {
        match step {
            Step::Notice(text) => {
                self.bar.suspend(|| eprintln!("{text}"));
            }
            Step::Libraries { name, done, total } => {
                let line = "building the libraries a session needs (once for this compiler; minutes)";
                self.count(done, total, &format!("libraries, once: {name}"), line);
            }
            Step::Library => self.say("compiling hade for notebooks (once for this version)"),
            Step::Waiting => self.say("another hade is preparing the libraries; waiting for it"),
            Step::Starting => self.say("starting a session"),
            Step::Cell { number, of, first_line } => {
                let line = format!("cell {number} of {of}: {}", shortened(first_line));
                self.count(number - 1, of, &line, &line);
                if self.live {
                    self.bar.set_style(style("{bar:24} {msg}"));
                    self.bar.enable_steady_tick(Duration::from_millis(120));
                }
            }
            _ => self.clear(),
        }
    }
}

fn style(template: &str) -> ProgressStyle {
    ProgressStyle::with_template(template).unwrap_or_else(|_| ProgressStyle::default_bar())
}

/// At most 60 characters.
fn shortened(line: &str) -> String {
    match line.char_indices().nth(60) {
        Some((at, _)) => format!("{}…", &line[..at]),
        None => line.to_owned(),
    }
}
