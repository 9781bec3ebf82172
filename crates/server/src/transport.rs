//! How messages come in and go out: a layer around `tower-lsp` that keeps the order of the wire.
//!
//! `tower-lsp` runs every handler as a future of its own, so two edits may be applied in either order, and its
//! queues are bounded on both sides, so a server and an editor can wait for each other. Here, instead:
//!
//! * Notifications about documents never reach a handler. `Ordered` hands them, in the order of the wire and
//!   without waiting, to the one writer of [`crate::documents`].
//! * A request is looked at once every edit that was read before it has been applied.
//! * No number of slow requests keeps a fast one, or the cancellation of a slow one, waiting.
//! * What is written goes into an unbounded queue that a task of its own empties: reading never waits for an editor
//!   that does not read.
//! * The server ends when it is told to, when its input or output closes, or when the editor's process is gone,
//!   whatever else is under way, with the exit code that the protocol asks for.
//! * A message that cannot be made out is answered with an error and does not end the reading (`incoming`).
//! * `"params": null` means no parameters; a request of unknown name is answered, whatever its name begins with.

use crate::documents::{Documents, Message, World};
use crate::incoming;
use serde::de::DeserializeOwned;
use serde_json::Value;
use std::future::{Future, ready};
use std::pin::Pin;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use std::task::{Context, Poll};
use std::time::Duration;
use tokio::io::{AsyncRead, AsyncWrite, AsyncWriteExt};
use tokio::sync::{mpsc, watch};
use tower::Service;
use tower_lsp::jsonrpc::{Error, Request, Response};
use tower_lsp::{ClientSocket, ExitedError, LanguageServer, LspService, Server};

/// How long answers that are under way may still take once `exit` was read.
const GRACE_AFTER_EXIT: Duration = Duration::from_millis(50);
/// The same once input or output closed: whoever pipes a whole dialogue in gets its answers.
const GRACE_AFTER_CLOSING: Duration = Duration::from_secs(2);
/// How long an editor that does not read may keep the process from ending.
const GRACE_FOR_OUTPUT: Duration = Duration::from_millis(500);

/// Between the sifted input and `tower-lsp`, bytes.
const PIPE: usize = 1 << 16;

/// Why the server ends.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Ending {
    /// The editor sent `exit`.
    Told,
    /// Input or output closed.
    Closed,
    /// The editor's process is no more.
    EditorGone,
}

/// What the parts of the transport tell each other about its end.
#[derive(Debug, Clone)]
struct Life {
    shutdown_seen: Arc<AtomicBool>,
    endings: mpsc::UnboundedSender<Ending>,
}

impl Life {
    fn end(&self, ending: Ending) {
        // Nobody listens any more once the first reason was heard.
        let _ = self.endings.send(ending);
    }
}

/// Serves until the end, and gives the exit code: 0 when the editor asked for the shutdown first, else 1.
pub async fn serve<S, I, O>(
    service: LspService<S>,
    socket: ClientSocket,
    documents: &Documents,
    input: I,
    output: O,
) -> i32
where
    S: LanguageServer,
    I: AsyncRead + Unpin + Send + 'static,
    O: AsyncWrite + Unpin + Send + 'static,
{
    let (endings, mut ended) = mpsc::unbounded_channel();
    let life = Life { shutdown_seen: Arc::default(), endings };
    let (output, emptied) = pump(output, life.clone());
    let (passed_on, messages) = tokio::io::duplex(PIPE);
    let reading = tokio::spawn({
        let (refusals, life) = (output.0.clone(), life.clone());
        async move {
            incoming::sift(input, passed_on, refusals).await;
            // `tower-lsp` alone would wait now for every request under way.
            life.end(Ending::Closed);
        }
    });
    {
        let ordered = Ordered {
            inner: service,
            documents: documents.inbox.clone(),
            world: documents.world.clone(),
            initialize_seen: false,
            sent: 0,
            life: life.clone(),
        };
        let serving = Server::new(messages, output, socket).concurrency_level(usize::MAX).serve(ordered);
        tokio::pin!(serving);
        let grace = tokio::select! {
            () = &mut serving => Duration::ZERO,
            ending = ended.recv() => match ending {
                Some(Ending::Told) => GRACE_AFTER_EXIT,
                Some(Ending::Closed) => GRACE_AFTER_CLOSING,
                Some(Ending::EditorGone) | None => Duration::ZERO,
            },
        };
        if !grace.is_zero() {
            let _ = tokio::time::timeout(grace, &mut serving).await;
        }
    }
    reading.abort();
    let _ = tokio::time::timeout(GRACE_FOR_OUTPUT, emptied).await;
    i32::from(!life.shutdown_seen.load(Ordering::SeqCst))
}

/// The layer: `call` runs in the order of the wire, inside the loop that reads.
struct Ordered<S> {
    inner: S,
    documents: mpsc::UnboundedSender<(u64, Message)>,
    world: watch::Receiver<Arc<World>>,
    initialize_seen: bool,
    /// Number of document messages handed on so far.
    sent: u64,
    life: Life,
}

