//! One file a command.

pub mod chain;
pub mod check;
pub mod curve;
pub mod schema;
pub mod why;

use crate::{Outcome, files, output};
use checks::{Analysis, Engine};

/// A single file analysed, for commands that take just one.
fn analysed(name: &str) -> Result<(String, Analysis), Outcome> {
    let asked = files::read(name);
    match asked.text {
        Ok(text) => {
            let analysis = checks::analyse(&text, &Engine::new(), &|| false);
            Ok((text, analysis))
        }
        Err(reason) => Err(output::refuse(&format!("{name}: {reason}"))),
    }
}

/// Prints why the stack of a file could not be resolved: its findings.
fn unresolved(name: &str, text: &str, analysis: &Analysis) -> Outcome {
    output::complain(&report::line::findings(&report::Checked { path: name, text, analysis }));
    output::refuse(&format!("{name}: the stack could not be resolved; the findings above say why"))
}

/// Prints a JSON document.
fn print_json(document: &serde_json::Value) -> Outcome {
    output::say(&format!("{document:#}\n"))
}
