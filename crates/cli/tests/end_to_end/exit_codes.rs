//! 0 clean, 1 found, 2 could not run, as POSIX tools have it.

use crate::program::{folder, run, run_in, sample};

#[test]
fn clean_is_0() {
    let run = run(&["check", "one-slab.stack.toml"]);
    assert_eq!((run.code, run.err.as_str()), (0, ""));
    assert!(run.out.starts_with("one-slab.stack.toml holds"), "{}", run.out);
}

#[test]
fn an_error_is_1() {
    assert_eq!(run(&["check", "two-slabs-too-weak.stack.toml"]).code, 1);
    assert_eq!(run(&["check", "slips.stack.toml"]).code, 1);
}

#[test]
fn one_that_fails_among_clean_ones_is_1_and_both_are_told() {
    let run = run(&["check", "one-slab.stack.toml", "jar-upside-down.stack.toml"]);
    assert_eq!(run.code, 1);
    let verdicts: Vec<_> = run.out.lines().filter(|line| !line.contains(": error: ")).collect();
    assert!(verdicts[0].starts_with("one-slab.stack.toml holds"), "{verdicts:?}");
    assert!(verdicts[1].starts_with("jar-upside-down.stack.toml fails"), "{verdicts:?}");
}

#[test]
fn a_warning_is_1_only_where_warnings_are_refused() {
    let file = "thin-slab.stack.toml";
    assert_eq!(run(&["check", file]).code, 0);
    assert_eq!(run(&["check", "--refuse", "error", file]).code, 0);
    assert_eq!(run(&["check", "--refuse", "warning", file]).code, 1);
    assert_eq!(run(&["check", "--refuse", "information", file]).code, 1);
}

#[test]
fn an_accepted_finding_is_not_refused_but_an_accepted_error_still_fails() {
    let accept = |finding: &str| {
        format!("\n[[accept]]\nfinding = \"{finding}\"\nreason = \"a test\"\nby = \"A. Tester\"\n")
    };
    let there = folder("accepted");
    let thin = sample("thin-slab") + &accept("wave-margin-short");
    assert_eq!(run_in(&there, &["check", "--refuse", "warning", "-"], thin.as_bytes()).code, 0);
    let weak = sample("two-slabs-too-weak") + &accept("interface-falls");
    let run = run_in(&there, &["check", "-"], weak.as_bytes());
    assert!(run.out.contains(" fails: 2 errors, 2 of them accepted"), "{}", run.out);
    assert_eq!(run.code, 0, "accepted findings do not count");
}

#[test]
fn incomplete_is_1_unless_allowed() {
    let file = "round-cell.stack.toml";
    assert_eq!(run(&["check", file]).code, 1);
    assert_eq!(run(&["check", "--allow-incomplete", file]).code, 0);
}

#[test]
fn a_file_that_cannot_be_read_is_found_and_said() {
    let there = folder("unreadable");
    std::fs::write(there.join("latin.stack.toml"), b"title = \"\xe9\"\n").expect("written");
    std::fs::write(there.join("large.stack.toml"), vec![b'#'; 2_000_000]).expect("written");
    for (file, said) in [
        ("missing.stack.toml", "No such file"),
        ("latin.stack.toml", "UTF-8"),
        ("large.stack.toml", "larger"),
    ] {
        let run = run_in(&there, &["check", file], b"");
        assert_ne!(run.code, 0, "{file}");
        assert!(run.out.contains("file-not-readable") && run.out.contains(said), "{file}: {}", run.out);
        let run = run_in(&there, &["check", "--format", "json", file], b"");
        assert_eq!(run.json()["files"][0]["verdict"], "unreadable", "{file}");
        for command in [&["chain", file][..], &["curve", file, "--slab", "oil", "--wavenumber", "100 1/m"]] {
            let run = run_in(&there, command, b"");
            assert_eq!((run.code, run.out.as_str()), (2, ""), "{command:?}");
            assert!(run.err.contains(said), "{}", run.err);
        }
    }
}

#[test]
fn an_empty_file_is_judged_and_holds_nothing() {
    for text in ["", "\n", "# nothing yet\n", "\u{feff}"] {
        let run = run_in(&folder("empty"), &["check", "--format", "json", "-"], text.as_bytes());
        assert_eq!(run.code, 1, "{text:?}: {}", run.out);
        assert_ne!(run.json()["files"][0]["verdict"], "holds", "{text:?}");
    }
}