type Answer = Pin<Box<dyn Future<Output = Result<Option<Response>, ExitedError>> + Send>>;

impl<S> Service<Request> for Ordered<S>
where
    S: Service<Request, Response = Option<Response>, Error = ExitedError>,
    S::Future: Send + 'static,
{
    type Response = Option<Response>;
    type Error = ExitedError;
    type Future = Answer;

    fn poll_ready(&mut self, context: &mut Context<'_>) -> Poll<Result<(), ExitedError>> {
        self.inner.poll_ready(context)
    }

    fn call(&mut self, request: Request) -> Answer {
        let request = without_null(request);
        match request.method() {
            "initialize" => {
                self.initialize_seen = true;
                watch_editor(&request, &self.life);
            }
            "shutdown" => self.life.shutdown_seen.store(true, Ordering::SeqCst),
            "exit" => self.life.end(Ending::Told),
            method if method.starts_with("textDocument/did") => {
                if let Some(message) = document_message(&request) {
                    self.hand_on(message);
                    return Box::pin(ready(Ok(None)));
                }
            }
            method if method.starts_with("$/") => {
                if let Some(id) = request.id() {
                    let refusal = Response::from_error(id.clone(), Error::method_not_found());
                    return Box::pin(ready(Ok(Some(refusal))));
                }
            }
            _ => {}
        }
        let (read_before, mut world) = (self.sent, self.world.clone());
        let answer = self.inner.call(request);
        Box::pin(async move {
            // An error says that the writer ended: what it wrote last is then as good as it gets.
            let _ = world.wait_for(|world| world.applied >= read_before).await;
            answer.await
        })
    }
}

impl<S> Ordered<S> {
    fn hand_on(&mut self, message: Message) {
        // The protocol drops notifications that come before `initialize`.
        if self.initialize_seen {
            self.sent += 1;
            let _ = self.documents.send((self.sent, message));
        }
    }
}

/// Some editors send `"params": null` where the protocol has none.
fn without_null(request: Request) -> Request {
    if !matches!(request.params(), Some(Value::Null)) {
        return request;
    }
    let (method, id, _) = request.into_parts();
    match id {
        Some(id) => Request::build(method).id(id).finish(),
        None => Request::build(method).finish(),
    }
}

/// What a notification says about documents; `None` for one that the writer need not see.
fn document_message(request: &Request) -> Option<Message> {
    let message = match request.method() {
        "textDocument/didOpen" => parameters(request).map(Message::Open),
        "textDocument/didChange" => parameters(request).map(Message::Change),
        "textDocument/didClose" => parameters(request).map(Message::Close),
        _ => return None,
    };
    Some(message.unwrap_or_else(|error| Message::Unreadable(format!("{}: {error}", request.method()))))
}

fn parameters<T: DeserializeOwned>(request: &Request) -> Result<T, serde_json::Error> {
    serde_json::from_value(request.params().cloned().unwrap_or_default())
}

/// Ends the server when the process that `initialize` names is gone.
fn watch_editor(initialize: &Request, life: &Life) {
    let id = initialize.params().and_then(|parameters| parameters.get("processId")).and_then(Value::as_u64);
    if let Some(editor) = id.and_then(crate::editor_process::Editor::of) {
        let life = life.clone();
        tokio::spawn(async move {
            editor.gone().await;
            life.end(Ending::EditorGone);
        });
    }
}

/// Output that never makes the writer wait.
struct Unbounded(mpsc::UnboundedSender<Vec<u8>>);

impl AsyncWrite for Unbounded {
    fn poll_write(self: Pin<&mut Self>, _: &mut Context<'_>, bytes: &[u8]) -> Poll<std::io::Result<usize>> {
        Poll::Ready(match self.0.send(bytes.to_vec()) {
            Ok(()) => Ok(bytes.len()),
            Err(_) => Err(std::io::ErrorKind::BrokenPipe.into()),
        })
    }

    fn poll_flush(self: Pin<&mut Self>, _: &mut Context<'_>) -> Poll<std::io::Result<()>> {
        Poll::Ready(Ok(()))
    }

    fn poll_shutdown(self: Pin<&mut Self>, _: &mut Context<'_>) -> Poll<std::io::Result<()>> {
        Poll::Ready(Ok(()))
    }
}

/// The unbounded queue before an output, and the task that ends when all is written and the queue is closed.
fn pump<O: AsyncWrite + Unpin + Send + 'static>(
    mut output: O,
    life: Life,
) -> (Unbounded, tokio::task::JoinHandle<()>) {
    let (queue, mut waiting) = mpsc::unbounded_channel::<Vec<u8>>();
    let task = tokio::spawn(async move {
        while let Some(bytes) = waiting.recv().await {
            let mut written = output.write_all(&bytes).await;
            if written.is_ok() && waiting.is_empty() {
                written = output.flush().await;
            }
            if written.is_err() {
                return life.end(Ending::Closed);
            }
        }
    });
    (Unbounded(queue), task)
}
