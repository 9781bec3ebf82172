//! One editor's session: what it asks, answered from snapshots.
//!
//! Notifications about documents are absent here: the transport hands them to the writer of the documents.

pub(crate) mod diagnostics;

use crate::Analyse;
use crate::ability::Ability;
use crate::documents::{Document, World};
use crate::{actions, hover};
use checks::{Analysis, Engine};
use diagnostics::{Checked, Desk, Results};
use setup::lines::Encoding;
use std::sync::{Arc, OnceLock};
use std::time::Duration;
use tokio::sync::{mpsc, watch};
use tower_lsp::jsonrpc::Result;
use tower_lsp::lsp_types::{
    CodeActionKind, CodeActionOptions, CodeActionParams, CodeActionProviderCapability, CodeActionResponse,
    Hover, HoverParams, HoverProviderCapability, InitializeParams, InitializeResult, MessageType,
    ServerCapabilities, ServerInfo, TextDocumentSyncCapability, TextDocumentSyncKind,
    TextDocumentSyncOptions, Url,
};
use tower_lsp::{Client, LanguageServer, async_trait};

/// How long a hover waits for the check of its text; what the words mean can be told without.
const PATIENCE_OF_HOVER: Duration = Duration::from_secs(2);
/// How long code actions wait for the check, and for changes that are still being tried.
const PATIENCE_OF_ACTIONS: Duration = Duration::from_millis(150);

/// What the handlers share.
pub(crate) struct Session {
    ability: Arc<OnceLock<Ability>>,
    encoding: Arc<OnceLock<Encoding>>,
    world: watch::Receiver<Arc<World>>,
    results: watch::Receiver<Results>,
}

impl Session {
    /// Starts the work in the background. `encoding` is filled in once it is agreed; `complaints` are shown in the
    /// editor's log.
    pub(crate) fn start(
        client: Client,
        world: watch::Receiver<Arc<World>>,
        encoding: Arc<OnceLock<Encoding>>,
        mut complaints: mpsc::UnboundedReceiver<String>,
        analyse: Analyse,
    ) -> Session {
        let (ability, engine) = (Arc::new(OnceLock::new()), Arc::new(Engine::new()));
        let log = client.clone();
        tokio::spawn(async move {
            while let Some(complaint) = complaints.recv().await {
                log.log_message(MessageType::WARNING, complaint).await;
            }
        });
        let (desk, results) = Desk::new(client, world.clone(), ability.clone(), engine, analyse);
        tokio::spawn(desk.work());
        Session { ability, encoding, world, results }
    }

    fn ability(&self) -> Ability {
        self.ability.get().copied().unwrap_or_default()
    }

    /// The newest state of a setup file; `None` when it is not open or no setup file.
    fn setup_file(&self, uri: &Url) -> Option<Arc<Document>> {
        self.world.borrow().documents.get(uri).filter(|document| document.is_setup()).cloned()
    }

    /// The check of exactly this state of a document. `None` when the document has moved on, the check fell over,
    /// or it takes longer than the patience.
    async fn checked(&self, document: &Document, patience: Duration) -> Option<Arc<Checked>> {
        let (mut results, mut world) = (self.results.clone(), self.world.clone());
        let wanted = Some(document.revision);
        let checked = async {
            let of = |results: &Results| results.get(&document.uri).cloned();
            let is_it = |results: &Results| of(results).map(|checked| checked.document.revision) == wanted;
            let results = results.wait_for(is_it).await.ok()?;
            of(&results)
        };
        tokio::select! {
            checked = checked => checked,
            _ = world.wait_for(|world| world.revision(&document.uri) != wanted) => None,
            () = tokio::time::sleep(patience) => None,
        }
    }
}

#[async_trait]
impl LanguageServer for Session {
    async fn initialize(&self, said: InitializeParams) -> Result<InitializeResult> {
        let ability = Ability::of(&said.capabilities);
        // The protocol allows one `initialize`; the transport refuses a second before it comes here.
        let _ = self.encoding.set(ability.encoding);
        let _ = self.ability.set(ability);
        let kinds = [CodeActionKind::QUICKFIX, CodeActionKind::SOURCE_FIX_ALL];
        Ok(InitializeResult {
            capabilities: ServerCapabilities {
                position_encoding: Some(ability.encoding_kind()),
                text_document_sync: Some(TextDocumentSyncCapability::Options(TextDocumentSyncOptions {
                    open_close: Some(true),
                    change: Some(TextDocumentSyncKind::INCREMENTAL),
                    ..TextDocumentSyncOptions::default()
                })),
                hover_provider: Some(HoverProviderCapability::Simple(true)),
                code_action_provider: Some(CodeActionProviderCapability::Options(CodeActionOptions {
                    code_action_kinds: Some(kinds.to_vec()),
                    ..CodeActionOptions::default()
                })),
                ..ServerCapabilities::default()
            },
            server_info: Some(ServerInfo {
                name: "topheavy".to_owned(),
                version: Some(env!("CARGO_PKG_VERSION").to_owned()),
            }),
        })
    }

    async fn shutdown(&self) -> Result<()> {
        Ok(())
    }

    async fn hover(&self, asked: HoverParams) -> Result<Option<Hover>> {
        let at = asked.text_document_position_params;
        let Some(document) = self.setup_file(&at.text_document.uri) else { return Ok(None) };
        let ability = self.ability();
        let checked = self.checked(&document, PATIENCE_OF_HOVER).await;
        let analysis = match checked.as_ref().and_then(|checked| checked.analysis.as_ref().ok()) {
            Some(analysis) => Arc::clone(analysis),
            None => match self.words_only(&document).await {
                Some(analysis) => Arc::new(analysis),
                None => return Ok(None),
            },
        };
        Ok(hover::hover(&document, &analysis, at.position, &ability))
    }

    async fn code_action(&self, asked: CodeActionParams) -> Result<Option<CodeActionResponse>> {
        let ability = self.ability();
        let Some(document) = self.setup_file(&asked.text_document.uri) else { return Ok(None) };
        if !ability.actions_with_edits {
            return Ok(None);
        }
        let deadline = tokio::time::Instant::now() + PATIENCE_OF_ACTIONS;
        let Some(checked) = self.checked(&document, PATIENCE_OF_ACTIONS).await else { return Ok(None) };
        let patience = deadline.saturating_duration_since(tokio::time::Instant::now());
        Ok(Some(actions::actions(&checked, &asked, &ability, patience).await))
    }
}

impl Session {
    /// What can be told without computing. `None` when it falls over.
    async fn words_only(&self, document: &Arc<Document>) -> Option<Analysis> {
        let document = document.clone();
        tokio::task::spawn_blocking(move || checks::read(&document.text)).await.ok()
    }
}
