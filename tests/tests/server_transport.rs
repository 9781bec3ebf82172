//! What `tower-lsp` alone does to an editor, and that our transport does not: each test shows the defect on the
//! bare server first, so that a test that could not see it would fail.
//!
//! Requirements: Language Server Protocol 3.17, sections "Base Protocol" (cancellation, `$/`), "Lifecycle Messages"
//! (exit codes) and "Text Document Synchronization" (order and versions).

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use serde_json::{Value, json};
use std::time::{Duration, Instant};
use topheavy_tests::dialogue::{Dialogue, SOON};

const PROGRAM: &str = env!("CARGO_BIN_EXE_language-server-under-test");
/// Long enough to say that something does not come.
const A_WHILE: Duration = Duration::from_millis(1500);
/// `RequestCancelled` and `MethodNotFound` of the protocol.
const CANCELLED: i64 = -32800;
const NO_SUCH_METHOD: i64 = -32601;

fn session(way: &str) -> Dialogue {
    let mut dialogue = Dialogue::start(PROGRAM, &[way]);
    dialogue.open_session(&json!({}));
    dialogue
}

fn command(dialogue: &mut Dialogue, name: &str) -> i64 {
    dialogue.request("workspace/executeCommand", json!({"command": name, "arguments": []}))
}

/// What a burst of edits left.
struct Burst {
    /// Answers that did not know an edit sent before their request.
    stale: usize,
    answers: usize,
    is_text_right: bool,
}

/// 10,000 edits whose order matters, without a wait, and 1,000 requests in between.
fn burst(way: &str) -> Burst {
    const URI: &str = "file:///bench/burst.toml";
    let mut dialogue = session(way);
    let mut model = "k = 1\n# é😀\n".to_owned();
    dialogue.open(URI, 0, &model);
    let mut asked = Vec::new();
    for version in 1..=10_000_i32 {
        let step = version as usize;
        let insert = (step * 7919) % (model.find('\n').unwrap() + 1);
        let letter = char::from(b'a' + (version % 26) as u8).to_string();
        model.insert_str(insert, &letter);
        let mut edits = vec![edit(insert, insert, &letter)];
        if version % 3 == 0 {
            let delete = (step * 31) % model.find('\n').unwrap();
            model.remove(delete);
            edits.push(edit(delete, delete + 1, ""));
        }
        dialogue.change(URI, version, json!(edits));
        if version % 10 == 0 {
            asked.push((version, command(&mut dialogue, "text")));
        }
    }
    let mut burst = Burst { stale: 0, answers: 0, is_text_right: false };
    for (version, id) in asked {
        let Some(answer) = dialogue.answer(id, SOON) else { break };
        burst.answers += 1;
        burst.stale += usize::from(answer["result"][0].as_i64() < Some(version.into()));
        burst.is_text_right = answer["result"][1] == model.as_str();
    }
    burst
}

fn edit(start: usize, end: usize, text: &str) -> Value {
    let place = |character: usize| json!({"line": 0, "character": character});
    json!({"range": {"start": place(start), "end": place(end)}, "text": text})
}

#[test]
fn edits_are_applied_in_order_and_no_answer_is_stale() {
    let bare = burst("bare");
    assert!(bare.stale > 0 || !bare.is_text_right, "the defect did not show");
    let ours = burst("ordered");
    assert_eq!((ours.answers, ours.stale, ours.is_text_right), (1000, 0, true));
}

/// Exit codes: 0 when the shutdown was asked for before, else 1.
#[test]
fn exit_ends_the_process_while_its_input_stays_open() {
    let end = |way: &str| {
        let mut dialogue = session(way);
        dialogue.ask("shutdown", Value::Null);
        dialogue.notify("exit", Value::Null);
        dialogue.exit_code(if way == "bare" { A_WHILE } else { SOON })
    };
    assert_eq!(end("ordered"), Some(0));
    assert_eq!(end("topheavy"), Some(0));

    let bare = || {
        let mut dialogue = session("bare");
        // Without parameters: the bare server refuses others.
        dialogue.send(&json!({"jsonrpc": "2.0", "id": 99, "method": "shutdown"}));
        dialogue.answer(99, SOON).expect("an answer");
        dialogue.send(&json!({"jsonrpc": "2.0", "method": "exit"}));
        dialogue.exit_code(A_WHILE)
    };
    assert_eq!(bare(), None, "the defect did not show");
}

