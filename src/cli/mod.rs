//! The only folder that prints, opens output files, or ends the process.

mod args;
mod catalogue;
mod check;
mod exact;
mod files;
mod inspect;
mod look;

use args::{Arguments, Command};
use clap::Parser;
use std::process::ExitCode;

/// How the process ends. Documented in README.md and relied on by scripts.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Exit {
    /// Everything was judged and passes (or the command did what was asked).
    AllPass = 0,
    /// Judged, and not all pass: failed, inconclusive or not run.
    NotAllPass = 1,
    /// Could not judge: bad input, bad arguments, no access.
    CouldNotJudge = 2,
}

/// Parses the arguments, runs the command, and gives the exit code.
pub fn main() -> ExitCode {
    let arguments = match Arguments::try_parse() {
        Ok(arguments) => arguments,
        Err(error) => {
            // help and version go to stdout and are no failure; a wrong argument could not be judged
            let code = if error.use_stderr() {
                Exit::CouldNotJudge
            } else {
                Exit::AllPass
            };
            let _ = error.print();
            return ExitCode::from(code as u8);
        }
    };
    let look = look::Look::decide(arguments.color);
    if let Some(threads) = arguments.threads {
        // only the first call can set it, and this is the first
        let _ = rayon::ThreadPoolBuilder::new()
            .num_threads(threads)
            .build_global();
    }
    let exit = match arguments.command {
        Command::Check(options) => check::run(&options, look),
        Command::Brief(options) => exact::brief(&options),
        Command::Exact(options) => exact::run(&options),
        Command::Inspect(options) => inspect::run(&options),
        Command::Catalogue(options) => catalogue::run(&options),
    };
    ExitCode::from(exit as u8)
}
