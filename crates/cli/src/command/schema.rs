//! `topheavy schema`: the JSON Schema of the setup file.

use crate::Outcome;

/// Runs the command.
pub fn run() -> Outcome {
    super::print_json(&setup::schema())
}
