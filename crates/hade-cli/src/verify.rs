//! `hade verify`: whether a memo is still what it was when it was made.

use std::fs::File;
use std::io::Read as _;
use std::path::{Path, PathBuf};
use std::process::ExitCode;
use std::time::Duration;

use clap::Args;
use hade_memo::{Report, Standing, verify};

use crate::Failure;
use crate::cells::{Interrupted, seconds};
use crate::rerun::{rerun, warning};

/// Exit code of a memo that is refused.
const REFUSED: u8 = 1;
/// Exit code of a file that is no memo, or cannot be read.
const UNREADABLE: u8 = 2;
/// Exit code when the memo holds, and its notebook could not be run again.
const NOT_RUN_AGAIN: u8 = 3;
/// Exit code after Ctrl-C, as a shell has it.
const INTERRUPTED: u8 = 130;
/// Largest file that is taken into memory.
const MOST_BYTES: u64 = hade_memo::MOST_VERIFIED_BYTES as u64;

/// Arguments of `hade verify`.
#[derive(Debug, Args)]
#[command(
    after_help = "Exit code: 0 accepted, 1 refused, 2 the file cannot be read as a memo, 3 accepted but its notebook \
    could not be run again."
)]
pub struct VerifyArgs {
    /// The memo
    memo: PathBuf,
    /// Write what was found as JSON
    #[arg(long)]
    json: bool,
    /// Then run the attached notebook again and compare; this runs code that came in the file
    #[arg(long)]
    rerun: bool,
    /// With --rerun: stop a cell that runs longer than this many seconds
    #[arg(long, value_name = "SECONDS", value_parser = seconds, requires = "rerun")]
    cell_timeout: Option<Duration>,
}

/// Verifies the memo and says what was found.
pub(crate) fn run(args: &VerifyArgs) -> ExitCode {
    let (report, not_run) = match looked_at(args) {
        Ok(found) => found,
        Err(why) => {
            match args.json {
                true => println!("{}", serde_json::json!({ "accepted": false, "unreadable": why })),
                false => eprintln!("error: {}: {why}", args.memo.display()),
            }
            return ExitCode::from(UNREADABLE);
        }
    };
    match args.json {
        true => println!("{}", serde_json::to_string_pretty(&report).unwrap_or_default()),
        false => print!("{}", told(&report)),
    }
    match not_run {
        _ if !report.accepted => ExitCode::from(REFUSED),
        Some(why) if why.is::<Interrupted>() => ExitCode::from(INTERRUPTED),
        Some(_) => ExitCode::from(NOT_RUN_AGAIN),
        None => ExitCode::SUCCESS,
    }
}

/// What is found of the memo, and why its notebook was not run again, where it was to be and was not.
fn looked_at(args: &VerifyArgs) -> Result<(Report, Option<Failure>), String> {
    let bytes = read(&args.memo)?;
    // Should a parser fail on a hostile file, the verdict says so; its own words help nobody.
    std::panic::set_hook(Box::new(|_| {}));
    let verified = verify(bytes);
    drop(std::panic::take_hook());
    let verified = verified.map_err(|e| e.to_string())?;
    let mut report = verified.report;
    if let Some(contents) = verified.contents.filter(|_| args.rerun) {
        eprintln!("{}", plain(&warning(&contents)));
        match rerun(&contents, args.cell_timeout) {
            Ok(again) => report.take_in_rerun(again.cells, &again.differences),
            Err(why) => {
                report.take_in_no_rerun(&why.to_string());
                return Ok((report, Some(why)));
            }
        }
    }
    Ok((report, None))
}

/// The bytes of a file that is not too long.
fn read(path: &Path) -> Result<Vec<u8>, String> {
    let cannot = |e: std::io::Error| format!("it cannot be read: {e}");
    let file = File::open(path).map_err(cannot)?;
    let mut bytes = Vec::new();
    // One byte more, so that a file that grows while it is read is noticed too.
    file.take(MOST_BYTES + 1).read_to_end(&mut bytes).map_err(cannot)?;
    match bytes.len() as u64 > MOST_BYTES {
        true => Err(format!("it is longer than {} MB, the most that is read", MOST_BYTES >> 20)),
        false => Ok(bytes),
    }
}

/// The report as lines of text. What comes out of the file is shown without control characters.
fn told(report: &Report) -> String {
    let mut text = String::new();
    for finding in &report.findings {
        let sign = match finding.standing {
            Standing::Holds => "✓",
            Standing::Fails => "✗",
            Standing::Note => "·",
        };
        text.push_str(&format!("{sign} {}: {}\n", plain(&finding.what), plain(&finding.found)));
    }
    text.push_str(&format!("\n{}\n", plain(&report.verdict)));
    text
}

/// Text that leaves a terminal as it is: no control characters, no line breaks, no marks that turn
/// the direction of writing.
fn plain(text: &str) -> String {
    let turns = |c: char| matches!(c, '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}');
    text.chars().map(|c| if c.is_control() || turns(c) { '\u{fffd}' } else { c }).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_a_file_says_cannot_drive_the_terminal() {
        assert_eq!(plain("a\u{1b}[2Jb\nc\u{202e}"), "a\u{fffd}[2Jb\u{fffd}c\u{fffd}");
    }

    #[test]
    fn what_is_not_there_is_said() {
        assert!(read(Path::new("no such memo.pdf")).unwrap_err().contains("cannot be read"));
    }
}
