//! Carries out the commands a cell begins with.

use std::collections::BTreeMap;
use std::time::Instant;

use crate::cell::{CellOutcome, Output, Stream};
use crate::commands::{self, Command, Split};
use crate::ledger::{Ledger, short};
use crate::outcome;
use crate::session::Session;
use crate::variables;

impl Session {
    /// Does what a cell says: its commands in order, then its code.
    pub(crate) fn carry_out(&mut self, cell: &Split) -> CellOutcome {
        let started = Instant::now();
        let mut all = CellOutcome::default();
        for command in &cell.commands {
            let done = self.command(command);
            all.outputs.extend(done.outputs);
            if done.error.is_some() {
                return CellOutcome { error: done.error, ..all };
            }
        }
        if cell.commands.is_empty() || !cell.code.trim().is_empty() {
            let done = self.run_code(&cell.code);
            all.outputs.extend(done.outputs);
            all.error = done.error;
        }
        if cell.commands.contains(&Command::Time) {
            let (whole, ran) = (started.elapsed(), self.ran_for());
            let compiled = whole.saturating_sub(ran);
            let text = format!("compiled in {:.2} s, ran in {:.2} s\n", compiled.as_secs_f64(), ran.as_secs_f64());
            all.outputs.push(Output::Text { stream: Stream::Stdout, text });
        }
        all
    }

    fn command(&mut self, command: &Command) -> CellOutcome {
        match command {
            Command::Help => shown(commands::help()),
            Command::Vars => self.show_variables(),
            Command::Card(name) => self.run_aside(name),
            Command::Type(name) => {
                let known = self.variables_and_types();
                match known.iter().find(|(variable, _)| variable == name) {
                    Some((name, kind)) => {
                        shown(BTreeMap::from([("text/plain".to_owned(), format!("{name}: {}", short(kind)))]))
                    }
                    None => {
                        let story = self.ledger().explain(name);
                        failed(story.unwrap_or_else(|| format!("there is no variable `{name}`; `:vars` lists them")))
                    }
                }
            }
            Command::Time => CellOutcome::default(),
            Command::Clear => self.clear(),
            Command::Engine(line) => {
                let notice =
                    commands::dependency_notice(line).map(|text| Output::Text { stream: Stream::Stderr, text });
                let mut done = self.run_aside(line);
                done.outputs.splice(0..0, notice);
                done
            }
        }
    }

    fn show_variables(&mut self) -> CellOutcome {
        let variables = self.variables_and_types();
        if variables.is_empty() {
            return shown(BTreeMap::from([("text/plain".to_owned(), "no variables yet".to_owned())]));
        }
        let with_values = self.run_aside(&variables::cell(&variables));
        match &with_values.error {
            // A value that cannot be shown (its `Debug` panics, its type has gone) hides no other.
            Some(error) if error.name != "Interrupted" && error.name != "ProcessDied" => {
                shown(variables::plain(&variables))
            }
            _ => with_values,
        }
    }

    fn clear(&mut self) -> CellOutcome {
        *self.ledger() = Ledger::default();
        match self.start_over() {
            Ok(()) => CellOutcome::default(),
            Err(error) => failed(error.to_string()),
        }
    }
}

fn shown(bundle: BTreeMap<String, String>) -> CellOutcome {
    CellOutcome { outputs: vec![Output::Display(bundle)], ..CellOutcome::default() }
}

fn failed(sentence: String) -> CellOutcome {
    CellOutcome { error: Some(outcome::plain("CommandError", sentence)), ..CellOutcome::default() }
}
