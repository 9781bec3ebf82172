//! The language server: findings, hover and code actions for setup files, over standard input and output.
//!
//! One writer owns the documents and applies edits in the order of the wire ([`documents`]); everything else reads
//! immutable snapshots. Checks run off the message loop, are cancelled when a newer text is there, and only what
//! belongs to the newest text is published (`session::diagnostics`). A panic in the engine is one finding; the
//! server lives.
//!
//! It writes no file, starts no process and opens no connection. This is the only crate that knows the types of the
//! protocol.

mod ability;
mod actions;
pub mod documents;
mod editor_process;
mod hover;
mod incoming;
mod session;
mod to_lsp;
pub mod transport;

use checks::{Analysis, Engine};
use documents::Documents;
use session::Session;
use std::sync::{Arc, OnceLock};
use tokio::io::{AsyncRead, AsyncWrite};
use tower_lsp::LspService;

/// The check of a text: [`checks::analyse`], except in tests of what happens when it fails or takes long.
pub type Analyse = fn(&str, &Engine, &(dyn Fn() -> bool + Sync)) -> Analysis;

/// Serves an editor over standard input and output until the end, and gives the exit code of the process.
///
/// What waits in the background is abandoned, not waited for: the process is to end right after.
pub fn run() -> i32 {
    let runtime = match tokio::runtime::Builder::new_multi_thread().enable_all().build() {
        Ok(runtime) => runtime,
        // No thread, no server; nothing can be said over a protocol that nobody speaks yet.
        Err(_) => return 2,
    };
    let code = runtime.block_on(serve(tokio::io::stdin(), tokio::io::stdout(), checks::analyse));
    runtime.shutdown_background();
    code
}

/// Serves an editor at the other end of `input` and `output`; gives 0 when it asked for the shutdown before the end,
/// else 1.
pub async fn serve<I, O>(input: I, output: O, analyse: Analyse) -> i32
where
    I: AsyncRead + Unpin + Send + 'static,
    O: AsyncWrite + Unpin + Send + 'static,
{
    let encoding = Arc::new(OnceLock::new());
    let (complaints, heard) = tokio::sync::mpsc::unbounded_channel();
    let documents = Documents::start(encoding.clone(), move |complaint| {
        // Lost only when the session is over.
        let _ = complaints.send(complaint);
    });
    let world = documents.world.clone();
    let (service, socket) = LspService::new(|client| Session::start(client, world, encoding, heard, analyse));
    transport::serve(service, socket, &documents, input, output).await
}
