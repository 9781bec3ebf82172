//! Cutting a text into statements, so that a broken one takes no other down with it.
//!
//! A statement ends at the first line end outside all brackets. A bracket or brace that nobody closes would reach to
//! the end of the file, so it is cut where a later line can only be a new statement; a multi-line string may hold
//! such lines rightfully and is cut only when the statement cannot be read ([`Statements::cut_short`]).

use crate::finding::Span;
use toml_parser::Source;
use toml_parser::lexer::TokenKind;

/// One statement.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Statement {
    /// From the start of its line to past its line end.
    pub whole: Span,
    /// Without indentation, trailing comment and line end.
    pub body: Span,
    /// Brackets nest, or the parts of a dotted key follow one another, beyond what is read.
    pub too_deep: bool,
}

/// Brackets in brackets: more than this is refused, no setup needs it and every walk over the tree is recursive.
const DEEPEST: usize = 32;
/// Parts of a dotted key.
const MOST_PARTS: usize = 16;
/// How often a byte may be looked at again after a cut before the rest is read line by line.
const LOOKS: usize = 8;

/// The statements of a text, in order; blank lines and lines that hold only a comment are passed over.
pub(super) struct Statements<'a> {
    text: &'a str,
    at: usize,
    budget: usize,
    /// Start and end of the stretch in which lone carriage returns stand, if there are any.
    pub lone_returns: Option<Span>,
}

impl<'a> Statements<'a> {
    pub fn new(text: &'a str) -> Statements<'a> {
        let at = if text.starts_with('\u{feff}') { '\u{feff}'.len_utf8() } else { 0 };
        Statements {
            text,
            at,
            budget: text.len().saturating_mul(LOOKS).saturating_add(4096),
            lone_returns: None,
        }
    }

    /// The part of a statement before the first later line that looks like a statement of its own; the reading goes
    /// on at that line.
    pub fn cut_short(&mut self, statement: &Statement) -> Option<Statement> {
        let mut at = line_end(self.text, statement.body.start);
        while at < statement.body.end {
            if starts_statement(line(self.text, at)) {
                self.at = at;
                let body = statement.body.start..blank_free(self.text, at);
                return Some(Statement { whole: statement.whole.start..at, body, ..*statement });
            }
            at = line_end(self.text, at);
        }
        None
    }

    /// How far the next look reaches: to the end, or, in a text that was cut again and again, to the line end.
    fn limit(&self) -> usize {
        if self.budget > 0 { self.text.len() } else { line_end(self.text, self.at) }
    }

    fn note_line_end(&mut self, span: Span) {
        if self.text[span.clone()].starts_with('\r') && span.len() == 1 {
            // After a cut the same stretch is looked at again.
            let known = self.lone_returns.take().unwrap_or(span.clone());
            self.lone_returns = Some(known.start.min(span.start)..known.end.max(span.end));
        }
    }
}

impl Iterator for Statements<'_> {
    type Item = Statement;

    fn next(&mut self) -> Option<Statement> {
        while self.at < self.text.len() {
            let statement = self.scan();
            if statement.is_some() {
                return statement;
            }
        }
        None
    }
}

impl Statements<'_> {
    /// The next statement as far as the limit reaches; none when there are but blank lines and comments.
    fn scan(&mut self) -> Option<Statement> {
        let offset = self.at;
        let mut line_start = offset;
        let mut seen = offset;
        let mut scan = Scan::default();
        let window = &self.text[offset..self.limit()];
        if window.starts_with('\u{feff}') {
            // Inside the file a byte-order mark is no blank space, which the lexer takes it for.
            scan.take(TokenKind::Atom, offset..offset + '\u{feff}'.len_utf8());
        }
        for token in Source::new(window).lex() {
            let span = offset + token.span().start()..offset + token.span().end();
            let kind = token.kind();
            seen = span.end;
            if kind == TokenKind::Newline {
                self.note_line_end(span.clone());
                if scan.start.is_none() {
                    line_start = span.end;
                    continue;
                }
                if scan.is_closed() || scan.gives_up_before(line(self.text, span.end)) {
                    break;
                }
            } else {
                scan.take(kind, span);
            }
        }
        self.budget = self.budget.saturating_sub(seen - offset);
        let Some(start) = scan.start else {
            self.at = offset + window.len();
            return None;
        };
        // Quotes that nobody closes take the line ends along.
        let body = start..blank_free(self.text, scan.end);
        let end = line_end(self.text, body.end);
        self.at = end;
        Some(Statement { whole: line_start..end, body, too_deep: scan.too_deep })
    }
}

/// What is known of the statement that is being scanned.
#[derive(Default)]
struct Scan {
    start: Option<usize>,
    end: usize,
    header: bool,
    past_equals: bool,
    /// Open brackets; `true`: a brace.
    open: Vec<bool>,
    /// How many of them are braces.
    braces: usize,
    dots: usize,
    too_deep: bool,
    /// The last token calls for more: an opening bracket or a comma.
    wants_more: bool,
}

