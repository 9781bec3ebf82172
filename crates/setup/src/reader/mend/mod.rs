//! The parts of a broken statement, what is wrong with them, and the one rewriting that mends it, where there is one.
//!
//! A rewriting may be a guess at the form, never at a value, and it is offered only after it was read without a slip.

mod header;
mod key;
mod pair;
mod pieces;
mod scalar;
mod value;

use super::parse::{Parsed, Segment, parse};
use crate::finding::Span;
use std::collections::HashSet;

/// A statement looked through.
#[derive(Debug, Default)]
pub(super) struct Mended {
    /// What is wrong, within the statement; all of it when not given.
    pub at: Option<Span>,
    /// What is wrong, as the part of a sentence behind the statement; none: nothing was found.
    pub fault: Option<String>,
    /// The key, where it can be told.
    pub key: Option<Vec<String>>,
    /// It is a header; inside, its name and whether it is one of many, where they can be told.
    pub header: Option<Option<(Vec<Segment>, bool)>>,
    /// The statement anew, to be tried.
    pub body: Option<String>,
    /// What the rewriting does.
    pub title: String,
}

/// Looks through a statement that starts at `base`. `repeated`: paths of headers in double brackets.
pub(super) fn look(body: &str, base: usize, repeated: &HashSet<Vec<String>>) -> Mended {
    if let Some(rest) = body.strip_prefix('\u{feff}') {
        return marked(rest, base + '\u{feff}'.len_utf8());
    }
    header::look(body, base, repeated)
        .or_else(|| pair::look(body))
        .unwrap_or_else(|| pair::without_equals(body))
}

/// A byte-order mark inside the file, as when two files are joined, with the statement behind it.
fn marked(rest: &str, base: usize) -> Mended {
    let (key, header) = match parse(rest, base, &(0..0)) {
        Ok(Parsed::Header { path, repeated, .. }) => (None, Some(Some((path, repeated)))),
        Ok(Parsed::Pair { path, .. }) => (Some(path.into_iter().map(|part| part.name).collect()), None),
        Err(_) => (None, rest.starts_with('[').then_some(None)),
    };
    Mended {
        at: None,
        fault: Some("a byte-order mark that no editor shows stands in front of it".to_owned()),
        key,
        header,
        body: Some(rest.to_owned()),
        title: "Take the byte-order mark away".to_owned(),
    }
}

/// Looks through a statement that is too long or too deep to be rewritten: only for what it is about.
pub(super) fn glance(body: &str) -> Mended {
    let header = body.starts_with('[').then_some(None);
    let key =
        key::parts(body).and_then(|parts| super::parse::key_names(parts.key)).filter(|_| header.is_none());
    Mended { key, header, ..Mended::default() }
}

/// Something that is wrong, as the part of a sentence, with its rewriting.
#[derive(Debug, Clone, PartialEq, Eq)]
struct Fault {
    words: String,
    mended: Option<String>,
    title: String,
}

impl Fault {
    fn new(words: impl Into<String>) -> Fault {
        Fault { words: words.into(), mended: None, title: String::new() }
    }

    fn mended(words: impl Into<String>, title: impl Into<String>, mended: impl Into<String>) -> Fault {
        Fault { words: words.into(), mended: Some(mended.into()), title: title.into() }
    }

    /// With the rewriting only if it passes.
    fn if_mended(mut self, passes: impl Fn(&str) -> bool) -> Fault {
        self.mended = self.mended.filter(|mended| passes(mended));
        self
    }
}

fn is_control(c: char) -> bool {
    c.is_control() && !matches!(c, '\t' | '\n' | '\r')
}

/// Typographic quotes as the straight ones that were meant.
fn straightened(text: &str) -> Option<String> {
    let straight = |c| match c {
        '“' | '”' | '„' | '‟' | '″' | '«' | '»' => '"',
        '‘' | '’' | '‚' | '‛' => '\'',
        other => other,
    };
    let out: String = text.chars().map(straight).collect();
    (out != text).then_some(out)
}
