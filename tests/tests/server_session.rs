//! What an editor gets from the language server: findings, hover texts, mends and changes, whatever the order in
//! which it asks.

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use serde_json::{Value, json};
use setup::lines::{Encoding, LineIndex, Position};
use std::time::Duration;
use topheavy_tests::dialogue::{Dialogue, SOON};

const PROGRAM: &str = env!("CARGO_BIN_EXE_language-server-under-test");
const URI: &str = "file:///bench/a.stack.toml";
const WEAK: &str = include_str!("../../samples/two-slabs-too-weak.stack.toml");
const ONE: &str = include_str!("../../samples/one-slab.stack.toml");
const A_WHILE: Duration = Duration::from_millis(1000);

/// An editor that can do all that we use.
fn able() -> Value {
    json!({
        "general": {"positionEncodings": ["utf-8", "utf-16"]},
        "workspace": {"workspaceEdit": {"documentChanges": true}},
        "textDocument": {
            "hover": {"contentFormat": ["markdown"]},
            "publishDiagnostics": {"relatedInformation": true},
            "codeAction": {"codeActionLiteralSupport": {"codeActionKind": {"valueSet": [""]}}}
        }
    })
}

/// An editor that knows versionless edits and counts in UTF-16.
fn plain() -> Value {
    let kinds = json!({"codeActionKind": {"valueSet": [""]}});
    json!({"textDocument": {"codeAction": {"codeActionLiteralSupport": kinds}}})
}

fn session(way: &str, capabilities: &Value) -> Dialogue {
    let mut dialogue = Dialogue::start(PROGRAM, &[way]);
    dialogue.open_session(capabilities);
    dialogue
}

fn codes(diagnostics: &[Value]) -> Vec<&str> {
    diagnostics.iter().map(|diagnostic| diagnostic["code"].as_str().unwrap()).collect()
}

/// Line of the first line that starts so, from 0.
fn line_of(text: &str, start: &str) -> usize {
    text.lines().position(|line| line.starts_with(start)).unwrap()
}

fn hover(dialogue: &mut Dialogue, line: usize, character: usize) -> Value {
    let position = json!({"line": line, "character": character});
    dialogue.ask("textDocument/hover", json!({"textDocument": {"uri": URI}, "position": position}))
}

fn actions(dialogue: &mut Dialogue, line: usize, only: Option<&str>) -> Vec<Value> {
    let place = json!({"line": line, "character": 0});
    let mut context = json!({"diagnostics": []});
    if let Some(only) = only {
        context["only"] = json!([only]);
    }
    let asked = json!({
        "textDocument": {"uri": URI}, "range": {"start": place, "end": place}, "context": context
    });
    dialogue.ask("textDocument/codeAction", asked).as_array().cloned().unwrap_or_default()
}

/// The text after edits as a list of `TextEdit`.
fn edited(text: &str, edits: &Value, encoding: Encoding) -> String {
    let lines = LineIndex::new(text);
    let offset = |place: &Value| {
        let at = |name: &str| place[name].as_u64().unwrap() as u32;
        lines.offset(text, Position { line: at("line"), character: at("character") }, encoding)
    };
    let edits: Vec<_> = edits
        .as_array()
        .unwrap()
        .iter()
        .map(|edit| setup::finding::Edit {
            span: offset(&edit["range"]["start"])..offset(&edit["range"]["end"]),
            new_text: edit["newText"].as_str().unwrap().to_owned(),
        })
        .collect();
    setup::edit::apply(text, &edits).unwrap()
}

/// Expected: the sample's own notes, written by hand.
#[test]
fn findings_come_when_a_document_opens_change_with_it_and_go_when_it_closes() {
    let mut dialogue = session("topheavy", &able());
    dialogue.open(URI, 3, WEAK);
    let found = dialogue.diagnostics(URI, 3, SOON).expect("findings");
    assert_eq!(codes(&found), ["interface-falls", "interface-falls"]);
    for finding in &found {
        assert_eq!((&finding["source"], &finding["severity"]), (&json!("topheavy"), &json!(1)));
        assert!(!finding["message"].as_str().unwrap().is_empty());
    }

    dialogue.replace(URI, 4, ONE);
    let found = dialogue.diagnostics(URI, 4, SOON).expect("findings");
    assert!(found.iter().all(|finding| finding["severity"] != 1), "{found:?}");

    dialogue.notify("textDocument/didClose", json!({"textDocument": {"uri": URI}}));
    let last = dialogue.notified("textDocument/publishDiagnostics", SOON, |said| Some(said.clone()));
    assert_eq!(last.expect("a last word")["diagnostics"], json!([]));
}

