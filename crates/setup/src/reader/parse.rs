//! One statement that stands alone, through `toml_edit`, to keys and values with their places in the whole file.

use crate::finding::Span;
use crate::tree::{Entry, Table, Text, Value};
use toml_edit::{Document, Item, TableLike};

/// A statement that could be read.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Parsed {
    /// `[path]` or `[[path]]`
    Header {
        path: Vec<Segment>,
        /// With its brackets.
        span: Span,
        repeated: bool,
    },
    /// `path = value`
    Pair { path: Vec<Segment>, value: Value },
}

/// One part of a dotted key.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Segment {
    pub name: String,
    pub span: Span,
}

/// Reads the statement `body`, which starts at `base` in the file and is all but the comment of the statement at
/// `whole`. The error is the parser's own short word.
pub(super) fn parse(body: &str, base: usize, whole: &Span) -> Result<Parsed, String> {
    if body.starts_with('\u{feff}') {
        return Err("a byte-order mark inside the file".to_owned());
    }
    let document = Document::parse(body).map_err(|error| error.message().to_owned())?;
    let source = Source { body, base, whole };
    let mut path = Vec::new();
    let mut table: &dyn TableLike = document.as_table();
    loop {
        let mut entries = table.iter();
        let (Some((key, item)), None) = (entries.next(), entries.next()) else {
            return Err("not one statement".to_owned());
        };
        let span = table.get_key_value(key).and_then(|(key, _)| key.span());
        path.push(Segment { name: key.to_owned(), span: source.span(span) });
        match item {
            Item::Value(value) => return Ok(Parsed::Pair { path, value: source.value(value) }),
            Item::Table(inner) if inner.is_implicit() => table = inner,
            Item::Table(inner) if !inner.is_empty() => return Err("not one statement".to_owned()),
            Item::Table(inner) => {
                return Ok(Parsed::Header { path, span: source.span(inner.span()), repeated: false });
            }
            Item::ArrayOfTables(inner) => {
                let span = inner.get(0).and_then(|element| element.span());
                return Ok(Parsed::Header { path, span: source.span(span), repeated: true });
            }
            Item::None => return Err("no value".to_owned()),
        }
    }
}

/// Whether a text is one whole statement.
pub(super) fn is_statement(text: &str) -> bool {
    parse(text, 0, &(0..0)).is_ok()
}

/// Whether a text is one whole value.
pub(super) fn is_value(text: &str) -> bool {
    // A line end would let a second statement follow.
    matches!(parse(&format!("x = {text}"), 0, &(0..0)), Ok(Parsed::Pair { path, .. }) if path.len() == 1)
}

/// The names of a dotted key.
pub(super) fn key_names(text: &str) -> Option<Vec<String>> {
    let keys = toml_edit::Key::parse(text).ok()?;
    Some(keys.iter().map(|key| key.get().to_owned()).collect())
}

struct Source<'a> {
    body: &'a str,
    base: usize,
    whole: &'a Span,
}

impl Source<'_> {
    fn span(&self, span: Option<Span>) -> Span {
        let span = span.unwrap_or_default();
        self.base + span.start..self.base + span.end
    }

    fn value(&self, value: &toml_edit::Value) -> Value {
        let here = value.span().unwrap_or_default();
        let span = self.span(Some(here.clone()));
        match value {
            toml_edit::Value::String(text) => Value::Text(self.text(text.value(), here)),
            toml_edit::Value::Integer(number) => Value::Integer(*number.value(), span),
            toml_edit::Value::Float(number) => Value::Float(*number.value(), span),
            toml_edit::Value::Boolean(truth) => Value::Boolean(*truth.value(), span),
            toml_edit::Value::Datetime(_) => {
                Value::Datetime(self.body.get(here).unwrap_or_default().to_owned(), span)
            }
            toml_edit::Value::Array(items) => {
                Value::Array(items.iter().map(|item| self.value(item)).collect(), span)
            }
            toml_edit::Value::InlineTable(table) => Value::Table(self.table(table)),
        }
    }

    fn table(&self, table: &toml_edit::InlineTable) -> Table {
        let span = if table.is_dotted() { 0..0 } else { self.span(table.span()) };
        let entries = table.iter().filter_map(|(name, value)| {
            let key_span = self.span(table.get_key_value(name)?.0.span());
            let value = self.value(value);
            Some(Entry { key: name.to_owned(), key_span, value, statement: self.whole.clone() })
        });
        Table { span, entries: entries.collect() }
    }

    fn text(&self, decoded: &str, here: Span) -> Text {
        let raw = self.body.get(here.clone()).unwrap_or_default();
        let long = raw.len() >= 6 && (raw.starts_with("\"\"\"") || raw.starts_with("'''"));
        let quotes = if long { 3 } else { 1 };
        // A line end right after three quotes is no part of the value.
        let newline = match raw.get(quotes..) {
            Some(rest) if long && rest.starts_with("\r\n") => 2,
            Some(rest) if long && rest.starts_with('\n') => 1,
            _ => 0,
        };
        let end = here.end.saturating_sub(quotes).max(here.start);
        let start = (here.start + quotes + newline).min(end);
        Text { value: decoded.to_owned(), span: self.span(Some(here)), inner: self.span(Some(start..end)) }
    }
}