impl Scan {
    fn take(&mut self, kind: TokenKind, span: Span) {
        use TokenKind::{
            Comma, Comment, Dot, Eof, Equals, LeftCurlyBracket, LeftSquareBracket, RightCurlyBracket,
            RightSquareBracket, Whitespace,
        };
        if matches!(kind, Whitespace | Comment | Eof) {
            return;
        }
        if self.start.is_none() {
            self.start = Some(span.start);
            self.header = kind == LeftSquareBracket;
        }
        self.end = span.end;
        match kind {
            Dot => self.dots += 1,
            Equals | Comma | LeftSquareBracket | LeftCurlyBracket => self.dots = 0,
            _ => {}
        }
        match kind {
            Equals => self.past_equals = true,
            LeftSquareBracket | LeftCurlyBracket if self.past_equals => {
                self.open.push(kind == LeftCurlyBracket);
                self.braces += usize::from(kind == LeftCurlyBracket);
            }
            RightSquareBracket | RightCurlyBracket => {
                self.braces -= usize::from(self.open.pop() == Some(true));
            }
            _ => {}
        }
        self.wants_more = matches!(kind, Comma | LeftSquareBracket | LeftCurlyBracket);
        self.too_deep |= self.open.len() > DEEPEST || self.dots >= MOST_PARTS;
    }

    /// A line end ends the statement.
    fn is_closed(&self) -> bool {
        self.header || self.open.is_empty()
    }

    /// The next line can only be a statement of its own, so the open bracket will not be closed. In an array no line
    /// starts with `key =`, indented or not; in an inline table one may where a comma calls for it.
    fn gives_up_before(&self, next: &str) -> bool {
        starts_statement(next)
            || ((self.braces == 0 || !self.wants_more)
                && starts_statement(next.trim_start_matches([' ', '\t'])))
    }
}

/// The end of a text without the blank space there; only what TOML counts as blank.
fn blank_free(text: &str, end: usize) -> usize {
    text[..end].trim_end_matches([' ', '\t', '\r', '\n']).len()
}

/// Past the line end of the line that `at` stands in.
fn line_end(text: &str, at: usize) -> usize {
    let rest = &text.as_bytes()[at.min(text.len())..];
    match rest.iter().position(|byte| matches!(byte, b'\n' | b'\r')) {
        Some(found) if rest[found] == b'\r' && rest.get(found + 1) == Some(&b'\n') => at + found + 2,
        Some(found) => at + found + 1,
        None => text.len(),
    }
}

/// The line that starts at `at`, with its end.
fn line(text: &str, at: usize) -> &str {
    &text[at..line_end(text, at)]
}

/// Whether a line starts, at its first column, like `key =` or like a whole `[header]`.
fn starts_statement(line: &str) -> bool {
    if let Some(inner) = line.strip_prefix('[') {
        let (inner, close) = inner.strip_prefix('[').map_or((inner, "]"), |inner| (inner, "]]"));
        let inner = inner.trim_start_matches([' ', '\t']);
        // `[1]`, `["a"]` and `[true]` are elements of an array as well; a header mostly starts with a bare name.
        let named = inner.starts_with(|first: char| first.is_ascii_alphabetic() || first == '_')
            && !["true", "false", "inf", "nan"].contains(&inner.split([']', ' ']).next().unwrap_or_default());
        let after = key_path(inner).and_then(|rest| rest.strip_prefix(close)).map(str::trim_start);
        named && after.is_some_and(|rest| rest.is_empty() || rest.starts_with('#'))
    } else {
        key_path(line).is_some_and(|rest| rest.starts_with('='))
    }
}

/// What follows a dotted key and the space after it.
fn key_path(text: &str) -> Option<&str> {
    let mut rest = text;
    loop {
        rest = match rest.as_bytes().first()? {
            quote @ (b'"' | b'\'') => {
                let inner = &rest[1..];
                &inner[inner.find(char::from(*quote))? + 1..]
            }
            _ => {
                let after =
                    rest.trim_start_matches(|c: char| c.is_ascii_alphanumeric() || c == '-' || c == '_');
                if after.len() == rest.len() {
                    return None;
                }
                after
            }
        };
        rest = rest.trim_start_matches([' ', '\t']);
        match rest.strip_prefix('.') {
            Some(next) => rest = next.trim_start_matches([' ', '\t']),
            None => return Some(rest),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn bodies(text: &str) -> Vec<&str> {
        Statements::new(text).map(|statement| &text[statement.body]).collect()
    }

    #[test]
    fn a_statement_is_a_line_unless_brackets_are_open() {
        assert_eq!(
            bodies("a = 1 # one\n\n# two\n[b]\r\n  c = [1,\n 2]\nd = 3"),
            ["a = 1", "[b]", "c = [1,\n 2]", "d = 3"]
        );
    }

    #[test]
    fn an_open_bracket_ends_before_the_next_statement() {
        assert_eq!(bodies("a = [1, 2\nb = 3\n"), ["a = [1, 2", "b = 3"]);
        assert_eq!(bodies("a = [1, 2\n\n# c\n[d]\n"), ["a = [1, 2", "[d]"]);
        assert_eq!(bodies("a = { b = 1\n  c = 3\n"), ["a = { b = 1", "c = 3"]);
        assert_eq!(bodies("a = [\n[1],\n[\"b\"],\n[true]\n]\n"), ["a = [\n[1],\n[\"b\"],\n[true]\n]"]);
        assert_eq!(bodies("a = { b = 1,\n  c = 3 }\n"), ["a = { b = 1,\n  c = 3 }"]);
    }

    #[test]
    fn whole_lines_with_comment_and_line_end() {
        let text = "\u{feff}a = 1 # one\r\n  b = 2";
        let wholes: Vec<&str> = Statements::new(text).map(|statement| &text[statement.whole]).collect();
        assert_eq!(wholes, ["a = 1 # one\r\n", "  b = 2"]);
    }
}
