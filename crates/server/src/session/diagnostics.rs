//! Findings, pushed: each newest text is checked off the message loop, and changes are tried in the background.
//!
//! One desk starts and cancels the jobs and publishes what they find, so that nothing overtakes. A document has one
//! job at a time; while it runs newer texts wait, and only the newest of them is looked at.

use crate::Analyse;
use crate::ability::Ability;
use crate::documents::{Document, World};
use crate::to_lsp;
use checks::{Analysis, Engine};
use setup::finding::Fix;
use std::collections::HashMap;
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::sync::atomic::{AtomicBool, Ordering};
use std::sync::{Arc, OnceLock};
use tokio::sync::{mpsc, watch};
use tower_lsp::Client;
use tower_lsp::lsp_types::Url;

/// The newest check of each document.
pub(crate) type Results = Arc<HashMap<Url, Arc<Checked>>>;

/// The check of one state of a document.
pub(crate) struct Checked {
    pub(crate) document: Arc<Document>,
    /// What was found, or the reason of a panic.
    pub(crate) analysis: Result<Arc<Analysis>, String>,
    /// Tried changes of each finding; `None` while the search is under way.
    pub(crate) tried: watch::Sender<Vec<Option<Vec<Fix>>>>,
}

impl Checked {
    fn new(document: Arc<Document>, analysis: Result<Analysis, String>) -> Checked {
        let findings = analysis.as_ref().map_or(0, |analysis| analysis.findings.len());
        let tried = watch::Sender::new(vec![None; findings]);
        Checked { document, analysis: analysis.map(Arc::new), tried }
    }
}

/// What a job tells the desk.
enum Report {
    /// The findings are there.
    Found(Arc<Checked>),
    /// The job for this state of this document has ended.
    Ended(Url, u64),
}

/// The job of a document.
struct Job {
    /// The state that it looks at.
    revision: u64,
    running: bool,
    unwanted: Arc<AtomicBool>,
}

impl Job {
    fn cancel(&self) {
        self.unwanted.store(true, Ordering::Relaxed);
    }
}

/// Starts jobs and publishes.
pub(crate) struct Desk {
    client: Client,
    world: watch::Receiver<Arc<World>>,
    ability: Arc<OnceLock<Ability>>,
    engine: Arc<Engine>,
    analyse: Analyse,
    jobs: HashMap<Url, Job>,
    results: watch::Sender<Results>,
    reports: mpsc::UnboundedSender<Report>,
    inbox: mpsc::UnboundedReceiver<Report>,
}

impl Desk {
    /// A desk with nothing on it, and where its results will be.
    pub(crate) fn new(
        client: Client,
        world: watch::Receiver<Arc<World>>,
        ability: Arc<OnceLock<Ability>>,
        engine: Arc<Engine>,
        analyse: Analyse,
    ) -> (Desk, watch::Receiver<Results>) {
        let (results, readers) = watch::channel(Results::default());
        let (reports, inbox) = mpsc::unbounded_channel();
        let jobs = HashMap::new();
        (Desk { client, world, ability, engine, analyse, jobs, results, reports, inbox }, readers)
    }

    /// Works until the documents' writer ends.
    pub(crate) async fn work(mut self) {
        loop {
            tokio::select! {
                changed = self.world.changed() => match changed {
                    Ok(()) => self.catch_up().await,
                    Err(_) => break,
                },
                Some(report) = self.inbox.recv() => match report {
                    Report::Found(checked) => self.publish(checked).await,
                    Report::Ended(uri, revision) => self.ended(&uri, revision),
                },
            }
        }
        self.jobs.values().for_each(Job::cancel);
    }

    /// Brings the jobs in line with the documents.
    async fn catch_up(&mut self) {
        let world = self.world.borrow_and_update().clone();
        let closed: Vec<Url> =
            self.jobs.keys().filter(|uri| !world.documents.contains_key(uri)).cloned().collect();
        for uri in closed {
            if let Some(job) = self.jobs.remove(&uri) {
                job.cancel();
            }
            self.results.send_modify(|results| drop(Arc::make_mut(results).remove(&uri)));
            self.client.publish_diagnostics(uri, Vec::new(), None).await;
        }
        for document in world.documents.values().filter(|document| document.is_setup()) {
            self.look_at(document);
        }
    }

