//! What a statement that cannot be read was meant to be, in words.

use super::mend::{self, Mended};
use super::merge::{Clash, Holds};
use super::parse::{Segment, is_statement, key_names};
use super::statements::Statement;
use crate::finding::Span;
use crate::tree::{Slip, SlipKind};
use std::collections::HashSet;

/// A longer statement is not rewritten: no line of a setup is as long.
const LONGEST_MEND: usize = 2000;

/// What is known of a broken statement.
pub(super) struct Explained {
    pub span: Span,
    pub message: String,
    /// The key, when it can be told.
    pub key: Option<Vec<String>>,
    /// It is a header; inside, its name and whether it is one of many, when they can be told.
    pub header: Option<Option<(Vec<Segment>, bool)>>,
    /// Title and the whole statement anew.
    pub mend: Option<(String, String)>,
}

/// Explains a statement that the parser refused with `word`.
pub(super) fn broken(
    text: &str,
    statement: &Statement,
    word: &str,
    mends: bool,
    repeated: &HashSet<Vec<String>>,
) -> Explained {
    let body = &text[statement.body.clone()];
    let short = mends && body.len() <= LONGEST_MEND && !statement.too_deep;
    let before = &text[statement.whole.start..statement.body.start];
    let after = &text[statement.body.end..statement.whole.end];
    let Mended { at, mut fault, key, header, body: mut mended, mut title } =
        if short { mend::look(body, statement.body.start, repeated) } else { mend::glance(body) };
    if fault.is_none() && after.contains(is_control) {
        fault = Some("a control character that no editor shows stands in the comment".to_owned());
        title = "Take the control character away".to_owned();
        mended = Some(body.to_owned());
    }
    let at = at.filter(|at| body.get(at.clone()).is_some_and(|part| !part.is_empty()));
    let at = at.unwrap_or(0..body.len());
    let message = format!("`{}`: {}", shown(body), fault.as_deref().unwrap_or(word));
    let mend = mended.filter(|mended| reads(mended) && !has_lone_return(&text[statement.whole.clone()])).map(
        |mended| {
            // A line that is taken away goes with its line end, unless a comment follows.
            if mended.is_empty() && after.trim().is_empty() {
                (title, String::new())
            } else {
                // A line end that the mend puts in is that of the file; those of a longer statement stay as they are.
                let mended = if body.contains('\n') { mended } else { mended.replace('\n', newline(text)) };
                (title, format!("{before}{mended}{}", after.replace(is_control, "")))
            }
        },
    );
    Explained {
        span: statement.body.start + at.start..statement.body.start + at.end,
        message,
        key,
        header,
        mend,
    }
}

/// One slip for all that are not told one by one.
pub(super) fn further(first: &Slip, last: &Slip, count: usize) -> Slip {
    Slip {
        kind: SlipKind::Unreadable,
        span: first.span.clone(),
        statement: first.statement.start..last.statement.end.max(first.statement.end),
        message: format!("{count} more statements from here on cannot be read"),
        related: None,
        mend: None,
        lost_key: None,
    }
}

/// Whether a rewriting is read without a slip: a statement, several, a comment, or nothing.
fn reads(mended: &str) -> bool {
    let line = |line: &str| line.is_empty() || line.starts_with('#') || is_statement(line);
    is_statement(mended) || mended.split('\n').map(|line| line.trim_matches([' ', '\t', '\r'])).all(line)
}

/// A carriage return that ends no line as TOML has it.
fn has_lone_return(text: &str) -> bool {
    text.replace("\r\n", "").contains('\r')
}

fn is_control(c: char) -> bool {
    c.is_ascii_control() && !matches!(c, '\t' | '\r' | '\n')
}

/// The line end that a file uses.
pub(super) fn newline(text: &str) -> &'static str {
    if text.contains("\r\n") { "\r\n" } else { "\n" }
}

