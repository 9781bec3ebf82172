//! The tree of a setup file: every key and value with its byte span, whatever else in the file is broken.

use crate::finding::Span;

/// A table: the root, a `[header]`, one element of `[[header]]`, or `{ inline }`.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Table {
    /// Header with its brackets, the braces of an inline table, or `0..0` for the root and for tables that only
    /// a dotted key implies.
    pub span: Span,
    /// In file order.
    pub entries: Vec<Entry>,
}

/// A key with its value.
#[derive(Debug, Clone, PartialEq)]
pub struct Entry {
    /// Decoded key (one segment).
    pub key: String,
    /// Where the key stands (for a table made by a header: its last segment in the first such header).
    pub key_span: Span,
    /// What it holds.
    pub value: Value,
    /// The whole statement with its trailing comment and line end, for moving or deleting it.
    pub statement: Span,
}

/// A value.
#[derive(Debug, Clone, PartialEq)]
pub enum Value {
    /// A string.
    Text(Text),
    /// An integer.
    Integer(i64, Span),
    /// A float (may be inf or nan as TOML allows; refused later).
    Float(f64, Span),
    /// `true` or `false`.
    Boolean(bool, Span),
    /// A date or time, as written.
    Datetime(String, Span),
    /// `[ … ]`
    Array(Vec<Value>, Span),
    /// A table.
    Table(Table),
    /// `[[ … ]]`, in file order.
    Tables(Vec<Table>),
}

/// A string value.
#[derive(Debug, Clone, PartialEq)]
pub struct Text {
    /// Decoded.
    pub value: String,
    /// With its quotes.
    pub span: Span,
    /// Between its quotes.
    pub inner: Span,
}

impl Text {
    /// Where a byte range of the decoded value stands in the file: exact when no escape is involved, else the
    /// whole inner text.
    pub fn locate(&self, range: Span) -> Span {
        if self.inner.len() == self.value.len() {
            self.inner.start + range.start..self.inner.start + range.end
        } else {
            self.inner.clone()
        }
    }
}

impl Value {
    /// Where the value stands (for `Tables`: the first header).
    pub fn span(&self) -> Span {
        match self {
            Value::Text(text) => text.span.clone(),
            Value::Integer(_, span)
            | Value::Float(_, span)
            | Value::Boolean(_, span)
            | Value::Datetime(_, span)
            | Value::Array(_, span) => span.clone(),
            Value::Table(table) => table.span.clone(),
            Value::Tables(tables) => tables.first().map(|table| table.span.clone()).unwrap_or_default(),
        }
    }
}

impl Table {
    /// The entry of a key.
    pub fn get(&self, key: &str) -> Option<&Entry> {
        self.entries.iter().find(|entry| entry.key == key)
    }
}

/// What came of reading a text as TOML.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Reading {
    /// All that still parses.
    pub root: Table,
    /// What does not.
    pub slips: Vec<Slip>,
}

/// A statement that could not be read.
#[derive(Debug, Clone, PartialEq)]
pub struct Slip {
    /// What is wrong.
    pub kind: SlipKind,
    /// The offending bytes.
    pub span: Span,
    /// The whole statement.
    pub statement: Span,
    /// A sentence in our own words, with what stands there.
    pub message: String,
    /// Another place involved (the first of two equal keys).
    pub related: Option<Span>,
    /// Replacement of `statement` that mends it without choosing a value, where that is clear.
    pub mend: Option<(String, String)>,
    /// Path of the key whose value is lost, where it can be told: `["layer", "thickness"]`-like segments with the
    /// table it stands in; lets later stages stay silent about a value that is there but broken.
    pub lost_key: Option<Vec<String>>,
}

/// Kinds of slip.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum SlipKind {
    /// The line is no TOML statement: rule `line-unreadable`.
    Unreadable,
    /// The same key twice in one table: rule `key-given-twice`.
    GivenTwice,
    /// Keys below a header that could not be read; the table they belong to is not sure.
    TableUnknown,
}
