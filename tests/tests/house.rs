//! Invariants of the house: what may import what, where the rules stand, and what no source may contain. The table
//! of imports in `DEVELOPERS.md` is the one that counts.

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use serde_json::Value;
use std::collections::{BTreeMap, BTreeSet};
use std::path::{Path, PathBuf};
use std::process::Command;

/// More lines than this and a file holds two ideas.
const MOST_LINES: usize = 900;

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("..").canonicalize().unwrap()
}

/// Every file below a folder whose name has this ending: path from the root, text.
fn files(folder: &str, ending: &str) -> Vec<(String, String)> {
    let root = root();
    let mut found = Vec::new();
    let mut folders = vec![root.join(folder)];
    while let Some(folder) = folders.pop() {
        for entry in
            std::fs::read_dir(&folder).unwrap_or_else(|error| panic!("{}: {error}", folder.display()))
        {
            let path = entry.unwrap().path();
            let name = path.file_name().unwrap().to_string_lossy().into_owned();
            if path.is_dir() && name != "target" && !name.starts_with('.') {
                folders.push(path);
            } else if path.is_file() && name.ends_with(ending) {
                let text = std::fs::read_to_string(&path)
                    .unwrap_or_else(|error| panic!("{}: {error}", path.display()));
                let from_root = path.strip_prefix(&root).unwrap().to_string_lossy().replace('\\', "/");
                found.push((from_root, text));
            }
        }
    }
    found.sort();
    assert!(!found.is_empty(), "no {ending} below {folder}");
    found
}

/// The sources of the crates, without their tests.
fn sources() -> Vec<(String, String)> {
    files("crates", ".rs").into_iter().filter(|(path, _)| path.contains("/src/")).collect()
}

fn rust() -> Vec<(String, String)> {
    sources_and_tests().into_iter().filter(|(path, _)| path.ends_with(".rs")).collect()
}

fn sources_and_tests() -> Vec<(String, String)> {
    let mut all = files("crates", ".rs");
    all.extend(files("tests", ".rs"));
    all
}

/// A source without its test modules and comments, so that line numbers stay.
fn production(path: &str, text: &str) -> String {
    if path.ends_with("/testing.rs") || path.ends_with("/tests.rs") {
        return String::new();
    }
    let mut out = String::new();
    let mut lines = text.lines().peekable();
    while let Some(line) = lines.next() {
        let next = lines.peek().copied().unwrap_or_default();
        if line.trim() == "#[cfg(test)]" && next.starts_with("mod ") && next.ends_with('{') {
            // A test module is the last thing in its file: what follows it would be passed over here.
            let after = lines.skip_while(|line| *line != "}").nth(1);
            assert!(after.is_none(), "{path}: something stands behind the tests: {after:?}");
            break;
        }
        let code = line.find("//").map_or(line, |at| &line[..at]);
        out += code;
        out.push('\n');
    }
    out
}

/// Places where a source contains a word: `path:line`.
fn places(path: &str, text: &str, word: &str) -> Vec<String> {
    let lines = text.lines().enumerate().filter(|(_, line)| line.contains(word));
    lines.map(|(i, line)| format!("{path}:{}: {}", i + 1, line.trim())).collect()
}

#[test]
fn imports_are_those_of_the_table() {
    let output = Command::new(env!("CARGO"))
        .args(["metadata", "--format-version", "1", "--no-deps", "--offline"])
        .current_dir(root())
        .output()
        .unwrap();
    assert!(output.status.success(), "{}", String::from_utf8_lossy(&output.stderr));
    let metadata: Value = serde_json::from_slice(&output.stdout).unwrap();
    let short = |name: &str| match name {
        "topheavy" => Some("cli".to_owned()),
        name => name.strip_prefix("topheavy-").map(str::to_owned),
    };
    let mut arrows: BTreeMap<String, BTreeSet<String>> = BTreeMap::new();
    for package in metadata["packages"].as_array().unwrap() {
        let name = short(package["name"].as_str().unwrap()).expect("every package is named topheavy-…");
        let dependencies = package["dependencies"].as_array().unwrap().iter();
        // Tests of a crate may import what they like.
        let normal = dependencies.filter(|dependency| dependency["kind"].as_str() != Some("dev"));
        arrows.insert(name, normal.filter_map(|d| short(d["name"].as_str().unwrap())).collect());
    }
    let mut table = table();
    for (name, imports) in &arrows {
        let allowed = table.remove(name).unwrap_or_else(|| panic!("`{name}` has no row in DEVELOPERS.md"));
        let Some(allowed) = allowed else { continue };
        let forbidden: Vec<_> = imports.difference(&allowed).collect();
        assert!(forbidden.is_empty(), "`{name}` imports {forbidden:?}, which DEVELOPERS.md does not allow");
        let idle: Vec<_> = allowed.difference(imports).collect();
        assert!(idle.is_empty(), "DEVELOPERS.md lets `{name}` import {idle:?}, which it does not");
    }
    assert!(table.is_empty(), "DEVELOPERS.md has rows of no crate: {table:?}");
}

