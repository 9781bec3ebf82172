//! In a pipe: one line a finding, `file:line:column: severity: message [rule]`, as editors read compilers.

use crate::program::{folder, run, run_in, sample};

/// The findings among the lines, taken apart.
fn parsed(out: &str) -> Vec<(String, usize, usize, String, String)> {
    out.lines()
        .filter(|line| line.ends_with(']'))
        .map(|line| {
            let mut parts = line.splitn(5, ':');
            let mut next = || parts.next().unwrap_or_else(|| panic!("{line}")).to_owned();
            let (file, row, column, severity) = (next(), next(), next(), next());
            let rule = line.rsplit_once(" [").map(|(_, rule)| rule.trim_end_matches(']').to_owned());
            let number = |text: String| text.parse().unwrap_or_else(|_| panic!("{line}"));
            (file, number(row), number(column), severity.trim().to_owned(), rule.unwrap_or_default())
        })
        .collect()
}

#[test]
fn each_finding_is_one_line() {
    let findings = parsed(&run(&["check", "slips.stack.toml"]).out);
    let rules = checks::all_rules();
    let text = sample("slips");
    assert!(findings.len() > 15, "{findings:?}");
    for (file, row, column, severity, rule) in &findings {
        assert_eq!(file, "slips.stack.toml");
        let line = text.lines().nth(row - 1).unwrap_or_else(|| panic!("no line {row}"));
        assert!((1..=line.chars().count() + 1).contains(column), "{row}:{column} of '{line}'");
        assert!(["error", "warning", "information", "hint"].contains(&severity.as_str()), "{severity}");
        assert!(rules.iter().any(|known| known.id == rule), "{rule}");
    }
    let rows: Vec<usize> = findings.iter().map(|finding| finding.1).collect();
    assert!(rows.is_sorted(), "in the order of the text: {rows:?}");
    // `depth` stands where an editor is to put its cursor.
    let at = text.lines().position(|line| line.starts_with("depth")).expect("in the sample") + 1;
    assert!(findings.contains(&(
        "slips.stack.toml".to_owned(),
        at,
        1,
        "error".to_owned(),
        "key-not-known".to_owned()
    )));
}

#[test]
fn columns_count_characters() {
    // An inline table, so that characters of more than one byte stand before the key in its line.
    let text = sample("one-slab").replace("[record]", "fluid = { \"é😀\" = { phse = \"gas\" } }\n\n[record]");
    let out = run_in(&folder("columns"), &["check", "-"], text.as_bytes()).out;
    let found = parsed(&out).into_iter().find(|found| found.4 == "key-not-known");
    let (_, _, column, _, _) = found.unwrap_or_else(|| panic!("{out}"));
    // `fluid = { "é😀" = { ` are 19 characters (23 bytes).
    assert_eq!(column, 20, "{out}");
}

#[test]
fn standard_input_goes_by_the_name_that_is_given() {
    let text = sample("jar-upside-down");
    let here = folder("standard-input");
    let run = run_in(&here, &["check", "-", "--as", "drafts/jar.stack.toml"], text.as_bytes());
    assert_eq!(run.code, 1);
    assert!(run.out.starts_with("drafts/jar.stack.toml:"), "{}", run.out);
    let run = run_in(&here, &["check", "-"], text.as_bytes());
    assert!(run.out.starts_with("standard-input.stack.toml:"), "{}", run.out);
}

#[test]
fn no_message_calls_anything_safe() {
    for file in ["slips", "on-resonance", "round-cell", "jar-upside-down", "thin-slab"] {
        let out = run(&["check", &format!("{file}.stack.toml")]).out.to_lowercase();
        assert!(
            !out.split(|c: char| !c.is_alphabetic()).any(|word| word == "safe" || word == "safely"),
            "{out}"
        );
    }
}