#[test]
fn other_files_are_left_alone() {
    let mut dialogue = session("topheavy", &able());
    let other = "file:///bench/Cargo.toml";
    dialogue.open(other, 1, "[[layer]]\nthicknes = 1\n");
    dialogue.open(URI, 1, "[[layer]]\nthicknes = 1\n");
    let mut first = || dialogue.notified("textDocument/publishDiagnostics", SOON, |said| Some(said.clone()));
    assert_eq!(first().expect("findings")["uri"], URI);
    let rest = dialogue.all_heard(A_WHILE);
    assert!(rest.iter().all(|said| said["params"]["uri"] != other), "{rest:?}");
}

/// `²` (U+00B2) is two bytes, one UTF-16 unit and one code point. Lengths counted by hand.
#[test]
fn places_are_counted_as_the_editor_counts() {
    let line = line_of(ONE, "grade = \"1000 mm²/s\"");
    for (offered, agreed, end) in [
        (json!(["utf-16", "utf-8"]), "utf-8", 21),
        (json!(["utf-32"]), "utf-32", 20),
        (json!([]), "utf-16", 20),
    ] {
        let mut dialogue = Dialogue::start(PROGRAM, &["topheavy"]);
        let able = dialogue.open_session(&json!({"general": {"positionEncodings": offered}}));
        assert_eq!(able["positionEncoding"], agreed);
        dialogue.open(URI, 1, ONE);
        let range = hover(&mut dialogue, line, 2)["range"].clone();
        assert_eq!(range["start"], json!({"line": line, "character": 0}), "{agreed}");
        assert_eq!(range["end"], json!({"line": line, "character": end}), "{agreed}");
    }
}

#[test]
fn hover_texts_come_in_the_format_that_the_editor_shows() {
    let line = line_of(ONE, "acceleration");
    let text = |capabilities: &Value| {
        let mut dialogue = session("topheavy", capabilities);
        dialogue.open(URI, 1, ONE);
        hover(&mut dialogue, line, 3)["contents"].clone()
    };
    let (rich, poor) = (text(&able()), text(&plain()));
    assert_eq!((&rich["kind"], &poor["kind"]), (&json!("markdown"), &json!("plaintext")));
    let value = |text: &Value| text["value"].as_str().unwrap().to_owned();
    assert!(value(&rich).contains("**") && !value(&poor).contains("**"), "{rich} {poor}");
    // 13.0 g0 peak is 26.0 g0 from peak to peak.
    for text in [&rich, &poor] {
        assert!(value(text).contains("13") && value(text).contains("26"), "{text}");
    }

    let mut dialogue = session("topheavy", &able());
    dialogue.open(URI, 1, ONE);
    // Far outside is the end of the text: the last layer's, without an error.
    hover(&mut dialogue, 9999, 9999);
}

#[test]
fn a_lone_mend_is_preferred_and_tied_to_the_version() {
    let slip = ONE.replace("thickness = \"15 mm\"", "thicknes = \"15 mm\"");
    let line = line_of(&slip, "thicknes =");
    let mut dialogue = session("topheavy", &able());
    dialogue.open(URI, 7, &slip);
    dialogue.diagnostics(URI, 7, SOON).expect("findings");
    let offered = actions(&mut dialogue, line, Some("quickfix"));
    let [mend] = offered.as_slice() else { panic!("{offered:?}") };
    assert_eq!((&mend["kind"], &mend["isPreferred"]), (&json!("quickfix"), &json!(true)));
    assert_eq!(mend["diagnostics"][0]["code"], "key-not-known");
    let change = &mend["edit"]["documentChanges"][0];
    assert_eq!(change["textDocument"], json!({"uri": URI, "version": 7}));
    assert_eq!(edited(&slip, &change["edits"], Encoding::Utf8), ONE);

    // An editor that knows no versions.
    let mut dialogue = session("topheavy", &plain());
    dialogue.open(URI, 7, &slip);
    dialogue.diagnostics(URI, 7, SOON).expect("findings");
    let offered = actions(&mut dialogue, line, Some("quickfix"));
    assert_eq!(edited(&slip, &offered[0]["edit"]["changes"][URI], Encoding::Utf16), ONE);

    // An editor that knows no edits in actions.
    let mut dialogue = session("topheavy", &json!({}));
    dialogue.open(URI, 7, &slip);
    dialogue.diagnostics(URI, 7, SOON).expect("findings");
    assert!(actions(&mut dialogue, line, None).is_empty());
}