/// The rows of `| crate | may import |`; `None` for 'any'.
fn table() -> BTreeMap<String, Option<BTreeSet<String>>> {
    let page = std::fs::read_to_string(root().join("DEVELOPERS.md")).unwrap();
    let rows = page.lines().skip_while(|line| *line != "| crate | may import |").skip(2);
    let mut table = BTreeMap::new();
    for row in rows.take_while(|row| row.starts_with('|')) {
        let cells: Vec<&str> = row.trim_matches('|').split('|').map(str::trim).collect();
        let [name, imports] = cells[..] else { panic!("{row}") };
        let imports = match imports {
            "any" => None,
            "nothing" => Some(BTreeSet::new()),
            list => Some(list.split(',').map(|name| name.trim().trim_matches('`').to_owned()).collect()),
        };
        table.insert(name.trim_matches('`').to_owned(), imports);
    }
    assert!(!table.is_empty(), "DEVELOPERS.md has lost its table");
    table
}

#[test]
fn the_guide_names_every_crate_and_only_files_that_exist() {
    let page = std::fs::read_to_string(root().join("DEVELOPERS.md")).unwrap();
    let pieces = page.split('`').skip(1).step_by(2);
    let starts = ["crates/", "tests/", "samples/", "editors/", ".ci/"];
    let paths = pieces.filter(|piece| starts.iter().any(|start| piece.starts_with(start)));
    let paths: Vec<&str> =
        paths.filter(|path| !path.contains(['*', ' ', '<']) && !path.contains("NAME")).collect();
    assert!(paths.len() > 20, "the code map is gone");
    for path in paths {
        assert!(root().join(path).exists(), "DEVELOPERS.md speaks of `{path}`, which does not exist");
    }
}

#[test]
fn every_source_says_what_it_is() {
    for (path, text) in rust() {
        assert!(text.starts_with("//! "), "{path} has no module documentation");
    }
}

#[test]
fn no_file_grows_too_long() {
    for (path, text) in sources_and_tests() {
        let lines = text.lines().count();
        assert!(lines <= MOST_LINES, "{path} has {lines} lines, at most {MOST_LINES} are wanted");
    }
}

/// Names of the rules in the trade's words. A new rule is written here once more, so that a name is chosen and does
/// not happen.
const NAMES: &[&str] = &[
    "acceptance-without-finding",
    "amplitude-kind-unsaid",
    "cushion-crushed",
    "cushion-near-resonance",
    "cushion-harmonics-large",
    "cushion-bounces-at-half",
    "cushion-stroke-long",
    "cushion-vented",
    "effect-switched-off",
    "file-not-readable",
    "gas-layer-compressible",
    "face-wedged-by-tilt",
    "equations-outside-range",
    "hold-margin-short",
    "interface-falls",
    "interfacial-tension-missing",
    "internal-fault",
    "key-given-twice",
    "key-not-known",
    "key-under-wrong-heading",
    "line-unreadable",
    "liquid-shear-dependent",
    "material-outside-range",
    "name-given-twice",
    "name-not-found",
    "no-holding-drive",
    "not-converged",
    "not-looked-at",
    "open-value-unsolved",
    "path-leaves-root",
    "peak-rms-slip",
    "pinned-line-slides",
    "pressure-reference-unsaid",
    "stack-overfills-cell",
    "tolerance-meaning-unsaid",
    "unit-missing",
    "unit-not-known",
    "unit-of-wrong-kind",
    "value-missing",
    "value-of-wrong-type",
    "value-out-of-range",
    "values-disagree",
    "wave-margin-short",
    "waves-on-interface",
];

#[test]
fn rule_names_are_the_chosen_ones() {
    let ids: Vec<&str> = checks::all_rules().iter().map(|rule| rule.id).collect();
    let unique: BTreeSet<&str> = ids.iter().copied().collect();
    assert_eq!(unique.len(), ids.len(), "two rules of one name");
    assert_eq!(unique, NAMES.iter().copied().collect());
    for id in ids {
        assert!(
            id.contains('-') && id.chars().all(|c| c.is_ascii_lowercase() || c == '-'),
            "{id} is not kebab case"
        );
    }
}

#[test]
fn one_file_a_rule() {
    // Files of the folders that are no rules: what rules share, and what one crate says under the other's names.
    let shared = ["mod", "testing", "context"];
    let borrowed = ["not_looked_at", "value_missing", "values_disagree"];
    let setup: BTreeSet<String> = setup::RULES.iter().map(|rule| rule.id.replace('-', "_")).collect();
    let checks: BTreeSet<String> = checks::RULES.iter().map(|rule| rule.info.id.replace('-', "_")).collect();
    for (folder, rules, borrowed) in
        [("crates/setup/src/rules", &setup, &[][..]), ("crates/checks/src/rules", &checks, &borrowed[..])]
    {
        let names = files(folder, ".rs").into_iter().map(|(path, _)| path);
        let stems: BTreeSet<String> = names
            .map(|path| path.rsplit('/').next().unwrap().trim_end_matches(".rs").to_owned())
            .filter(|stem| !shared.contains(&stem.as_str()) && !borrowed.contains(&stem.as_str()))
            .collect();
        assert_eq!(&stems, rules, "files in {folder} and rules of its list");
    }
}

