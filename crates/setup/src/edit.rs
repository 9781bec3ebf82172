//! Edits of a setup file, built from the places in its tree and applied byte for byte: what no edit touches stays as
//! it is. Comments, order, line ends, a byte-order mark and the way numbers are written survive.
//!
//! What cannot be done by such an edit gives `None`: a key cannot be put into an inline table, say.

use crate::finding::{Edit, Span};
use crate::tree::{Entry, Table, Value};

/// Two edits that touch the same bytes, or one that lies outside the text or inside a character.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Misfit {
    /// The edit that does not fit.
    pub edit: Edit,
}

/// The text with all edits made, in any order; edits at the same empty place are made in the order given.
///
/// # Errors
/// [`Misfit`]; nothing is changed then.
pub fn apply(text: &str, edits: &[Edit]) -> Result<String, Misfit> {
    let mut order: Vec<&Edit> = edits.iter().collect();
    order.sort_by_key(|edit| (edit.span.start, edit.span.end));
    let mut out = String::with_capacity(text.len() + 64);
    let mut done = 0;
    for edit in order {
        let kept =
            text.get(done..edit.span.start).filter(|_| text.is_char_boundary(edit.span.end.min(text.len())));
        let (Some(kept), true) = (kept, edit.span.start <= edit.span.end && edit.span.end <= text.len())
        else {
            return Err(Misfit { edit: edit.clone() });
        };
        out += kept;
        out += &edit.new_text;
        done = edit.span.end;
    }
    out += &text[done..];
    Ok(out)
}

/// A table that lines can be put into.
#[derive(Debug, Clone, Copy)]
pub enum Home<'t> {
    /// The keys above the first header; the root of the tree.
    Top(&'t Table),
    /// A table with a header of its own.
    Section(&'t Table),
}

/// Puts another value in the place of an entry's; none for a table that has no braces.
pub fn replace_value(entry: &Entry, value: &str) -> Option<Edit> {
    let span = match &entry.value {
        Value::Tables(_) => return None,
        // A header holds its key, and a table made by dotted keys has no place.
        Value::Table(table) if table.span.start < entry.key_span.end => return None,
        other => other.span(),
    };
    Some(Edit { span, new_text: value.to_owned() })
}

/// Gives an entry another name; quoted where it has to be.
pub fn rename_key(entry: &Entry, name: &str) -> Edit {
    Edit { span: entry.key_span.clone(), new_text: written_key(name) }
}

/// A key as it is written: in quotes unless it is made of letters A to Z, digits, `-` and `_`.
pub fn written_key(name: &str) -> String {
    let bare = |c: char| c.is_ascii_alphanumeric() || c == '-' || c == '_';
    if !name.is_empty() && name.chars().all(bare) { name.to_owned() } else { crate::written::quoted(name) }
}

/// Puts the line `key = value` (without line end) behind the last statement of a table.
pub fn insert_line(text: &str, home: Home, line: &str) -> Option<Edit> {
    let end = newline(text);
    let (at, indent) = match home {
        Home::Section(table) => {
            let header = header_line(text, table)?;
            let last = last_statement(text, table).unwrap_or(header);
            (last.end, indentation(text, last.start))
        }
        Home::Top(table) => match last_statement(text, table) {
            Some(statement) => (statement.end, indentation(text, statement.start)),
            None => {
                let at = below_opening_comment(text);
                // The first header keeps its distance.
                let gap = if text[at..].trim().is_empty() { "" } else { end };
                return Some(Edit { span: at..at, new_text: format!("{line}{end}{gap}") });
            }
        },
    };
    let broken = if text[..at].ends_with(['\n', '\r']) { "" } else { end };
    Some(Edit { span: at..at, new_text: format!("{broken}{indent}{line}{end}") })
}

/// Puts a section behind another, or at the end of the file: a blank line, the header with its brackets, its lines.
pub fn insert_section(text: &str, after: Option<&Table>, header: &str, lines: &[&str]) -> Option<Edit> {
    let end = newline(text);
    let at = match after {
        None => text.trim_end_matches([' ', '\t', '\r', '\n']).len().max(start(text)),
        Some(table) => {
            let header = header_line(text, table)?;
            last_statement(text, table).unwrap_or(header).end
        }
    };
    // At the end of the file what blank space is left there stays behind the new section.
    let (at, lead) = match text[at..].starts_with("\r\n") {
        _ if text[..at].ends_with(['\n', '\r']) => (at, end.to_owned()),
        true => (at + 2, end.to_owned()),
        false if text[at..].starts_with('\n') => (at + 1, end.to_owned()),
        false if at <= start(text) => (at, String::new()),
        false => (at, end.repeat(2)),
    };
    let body: String = std::iter::once(&header).chain(lines).map(|line| format!("{line}{end}")).collect();
    Some(Edit { span: at..at, new_text: lead + &body })
}

/// Takes a whole statement away, with its comment and line end; none for a header and for a key in an inline table.
pub fn delete_statement(text: &str, entry: &Entry) -> Option<Edit> {
    let before = text.get(entry.statement.start..entry.key_span.start)?;
    if before.contains('=') || is_header(text, &entry.statement) {
        return None;
    }
    Some(Edit { span: entry.statement.clone(), new_text: String::new() })
}

/// Moves a statement with its comment to the end of another table; none for a header, a dotted key and a key in an
/// inline table. The edits ascend.
pub fn move_statement(text: &str, entry: &Entry, to: Home) -> Option<Vec<Edit>> {
    let delete = delete_statement(text, entry)?;
    if !text.get(entry.statement.start..entry.key_span.start)?.trim().is_empty() {
        return None;
    }
    let line = text.get(entry.statement.clone())?.trim_matches([' ', '\t', '\r', '\n']);
    let mut edits = vec![insert_line(text, to, line)?, delete];
    edits.sort_by_key(|edit| (edit.span.start, edit.span.end));
    Some(edits)
}

/// The line end that a file uses.
fn newline(text: &str) -> &'static str {
    if text.contains("\r\n") { "\r\n" } else { "\n" }
}

