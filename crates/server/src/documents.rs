//! The open documents: one writer, any number of readers of immutable snapshots.

use setup::lines::{Encoding, LineIndex};
use std::collections::HashMap;
use std::sync::{Arc, OnceLock};
use tokio::sync::{mpsc, watch};
use tower_lsp::lsp_types::{
    DidChangeTextDocumentParams, DidCloseTextDocumentParams, DidOpenTextDocumentParams, Position,
    TextDocumentContentChangeEvent, TextDocumentItem, Url,
};

/// A notification about a document.
#[derive(Debug, Clone)]
pub enum Message {
    /// The editor shows it; its text comes along.
    Open(DidOpenTextDocumentParams),
    /// It was edited.
    Change(DidChangeTextDocumentParams),
    /// The editor no longer shows it.
    Close(DidCloseTextDocumentParams),
    /// Parameters that could not be read, and why.
    Unreadable(String),
}

/// One document as it was at one moment.
#[derive(Debug, Clone)]
pub struct Document {
    /// As the editor spells it.
    pub uri: Url,
    /// The highest version that the editor gave it.
    pub version: i32,
    /// Counts what happened to all documents: no two states of any document share it.
    pub revision: u64,
    /// The text.
    pub text: String,
    /// The lines of the text.
    pub lines: LineIndex,
}

/// All open documents at one moment.
#[derive(Debug, Clone, Default)]
pub struct World {
    /// By address.
    pub documents: HashMap<Url, Arc<Document>>,
    /// How many messages have been applied.
    pub applied: u64,
}

/// The two ends of the writer.
#[derive(Debug, Clone)]
pub struct Documents {
    /// Takes messages with their number, counted from 1.
    pub inbox: mpsc::UnboundedSender<(u64, Message)>,
    /// The newest snapshot.
    pub world: watch::Receiver<Arc<World>>,
}

impl Documents {
    /// Starts the writer. It counts the characters of a line in the units that `encoding` holds by the time of the
    /// first message (UTF-16 when it holds none, as the protocol says), and tells `complain` what editors should
    /// not have sent.
    pub fn start(encoding: Arc<OnceLock<Encoding>>, complain: impl Fn(String) + Send + 'static) -> Documents {
        let (inbox, mut messages) = mpsc::unbounded_channel();
        let (snapshots, world) = watch::channel(Arc::default());
        tokio::spawn(async move {
            let mut world = World::default();
            let mut batch = Vec::new();
            // A burst of edits makes one snapshot.
            while messages.recv_many(&mut batch, 1024).await > 0 {
                let encoding = encoding.get().copied().unwrap_or(Encoding::Utf16);
                for (number, message) in batch.drain(..) {
                    world.applied = number;
                    if let Err(complaint) = world.apply(message, encoding) {
                        complain(complaint);
                    }
                }
                snapshots.send_replace(Arc::new(world.clone()));
            }
        });
        Documents { inbox, world }
    }
}

impl World {
    /// The state of a document, if it is open.
    pub fn revision(&self, uri: &Url) -> Option<u64> {
        self.documents.get(uri).map(|document| document.revision)
    }

    /// Applies one message. What the editor should not have sent is survived and told.
    fn apply(&mut self, message: Message, encoding: Encoding) -> Result<(), String> {
        match message {
            Message::Open(opened) => self.open(opened),
            Message::Change(changed) => self.change(changed, encoding),
            Message::Close(closed) => match self.documents.remove(&closed.text_document.uri) {
                Some(_) => Ok(()),
                None => Err(format!("{} was closed and was not open", closed.text_document.uri)),
            },
            Message::Unreadable(reason) => Err(reason),
        }
    }

    fn open(&mut self, opened: DidOpenTextDocumentParams) -> Result<(), String> {
        let document = Document::new(opened.text_document, self.applied);
        let uri = document.uri.clone();
        match self.documents.insert(uri.clone(), Arc::new(document)) {
            None => Ok(()),
            Some(_) => Err(format!("{uri} was opened twice; the second text counts")),
        }
    }

    fn change(&mut self, changed: DidChangeTextDocumentParams, encoding: Encoding) -> Result<(), String> {
        let (uri, version) = (changed.text_document.uri, changed.text_document.version);
        let Some(document) = self.documents.get_mut(&uri) else {
            return Err(format!("{uri} was changed and was not open"));
        };
        let document = Arc::make_mut(document);
        let before = document.version;
        document.revision = self.applied;
        document.version = before.max(version);
        for change in changed.content_changes {
            document.edit(change, encoding);
        }
        match version > before {
            true => Ok(()),
            // The order of the wire is the truth; the number only names it.
            false => Err(format!("{uri}: version {version} came after {before}; its edits were made")),
        }
    }
}

impl Document {
    /// As the editor sent it.
    pub fn new(item: TextDocumentItem, revision: u64) -> Document {
        let lines = LineIndex::new(&item.text);
        Document { uri: item.uri, version: item.version, revision, text: item.text, lines }
    }