    /// Sees to it that the newest state of a document is checked, now or once the job under way has given up.
    fn look_at(&mut self, document: &Arc<Document>) {
        match self.jobs.get(&document.uri) {
            Some(job) if job.revision == document.revision => return,
            Some(job) if job.running => return job.cancel(),
            _ => {}
        }
        let unwanted = Arc::new(AtomicBool::new(false));
        let job = Job { revision: document.revision, running: true, unwanted: unwanted.clone() };
        self.jobs.insert(document.uri.clone(), job);

        let (document, engine, analyse) = (document.clone(), self.engine.clone(), self.analyse);
        let (found, ended) = (self.reports.clone(), self.reports.clone());
        let end = Report::Ended(document.uri.clone(), document.revision);
        let work = tokio::task::spawn_blocking(move || {
            let is_unwanted = || unwanted.load(Ordering::Relaxed);
            check(document, &engine, analyse, &is_unwanted, &|checked| {
                // Lost only when the session is over.
                let _ = found.send(Report::Found(checked));
            });
        });
        tokio::spawn(async move {
            let _ = work.await;
            let _ = ended.send(end);
        });
    }

    fn ended(&mut self, uri: &Url, revision: u64) {
        match self.jobs.get_mut(uri) {
            Some(job) if job.revision == revision => job.running = false,
            // The document was closed meanwhile.
            _ => return,
        }
        let newest = self.world.borrow().documents.get(uri).cloned();
        if let Some(document) = newest {
            self.look_at(&document);
        }
    }

    /// Publishes what was found unless the document has moved on.
    async fn publish(&mut self, checked: Arc<Checked>) {
        let document = checked.document.clone();
        if self.world.borrow().revision(&document.uri) != Some(document.revision) {
            return;
        }
        let ability = self.ability.get().copied().unwrap_or_default();
        let diagnostics = match &checked.analysis {
            Ok(analysis) => analysis
                .findings
                .iter()
                .map(|finding| to_lsp::diagnostic(&document, finding, &ability))
                .collect(),
            Err(reason) => vec![to_lsp::fault(reason)],
        };
        self.results
            .send_modify(|results| drop(Arc::make_mut(results).insert(document.uri.clone(), checked)));
        self.client.publish_diagnostics(document.uri.clone(), diagnostics, Some(document.version)).await;
    }
}

/// A job: the check, told as soon as it is done, then the search for changes.
fn check(
    document: Arc<Document>,
    engine: &Engine,
    analyse: Analyse,
    is_unwanted: &(dyn Fn() -> bool + Sync),
    found: &dyn Fn(Arc<Checked>),
) {
    let analysis = guarded(|| analyse(&document.text, engine, is_unwanted));
    if is_unwanted() {
        return;
    }
    let checked = Arc::new(Checked::new(document, analysis));
    found(checked.clone());
    let Ok(analysis) = &checked.analysis else { return };
    for finding in 0..analysis.findings.len() {
        let text = &checked.document.text;
        // A search that falls over has found nothing; its finding stands.
        let changes = match is_unwanted() {
            true => Vec::new(),
            false => {
                guarded(|| checks::changes(text, analysis, engine, finding, is_unwanted)).unwrap_or_default()
            }
        };
        checked.tried.send_modify(|tried| tried[finding] = Some(changes));
    }
}

/// Runs something of the engine; a panic is an error with its message.
fn guarded<T>(work: impl FnOnce() -> T) -> Result<T, String> {
    catch_unwind(AssertUnwindSafe(work)).map_err(|panic| {
        let said = panic.downcast_ref::<String>().cloned();
        said.or_else(|| panic.downcast_ref::<&str>().map(|said| (*said).to_owned()))
            .unwrap_or_else(|| "no reason given".to_owned())
    })
}
