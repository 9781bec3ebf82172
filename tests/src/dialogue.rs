//! A dialogue with a language server in a process of its own. No wait is without an end.

use serde_json::{Value, json};
use std::io::{BufRead, BufReader, Write};
use std::path::{Path, PathBuf};
use std::process::{Child, ChildStdout, Command, Stdio};
use std::sync::atomic::{AtomicUsize, Ordering};
use std::sync::{Arc, mpsc};
use std::time::{Duration, Instant};

/// How long anything may take that should take no time, on a busy machine.
pub const SOON: Duration = Duration::from_secs(20);

/// A server and what was said so far.
pub struct Dialogue {
    child: Child,
    /// `None` once the server's input was closed.
    outgoing: Option<mpsc::Sender<Vec<u8>>>,
    written: Arc<AtomicUsize>,
    sent: usize,
    unread: Option<ChildStdout>,
    incoming: mpsc::Receiver<Value>,
    deliver: mpsc::Sender<Value>,
    heard: Vec<Value>,
    next_id: i64,
}

impl Dialogue {
    /// Starts a server and listens to it.
    pub fn start(program: impl AsRef<Path>, arguments: &[&str]) -> Dialogue {
        let mut dialogue = Dialogue::deaf(program, arguments);
        dialogue.listen();
        dialogue
    }

    /// Starts a server and reads nothing of what it says.
    pub fn deaf(program: impl AsRef<Path>, arguments: &[&str]) -> Dialogue {
        let program = program.as_ref();
        let mut child = Command::new(program)
            .args(arguments)
            .stdin(Stdio::piped())
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .unwrap_or_else(|error| panic!("{}: {error}", program.display()));
        let (mut input, unread) = (child.stdin.take().expect("piped"), child.stdout.take());
        let (outgoing, queue) = mpsc::channel::<Vec<u8>>();
        let written = Arc::new(AtomicUsize::new(0));
        let count = written.clone();
        std::thread::spawn(move || {
            for bytes in queue {
                if input.write_all(&bytes).and_then(|()| input.flush()).is_err() {
                    return;
                }
                count.fetch_add(1, Ordering::SeqCst);
            }
        });
        let (deliver, incoming) = mpsc::channel();
        Dialogue {
            child,
            outgoing: Some(outgoing),
            written,
            sent: 0,
            unread,
            incoming,
            deliver,
            heard: Vec::new(),
            next_id: 1,
        }
    }

    /// Starts to read what the server says.
    pub fn listen(&mut self) {
        let Some(output) = self.unread.take() else { return };
        let deliver = self.deliver.clone();
        std::thread::spawn(move || {
            let mut output = BufReader::new(output);
            while let Some(message) = message(&mut output) {
                if deliver.send(message).is_err() {
                    return;
                }
            }
        });
    }

    /// Sends bytes as they are; never waits.
    pub fn send_bytes(&mut self, bytes: Vec<u8>) {
        if let Some(outgoing) = &self.outgoing {
            self.sent += usize::from(outgoing.send(bytes).is_ok());
        }
    }

    /// Sends a message; never waits.
    pub fn send(&mut self, message: &Value) {
        let body = message.to_string();
        self.send_bytes(format!("Content-Length: {}\r\n\r\n{body}", body.len()).into_bytes());
    }

    /// Sends a notification.
    pub fn notify(&mut self, method: &str, params: Value) {
        self.send(&json!({"jsonrpc": "2.0", "method": method, "params": params}));
    }

    /// Sends a request; gives its number.
    pub fn request(&mut self, method: &str, params: Value) -> i64 {
        let id = self.next_id;
        self.next_id += 1;
        self.send(&json!({"jsonrpc": "2.0", "id": id, "method": method, "params": params}));
        id
    }

    /// Whether all that was sent has gone into the pipe within a time.
    pub fn all_taken(&self, within: Duration) -> bool {
        until(within, || (self.written.load(Ordering::SeqCst) == self.sent).then_some(())).is_some()
    }

    /// The first message of which `pick` makes something, of those heard so far or within a time. It is not heard
    /// again; messages before it are.
    pub fn hear<T>(&mut self, within: Duration, mut pick: impl FnMut(&Value) -> Option<T>) -> Option<T> {
        let deadline = Instant::now() + within;
        let mut next = 0;
        loop {
            while let Some(message) = self.heard.get(next) {
                if let Some(picked) = pick(message) {
                    self.heard.remove(next);
                    return Some(picked);
                }
                next += 1;
            }
            let left = deadline.saturating_duration_since(Instant::now());
            self.heard.push(self.incoming.recv_timeout(left).ok()?);
        }
    }

