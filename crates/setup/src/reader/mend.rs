//! The parts of a broken statement, what is wrong with them, and the one rewriting that mends it, where there is one.

use super::explain::shown;
use super::parse::{Segment, key_names};
use crate::finding::Span;
use std::collections::HashSet;

/// A statement looked through.
#[derive(Default)]
pub(super) struct Mended {
    /// What is wrong, within the statement.
    pub at: Option<Span>,
    pub message: Option<String>,
    pub key: Option<Vec<String>>,
    pub header: Option<Option<(Vec<Segment>, bool)>>,
    /// The statement anew, to be tried.
    pub body: Option<String>,
    pub title: String,
}

/// The line end that a file uses.
pub(super) fn newline(text: &str) -> &'static str {
    if text.contains("\r\n") { "\r\n" } else { "\n" }
}

/// A statement that starts like a header.
pub(super) fn header(_body: &str, _base: usize, _repeated: &HashSet<Vec<String>>) -> Option<Mended> {
    None
}

/// `key = value`
pub(super) fn pair(body: &str) -> Option<Mended> {
    let (key, _) = body.split_once('=')?;
    Some(Mended { key: key_names(key.trim()), ..Mended::default() })
}

/// Neither.
pub(super) fn other(body: &str) -> Mended {
    Mended {
        message: Some(format!("`{}` is neither a header nor `key = value`", shown(body))),
        ..Mended::default()
    }
}
