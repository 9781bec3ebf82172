//! The binary `topheavy`: arguments, files, exit codes. Everything else lives in the other crates.
//!
//! Exit codes: 0 clean; 1 something was found at or above the severity of `--refuse` (or a verdict `incomplete`
//! without `--allow-incomplete`); 2 the command could not run.

mod arguments;
mod command;
mod files;
mod output;

use arguments::{Arguments, Command};
use clap::Parser;
use std::process::ExitCode;

/// What a command ends with.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Outcome {
    /// Exit code 0.
    Clean,
    /// Exit code 1.
    Found,
    /// Exit code 2.
    CouldNotRun,
}

fn main() -> ExitCode {
    let arguments = match Arguments::try_parse() {
        Ok(arguments) => arguments,
        Err(refusal) => return refuse(&refusal),
    };
    let outcome = match &arguments.command {
        Command::Check(options) => command::check::run(options),
        Command::Chain(options) => command::chain::run(options),
        Command::Curve(options) => command::curve::run(options),
        Command::Why(options) => command::why::run(options),
        Command::Schema => command::schema::run(),
        Command::Serve => return ExitCode::from(u8::try_from(server::run()).unwrap_or(1)),
    };
    ExitCode::from(match outcome {
        Outcome::Clean => 0,
        Outcome::Found => 1,
        Outcome::CouldNotRun => 2,
    })
}

/// Help and version go to standard output with code 0, slips in the arguments to standard error with code 2. A
/// closed pipe is nobody's fault.
fn refuse(refusal: &clap::Error) -> ExitCode {
    let text = refusal.render();
    if refusal.use_stderr() {
        output::complain(&text.to_string());
        ExitCode::from(2)
    } else {
        match output::say(&text.to_string()) {
            Outcome::CouldNotRun => ExitCode::from(2),
            _ => ExitCode::SUCCESS,
        }
    }
}