    /// The whole answer to a request.
    pub fn answer(&mut self, id: i64, within: Duration) -> Option<Value> {
        self.hear(within, |message| {
            (message["id"] == id && message.get("method").is_none()).then(|| message.clone())
        })
    }

    /// Asks and gives the result.
    ///
    /// # Panics
    /// Without an answer, or with an error.
    pub fn ask(&mut self, method: &str, params: Value) -> Value {
        let id = self.request(method, params);
        let answer = self.answer(id, SOON).unwrap_or_else(|| panic!("{method}: no answer"));
        assert!(answer.get("error").is_none(), "{method}: {answer}");
        answer["result"].clone()
    }

    /// The first notification of a name of which `pick` makes something.
    pub fn notified<T>(
        &mut self,
        method: &str,
        within: Duration,
        mut pick: impl FnMut(&Value) -> Option<T>,
    ) -> Option<T> {
        self.hear(within, |message| (message["method"] == method).then(|| pick(&message["params"])).flatten())
    }

    /// All messages that came within a time or before, in their order.
    pub fn all_heard(&mut self, within: Duration) -> Vec<Value> {
        let _ = self.hear(within, |_| None::<()>);
        std::mem::take(&mut self.heard)
    }

    /// `initialize` and `initialized`; gives what the server can do.
    pub fn open_session(&mut self, capabilities: &Value) -> Value {
        let said = json!({"processId": null, "rootUri": null, "capabilities": capabilities});
        let result = self.ask("initialize", said);
        self.notify("initialized", json!({}));
        result["capabilities"].clone()
    }

    /// Shows a document.
    pub fn open(&mut self, uri: &str, version: i32, text: &str) {
        let document = json!({"uri": uri, "languageId": "toml", "version": version, "text": text});
        self.notify("textDocument/didOpen", json!({"textDocument": document}));
    }

    /// Replaces the text of a document as a whole.
    pub fn replace(&mut self, uri: &str, version: i32, text: &str) {
        self.change(uri, version, json!([{"text": text}]));
    }

    /// Edits a document.
    pub fn change(&mut self, uri: &str, version: i32, edits: Value) {
        let document = json!({"uri": uri, "version": version});
        self.notify("textDocument/didChange", json!({"textDocument": document, "contentChanges": edits}));
    }

    /// The diagnostics that are published for a version of a document.
    pub fn diagnostics(&mut self, uri: &str, version: i32, within: Duration) -> Option<Vec<Value>> {
        self.notified("textDocument/publishDiagnostics", within, |said| {
            (said["uri"] == uri && said["version"] == version)
                .then(|| said["diagnostics"].as_array().cloned())
                .flatten()
        })
    }

    /// Closes the server's input once all is written.
    pub fn close_input(&mut self) {
        self.outgoing = None;
    }

    /// The exit code, once the process has ended within a time.
    pub fn exit_code(&mut self, within: Duration) -> Option<i32> {
        until(within, || self.child.try_wait().ok().flatten()).and_then(|status| status.code())
    }
}

impl Drop for Dialogue {
    fn drop(&mut self) {
        // It has ended already, as a rule.
        let _ = self.child.kill();
        let _ = self.child.wait();
    }
}

/// Looks again and again until there is something to see or the time is over.
pub fn until<T>(within: Duration, mut look: impl FnMut() -> Option<T>) -> Option<T> {
    let deadline = Instant::now() + within;
    loop {
        let seen = look();
        if seen.is_some() || Instant::now() > deadline {
            return seen;
        }
        std::thread::sleep(Duration::from_millis(2));
    }
}

/// The program `topheavy` that was built along with the test that runs.
///
/// # Panics
/// When it was not built.
pub fn topheavy() -> PathBuf {
    let test = std::env::current_exe().expect("a test has a path");
    let folder =
        test.parent().and_then(Path::parent).expect("tests are built into a folder below the programs");
    let program = folder.join(format!("topheavy{}", std::env::consts::EXE_SUFFIX));
    assert!(program.exists(), "{} is missing: `cargo build -p topheavy` makes it", program.display());
    program
}

/// Reads one framed message; `None` at the end, or when what comes is no message.
fn message(from: &mut impl BufRead) -> Option<Value> {
    let mut length = None;
    loop {
        let mut line = String::new();
        if from.read_line(&mut line).ok()? == 0 {
            return None;
        }
        match line.trim_end() {
            "" => break,
            line => {
                let said = line.strip_prefix("Content-Length: ").and_then(|said| said.parse::<usize>().ok());
                length = said.or(length);
            }
        }
    }
    let mut body = vec![0; length?];
    from.read_exact(&mut body).ok()?;
    serde_json::from_slice(&body).ok()
}
