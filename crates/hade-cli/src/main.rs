//! The `hade` command.

use std::process::ExitCode;

fn main() -> ExitCode {
    hade_kernel::runtime_hook();
    hade_cli::main()
}