    /// Makes one edit; what lies outside the text is pulled in.
    pub fn edit(&mut self, change: TextDocumentContentChangeEvent, encoding: Encoding) {
        match change.range {
            None => self.text = change.text,
            Some(range) => {
                let (start, end) = (self.offset(range.start, encoding), self.offset(range.end, encoding));
                self.text.replace_range(start.min(end)..start.max(end), &change.text);
            }
        }
        self.lines = LineIndex::new(&self.text);
    }

    /// The byte offset of a position, pulled into the text.
    pub fn offset(&self, position: Position, encoding: Encoding) -> usize {
        let place = setup::lines::Position { line: position.line, character: position.character };
        self.lines.offset(&self.text, place, encoding)
    }

    /// Whether it is a setup file: named `*.stack.toml`.
    pub fn is_setup(&self) -> bool {
        self.uri.path().ends_with(".stack.toml")
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use tower_lsp::lsp_types::{Range, TextDocumentIdentifier, VersionedTextDocumentIdentifier};

    fn uri() -> Url {
        Url::parse("file:///bench/a.stack.toml").unwrap()
    }

    fn open(version: i32, text: &str) -> Message {
        let text_document = TextDocumentItem::new(uri(), "toml".to_owned(), version, text.to_owned());
        Message::Open(DidOpenTextDocumentParams { text_document })
    }

    /// Line and character.
    type Place = (u32, u32);

    /// Replaces what stands between two places.
    fn change(version: i32, edits: &[(Place, Place, &str)]) -> Message {
        let content_changes = edits
            .iter()
            .map(|(start, end, text)| TextDocumentContentChangeEvent {
                range: Some(Range::new(Position::new(start.0, start.1), Position::new(end.0, end.1))),
                range_length: None,
                text: (*text).to_owned(),
            })
            .collect();
        let text_document = VersionedTextDocumentIdentifier::new(uri(), version);
        Message::Change(DidChangeTextDocumentParams { text_document, content_changes })
    }

    fn close() -> Message {
        Message::Close(DidCloseTextDocumentParams { text_document: TextDocumentIdentifier::new(uri()) })
    }

    /// The world after some messages, and which of them were complained about.
    fn after(messages: &[Message], encoding: Encoding) -> (World, Vec<usize>) {
        let mut world = World::default();
        let mut complaints = Vec::new();
        for (i, message) in messages.iter().enumerate() {
            world.applied += 1;
            if world.apply(message.clone(), encoding).is_err() {
                complaints.push(i);
            }
        }
        (world, complaints)
    }

    fn text(messages: &[Message], encoding: Encoding) -> String {
        after(messages, encoding).0.documents[&uri()].text.clone()
    }

    /// U+1D6FC is 4 bytes in UTF-8, 2 units in UTF-16, one code point (The Unicode Standard, chapter 3, table 3-1).
    #[test]
    fn characters_are_counted_in_each_encoding() {
        for (encoding, x) in [(Encoding::Utf8, 4), (Encoding::Utf16, 2), (Encoding::Utf32, 1)] {
            let messages = [open(1, "a\n𝛼x\n"), change(2, &[((1, x), (1, x + 1), "y")])];
            assert_eq!(text(&messages, encoding), "a\n𝛼y\n", "{encoding:?}");
        }
    }

    #[test]
    fn edits_of_one_change_are_made_one_after_the_other() {
        let messages = [open(1, "ab"), change(2, &[((0, 1), (0, 1), "\n"), ((1, 0), (1, 1), "c")])];
        assert_eq!(text(&messages, Encoding::Utf16), "a\nc");
    }

    #[test]
    fn places_outside_are_pulled_in() {
        let messages = [open(1, "ab\ncd"), change(2, &[((0, 99), (0, 99), "!"), ((9, 9), (9, 9), "?")])];
        assert_eq!(text(&messages, Encoding::Utf16), "ab!\ncd?");
        let turned = [open(1, "abcd"), change(2, &[((0, 3), (0, 1), "-")])];
        assert_eq!(text(&turned, Encoding::Utf16), "a-d");
    }

    #[test]
    fn what_editors_should_not_send_is_survived_and_told() {
        let (world, complaints) = after(&[change(1, &[((0, 0), (0, 0), "x")])], Encoding::Utf16);
        assert!(world.documents.is_empty());
        assert_eq!(complaints, [0]);

        let twice = [open(5, "old"), open(1, "new")];
        let (world, complaints) = after(&twice, Encoding::Utf16);
        assert_eq!((world.documents[&uri()].text.as_str(), complaints), ("new", vec![1]));

        let stale = [open(5, "a"), change(3, &[((0, 1), (0, 1), "b")]), change(6, &[((0, 2), (0, 2), "c")])];
        let (world, complaints) = after(&stale, Encoding::Utf16);
        let document = &world.documents[&uri()];
        assert_eq!((document.text.as_str(), document.version, complaints), ("abc", 6, vec![1]));

        assert_eq!(after(&[close()], Encoding::Utf16).1, [0]);
    }

    #[test]
    fn every_state_has_its_own_revision() {
        let (first, _) = after(&[open(1, "a")], Encoding::Utf16);
        let (second, _) = after(&[open(1, "a"), close(), open(1, "a")], Encoding::Utf16);
        assert_ne!(first.revision(&uri()), second.revision(&uri()));
    }
}
