//! `check --format json` key by key against the contract: what stands there, of which type, which numbers.

use crate::program::{run, samples};
use serde_json::{Map, Value};

/// An object that has these keys; additions are free.
#[track_caller]
fn keys(value: &Value, needed: &[&str]) -> Map<String, Value> {
    let object = value.as_object().unwrap_or_else(|| panic!("no object: {value}"));
    for key in needed {
        assert!(object.contains_key(*key), "`{key}` is missing in {value:#}");
    }
    object.clone()
}

#[track_caller]
fn number(value: &Value) -> f64 {
    let number = value.as_f64().unwrap_or_else(|| panic!("no number: {value}"));
    assert!(number.is_finite(), "{number}");
    number
}

#[track_caller]
fn number_or_null(value: &Value) -> Option<f64> {
    (!value.is_null()).then(|| number(value))
}

#[track_caller]
fn text(value: &Value) -> String {
    value.as_str().unwrap_or_else(|| panic!("no text: {value}")).to_owned()
}

#[track_caller]
fn list(value: &Value) -> Vec<Value> {
    value.as_array().unwrap_or_else(|| panic!("no list: {value}")).clone()
}

#[track_caller]
fn one_of(value: &Value, words: &[&str]) {
    assert!(words.contains(&text(value).as_str()), "{value} is none of {words:?}");
}

#[track_caller]
fn range(value: &Value) {
    let range = keys(value, &["start", "end"]);
    let at = |end: &str| {
        let end = keys(&range[end], &["line", "character"]);
        let whole = |key: &str| end[key].as_u64().unwrap_or_else(|| panic!("{value}"));
        (whole("line"), whole("character"))
    };
    assert!(at("start") <= at("end"), "{value}");
}

fn all_samples() -> Vec<String> {
    let entries = std::fs::read_dir(samples()).expect("the samples");
    let names = entries.map(|entry| entry.expect("an entry").file_name().into_string().expect("UTF-8"));
    let mut names: Vec<String> = names.filter(|name| name.ends_with(".stack.toml")).collect();
    names.sort();
    names
}

#[test]
fn every_sample_keeps_the_contract() {
    let names = all_samples();
    let mut arguments = vec!["check", "--format", "json"];
    arguments.extend(names.iter().map(String::as_str));
    let run = run(&arguments);
    assert_eq!(run.err, "");
    let document = run.json();
    keys(&document, &["format", "tool", "position_encoding", "files"]);
    assert_eq!(document["format"], 1);
    assert_eq!(document["tool"]["name"], "topheavy");
    assert!(text(&document["tool"]["version"]).split('.').count() == 3);
    assert_eq!(document["position_encoding"], "utf-32");
    let files = list(&document["files"]);
    assert_eq!(files.iter().map(|file| text(&file["path"])).collect::<Vec<_>>(), names);
    for file in &files {
        keys(file, &["path", "kind", "verdict", "findings", "results"]);
        assert_eq!(file["kind"], "setup");
        one_of(&file["verdict"], &["holds", "fails", "incomplete"]);
        list(&file["findings"]).iter().for_each(|found| finding(found, &text(&file["path"])));
        results(&file["results"], &file["path"]);
        let is_error = |found: &Value| found["severity"] == "error";
        let fails = list(&file["findings"]).iter().any(is_error);
        assert_eq!(
            file["verdict"] == "fails",
            fails,
            "an error is there, or it does not fail: {}",
            file["path"]
        );
    }
}

#[track_caller]
fn finding(found: &Value, path: &str) {
    let all = ["id", "severity", "place", "message", "range", "related", "values", "fixable", "accepted"];
    keys(found, &all);
    assert!(checks::all_rules().iter().any(|rule| found["id"] == rule.id), "{}", found["id"]);
    one_of(&found["severity"], &["error", "warning", "information", "hint"]);
    text(&found["place"]);
    assert!(text(&found["message"]).len() > 20);
    range(&found["range"]);
    for related in list(&found["related"]) {
        keys(&related, &["path", "message", "range"]);
        assert_eq!(related["path"], path);
        range(&related["range"]);
    }
    for (name, value) in found["values"].as_object().expect("values") {
        number(value);
        assert!(name.chars().all(|c| c.is_ascii_lowercase() || c.is_ascii_digit() || c == '_'), "{name}");
    }
    let fixable = found["fixable"].as_bool().expect("true or false");
    assert!(found["accepted"].is_boolean());
    match found.get("fixes") {
        None => assert!(fixable, "absent only where changes were not searched for: {found:#}"),
        Some(fixes) => list(fixes).iter().for_each(|fix| {
            keys(fix, &["title", "keeps_meaning", "edits"]);
            assert!(fix["keeps_meaning"].is_boolean() && !text(&fix["title"]).is_empty());
            for edit in list(&fix["edits"]) {
                keys(&edit, &["path", "range", "new_text"]);
                assert_eq!(edit["path"], path);
                range(&edit["range"]);
                text(&edit["new_text"]);
            }
        }),
    }
}

