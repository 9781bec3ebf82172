//! Runs the program; nothing of it may ever say that it panicked.

use serde_json::Value;
use std::io::Write;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

/// What a run gave.
#[derive(Debug)]
pub struct Run {
    pub code: i32,
    pub out: String,
    pub err: String,
}

impl Run {
    /// The JSON document on standard output.
    #[track_caller]
    pub fn json(&self) -> Value {
        serde_json::from_str(&self.out)
            .unwrap_or_else(|error| panic!("no JSON: {error}\n{}\n{}", self.out, self.err))
    }
}

/// Runs it in the folder of the samples.
#[track_caller]
pub fn run(arguments: &[&str]) -> Run {
    run_in(&samples(), arguments, b"")
}

/// Runs it in a folder, with something on standard input.
#[track_caller]
pub fn run_in(folder: &Path, arguments: &[&str], input: &[u8]) -> Run {
    let mut child = Command::new(env!("CARGO_BIN_EXE_topheavy"))
        .args(arguments)
        .current_dir(folder)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the program starts");
    // A program that refuses its arguments never reads: the pipe is then closed, which is no failure.
    let _ = child.stdin.take().expect("piped").write_all(input);
    let output = child.wait_with_output().expect("the program ends");
    let run = Run {
        code: output.status.code().unwrap_or_else(|| panic!("{arguments:?} was killed: {:?}", output.status)),
        out: String::from_utf8(output.stdout).expect("UTF-8 on standard output"),
        err: String::from_utf8(output.stderr).expect("UTF-8 on standard error"),
    };
    assert!(!run.err.contains("panicked"), "{arguments:?}: {}", run.err);
    run
}

pub fn samples() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../samples").canonicalize().expect("the samples")
}

/// An empty folder of this test alone.
pub fn folder(name: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    let _ = std::fs::remove_dir_all(&folder);
    std::fs::create_dir_all(&folder).expect("a folder for the test");
    folder
}

/// The text of a sample.
pub fn sample(name: &str) -> String {
    std::fs::read_to_string(samples().join(format!("{name}.stack.toml"))).expect("the sample")
}
