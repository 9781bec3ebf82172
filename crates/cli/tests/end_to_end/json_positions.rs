//! Positions in the three encodings, with characters before them that the encodings count differently.

use crate::program::{folder, run_in, sample};
use serde_json::Value;

/// `range` of the finding of a rule.
fn range(text: &str, encoding: &str, rule: &str) -> Value {
    let arguments = ["check", "--format", "json", "--positions", encoding, "-"];
    let document = run_in(&folder(&format!("positions-{encoding}")), &arguments, text.as_bytes()).json();
    assert_eq!(document["position_encoding"], encoding);
    let findings = document["files"][0]["findings"].as_array().expect("findings").clone();
    let found = findings.iter().find(|finding| finding["id"] == rule);
    found.unwrap_or_else(|| panic!("no {rule}: {findings:#?}"))["range"].clone()
}

#[test]
fn each_encoding_counts_its_own_units() {
    // é: 2 bytes, 1 unit of UTF-16, 1 code point; 😀: 4, 2, 1.
    let text =
        sample("one-slab").replace("shape = \"rectangular\"", "\"é😀\" = 1 # é😀\nshape = \"rectangular\"");
    let row = text.lines().position(|line| line.starts_with("\"é😀\"")).expect("the line");
    for (encoding, end) in [("utf-8", 8), ("utf-16", 5), ("utf-32", 4)] {
        let arguments = ["check", "--format", "json", "--positions", encoding, "-"];
        let document = run_in(&folder("positions"), &arguments, text.as_bytes()).json();
        let findings = document["files"][0]["findings"].as_array().expect("findings").clone();
        let found = findings
            .iter()
            .find(|f| f["id"] == "key-not-known" && f["range"]["start"]["line"] == row)
            .unwrap_or_else(|| panic!("{findings:#?}"));
        assert_eq!(found["range"]["start"]["character"], 0, "{encoding}");
        assert_eq!(found["range"]["end"]["line"], row);
        assert_eq!(found["range"]["end"]["character"], end, "{encoding}: the key with its quotes");
    }
}

#[test]
fn the_line_break_of_the_file_does_not_matter() {
    let text = sample("slips");
    let unix = range(&text, "utf-16", "peak-rms-slip");
    let dos = range(&text.replace('\n', "\r\n"), "utf-16", "peak-rms-slip");
    assert_eq!(unix, dos);
}
