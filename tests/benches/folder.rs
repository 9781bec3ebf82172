//! A folder of many different setups by the program itself: `topheavy check DIR`.
//!
//! `cargo bench -p topheavy-tests --bench folder` builds the program and runs it over [`FEW`] and over [`MANY`] setups of two
//! slabs, no two alike. Time is shown. The peak of resident memory must not follow the number of setups: what is kept of each is its
//! text and its findings, not what was computed on the way. Memory is read where the system tells it (`/proc`).

#![allow(clippy::unwrap_used, clippy::print_stdout)]

use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};
use std::time::{Duration, Instant};
use topheavy_tests::sample::two_slabs;

const FEW: u32 = 100;
const MANY: u32 = 1000;
/// The peak over [`MANY`] setups may be this many times that over [`FEW`].
const FLAT: f64 = 2.0;

fn main() {
    let program = program();
    let folder = std::env::temp_dir().join(format!("topheavy-folder-{}", std::process::id()));
    let few = run(&program, &folder, 0, FEW);
    let many = run(&program, &folder, FEW, MANY);
    std::fs::remove_dir_all(&folder).unwrap();
    for (setups, (time, peak)) in [(FEW, few), (MANY, many)] {
        let each = time / setups;
        let peak = peak.map_or("not told here".to_owned(), |kib| format!("{:.1} MiB", kib as f64 / 1024.0));
        println!("{setups} setups of two slabs: {time:.2?}, {each:.2?} each; peak of memory {peak}");
    }
    if let (Some(few), Some(many)) = (few.1, many.1) {
        assert!(many as f64 <= FLAT * few as f64, "memory follows the number of setups: {few} to {many} KiB");
    }
}

/// The program of this profile, built now.
fn program() -> PathBuf {
    let build =
        Command::new(env!("CARGO")).args(["build", "--release", "--quiet", "-p", "topheavy"]).status();
    assert!(build.unwrap().success(), "the program does not build");
    let here = std::env::current_exe().unwrap();
    here.ancestors().nth(2).unwrap().join("topheavy").with_extension(std::env::consts::EXE_EXTENSION)
}

/// Time and peak of memory (KiB) of one check of a folder with so many setups.
fn run(program: &Path, folder: &Path, first: u32, setups: u32) -> (Duration, Option<u64>) {
    let folder = folder.join(setups.to_string());
    std::fs::create_dir_all(&folder).unwrap();
    for number in first..first + setups {
        std::fs::write(folder.join(format!("{number:05}.stack.toml")), two_slabs(number)).unwrap();
    }
    let start = Instant::now();
    let mut child = Command::new(program).arg("check").arg(&folder).stdout(Stdio::null()).spawn().unwrap();
    let mut peak = None;
    let status = loop {
        // The peak is known as long as the process is; it is read until it ends.
        peak = peak_of(child.id()).or(peak);
        if let Some(status) = child.try_wait().unwrap() {
            break status;
        }
        std::thread::sleep(Duration::from_millis(2));
    };
    let time = start.elapsed();
    // Code 1: setups with findings.
    assert!(matches!(status.code(), Some(0 | 1)), "{status}");
    (time, peak)
}

fn peak_of(process: u32) -> Option<u64> {
    let status = std::fs::read_to_string(format!("/proc/{process}/status")).ok()?;
    let line = status.lines().find(|line| line.starts_with("VmHWM:"))?;
    line.split_whitespace().nth(1)?.parse().ok()
}