/// Behind a byte-order mark.
fn start(text: &str) -> usize {
    if text.starts_with('\u{feff}') { '\u{feff}'.len_utf8() } else { 0 }
}

fn indentation(text: &str, line_start: usize) -> &str {
    let line = &text[line_start..];
    &line[..line.len() - line.trim_start_matches([' ', '\t']).len()]
}

fn is_header(text: &str, statement: &Span) -> bool {
    text.get(statement.clone()).is_some_and(|statement| statement.trim_start().starts_with('['))
}

/// The last statement that belongs to a table itself or to a dotted key in it, not to a header below.
fn last_statement(text: &str, table: &Table) -> Option<Span> {
    let own = table.entries.iter().filter(|entry| !is_header(text, &entry.statement));
    let ends = own.flat_map(|entry| {
        let inner = match &entry.value {
            Value::Table(inner) if inner.span.is_empty() => last_statement(text, inner),
            _ => None,
        };
        [Some(entry.statement.clone()), inner]
    });
    ends.flatten().max_by_key(|statement| statement.end)
}

/// The line of a table's header.
fn header_line(text: &str, table: &Table) -> Option<Span> {
    if !text.get(table.span.clone())?.starts_with('[') {
        return None;
    }
    let start = text[..table.span.start].rfind(['\n', '\r']).map_or(start(text), |at| at + 1);
    let end = text[table.span.end..].find('\n').map_or(text.len(), |at| table.span.end + at + 1);
    Some(start..end)
}

/// Below the comment that opens a file, when a blank line parts it from the rest; else the start.
fn below_opening_comment(text: &str) -> usize {
    let start = start(text);
    let mut at = start;
    for line in text[start..].split_inclusive('\n') {
        match line.trim() {
            "" => return at + line.len(),
            comment if comment.starts_with('#') => at += line.len(),
            _ => break,
        }
    }
    start
}

#[cfg(test)]
mod tests {
    use super::*;

    fn edit(span: std::ops::Range<usize>, new_text: &str) -> Edit {
        Edit { span, new_text: new_text.to_owned() }
    }

    #[test]
    fn edits_are_made_in_any_order_and_the_rest_stays() {
        let text = "\u{feff}a = 1 # x\r\nb = 2.50e-6\r\n";
        let two = text.find("2.50").unwrap();
        let made = apply(text, &[edit(two..two + 7, "3"), edit(3..4, "aa")]).unwrap();
        assert_eq!(made, "\u{feff}aa = 1 # x\r\nb = 3\r\n");
    }

    #[test]
    fn overlaps_and_places_outside_are_refused() {
        assert!(apply("abc", &[edit(0..2, ""), edit(1..3, "")]).is_err());
        assert!(apply("abc", &[edit(2..9, "")]).is_err());
        assert!(apply("é", &[edit(1..2, "")]).is_err());
        assert_eq!(apply("abc", &[edit(1..1, "x"), edit(1..1, "y")]).unwrap(), "axybc");
    }

    const TEXT: &str = "\u{feff}# Bench 2\r\n\r\ntitle = \"x\" # the title\r\na.b = 1_000\r\n\r\n[cell]\r\n  \
        length = 2.50e-6\t# as drawn\r\n  wall = { e = 1, f = 2 }\r\n\r\n# the drive\r\n[drive]\r\n[cell.base]\r\nz = 0x1F";

