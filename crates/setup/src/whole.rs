//! The tree of a text that is sound TOML. Of a broken text it takes out one broken line after the other, which keeps
//! the offsets of all others; what a line lost is told by the header above it.
//!
//! Stands in until the reader with recovery inside a line is there: same types, coarser slips.

use crate::finding::Span;
use crate::tree::{Entry, Reading, Slip, SlipKind, Table, Text, Value};
use toml_edit::{Document, Item, TableLike};

/// More broken lines than this are not looked for.
const MOST_SLIPS: usize = 100;

/// Reads a text.
pub fn read(text: &str) -> Reading {
    let mut sound = text.to_owned();
    let mut slips = Vec::new();
    while slips.len() < MOST_SLIPS {
        let error = match Document::parse(sound.clone()) {
            Ok(document) => return Reading { root: table(document.as_table(), &sound, 0..0), slips },
            Err(error) => error,
        };
        let Some(line) = broken_line(&sound, error.span().map_or(0, |span| span.start)) else { break };
        let twice = error.message().contains("duplicate");
        slips.push(slip(&sound, line.clone(), twice));
        let line = line.start..reach(&sound, &line);
        let blank: String =
            sound[line.clone()].bytes().map(|byte| if byte == b'\n' { '\n' } else { ' ' }).collect();
        sound.replace_range(line, &blank);
    }
    Reading { root: Table::default(), slips }
}

/// The line at an offset or, when that is blank, the last one above that is not.
fn broken_line(text: &str, offset: usize) -> Option<Span> {
    let mut start = 0;
    let mut found = None;
    for line in text.split_inclusive('\n') {
        if start > offset && found.is_some() {
            break;
        }
        if !line.trim().is_empty() {
            found = Some(start..start + line.len());
        }
        start += line.len();
    }
    found
}

/// Where a broken line ends; a broken header takes along the keys below it, whose table is not known.
fn reach(text: &str, line: &Span) -> usize {
    if !text[line.clone()].trim_start().starts_with('[') {
        return line.end;
    }
    let mut end = line.end;
    for below in
        text[line.end..].split_inclusive('\n').take_while(|below| !below.trim_start().starts_with('['))
    {
        end += below.len();
    }
    end
}

fn slip(text: &str, line: Span, twice: bool) -> Slip {
    let written = text.get(line.clone()).unwrap_or_default();
    let start = line.start + (written.len() - written.trim_start().len());
    let span = start..start + written.trim().len();
    let key = written.split('=').next().unwrap_or_default().trim();
    let plain =
        |key: &str| !key.is_empty() && key.chars().all(|c| c.is_ascii_alphanumeric() || c == '-' || c == '_');
    let header = text
        .get(..line.start)
        .unwrap_or_default()
        .lines()
        .rev()
        .map(str::trim)
        .find(|line| line.starts_with('['));
    let mut path: Vec<String> = header
        .map(|header| {
            header.trim_matches(['[', ']']).split('.').map(|part| part.trim_matches('"').to_owned()).collect()
        })
        .unwrap_or_default();
    path.push(key.to_owned());
    let message = if twice {
        format!("'{}' gives a key a second time", written.trim())
    } else {
        format!("'{}' cannot be read", written.trim())
    };
    Slip {
        kind: match (twice, written.trim_start().starts_with('[')) {
            (true, _) => SlipKind::GivenTwice,
            (false, true) => SlipKind::TableUnknown,
            (false, false) => SlipKind::Unreadable,
        },
        span,
        statement: line.clone(),
        message,
        related: None,
        mend: None,
        lost_key: plain(key).then_some(path),
    }
}

fn table(table: &dyn TableLike, text: &str, span: Span) -> Table {
    let mut entries = Vec::new();
    for (name, item) in table.iter() {
        let key_span = table.key(name).and_then(|key| key.span()).unwrap_or_default();
        let header =
            |span: Option<Span>| span.filter(|span| text[span.clone()].starts_with('[')).unwrap_or_default();
        let value = match item {
            Item::Value(value) => inline(value, text),
            Item::Table(inner) => Value::Table(self::table(inner, text, header(inner.span()))),
            Item::ArrayOfTables(inner) => Value::Tables(
                inner.iter().map(|inner| self::table(inner, text, header(inner.span()))).collect(),
            ),
            Item::None => continue,
        };
        let statement = statement(text, &key_span, &value.span());
        entries.push(Entry { key: name.to_owned(), key_span, value, statement });
    }
    Table { span, entries }
}

fn statement(text: &str, key: &Span, value: &Span) -> Span {
    let start = text[..key.start].rfind('\n').map_or(0, |at| at + 1);
    let end = value.end.max(key.end);
    start..text[end..].find('\n').map_or(text.len(), |at| end + at + 1)
}

fn inline(value: &toml_edit::Value, text: &str) -> Value {
    let span = value.span().unwrap_or_default();
    match value {
        toml_edit::Value::String(string) => {
            let source = &text[span.clone()];
            let quote = if source.len() >= 6 && (source.starts_with("\"\"\"") || source.starts_with("'''")) {
                3
            } else {
                1
            };
            Value::Text(Text {
                value: string.value().clone(),
                inner: if source.len() >= 2 * quote {
                    span.start + quote..span.end - quote
                } else {
                    span.clone()
                },
                span,
            })
        }
        toml_edit::Value::Integer(number) => Value::Integer(*number.value(), span),
        toml_edit::Value::Float(number) => Value::Float(*number.value(), span),
        toml_edit::Value::Boolean(flag) => Value::Boolean(*flag.value(), span),
        toml_edit::Value::Datetime(date) => Value::Datetime(date.value().to_string(), span),
        toml_edit::Value::Array(items) => {
            Value::Array(items.iter().map(|item| inline(item, text)).collect(), span)
        }
        toml_edit::Value::InlineTable(inner) => Value::Table(table(inner, text, span)),
    }
}
