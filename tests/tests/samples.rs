//! Each sample gives just the findings that stand beside it, which were written by hand (see `samples/README.md`).

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use checks::{Engine, analyse};
use setup::declare::{Attention, Form, Section};
use setup::tree::{Table, Value};
use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../samples")
}

/// Name and text of every sample, by name.
fn samples() -> Vec<(String, String)> {
    let mut found = Vec::new();
    for entry in std::fs::read_dir(folder()).unwrap() {
        let path = entry.unwrap().path();
        let file = path.file_name().unwrap().to_str().unwrap();
        if let Some(name) = file.strip_suffix(".stack.toml") {
            found.push((name.to_owned(), std::fs::read_to_string(&path).unwrap()));
        }
    }
    found.sort();
    found
}

/// The verdict and the sorted lines `severity rule place` of an `.expected` file.
fn expected(name: &str) -> (String, Vec<String>) {
    let path = folder().join(format!("{name}.expected"));
    let text = std::fs::read_to_string(&path).unwrap_or_else(|error| panic!("{}: {error}", path.display()));
    let (mut verdict, mut lines) = (None, Vec::new());
    for line in text.lines().map(str::trim).filter(|line| !line.is_empty() && !line.starts_with('#')) {
        match line.strip_prefix("verdict ") {
            Some(word) => assert!(verdict.replace(word.to_owned()).is_none(), "{name}: two verdicts"),
            None => lines.push(line.to_owned()),
        }
    }
    lines.sort();
    (verdict.unwrap_or_else(|| panic!("{name}: no verdict is expected")), lines)
}

#[test]
fn each_gives_what_was_estimated() {
    let engine = Engine::new();
    let samples = samples();
    assert!(samples.len() >= 13, "the samples are gone: {}", samples.len());
    let mut wrong = String::new();
    for (name, text) in &samples {
        let analysis = analyse(text, &engine, &|| false);
        let findings = analysis.findings.iter();
        let mut got: Vec<String> = findings
            .map(|f| {
                format!("{} {} {}", report::line::word(f.severity), f.rule, f.place).trim_end().to_owned()
            })
            .collect();
        got.sort();
        let (verdict, lines) = expected(name);
        if verdict != analysis.verdict.word() {
            wrong += &format!("{name}: {verdict} expected, {} got\n", analysis.verdict.word());
        }
        wrong += &difference(name, &lines, &got);
    }
    assert!(wrong.is_empty(), "\n{wrong}");
}

/// The lines that only one of two sorted lists has; each counts as often as it stands there.
fn difference(name: &str, expected: &[String], got: &[String]) -> String {
    let count = |list: &[String], line: &String| list.iter().filter(|other| *other == line).count();
    let all: BTreeSet<&String> = expected.iter().chain(got).collect();
    all.into_iter()
        .filter(|line| count(expected, line) != count(got, line))
        .map(|line| format!("{name}: {line}: {} expected, {} got\n", count(expected, line), count(got, line)))
        .collect()
}

#[test]
fn every_sample_has_its_expectations_and_says_that_it_is_invented() {
    let names: BTreeSet<String> = samples().iter().map(|(name, _)| name.clone()).collect();
    for entry in std::fs::read_dir(folder()).unwrap() {
        let file = entry.unwrap().file_name().into_string().unwrap();
        if let Some(name) = file.strip_suffix(".expected") {
            assert!(names.contains(name), "{file} has no sample");
        }
    }
    let page = std::fs::read_to_string(folder().join("README.md")).unwrap();
    for (name, text) in samples() {
        assert!(page.contains(&format!("| `{name}` |")), "samples/README.md does not tell of {name}");
        assert!(text.contains("(invented)"), "{name} does not say that it is invented");
    }
}

#[test]
fn only_the_slips_have_slips() {
    for (name, text) in samples().iter().filter(|(name, _)| name != "slips") {
        let slips = setup::understand(text).findings;
        let slips: Vec<_> = slips.iter().filter(|f| f.severity == setup::finding::Severity::Error).collect();
        assert!(slips.is_empty(), "{name}: {slips:#?}");
    }
}

#[test]
fn the_slips_show_every_reading_rule() {
    let (_, lines) = expected("slips");
    let told: BTreeSet<&str> = lines.iter().filter_map(|line| line.split(' ').nth(1)).collect();
    // A file that cannot be read has no text that could show it.
    let shown = setup::RULES.iter().map(|rule| rule.id).filter(|id| *id != "file-not-readable");
    let missing: Vec<_> = shown.filter(|id| !told.contains(id)).collect();
    assert!(missing.is_empty(), "no slip of {missing:?}");
}

#[test]
fn every_key_that_is_looked_at_stands_in_a_sample() {
    let mut used = BTreeSet::new();
    for (_, text) in samples().iter().filter(|(name, _)| name != "slips") {
        let reading = setup::read(text);
        for section in setup::declarations() {
            for table in tables(&reading.root, section) {
                used.extend(table.entries.iter().map(|entry| (section.path, entry.key.clone())));
            }
        }
    }
    let mut unused = Vec::new();
    for section in setup::declarations().iter().filter(|section| section.attention == Attention::Looked) {
        for key in section.keys.iter().filter(|key| key.attention == Attention::Looked) {
            if !used.contains(&(section.path, key.name.to_owned())) {
                unused.push(format!("{} {}", section.header(), key.name));
            }
        }
    }
    assert!(unused.is_empty(), "no sample uses {unused:#?}");
}

/// Every table of the tree that a section's declaration speaks of.
fn tables<'a>(root: &'a Table, section: &Section) -> Vec<&'a Table> {
    let mut found = vec![root];
    for step in section.path.split('.').filter(|step| !step.is_empty()) {
        found = found.into_iter().flat_map(|table| below(table, step)).collect();
    }
    if section.form == Form::Named {
        found = found
            .into_iter()
            .flat_map(|table| table.entries.iter().flat_map(|entry| of(&entry.value)))
            .collect();
    }
    found
}

fn below<'a>(table: &'a Table, key: &str) -> Vec<&'a Table> {
    table.entries.iter().filter(|entry| entry.key == key).flat_map(|entry| of(&entry.value)).collect()
}

fn of(value: &Value) -> Vec<&Table> {
    match value {
        Value::Table(table) => vec![table],
        Value::Tables(tables) => tables.iter().collect(),
        _ => Vec::new(),
    }
}
