//! Reference libraries of the Python world, run beside the tests.
//!
//! The scripts in `tests/references` print JSON. Each test compares with the stored output (which names the versions it
//! came from) always, and with a fresh one where an interpreter with the packages of `requirements.txt` is at hand:
//! `TOPHEAVY_PYTHON` names it (default `python3`), and with `TOPHEAVY_REFERENCES=required`, as in continuous
//! integration, its absence is a failure.

use serde_json::Value;
use std::path::Path;
use std::process::Command;

/// What a script of `tests/references` prints for `args`; `None` where no interpreter has the packages it imports.
///
/// # Panics
/// When the script fails for another reason than a missing interpreter or package, prints no JSON, or when references
/// are required and cannot be had.
#[allow(clippy::panic, clippy::print_stderr)]
pub fn run(script: &str, args: &[&str]) -> Option<Value> {
    let required = std::env::var("TOPHEAVY_REFERENCES").is_ok_and(|value| value == "required");
    let interpreter = std::env::var("TOPHEAVY_PYTHON").unwrap_or_else(|_| "python3".to_owned());
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("references").join(script);
    let missing = match Command::new(&interpreter).arg(&path).args(args).output() {
        Err(error) => error.to_string(),
        Ok(output) => {
            let complaint = String::from_utf8_lossy(&output.stderr).into_owned();
            if output.status.success() {
                match serde_json::from_slice(&output.stdout) {
                    Ok(value) => return Some(value),
                    Err(error) => panic!("{script} printed no JSON: {error}"),
                }
            }
            assert!(complaint.contains("ModuleNotFoundError"), "{script} failed:\n{complaint}");
            complaint
        }
    };
    assert!(!required, "{script} cannot be run by {interpreter}: {missing}");
    eprintln!("{script} not run, stored numbers only: {missing}");
    None
}