#[test]
fn a_late_message_after_exit_does_not_keep_the_process() {
    let end = |way: &str, within: Duration| {
        let mut dialogue = session(way);
        dialogue.send(&json!({"jsonrpc": "2.0", "id": 99, "method": "shutdown"}));
        dialogue.answer(99, SOON).expect("an answer");
        dialogue.send(&json!({"jsonrpc": "2.0", "method": "exit"}));
        std::thread::sleep(Duration::from_millis(20));
        command(&mut dialogue, "text");
        dialogue.close_input();
        dialogue.exit_code(within)
    };
    assert_eq!(end("bare", A_WHILE), None, "the defect did not show");
    assert_eq!(end("ordered", SOON), Some(0));
    assert_eq!(end("topheavy", SOON), Some(0));
}

#[test]
fn the_exit_code_says_whether_the_shutdown_was_asked_for() {
    let end = |way: &str| {
        let mut dialogue = session(way);
        dialogue.send(&json!({"jsonrpc": "2.0", "method": "exit"}));
        dialogue.close_input();
        dialogue.exit_code(SOON)
    };
    assert_eq!(end("bare"), Some(0), "the defect did not show");
    assert_eq!(end("ordered"), Some(1));
    assert_eq!(end("topheavy"), Some(1));
}

#[test]
fn a_fast_request_does_not_wait_for_slow_ones_and_slow_ones_can_be_cancelled() {
    let run = |way: &str| {
        let mut dialogue = session(way);
        let slow: Vec<i64> = (0..4).map(|_| command(&mut dialogue, "slow")).collect();
        let start = Instant::now();
        dialogue.notify("$/cancelRequest", json!({"id": slow[0]}));
        let fast = command(&mut dialogue, "text");
        dialogue.answer(fast, SOON).expect("an answer");
        let waited = start.elapsed();
        let cancelled = dialogue.answer(slow[0], SOON).expect("an answer");
        (waited, cancelled["error"]["code"].as_i64())
    };
    let slow = Duration::from_secs(3);
    let (waited, code) = run("bare");
    assert!(waited > slow / 2 && code.is_none(), "the defect did not show: {waited:?} {code:?}");
    let (waited, code) = run("ordered");
    assert!(waited < slow / 2, "{waited:?}");
    assert_eq!(code, Some(CANCELLED));
}

#[test]
fn handlers_that_ask_the_editor_do_not_stop_the_reading() {
    let run = |way: &str, within: Duration| {
        let mut dialogue = session(way);
        let asking: Vec<i64> = (0..4).map(|_| command(&mut dialogue, "ask")).collect();
        let others: Vec<i64> = (0..150).map(|_| command(&mut dialogue, "text")).collect();
        for _ in &asking {
            let question =
                |said: &Value| (said["method"] == "workspace/configuration").then(|| said["id"].clone());
            let id = dialogue.hear(SOON, question).expect("a question");
            dialogue.send(&json!({"jsonrpc": "2.0", "id": id, "result": [null]}));
        }
        others.iter().chain(&asking).all(|id| dialogue.answer(*id, within).is_some())
    };
    assert!(!run("bare", A_WHILE), "the defect did not show");
    assert!(run("ordered", SOON));
}

