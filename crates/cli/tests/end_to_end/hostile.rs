//! What nobody would write on purpose: no panic, no broken line, no steered terminal.

use crate::program::{folder, run_in, sample};
use std::process::{Command, Stdio};

#[test]
fn control_characters_of_names_do_not_reach_the_terminal() {
    let there = folder("control-characters");
    let text = sample("jar-upside-down")
        .replace("name = \"water\"", "name = \"wa\\u001b[31mter\\u0007\"")
        .replace("title = \"", "title = \"\\u001b]0;gone\\u0007");
    for arguments in [
        &["check", "-", "--as", "a\u{1b}[2Jb.stack.toml"][..],
        &["chain", "-"],
        &["curve", "-", "--slab", "wa\u{1b}[31mter", "--wavenumber", "100 1/m"],
        &["why", "\u{1b}[31m"],
    ] {
        let run = run_in(&there, arguments, text.as_bytes());
        for (name, text) in [("output", &run.out), ("errors", &run.err)] {
            let control = text.chars().find(|c| c.is_control() && *c != '\n');
            assert_eq!(control, None, "{arguments:?}: standard {name}: {text:?}");
        }
    }
}

#[test]
fn a_reader_that_goes_away_ends_the_command_quietly() {
    for arguments in [&["check", "slips.stack.toml"][..], &["schema"], &["why"], &["--help"]] {
        let mut child = Command::new(env!("CARGO_BIN_EXE_topheavy"))
            .args(arguments)
            .current_dir(crate::program::samples())
            .stdout(Stdio::piped())
            .stderr(Stdio::piped())
            .spawn()
            .expect("the program starts");
        drop(child.stdout.take());
        let output = child.wait_with_output().expect("the program ends");
        let complaint = String::from_utf8_lossy(&output.stderr);
        assert!(complaint.is_empty(), "{arguments:?}: {complaint}");
        assert!(matches!(output.status.code(), Some(0 | 1)), "{arguments:?}: {:?}", output.status);
    }
}

#[test]
fn absurd_numbers_are_refused_and_not_computed() {
    let there = folder("absurd");
    for number in ["1e300", "-1e300", "1e-300", "0", "1e999", "nan", "inf", "9999999999999999999999999"] {
        for (key, unit) in [
            ("thickness = \"15", "mm"),
            ("frequency = \"50", "Hz"),
            ("acceleration = \"13.0", "g0 peak"),
            ("length = \"50", "mm"),
        ] {
            let name = key.split(' ').next().expect("a key");
            let text = sample("one-slab");
            let line = text.lines().find(|line| line.starts_with(key)).expect("in the sample").to_owned();
            let text = text.replacen(&line, &format!("{name} = \"{number} {unit}\""), 1);
            let run = run_in(&there, &["check", "--format", "json", "-"], text.as_bytes());
            let document = run.json();
            // An acceleration of 0 is a cell at rest, and too little of it falls: each other one is a slip.
            assert_eq!(run.code, 1, "{name} = {number}: {}", run.out);
            assert!(!run.out.contains("internal-fault"), "{name} = {number}");
            assert_eq!(document["files"][0]["verdict"], "fails", "{name} = {number}");
        }
    }
}

#[test]
fn a_drive_of_next_to_nothing_is_judged_like_none() {
    // From rounding noise up to a thousandth of gravity the slab falls as fast as at rest.
    let there = folder("next-to-nothing");
    for exponent in (-12..=-2).rev() {
        let text = sample("one-slab").replace("13.0 g0 peak", &format!("1e{exponent} m/s² peak"));
        let run = run_in(&there, &["check", "-"], text.as_bytes());
        assert!(
            run.out.contains("[interface-falls]") && run.out.contains("fails: 1 error"),
            "1e{exponent}: {}",
            run.out
        );
    }
}

#[test]
fn texts_that_are_no_setup_are_found_wanting() {
    let there = folder("no-setup");
    let deep = "[".repeat(5_000);
    let long = format!("title = \"{}\"", "x".repeat(500_000));
    let many = "[[layer]]\nname = \"a\"\n".repeat(2_000);
    for text in ["\0", "=", "[[[", "\"", "'''", "a.b.c.d = { e = [ { f = 1", &deep, &long, &many] {
        for arguments in [&["check", "-"][..], &["check", "--format", "json", "-"], &["chain", "-"]] {
            let run = run_in(&there, arguments, text.as_bytes());
            assert!(matches!(run.code, 1 | 2), "{arguments:?}: {:.60}: {}", text, run.code);
        }
    }
}

#[cfg(unix)]
#[test]
fn a_pipe_given_as_a_file_is_not_waited_for() {
    let run = run_in(&folder("device"), &["check", "/dev/zero"], b"");
    assert_eq!(run.code, 1);
    assert!(run.out.contains("file-not-readable"), "{}", run.out);
}