/// A key that its table holds already, or that a value stands in the way of.
pub(super) fn pair_clash(
    text: &str,
    statement: &Statement,
    path: &[Segment],
    here: &Span,
    clash: &Clash,
    lost_key: Option<Vec<String>>,
) -> Slip {
    let full = dotted(path);
    let reached = dotted(&path[..clash.parts.min(path.len())]);
    let whole_path = clash.parts == path.len();
    let mut mend = None;
    let message = match &clash.holds {
        Holds::Value(first) if whole_path => {
            let (first, second) = (&text[first.clone()], &text[here.clone()]);
            if first == second {
                mend = Some(("Take the repeated line away".to_owned(), String::new()));
                format!("`{full}` is given twice, both times as `{}`", shown(first))
            } else {
                format!("`{full}` is given twice: `{}` first, `{}` here", shown(first), shown(second))
            }
        }
        Holds::Value(first) => {
            format!(
                "`{full}` needs `{reached}` to be a table, but above it is `{}`",
                shown(&text[first.clone()])
            )
        }
        Holds::Table if whole_path => format!("`{full}` is a value here, but above it is a table of keys"),
        Holds::Table => format!("`{full}` adds to `[{reached}]`, which has a header of its own"),
        Holds::Tables(_) => format!("`{full}` clashes with `[[{reached}]]` above"),
    };
    Slip {
        kind: SlipKind::GivenTwice,
        span: span_of(path),
        statement: statement.whole.clone(),
        message,
        related: Some(clash.first.clone()),
        mend,
        lost_key,
    }
}

/// A header whose name is taken.
pub(super) fn header_clash(
    text: &str,
    statement: &Statement,
    path: &[Segment],
    repeated: bool,
    clash: &Clash,
    lost_key: Vec<String>,
) -> Slip {
    let full = dotted(path);
    let reached = dotted(&path[..clash.parts.min(path.len())]);
    let (open, close) = if repeated { ("[[", "]]") } else { ("[", "]") };
    let mut mend = None;
    let message = match &clash.holds {
        Holds::Value(first) => {
            format!(
                "`{open}{full}{close}` needs `{reached}` to be a table, but above it is `{}`",
                shown(&text[first.clone()])
            )
        }
        Holds::Tables(count) => {
            if *count > 1 {
                let body = &text[statement.body.clone()];
                let line = text[statement.whole.clone()].replacen(body, &format!("[{body}]"), 1);
                mend = Some((format!("Write `[[{full}]]`"), line));
            }
            format!("`[{full}]` stands in single brackets, above it is `[[{full}]]`, one of several")
        }
        Holds::Table if repeated => {
            format!("`[[{full}]]` is one of several, but above it is `[{full}]` in single brackets")
        }
        Holds::Table => format!("`[{full}]` is given twice"),
    };
    Slip {
        kind: SlipKind::GivenTwice,
        span: span_of(path),
        statement: statement.whole.clone(),
        message,
        related: Some(clash.first.clone()),
        mend,
        lost_key: Some(lost_key),
    }
}

/// The keys below a header that could not be read.
pub(super) fn homeless(first: &Statement, last: &Statement, count: usize) -> Slip {
    let keys =
        if count == 1 { "the key here stands".to_owned() } else { format!("the {count} keys here stand") };
    Slip {
        kind: SlipKind::TableUnknown,
        span: first.body.start..last.body.end,
        statement: first.whole.start..last.whole.end,
        message: format!("{keys} below a header that cannot be used, so it is open what is meant"),
        related: None,
        mend: None,
        lost_key: None,
    }
}

/// A piece of the file for a message: one line, not too long.
pub(super) fn shown(text: &str) -> String {
    const LONGEST: usize = 60;
    let line = text.trim().lines().next().unwrap_or_default().trim_end();
    let short: String = line.chars().take(LONGEST).collect();
    if short.len() < text.trim().len() { format!("{short}…") } else { short }
}

fn dotted(path: &[Segment]) -> String {
    let quoted = |segment: &Segment| {
        let bare = key_names(&segment.name).is_some_and(|names| names == [segment.name.clone()]);
        if bare { segment.name.clone() } else { format!("{:?}", segment.name) }
    };
    path.iter().map(quoted).collect::<Vec<_>>().join(".")
}

fn span_of(path: &[Segment]) -> Span {
    let start = path.first().map(|segment| segment.span.start).unwrap_or_default();
    start..path.last().map(|segment| segment.span.end).unwrap_or_default().max(start)
}