#[test]
fn a_folder_is_searched_and_one_without_setups_is_2() {
    let there = folder("searched");
    assert_eq!(run_in(&there, &["check", "."], b"").code, 2);
    std::fs::create_dir_all(there.join("deep/er")).expect("made");
    std::fs::write(there.join("deep/er/a.stack.toml"), sample("one-slab")).expect("written");
    std::fs::write(there.join("deep/b.stack.toml"), sample("jar-upside-down")).expect("written");
    std::fs::write(there.join("deep/other.toml"), "not a setup").expect("written");
    let run = run_in(&there, &["check", ".", "--format", "json"], b"");
    let document = run.json();
    let paths: Vec<_> =
        document["files"].as_array().expect("files").iter().map(|file| file["path"].clone()).collect();
    assert_eq!(paths, ["deep/b.stack.toml", "deep/er/a.stack.toml"]);
    std::fs::write(there.join(".ignore"), "b.stack.toml\n").expect("written");
    let run = run_in(&there, &["check", "deep"], b"");
    assert_eq!(run.code, 0, "the ignored one is passed over: {}", run.out);
    std::fs::write(there.join("topheavy.toml"), "").expect("written");
    let run = run_in(&there.join("deep"), &["check"], b"");
    assert_eq!(run.code, 0, "no path: the root: {}{}", run.out, run.err);
}

#[test]
fn slips_in_the_arguments_are_2() {
    for arguments in [
        &[][..],
        &["chekc"],
        &["check", "--no-such-option"],
        &["check", "--refuse", "everything", "one-slab.stack.toml"],
        &["check", "--positions", "utf-7", "one-slab.stack.toml"],
        &["curve", "one-slab.stack.toml", "--slab", "oil"],
        &["curve", "one-slab.stack.toml", "--slab", "water", "--wavenumber", "100 1/m"],
        &["curve", "one-slab.stack.toml", "--slab", "oil", "--wavenumber", "100 kg"],
        &["curve", "one-slab.stack.toml", "--slab", "oil", "--wavenumber", "0 1/m"],
        &["curve", "one-slab.stack.toml", "--slab", "oil", "--wavenumber", "1e300 1/m"],
        &["curve", "one-slab.stack.toml", "--slab", "oil", "--wavelength", "0 mm"],
        &[
            "curve",
            "one-slab.stack.toml",
            "--slab",
            "oil",
            "--wavenumber",
            "100 1/m",
            "--acceleration",
            "loud",
        ],
        &["curve", "jar-upside-down.stack.toml", "--slab", "water", "--wavenumber", "100 1/m"],
        &["chain", "one-slab.stack.toml", "--sweep", "300 Hz to 20 Hz"],
        &["chain", "one-slab.stack.toml", "--sweep", "20 to 300"],
        &["chain", "one-slab.stack.toml", "--points", "1"],
        &["chain", "slips.stack.toml"],
        &["chain", "."],
        &["why", "no-such-finding"],
    ] {
        let run = run(arguments);
        assert_eq!((run.code, run.out.as_str()), (2, ""), "{arguments:?}: {}", run.err);
        assert!(!run.err.trim().is_empty(), "{arguments:?} says nothing");
    }
}

#[test]
fn help_and_version_are_0_on_standard_output() {
    for arguments in [&["--help"][..], &["--version"], &["check", "--help"], &["help", "curve"]] {
        let run = run(arguments);
        assert_eq!((run.code, run.err.as_str()), (0, ""), "{arguments:?}");
        assert!(!run.out.is_empty());
    }
}

#[test]
fn why_has_a_page_for_every_finding() {
    let list = run(&["why"]);
    assert_eq!(list.code, 0);
    let names: Vec<&str> = list.out.lines().filter_map(|line| line.split_whitespace().next()).collect();
    assert_eq!(names, checks::all_rules().iter().map(|rule| rule.id).collect::<Vec<_>>());
    for name in names {
        let page = run(&["why", name]);
        assert_eq!(page.code, 0, "{name}");
        assert!(page.out.starts_with(name) && page.out.contains("Why it matters:"), "{}", page.out);
    }
}

#[test]
fn the_schema_is_one_json_document() {
    let run = run(&["schema"]);
    assert_eq!(run.code, 0);
    assert!(run.json()["$schema"].as_str().is_some_and(|name| name.contains("draft-07")));
}
