//! The only place that writes to the terminal. A reader that closes its end of the pipe ends the command quietly.

use crate::Outcome;
use std::io::{ErrorKind, IsTerminal, Write};

/// Writes to standard output.
pub fn say(text: &str) -> Outcome {
    let mut out = std::io::stdout().lock();
    match out.write_all(text.as_bytes()).and_then(|()| out.flush()) {
        Ok(()) => Outcome::Clean,
        Err(error) if error.kind() == ErrorKind::BrokenPipe => Outcome::Clean,
        Err(error) => {
            complain(&format!("topheavy: standard output: {error}\n"));
            Outcome::CouldNotRun
        }
    }
}

/// Writes to standard error; nothing can be done when that fails.
pub fn complain(text: &str) {
    let _ = std::io::stderr().lock().write_all(text.as_bytes());
}

/// Says why a command could not run.
pub fn refuse(reason: &str) -> Outcome {
    complain(&format!("topheavy: {}\n", report::line::one_line(reason)));
    Outcome::CouldNotRun
}

/// How the terminal on standard output wants findings, or `None` when it is no terminal.
/// `NO_COLOR` (no-color.org) is honoured; `COLUMNS` gives the width.
pub fn terminal() -> Option<report::terminal::Style> {
    if !std::io::stdout().is_terminal() {
        return None;
    }
    let colour = std::env::var_os("NO_COLOR").is_none_or(|value| value.is_empty())
        && std::env::var_os("TERM").is_none_or(|term| term != "dumb");
    let width = std::env::var("COLUMNS").ok().and_then(|text| text.parse().ok()).unwrap_or(100);
    Some(report::terminal::Style { colour, width })
}