#[test]
fn all_mends_at_once_choose_no_value() {
    let weak = ONE.replace("13.0 g0 peak", "8.0 g0 peak");
    let slips = weak
        .replace("frequency = \"50 Hz\"", "frequency = 50 Hz")
        .replace("thickness = \"15 mm\"", "thicknes = \"15 mm\"");
    let mut dialogue = session("topheavy", &able());
    dialogue.open(URI, 1, &slips);
    dialogue.diagnostics(URI, 1, SOON).expect("findings");
    let offered = actions(&mut dialogue, 0, Some("source.fixAll"));
    let [all] = offered.as_slice() else { panic!("{offered:?}") };
    assert_eq!(all["kind"], "source.fixAll");
    assert_eq!(edited(&slips, &all["edit"]["documentChanges"][0]["edits"], Encoding::Utf8), weak);

    // The drive is too weak, which is no slip: nothing to do on save.
    dialogue.replace(URI, 2, &weak);
    dialogue.diagnostics(URI, 2, SOON).expect("findings");
    assert!(actions(&mut dialogue, 0, Some("source.fixAll")).is_empty());
}

/// The drive that is offered: see `neovim.rs` for the estimate of 12.4 g0.
#[test]
fn a_change_of_the_drive_is_offered_by_hand_only_and_holds() {
    let weak = ONE.replace("13.0 g0 peak", "8.0 g0 peak");
    let mut dialogue = session("topheavy", &able());
    dialogue.open(URI, 1, &weak);
    let found = dialogue.diagnostics(URI, 1, SOON).expect("findings");
    let fall = found.iter().find(|finding| finding["code"] == "interface-falls").expect("a fall");
    let line = fall["range"]["start"]["line"].as_u64().unwrap() as usize;
    let mut change = None;
    for _ in 0..100 {
        let offered = actions(&mut dialogue, line, Some("quickfix"));
        change = offered.into_iter().find(|action| action["diagnostics"][0]["code"] == "interface-falls");
        if change.is_some() {
            break;
        }
    }
    let change = change.expect("a change");
    assert!(change.get("isPreferred").is_none());
    let after = edited(&weak, &change["edit"]["documentChanges"][0]["edits"], Encoding::Utf8);
    dialogue.replace(URI, 2, &after);
    let found = dialogue.diagnostics(URI, 2, SOON).expect("findings");
    assert!(found.iter().all(|finding| finding["severity"] != 1), "{found:?}");
    let value =
        after.lines().find_map(|line| line.strip_prefix("acceleration = \"")?.strip_suffix(" g0 peak\""));
    let value: f64 = value.expect("the drive, in its own words").parse().unwrap();
    assert!((value / 12.4 - 1.0).abs() < 0.05, "{value} g0");
}

#[test]
fn related_lines_are_named_only_where_the_editor_shows_them() {
    let twice = ONE.replace("name = \"cushion\"", "name = \"cushion\"\nname = \"air\"");
    let related = |capabilities: &Value| {
        let mut dialogue = session("topheavy", capabilities);
        dialogue.open(URI, 1, &twice);
        let found = dialogue.diagnostics(URI, 1, SOON).expect("findings");
        let twice = found.iter().find(|finding| finding["code"] == "key-given-twice");
        twice.expect("a key given twice")["relatedInformation"].clone()
    };
    let named = related(&able());
    assert_eq!(named[0]["location"]["uri"], URI);
    let line = &named[0]["location"]["range"]["start"]["line"];
    let (first, second) = (line_of(&twice, "name = \"cushion\""), line_of(&twice, "name = \"air\""));
    assert!([json!(first), json!(second)].contains(line), "{named}");
    assert!(related(&plain()).is_null());
}

#[test]
fn a_check_that_falls_over_is_one_finding_and_the_server_lives() {
    let mut dialogue = session("faulty", &able());
    let bad = format!("{ONE}# falls over\n");
    dialogue.open(URI, 1, &bad);
    let found = dialogue.diagnostics(URI, 1, SOON).expect("findings");
    assert_eq!(codes(&found), ["internal-fault"]);
    // What the words mean can be told all the same.
    assert!(hover(&mut dialogue, line_of(ONE, "acceleration"), 0)["contents"].is_object());
    assert!(actions(&mut dialogue, 0, None).is_empty());
    dialogue.replace(URI, 2, WEAK);
    let found = dialogue.diagnostics(URI, 2, SOON).expect("findings");
    assert_eq!(codes(&found), ["interface-falls", "interface-falls"]);
}