#[test]
fn an_editor_that_writes_before_it_reads_is_served() {
    let run = |way: &str, within: Duration| {
        let mut dialogue = Dialogue::deaf(PROGRAM, &[way]);
        let said = json!({"processId": null, "rootUri": null, "capabilities": {}});
        dialogue.request("initialize", said);
        std::thread::sleep(Duration::from_millis(200));
        dialogue.notify("initialized", json!({}));
        // 40 MB of answers, 200 kB of requests: more than any pipe holds.
        let asked: Vec<i64> = (0..2000).map(|_| command(&mut dialogue, "long")).collect();
        let taken = dialogue.all_taken(within);
        if taken {
            dialogue.listen();
            let answered = asked.iter().all(|id| dialogue.answer(*id, SOON).is_some());
            assert!(answered, "{way}: answers were lost");
        }
        taken
    };
    assert!(!run("bare", A_WHILE), "the defect did not show");
    assert!(run("ordered", SOON));
}

#[test]
fn null_parameters_are_no_parameters() {
    let run = |way: &str| {
        let mut dialogue = session(way);
        let id = dialogue.request("shutdown", Value::Null);
        dialogue.answer(id, SOON).expect("an answer")
    };
    assert!(run("bare").get("error").is_some(), "the defect did not show");
    for way in ["ordered", "topheavy"] {
        let answer = run(way);
        assert!(answer.get("error").is_none() && answer["result"].is_null(), "{way}: {answer}");
    }
}

#[test]
fn a_request_of_unknown_name_is_answered() {
    let run = |way: &str, within: Duration| {
        let mut dialogue = session(way);
        let id = dialogue.request("$/unheardOf", json!({}));
        dialogue.answer(id, within).map(|answer| answer["error"]["code"].clone())
    };
    assert_eq!(run("bare", A_WHILE), None, "the defect did not show");
    assert_eq!(run("ordered", SOON), Some(json!(NO_SUCH_METHOD)));
    assert_eq!(run("topheavy", SOON), Some(json!(NO_SUCH_METHOD)));
}

#[test]
fn the_process_ends_when_its_input_closes_whatever_is_under_way() {
    let mut dialogue = session("ordered");
    command(&mut dialogue, "ask");
    dialogue.close_input();
    // Nobody will answer the question any more.
    assert_eq!(dialogue.exit_code(SOON), Some(1));

    let mut dialogue = session("topheavy");
    dialogue.close_input();
    assert_eq!(dialogue.exit_code(SOON), Some(1));

    let mut bare = session("bare");
    command(&mut bare, "ask");
    bare.close_input();
    assert_eq!(bare.exit_code(A_WHILE), None, "the defect did not show");
}

/// Codes: JSON-RPC 2.0, section 5.1.
#[test]
fn a_message_that_cannot_be_made_out_does_not_end_the_reading() {
    let run = |way: &str, within: Duration| {
        let mut dialogue = session(way);
        dialogue.send_bytes(b"Content-Length: 9\r\n\r\n{\"broken\"".to_vec());
        let refusal = dialogue.hear(SOON, |said| said["error"]["code"].as_i64());
        assert_eq!(refusal, Some(-32700), "{way}");
        let next = command(&mut dialogue, "text");
        dialogue.answer(next, within).is_some()
    };
    assert!(!run("bare", A_WHILE), "the defect did not show");
    assert!(run("ordered", SOON));
    assert!(run("topheavy", SOON));
}

/// `processId` of `initialize`: the server ends when that process does, though its input stays open.
#[cfg(target_os = "linux")]
#[test]
fn the_process_ends_with_the_editor() {
    let mut editor =
        std::process::Command::new("sleep").arg("60").spawn().expect("a process to stand for the editor");
    let run = |way: &str| {
        let mut dialogue = Dialogue::start(PROGRAM, &[way]);
        dialogue.ask("initialize", json!({"processId": editor.id(), "rootUri": null, "capabilities": {}}));
        dialogue.notify("initialized", json!({}));
        dialogue
    };
    let (mut bare, mut ours) = (run("bare"), run("topheavy"));
    assert_eq!(ours.exit_code(A_WHILE), None, "it ended before the editor did");
    editor.kill().expect("our own process");
    editor.wait().expect("our own process");
    assert_eq!(ours.exit_code(SOON), Some(1));
    assert_eq!(bare.exit_code(Duration::from_millis(100)), None, "the defect did not show");
}