#[track_caller]
fn results(results: &Value, path: &Value) {
    let all = ["slabs", "cushions", "natural_frequencies_hz", "defaults", "not_looked_at", "effects_off"];
    let object = keys(results, &all);
    list(&results["slabs"]).iter().for_each(slab);
    for cushion in list(&results["cushions"]) {
        let needed = ["layer", "pressure_abs_pa", "polytropic_re", "polytropic_im"];
        let cushion = keys(&cushion, &needed);
        assert!(number(&cushion["pressure_abs_pa"]) > 1e4);
        assert!((1.0..=1.67).contains(&number(&cushion["polytropic_re"])), "{path}");
        assert!(number(&cushion["polytropic_im"]) >= 0.0);
        if let Some(stroke) = cushion.get("stroke_ratio") {
            assert!(number(stroke) >= 0.0);
        }
    }
    let naturals: Vec<f64> = list(&results["natural_frequencies_hz"]).iter().map(number).collect();
    assert!(naturals.is_sorted() && naturals.iter().all(|f| *f > 0.0), "{naturals:?}");
    if let Some(window) = object.get("window") {
        let window = keys(window, &["hold_drive_m_per_s2", "wave_drive_m_per_s2"]);
        window.values().for_each(|value| {
            number_or_null(value);
        });
    }
    if let Some(intervals) = object.get("drive_intervals") {
        drive_intervals(intervals);
    }
    for default in list(&results["defaults"]) {
        keys(&default, &["place", "value", "source"])
            .values()
            .for_each(|value| assert!(!text(value).is_empty()));
    }
    for entry in list(&results["not_looked_at"]) {
        keys(&entry, &["check", "needs"]);
    }
    list(&results["effects_off"]).iter().for_each(|effect| {
        text(effect);
    });
}

/// They ascend without overlap; the nearest is one, and where one holds the set drive it is that.
fn drive_intervals(intervals: &Value) {
    let intervals = list(intervals);
    let mut last = f64::NEG_INFINITY;
    for interval in &intervals {
        keys(
            interval,
            &["low_m_per_s2", "high_m_per_s2", "low_set_by", "high_set_by", "holds_set_drive", "nearest"],
        );
        let low = number(&interval["low_m_per_s2"]);
        assert!(low >= last.max(0.0), "{intervals:?}");
        last = number_or_null(&interval["high_m_per_s2"]).unwrap_or(f64::INFINITY);
        assert!(last > low, "{interval}");
        assert_eq!(interval["high_set_by"].is_null(), interval["high_m_per_s2"].is_null());
        for end in
            [&interval["low_set_by"], &interval["high_set_by"]].into_iter().filter(|end| !end.is_null())
        {
            one_of(&end["mechanism"], &["falls", "waves", "none"]);
            assert!(!text(&end["slab"]).is_empty());
        }
        assert!(interval["nearest"] == true || interval["holds_set_drive"] == false, "{interval}");
    }
    let nearest = intervals.iter().filter(|interval| interval["nearest"] == true).count();
    assert_eq!(nearest, intervals.len().min(1));
}