    fn table<'t>(root: &'t Table, key: &str) -> &'t Table {
        match &root.get(key).expect(key).value {
            Value::Table(table) => table,
            other => panic!("{other:?}"),
        }
    }

    fn made(edits: &[Edit]) -> String {
        apply(TEXT, edits).unwrap()
    }

    /// What is expected is `TEXT` with one piece replaced, so that every other byte is held.
    fn with(old: &str, new: &str) -> String {
        assert_eq!(TEXT.matches(old).count(), 1, "{old}");
        TEXT.replace(old, new)
    }

    #[test]
    fn values_and_keys_are_replaced_in_their_places() {
        let root = crate::read(TEXT).root;
        let cell = table(&root, "cell");
        let length = cell.get("length").unwrap();
        assert_eq!(made(&[replace_value(length, "\"2 mm\"").unwrap()]), with("2.50e-6", "\"2 mm\""));
        assert_eq!(made(&[rename_key(length, "own länge")]), with("length", "\"own länge\""));
        let wall = cell.get("wall").unwrap();
        assert_eq!(made(&[replace_value(wall, "3").unwrap()]), with("{ e = 1, f = 2 }", "3"));
        assert_eq!(replace_value(root.get("cell").unwrap(), "3"), None, "a header is no value");
        assert_eq!(replace_value(root.get("a").unwrap(), "3"), None, "nor is a dotted key");
    }

    #[test]
    fn lines_go_behind_the_last_statement_with_its_indentation() {
        let root = crate::read(TEXT).root;
        let insert = |home| made(&[insert_line(TEXT, home, "n = 1").unwrap()]);
        let cell = table(&root, "cell");
        assert_eq!(insert(Home::Top(&root)), with("1_000\r\n", "1_000\r\nn = 1\r\n"));
        assert_eq!(insert(Home::Section(cell)), with("f = 2 }\r\n", "f = 2 }\r\n  n = 1\r\n"));
        assert_eq!(insert(Home::Section(table(&root, "drive"))), with("[drive]\r\n", "[drive]\r\nn = 1\r\n"));
        assert_eq!(insert(Home::Section(table(cell, "base"))), with("0x1F", "0x1F\r\nn = 1\r\n"));
        assert_eq!(insert_line(TEXT, Home::Section(table(cell, "wall")), "n = 1"), None);
        let bare = "\u{feff}[a]\nb = 1\n";
        let edit = insert_line(bare, Home::Top(&crate::read(bare).root), "n = 1").unwrap();
        assert_eq!(apply(bare, &[edit]).unwrap(), "\u{feff}n = 1\n\n[a]\nb = 1\n");
    }

    #[test]
    fn statements_go_and_move_whole() {
        let root = crate::read(TEXT).root;
        let cell = table(&root, "cell");
        let length = cell.get("length").unwrap();
        let line = "  length = 2.50e-6\t# as drawn\r\n";
        assert_eq!(made(&[delete_statement(TEXT, length).unwrap()]), with(line, ""));
        let moved = made(&move_statement(TEXT, length, Home::Section(table(&root, "drive"))).unwrap());
        assert_eq!(
            moved,
            with(line, "").replace("[drive]\r\n", &format!("[drive]\r\n{}", line.trim_start())),
            "with its comment"
        );
        assert!(table(&crate::read(&moved).root, "drive").get("length").is_some());
        let inner = table(cell, "wall").get("e").unwrap();
        assert_eq!(delete_statement(TEXT, inner), None, "a key in braces is not a statement");
        assert_eq!(delete_statement(TEXT, root.get("cell").unwrap()), None, "nor is a header");
        let dotted = table(&root, "a").get("b").unwrap();
        assert!(delete_statement(TEXT, dotted).is_some());
        assert_eq!(move_statement(TEXT, dotted, Home::Section(cell)), None);
    }

    #[test]
    fn sections_go_behind_another_or_to_the_end() {
        let root = crate::read(TEXT).root;
        let cell = table(&root, "cell");
        let section = |after| made(&[insert_section(TEXT, after, "[limits]", &["a = 1"]).unwrap()]);
        assert_eq!(section(None), with("0x1F", "0x1F\r\n\r\n[limits]\r\na = 1\r\n"));
        assert_eq!(section(Some(cell)), with("f = 2 }\r\n", "f = 2 }\r\n\r\n[limits]\r\na = 1\r\n"));
        for (text, expected) in [
            ("", "[b]\n"),
            ("a = 1", "a = 1\n\n[b]\n"),
            ("a = 1\n", "a = 1\n\n[b]\n"),
            ("a = 1\n\n", "a = 1\n\n[b]\n\n"),
            ("\u{feff}", "\u{feff}[b]\n"),
        ] {
            let edit = insert_section(text, None, "[b]", &[]).unwrap();
            assert_eq!(apply(text, &[edit]).unwrap(), expected, "{text:?}");
        }
    }
}
