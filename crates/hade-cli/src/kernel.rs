//! `hade kernel`: the kernel Jupyter runs, and the compiled libraries that every notebook uses.

use std::path::PathBuf;
use std::time::{Duration, Instant, SystemTime};

use clap::{Args, Subcommand};
use hade_kernel::{CacheReport, KernelPlace};

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
    /// Build the libraries now, so that the first notebook need not wait, and make Jupyter know the kernel
    Install(InstallArgs),
    /// Serve one notebook to Jupyter (Jupyter calls this)
    Start(StartArgs),
    /// Keep one session ready for the next notebook (`hade kernel start --standby` calls this)
    #[command(hide = true)]
    Standby(StandbyArgs),
    /// Remove everything that was built; the next run builds it anew
    Clean,
}

#[derive(Debug, Args)]
struct InstallArgs {
    /// Make it known to this user's Jupyter (the default)
    #[arg(long, conflicts_with = "prefix")]
    user: bool,
    /// Make it known to the Jupyter of a Python environment, such as "$VIRTUAL_ENV"
    #[arg(long, value_name = "DIR")]
    prefix: Option<PathBuf>,
    /// Let a notebook begin within a second: keep one session ready in the background for half an hour after a
    /// kernel starts (about 0.5 GB of memory)
    #[arg(long)]
    standby: bool,
}

#[derive(Debug, Args)]
struct StartArgs {
    /// The file in which Jupyter says where to listen
    #[arg(long, short = 'f', value_name = "FILE")]
    connection_file: PathBuf,
    /// Take over the session that stands by, if there is one, and have the next one made ready
    #[arg(long)]
    standby: bool,
}

#[derive(Debug, Args)]
struct StandbyArgs {
    /// Begin after so many seconds
    #[arg(long, value_name = "SECONDS", default_value_t = 0)]
    after: u64,
    /// Leave when no notebook came for so many seconds
    #[arg(long, value_name = "SECONDS")]
    idle: Option<u64>,
}

/// Does what the arguments say.
pub(crate) fn run(args: &KernelArgs) -> Result<(), Failure> {
    match &args.command {
        KernelCommand::Install(args) => install(args)?,
        KernelCommand::Start(args) if args.standby => hade_kernel::serve_kernel_by_standby(&args.connection_file)?,
        KernelCommand::Start(args) => hade_kernel::serve_kernel(&args.connection_file)?,
        KernelCommand::Standby(args) => {
            hade_kernel::stand_by(Duration::from_secs(args.after), args.idle.map(Duration::from_secs))?;
        }
        KernelCommand::Clean => {
            hade_kernel::send_standby_away()?;
            let report = hade_kernel::clean()?;
            eprintln!("removed {} from {}", megabytes(&report), report.folder.display());
        }
    }
    Ok(())
}

fn install(args: &InstallArgs) -> Result<(), Failure> {
    let started = Instant::now();
    hade_kernel::send_standby_away()?;
    let mut bar = Bar::new();
    let prepared = hade_kernel::prepare(&mut bar);
    bar.clear();
    prepared?;
    let report = hade_kernel::cache_report()?;
    let built = match report.built.and_then(|when| SystemTime::now().duration_since(when).ok()) {
        Some(age) if age > started.elapsed() => format!("built {} ago", rough(age)),
        _ => format!("built now, in {}", rough(started.elapsed())),
    };
    eprintln!("libraries: {} in {}, {built}", megabytes(&report), report.folder.display());
    let place = args.prefix.clone().map_or(KernelPlace::User, KernelPlace::Prefix);
    let folder = hade_kernel::install_kernel(&place, args.standby)?;
    eprintln!("kernel: {}; Jupyter shows it as \"Hade (Rust)\"", folder.display());
    Ok(())
}

fn megabytes(report: &CacheReport) -> String {
    format!("{:.0} MB", report.bytes as f64 / 1e6)
}

/// A length of time in its largest unit.
fn rough(time: Duration) -> String {
    let seconds = time.as_secs();
    let (count, unit) = match seconds {
        0..120 => (seconds, "second"),
        120..7_200 => (seconds / 60, "minute"),
        7_200..172_800 => (seconds / 3_600, "hour"),
        _ => (seconds / 86_400, "day"),
    };
    format!("{count} {unit}{}", if count == 1 { "" } else { "s" })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn times_are_said_in_their_largest_unit() {
        for (seconds, said) in [(1, "1 second"), (119, "119 seconds"), (125, "2 minutes"), (90_000, "25 hours")] {
            assert_eq!(rough(Duration::from_secs(seconds)), said);
        }
        assert_eq!(rough(Duration::from_secs(200_000)), "2 days");
    }
}