fn slab(slab: &Value) {
    let object = keys(slab, &["name", "layers", "mass_kg_per_m2"]);
    assert!(number(&slab["mass_kg_per_m2"]) > 0.0 && !list(&slab["layers"]).is_empty());
    if let Some(phase) = object.get("phase_rad") {
        assert!(number(phase) > -std::f64::consts::PI - 1e-12 && number(phase) <= std::f64::consts::PI);
        assert!(number(&slab["acceleration_peak_m_per_s2"]) >= 0.0 && number(&slab["amplification"]) >= 0.0);
    }
    let Some(growth) = object.get("growth_rate_per_s") else { return };
    number(growth);
    one_of(&slab["response"], &["harmonic", "subharmonic", "other", "none"]);
    one_of(&slab["mechanism"], &["falls", "waves", "none"]);
    mode(&slab["worst"]);
    assert!(object.contains_key("ring_down_per_s"));
    number_or_null(&slab["ring_down_per_s"]);
    if number(growth) > 0.0 {
        assert!(slab["ring_down_per_s"].is_null(), "rings down only when all decay: {slab:#}");
        assert_ne!(slab["mechanism"], "none");
    }
    let Some(windows) = object.get("windows_m_per_s2") else { return };
    let mut last = f64::NEG_INFINITY;
    for window in list(windows) {
        let ends = list(&window);
        assert_eq!(ends.len(), 2, "{window}");
        let low = number(&ends[0]);
        assert!(low >= last.max(0.0), "windows ascend: {windows}");
        last = number_or_null(&ends[1]).unwrap_or(f64::INFINITY);
        assert!(last > low, "{window}");
    }
    number_or_null(&slab["hold_limit_m_per_s2"]);
    number_or_null(&slab["wave_limit_m_per_s2"]);
    for by in ["hold_set_by", "wave_set_by"] {
        if !slab[by].is_null() {
            mode(&slab[by]);
            one_of(&slab[by]["response"], &["harmonic", "subharmonic", "other", "none"]);
        }
    }
}

#[track_caller]
fn mode(mode: &Value) {
    keys(mode, &["wavenumber_per_m", "mode", "interface"]);
    assert!(number(&mode["wavenumber_per_m"]) > 0.0);
    match &mode["mode"] {
        Value::String(word) => assert_eq!(word, "continuum"),
        pair => assert_eq!(list(pair).iter().filter_map(Value::as_u64).count(), 2, "{mode}"),
    }
    text(&mode["interface"]);
}

#[test]
fn margins_and_ratios_are_those_of_the_window() {
    let document = run(&["check", "--format", "json", "one-slab.stack.toml"]).json();
    let results = &document["files"][0]["results"];
    let window = &results["window"];
    let set = 13.0 * 9.80665;
    for end in ["hold", "wave"] {
        let drive = number(&window[format!("{end}_drive_m_per_s2")]);
        let ratio = number(&window[format!("{end}_drive_ratio")]);
        assert!((drive / set - ratio).abs() < 1e-12 * ratio, "{end}");
        // One slab: its own limit over its amplification.
        let slab = &results["slabs"][0];
        let limit = number(&slab[format!("{end}_limit_m_per_s2")]);
        assert!((limit / number(&slab["amplification"]) - drive).abs() < 1e-6 * drive, "{end}");
    }
    // Worked designs: hold 175.5 m/s² (inviscid, 50 mm at 50 Hz), waves 1.63 times that.
    let slab = &results["slabs"][0];
    assert!((number(&slab["hold_limit_m_per_s2"]) / 175.5 - 1.0).abs() < 0.01);
    assert!((number(&slab["wave_limit_m_per_s2"]) / 286.0 - 1.0).abs() < 0.01);
}

#[test]
fn mends_always_changes_only_when_asked_for() {
    let fixes = |arguments: &[&str], rule: &str| {
        let document = run(arguments).json();
        let findings = list(&document["files"][0]["findings"]);
        findings.iter().find(|found| found["id"] == rule).unwrap_or_else(|| panic!("no {rule}")).clone()
    };
    let mend = fixes(&["check", "--format", "json", "slips.stack.toml"], "line-unreadable");
    assert!(list(&mend["fixes"]).iter().any(|fix| fix["keeps_meaning"] == true), "{mend:#}");
    let file = "two-slabs-too-weak.stack.toml";
    let without = fixes(&["check", "--format", "json", file], "interface-falls");
    assert!(without.get("fixes").is_none() && without["fixable"] == true, "{without:#}");
    let with = fixes(&["check", "--format", "json", "--with-fixes", file], "interface-falls");
    let changes = list(&with["fixes"]);
    assert!(!changes.is_empty() && changes.iter().all(|fix| fix["keeps_meaning"] == false), "{with:#}");
}
