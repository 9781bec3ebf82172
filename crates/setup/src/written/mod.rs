//! The setup as written: every known key with its value read by its declaration, units checked, nothing resolved.
//!
//! A value that is there but could not be read is kept as *unreadable*: later stages stay silent about it, so that
//! one cause makes one finding.

mod lost;
mod unknown;
mod value;
mod walk;

use crate::declare::{Key, Section};
use crate::finding::{Finding, Span};
use crate::places::Places;
use crate::resolved::{NotLookedAt, OpenPlace};
use quantity::Quantity;
use std::collections::BTreeSet;

pub(crate) use walk::{MOST_LAYERS, Misplaced, walk};

/// Everything that is written, in file order.
#[derive(Debug, Default)]
pub(crate) struct Document {
    pub sections: Vec<WrittenSection>,
    pub findings: Vec<Finding>,
    pub places: Places,
    /// Places that are there but could not be read.
    pub unreadable: BTreeSet<String>,
    pub not_looked_at: Vec<NotLookedAt>,
    pub open_values: Vec<OpenPlace>,
    /// Place of the first value that carries a tolerance.
    pub first_tolerance: Option<String>,
}

/// One section as written.
#[derive(Debug)]
pub(crate) struct WrittenSection {
    pub declaration: &'static Section,
    pub place: String,
    /// The name of `[fluid.NAME]`, the `name` of `[[layer]]`, or one made from the position.
    pub name: String,
    pub header: Span,
    pub entries: Vec<WrittenEntry>,
}

/// One key as written.
#[derive(Debug)]
pub(crate) struct WrittenEntry {
    pub key: &'static Key,
    pub place: String,
    pub span: Span,
    /// `None`: there, but unreadable.
    pub value: Option<Written>,
}

/// A value as written.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Written {
    Quantity(Quantity),
    /// Several in an array.
    Quantities(Vec<Quantity>),
    /// (temperature, value) in the order written.
    Figure(Vec<(Quantity, Quantity)>),
    Text(String),
    Texts(Vec<String>),
    Word(&'static str),
    Boolean(bool),
    Date(String),
    /// The quantities of a table within a key, by name.
    Parts(Vec<(&'static str, Quantity)>),
    /// Read for its form only: nothing is computed from it.
    Other,
}

impl Document {
    pub fn section(&self, path: &str) -> Option<&WrittenSection> {
        self.sections.iter().find(|section| section.declaration.path == path)
    }

    pub fn sections<'a>(&'a self, path: &'a str) -> impl Iterator<Item = &'a WrittenSection> {
        self.sections.iter().filter(move |section| section.declaration.path == path)
    }

    /// Whether a place, or something it stands in, is there but unreadable.
    pub fn is_lost(&self, place: &str) -> bool {
        self.unreadable.iter().any(|lost| {
            place == lost || place.strip_prefix(lost.as_str()).is_some_and(|rest| rest.starts_with('.'))
        })
    }

    /// Whether the names of all sections of a path are known: no header and no `name` of one is lost. Until then
    /// nobody says that a name is not found.
    pub fn knows_names(&self, path: &str) -> bool {
        let name_lost = |section: &WrittenSection| self.unreadable.contains(&section.place_of("name"));
        !self.unreadable.contains(path) && !self.sections(path).any(name_lost)
    }
}

impl WrittenSection {
    pub fn entry(&self, key: &str) -> Option<&WrittenEntry> {
        self.entries.iter().find(|entry| entry.key.name == key)
    }

    pub fn value(&self, key: &str) -> Option<&Written> {
        self.entry(key)?.value.as_ref()
    }

    pub fn text(&self, key: &str) -> Option<&str> {
        match self.value(key)? {
            Written::Text(text) => Some(text),
            Written::Word(word) => Some(word),
            Written::Date(date) => Some(date),
            _ => None,
        }
    }

    pub fn texts(&self, key: &str) -> Option<&[String]> {
        match self.value(key)? {
            Written::Texts(texts) => Some(texts),
            _ => None,
        }
    }

    pub fn boolean(&self, key: &str) -> Option<bool> {
        match self.value(key)? {
            Written::Boolean(value) => Some(*value),
            _ => None,
        }
    }

    pub fn quantity(&self, key: &str) -> Option<&Quantity> {
        match self.value(key)? {
            Written::Quantity(quantity) => Some(quantity),
            _ => None,
        }
    }

    /// A quantity of a table within a key.
    pub fn part(&self, key: &str, part: &str) -> Option<&Quantity> {
        match self.value(key)? {
            Written::Parts(parts) => parts.iter().find(|(name, _)| *name == part).map(|(_, q)| q),
            _ => None,
        }
    }

    /// One or several.
    pub fn quantities(&self, key: &str) -> &[Quantity] {
        match self.value(key) {
            Some(Written::Quantity(quantity)) => std::slice::from_ref(quantity),
            Some(Written::Quantities(quantities)) => quantities,
            _ => &[],
        }
    }

    /// The place of a key of this section, written or not.
    pub fn place_of(&self, key: &str) -> String {
        join(&self.place, key)
    }

    /// What a finding about a key underlines: its value, or the header.
    pub fn span_of(&self, key: &str) -> Span {
        self.entry(key).map_or_else(|| self.header.clone(), |entry| entry.span.clone())
    }
}

/// A place one step further down.
pub(crate) fn join(place: &str, key: &str) -> String {
    if place.is_empty() { key.to_owned() } else { format!("{place}.{key}") }
}

/// A name trimmed and with its spaces folded, the form in which names are compared.
pub(crate) fn folded(name: &str) -> String {
    name.split_whitespace().collect::<Vec<_>>().join(" ")
}

/// A text as a TOML basic string.
pub(crate) fn quoted(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 2);
    out.push('"');
    for character in text.chars() {
        match character {
            '"' => out.push_str("\\\""),
            '\\' => out.push_str("\\\\"),
            '\n' => out.push_str("\\n"),
            '\t' => out.push_str("\\t"),
            control if control.is_control() => out.push_str(&format!("\\u{:04X}", u32::from(control))),
            other => out.push(other),
        }
    }
    out.push('"');
    out
}

/// The line end that a file uses.
pub(crate) fn newline(text: &str) -> &'static str {
    if text.contains("\r\n") { "\r\n" } else { "\n" }
}
