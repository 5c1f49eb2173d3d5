//! The `hade` command: one file a subcommand, and a thin program around [`main`].

mod bar;
mod cells;
mod kernel;
mod memo;
mod new;
mod rerun;
mod run;
mod template;
mod verify;

use std::process::ExitCode;

use clap::{Parser, Subcommand};

pub use bar::Bar;

/// Stress in rock: notebooks that explain themselves, and the memo made from them.
#[derive(Debug, Parser)]
#[command(name = "hade", version, propagate_version = true)]
struct Cli {
    #[command(subcommand)]
    command: Command,
}

#[derive(Debug, Subcommand)]
enum Command {
    /// Make a folder with a notebook to begin from
    New(new::NewArgs),
    /// Run a notebook from top to bottom and write its outputs back
    Run(run::RunArgs),
    /// Run a notebook from a clean start and write its calculation memo
    Memo(memo::MemoArgs),
    /// Say whether a memo is still what it was when it was made, and compute it again
    Verify(verify::VerifyArgs),
    /// The templates of memos: list them, copy one, try one
    Template(template::TemplateArgs),
    /// The Jupyter kernel, and the compiled libraries that notebooks use
    Kernel(kernel::KernelArgs),
}

/// Why a command did not do its job: printed after `error: `, and the exit code is 1.
pub type Failure = Box<dyn std::error::Error>;

/// Reads the command line and does what it says.
pub fn main() -> ExitCode {
    let done = match Cli::parse().command {
        Command::New(args) => new::run(&args),
        Command::Run(args) => run::run(&args),
        Command::Memo(args) => memo::run(&args),
        Command::Template(args) => template::run(&args),
        // Its exit code tells a memo that is refused from a file that is none.
        Command::Verify(args) => return verify::run(&args),
        Command::Kernel(args) => kernel::run(&args),
    };
    match done {
        Ok(()) => ExitCode::SUCCESS,
        Err(failure) => {
            eprintln!("error: {failure}");
            // As a shell reports a program that Ctrl-C ended.
            if failure.is::<cells::Interrupted>() { ExitCode::from(130) } else { ExitCode::FAILURE }
        }
    }
}