#[test]
fn a_check_of_an_old_text_is_given_up_and_its_findings_are_not_shown() {
    let mut dialogue = session("faulty", &able());
    dialogue.open(URI, 1, &format!("{ONE}# never ends\n"));
    let asked = json!({
        "textDocument": {"uri": URI}, "position": {"line": line_of(ONE, "acceleration"), "character": 0}
    });
    // A hover that waits for the check can be cancelled; without that it tells what the words mean.
    let waiting = dialogue.request("textDocument/hover", asked.clone());
    dialogue.notify("$/cancelRequest", json!({"id": waiting}));
    let answer = dialogue.answer(waiting, SOON).expect("an answer");
    assert_eq!(answer["error"]["code"], -32800);
    assert!(dialogue.ask("textDocument/hover", asked)["contents"]["value"].is_string());

    dialogue.replace(URI, 2, ONE);
    let versions = |said: &Value| said["version"].as_i64();
    let first = dialogue.notified("textDocument/publishDiagnostics", SOON, versions);
    assert_eq!(first, Some(2));
}

#[test]
fn what_editors_should_not_send_is_survived() {
    let mut dialogue = session("topheavy", &able());
    dialogue.replace(URI, 1, WEAK);
    dialogue.notify("textDocument/didClose", json!({"textDocument": {"uri": URI}}));
    dialogue.notify("textDocument/didChange", json!({"wrong": true}));
    dialogue.notify("textDocument/didOpen", Value::Null);
    dialogue.send_bytes(b"Content-Length: 9\r\n\r\n{\"broken\"".to_vec());
    dialogue.open(URI, 5, "");
    dialogue.open(URI, 5, WEAK);
    let far = json!({"line": 99_999, "character": 99_999});
    dialogue.change(URI, 4, json!([{"range": {"start": far, "end": far}, "text": "# end\n"}]));
    dialogue.replace(URI, 6, WEAK);
    let found = dialogue.diagnostics(URI, 6, SOON).expect("findings");
    assert_eq!(codes(&found), ["interface-falls", "interface-falls"]);
    let complaints = dialogue
        .all_heard(Duration::from_millis(100))
        .iter()
        .filter(|said| said["method"] == "window/logMessage")
        .count();
    // A change and a closing before the opening, two messages that cannot be read, a second opening, an old version.
    assert_eq!(complaints, 6);
}

/// 10,000 edits of one line without a wait, and 1,000 hovers over it: the range of each answer belongs to a text
/// that is not older than the question, and the last findings are those of the last text.
#[test]
fn a_burst_of_edits_leaves_the_last_text_and_no_old_answer() {
    const EDITS: i32 = 10_000;
    let mut dialogue = session("topheavy", &able());
    let line = line_of(WEAK, "title = ");
    let before = WEAK.lines().nth(line).unwrap().len() - 1;
    dialogue.open(URI, 0, WEAK);
    let mut title = String::new();
    let mut lengths = vec![before + 1];
    let mut asked = Vec::new();
    for version in 1..=EDITS {
        // Grows for 37 edits, then loses what it gained but one.
        let (text, removed) = match version % 37 {
            0 => ("", title.len() - title.len().min(version as usize / 37)),
            step => (["a", "b", "c"][step as usize % 3], 0),
        };
        let start = before + title.len() - removed;
        let range = json!({
            "start": {"line": line, "character": start}, "end": {"line": line, "character": start + removed}
        });
        title.truncate(title.len() - removed);
        title += text;
        lengths.push(before + 1 + title.len());
        dialogue.change(URI, version, json!([{"range": range, "text": text}]));
        if version % 10 == 0 {
            let position = json!({"line": line, "character": 0});
            let asked_for = json!({"textDocument": {"uri": URI}, "position": position});
            asked.push((version, dialogue.request("textDocument/hover", asked_for)));
        }
    }
    let last = dialogue.diagnostics(URI, EDITS, SOON * 3).expect("the findings of the last text");
    assert_eq!(codes(&last), ["interface-falls", "interface-falls"]);
    for (version, id) in asked {
        let answer = dialogue.answer(id, SOON * 3).expect("an answer");
        let end = answer["result"]["range"]["end"]["character"].as_u64().unwrap() as usize;
        assert!(lengths[version as usize..].contains(&end), "version {version}: {answer}");
    }
    let end = hover(&mut dialogue, line, 0)["range"]["end"]["character"].as_u64();
    assert_eq!(end, Some(lengths[EDITS as usize] as u64));

    // No version is published twice or after a newer one.
    let published: Vec<i64> = dialogue
        .all_heard(Duration::from_millis(100))
        .iter()
        .filter(|said| said["method"] == "textDocument/publishDiagnostics")
        .filter_map(|said| said["params"]["version"].as_i64())
        .collect();
    assert!(published.is_sorted_by(|a, b| a < b), "{published:?}");
}
