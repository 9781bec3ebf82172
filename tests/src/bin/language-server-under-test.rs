//! A language server for the tests, in one of these ways:
//!
//! * `bare`: small handlers on `tower-lsp` as it is, written as its own examples are;
//! * `ordered`: the same handlers on the transport of `crates/server`;
//! * `topheavy`: what `topheavy serve` runs;
//! * `faulty`: the same with a check that falls over or never ends by itself when the text says so.
//!
//! The commands of `bare` and `ordered` (`workspace/executeCommand`): `text` gives the newest text with its version,
//! `slow` takes long, `ask` asks the editor for its configuration, `long` gives a long answer.

use server::documents::{Document, Documents, World};
use setup::lines::Encoding;
use std::collections::HashMap;
use std::sync::{Arc, OnceLock};
use std::time::Duration;
use tokio::sync::{Mutex, watch};
use tower_lsp::jsonrpc::{Error, Result};
use tower_lsp::lsp_types::{
    ConfigurationItem, DidChangeTextDocumentParams, DidOpenTextDocumentParams, ExecuteCommandParams,
    InitializeParams, InitializeResult, MessageType, Url,
};
use tower_lsp::{Client, LanguageServer, LspService, Server, async_trait};

/// Where the handlers find the documents.
enum Store {
    /// Behind a lock that the handlers of notifications take.
    Locked(Mutex<HashMap<Url, Document>>),
    /// With their writer.
    Written(watch::Receiver<Arc<World>>),
}

struct Handlers {
    client: Client,
    store: Store,
}

impl Handlers {
    async fn text(&self) -> Option<(i32, String)> {
        let said = |document: &Document| (document.version, document.text.clone());
        match &self.store {
            Store::Locked(documents) => documents.lock().await.values().next().map(said),
            Store::Written(world) => world.borrow().documents.values().next().map(|document| said(document)),
        }
    }
}

#[async_trait]
impl LanguageServer for Handlers {
    async fn initialize(&self, _: InitializeParams) -> Result<InitializeResult> {
        Ok(InitializeResult::default())
    }

    async fn shutdown(&self) -> Result<()> {
        Ok(())
    }

    async fn did_open(&self, opened: DidOpenTextDocumentParams) {
        let Store::Locked(documents) = &self.store else { return };
        let document = Document::new(opened.text_document, 0);
        documents.lock().await.insert(document.uri.clone(), document);
    }

    async fn did_change(&self, changed: DidChangeTextDocumentParams) {
        let Store::Locked(documents) = &self.store else { return };
        // Handlers that tell something before they write are common.
        if changed.text_document.version % 7 == 0 {
            self.client.log_message(MessageType::LOG, "changed").await;
        }
        if let Some(document) = documents.lock().await.get_mut(&changed.text_document.uri) {
            document.version = changed.text_document.version;
            for change in changed.content_changes {
                document.edit(change, Encoding::Utf16);
            }
        }
    }

    async fn execute_command(&self, asked: ExecuteCommandParams) -> Result<Option<serde_json::Value>> {
        match asked.command.as_str() {
            "text" => Ok(self.text().await.map(|(version, text)| serde_json::json!([version, text]))),
            "slow" => {
                tokio::time::sleep(Duration::from_secs(3)).await;
                Ok(Some("slow".into()))
            }
            "ask" => {
                let item = ConfigurationItem { scope_uri: None, section: Some("any".to_owned()) };
                let said = self.client.configuration(vec![item]).await?;
                Ok(Some(said.into()))
            }
            "long" => Ok(Some("x".repeat(20_000).into())),
            _ => Err(Error::method_not_found()),
        }
    }
}

/// A check with two faults that the text can ask for.
fn faulty(text: &str, engine: &checks::Engine, cancel: &(dyn Fn() -> bool + Sync)) -> checks::Analysis {
    assert!(!text.contains("# falls over"), "the text says so");
    while text.contains("# never ends") && !cancel() {
        std::thread::sleep(Duration::from_millis(1));
    }
    checks::analyse(text, engine, cancel)
}

async fn bare() -> i32 {
    let store = Store::Locked(Mutex::default());
    let (service, socket) = LspService::new(|client| Handlers { client, store });
    Server::new(tokio::io::stdin(), tokio::io::stdout(), socket).serve(service).await;
    0
}

async fn ordered() -> i32 {
    let documents = Documents::start(Arc::new(OnceLock::new()), |_| {});
    let store = Store::Written(documents.world.clone());
    let (service, socket) = LspService::new(|client| Handlers { client, store });
    server::transport::serve(service, socket, &documents, tokio::io::stdin(), tokio::io::stdout()).await
}

fn main() {
    let way = std::env::args().nth(1).unwrap_or_default();
    if way == "topheavy" {
        std::process::exit(server::run());
    }
    let runtime = tokio::runtime::Runtime::new().expect("threads for the tests");
    let code = runtime.block_on(async {
        match way.as_str() {
            "bare" => bare().await,
            "ordered" => ordered().await,
            "faulty" => server::serve(tokio::io::stdin(), tokio::io::stdout(), faulty).await,
            _ => 2,
        }
    });
    // As a program ends whose main function returns, without the wait for a thread that reads.
    runtime.shutdown_background();
    std::process::exit(code);
}
