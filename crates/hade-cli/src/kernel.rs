//! `hade kernel`: the compiled libraries that notebooks use.
//!
//! The Jupyter kernel itself (`hade kernel start`) has its place here later.

use clap::{Args, Subcommand};

use crate::Failure;
use crate::bar::Bar;

/// Arguments of `hade kernel`.
#[derive(Debug, Args)]
pub struct KernelArgs {
    #[command(subcommand)]
    command: KernelCommand,
}

#[derive(Debug, Subcommand)]
enum KernelCommand {
    /// Build the libraries now, so that the first notebook need not wait
    Install,
    /// Remove everything that was built; the next run builds it anew
    Clean,
}

/// Does what the arguments say.
pub(crate) fn run(args: &KernelArgs) -> Result<(), Failure> {
    match args.command {
        KernelCommand::Install => {
            let mut bar = Bar::new();
            let prepared = hade_kernel::prepare(&mut bar);
            bar.clear();
            prepared?;
            eprintln!("ready; libraries are in {}", hade_kernel::cache_folder()?.display());
        }
        KernelCommand::Clean => {
            let report = hade_kernel::clean()?;
            eprintln!("removed {:.0} MB from {}", report.bytes as f64 / 1e6, report.folder.display());
        }
    }
    Ok(())
}