#[test]
fn every_page_says_what_why_and_what_to_do() {
    for rule in checks::all_rules() {
        let page = rule.doc();
        assert_eq!(page.lines().next(), Some(rule.id), "the first line of a page is the rule's name");
        for (part, text) in [("statement", rule.statement()), ("why", rule.why()), ("remedy", rule.remedy())]
        {
            assert!(text.len() > 10 && text.ends_with('.'), "{}: {part} is '{text}'", rule.id);
        }
        assert!(!is_safe_said(&page), "{} says 'safe'", rule.id);
    }
}

/// Whether the word 'safe' or 'safely' stands in a text.
fn is_safe_said(text: &str) -> bool {
    let lower = text.to_lowercase();
    lower.split(|c: char| !c.is_alphabetic()).any(|word| word == "safe" || word == "safely")
}

#[test]
fn no_string_says_safe() {
    for (path, text) in sources() {
        for (i, line) in production(&path, &text).lines().enumerate() {
            assert!(!is_safe_said(line), "{path}:{}: {line}", i + 1);
        }
    }
}

#[test]
fn nothing_tells_of_a_machine() {
    let mut all = sources_and_tests();
    for (folder, ending) in
        [("samples", ".toml"), ("samples", ".expected"), ("samples", ".md"), ("editors", ".md")]
    {
        all.extend(files(folder, ending));
    }
    for page in ["README.md", "DEVELOPERS.md", ".ci/run"] {
        all.push((page.to_owned(), std::fs::read_to_string(root().join(page)).unwrap()));
    }
    // In two pieces, so that this list is not found in this file.
    let roots = [["/tm", "p/"], ["/roo", "t/"], ["/hom", "e/"], ["/wor", "k/"]].map(|pieces| pieces.concat());
    for (path, text) in all {
        for folder in &roots {
            let found = places(&path, &text, folder);
            assert!(found.is_empty(), "a path of somebody's machine: {found:#?}");
        }
    }
}

#[test]
fn no_finding_is_a_code() {
    for (path, text) in sources() {
        for (i, line) in text.lines().enumerate() {
            for word in line.split('"').skip(1).step_by(2) {
                assert!(!is_code(word), "{path}:{}: \"{word}\" is a code and not a name", i + 1);
            }
        }
    }
    assert!(is_code("TH012") && is_code("E0308") && !is_code("M6") && !is_code("interface-falls"));
}

/// One to four capitals and three or four digits.
fn is_code(word: &str) -> bool {
    let letters = word.chars().take_while(char::is_ascii_uppercase).count();
    let digits = word.len() - letters;
    (1..=4).contains(&letters)
        && (3..=4).contains(&digits)
        && word[letters..].bytes().all(|b| b.is_ascii_digit())
}

#[test]
fn physics_touches_nothing_outside() {
    for (path, text) in files("crates/physics/src", ".rs") {
        let code = production(&path, &text);
        for word in ["std::fs", "std::io", "std::env", "std::net", "std::time", "toml_edit", "lsp", "Span"] {
            let found = places(&path, &code, word);
            assert!(found.is_empty(), "physics knows no {word}: {found:#?}");
        }
    }
}

#[test]
fn the_editor_protocol_stays_in_the_server() {
    for (path, text) in sources().iter().filter(|(path, _)| !path.starts_with("crates/server/")) {
        let found = places(path, &production(path, text), "lsp");
        assert!(found.is_empty(), "types of the editor protocol outside the server: {found:#?}");
    }
}

#[test]
fn files_environment_and_clock_have_few_doors() {
    let doors = ["crates/cli/", "crates/server/"];
    for (path, text) in sources().iter().filter(|(path, _)| !doors.iter().any(|door| path.starts_with(door)))
    {
        for word in ["std::fs", "std::env", "std::net", "SystemTime", "Instant::now"] {
            let found = places(path, &production(path, text), word);
            assert!(found.is_empty(), "{word} outside of the command line and the server: {found:#?}");
        }
    }
}

#[test]
fn nothing_that_a_person_writes_can_panic() {
    let mut looked_at = 0;
    for folder in [
        "crates/setup/src",
        "crates/quantity/src",
        "crates/server/src",
        "crates/report/src",
        "crates/cli/src",
    ] {
        for (path, text) in files(folder, ".rs") {
            let code = production(&path, &text);
            looked_at += code.lines().count();
            for word in [".unwrap()", ".expect(", "panic!(", "unreachable!(", "todo!(", "unimplemented!("] {
                let found = places(&path, &code, word);
                assert!(found.is_empty(), "may panic: {found:#?}");
            }
        }
    }
    assert!(looked_at > 5000, "the sources are gone: {looked_at} lines");
}
