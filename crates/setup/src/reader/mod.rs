//! The first stage: a text to a tree of keys and values with their places. It never fails; what cannot be read is
//! told statement by statement, and everything else is there.
//!
//! The text is cut into statements ([`statements`]), each is parsed alone ([`mod@parse`]) and put where it belongs
//! ([`merge`]). So one broken line costs one line, and the cost grows with the length of the text and no faster. What
//! a broken statement was meant to be is worked out from its parts ([`explain`]), with the rewriting that mends it
//! where there is just one ([`mend`]).
//!
//! The language is TOML 1.0. What only later editions allow and what has one meaning all the same is read without a
//! word: an inline table over several lines (if the later ones are indented), a comma after its last value, the
//! escapes `\e` and `\x41`, a time without seconds.
//!
//! What a slip takes with it: the value of a broken line; of a key given twice the second; of a header whose name is
//! clear in spite of the slip nothing, its keys are in the tree and its path is told as lost so that nothing rests on
//! them; of any other header all keys below it.

mod explain;
mod mend;
mod merge;
mod parse;
mod statements;

use crate::finding::Span;
use crate::interrupt::Interrupt;
use crate::tree::{Reading, Slip, SlipKind};
use explain::Explained;
use merge::{Clash, Merge, NodeId, ROOT};
use parse::{Parsed, Segment, parse};
use statements::{Statement, Statements};
use std::collections::HashSet;

/// So many slips are told one by one; a file with more is no setup file.
const MOST_SLIPS: usize = 200;

/// Reads a text, whatever it holds.
pub fn read(text: &str) -> Reading {
    read_unless(text, &Interrupt::never())
}

/// The same; what has been read when the interrupt is due is of no use.
pub(crate) fn read_unless(text: &str, interrupt: &Interrupt) -> Reading {
    let mut reader = Reader::new(text);
    let mut statements = Statements::new(text);
    let mut pieces = Vec::new();
    while !interrupt.is_due()
        && let Some(mut statement) = statements.next()
    {
        let mut parsed = reader.parse(&statement);
        if parsed.is_err()
            && let Some(shorter) = statements.cut_short(&statement)
        {
            statement = shorter;
            parsed = reader.parse(&statement);
        }
        if let Ok(Parsed::Header { path, repeated: true, .. }) = &parsed {
            reader.repeated.insert(names(path));
        }
        pieces.push((statement, parsed));
    }
    for (statement, parsed) in pieces {
        if interrupt.is_due() {
            break;
        }
        match parsed {
            Ok(Parsed::Header { path, span, repeated }) => reader.header(&statement, &path, &span, repeated),
            Ok(Parsed::Pair { path, value }) => reader.pair(&statement, &path, value),
            Err(word) => reader.broken(&statement, &word),
        }
    }
    if let Some(span) = statements.lone_returns {
        reader.lone_returns(span);
    }
    reader.finish()
}

/// The table that the next keys belong to.
struct Current {
    /// `None`: the header above could not be read.
    table: Option<NodeId>,
    path: Vec<String>,
}

struct Reader<'a> {
    text: &'a str,
    merge: Merge,
    current: Current,
    slips: Vec<Slip>,
    /// The first and the last slip that are not told, and how many.
    further: Option<(Slip, Slip, usize)>,
    /// The keys that a slip's mend would add to which table.
    mended_keys: Vec<(usize, NodeId, Vec<Vec<String>>)>,
    /// Paths of all `[[headers]]`.
    repeated: HashSet<Vec<String>>,
    /// Keys below a header that could not be read: first and last statement, and how many.
    homeless: Option<(Statement, Statement, usize)>,
}

impl<'a> Reader<'a> {
    fn new(text: &'a str) -> Reader<'a> {
        Reader {
            text,
            merge: Merge::new(),
            current: Current { table: Some(ROOT), path: Vec::new() },
            slips: Vec::new(),
            further: None,
            mended_keys: Vec::new(),
            repeated: HashSet::new(),
            homeless: None,
        }
    }

    fn parse(&self, statement: &Statement) -> Result<Parsed, String> {
        if statement.too_deep {
            return Err("it nests deeper than any setup does".to_owned());
        }
        let control = |c: char| c.is_ascii_control() && !matches!(c, '\t' | '\r' | '\n');
        if self.text[statement.body.end..statement.whole.end].contains(control) {
            return Err("a control character in the comment".to_owned());
        }
        parse(&self.text[statement.body.clone()], statement.body.start, &statement.whole)
    }

    fn header(&mut self, statement: &Statement, path: &[Segment], span: &Span, repeated: bool) {
        self.settle_homeless();
        self.current.path = names(path);
        match self.merge.header(path, span, &statement.whole, repeated) {
            Ok(table) => self.current.table = Some(table),
            Err(clash) => {
                self.current.table = clash.table;
                let lost = self.current.path.clone();
                let slip = explain::header_clash(self.text, statement, path, repeated, &clash, lost);
                self.tell(slip);
            }
        }
    }

    fn pair(&mut self, statement: &Statement, path: &[Segment], value: crate::tree::Value) {
        let Some(table) = self.current.table else {
            let first =
                self.homeless.take().map_or((statement.clone(), 0), |(first, _, count)| (first, count));
            self.homeless = Some((first.0, statement.clone(), first.1 + 1));
            return;
        };
        let here = value.span();
        if let Err(clash) = self.merge.pair(table, path, value, &statement.whole) {
            self.clash(statement, path, &here, &clash);
        }
    }

    fn clash(&mut self, statement: &Statement, path: &[Segment], here: &Span, clash: &Clash) {
        let lost = self.lost(&names(path));
        let slip = explain::pair_clash(self.text, statement, path, here, clash, lost);
        self.tell(slip);
    }

    fn tell(&mut self, slip: Slip) {
        if self.slips.len() < MOST_SLIPS {
            self.slips.push(slip);
        } else {
            self.further = Some(match self.further.take() {
                None => (slip.clone(), slip, 1),
                Some((first, _, count)) => (first, slip, count + 1),
            });
        }
    }

    fn lost(&self, key: &[String]) -> Option<Vec<String>> {
        self.current.table.map(|_| [self.current.path.as_slice(), key].concat())
    }

    fn broken(&mut self, statement: &Statement, word: &str) {
        let mends = self.slips.len() < MOST_SLIPS;
        let explained = explain::broken(self.text, statement, word, mends, &self.repeated);
        let Explained { span, message, key, header, mut mend } = explained;
        let mut lost_key = None;
        if let Some(found) = header {
            self.settle_homeless();
            self.current = Current { table: None, path: Vec::new() };
            if let Some((path, repeated)) = found {
                self.current.path = names(&path);
                let table = self.merge.header(&path, &statement.body, &statement.whole, repeated);
                mend = mend.filter(|_| table.is_ok());
                self.current.table = table.map_or_else(|clash| clash.table, Some);
                lost_key = Some(self.current.path.clone());
            }
        } else if self.current.table.is_none() {
            // First the header above.
            mend = None;
        } else if let Some(key) = key {
            lost_key = self.lost(&key);
        }
        if let (Some(table), Some((_, mended))) = (self.current.table, &mend) {
            self.mended_keys.push((self.slips.len(), table, keys_in(mended)));
        }
        self.tell(Slip {
            kind: SlipKind::Unreadable,
            span,
            statement: statement.whole.clone(),
            message,
            related: None,
            mend,
            lost_key,
        });
    }

    /// One slip for all keys whose table is not known.
    fn settle_homeless(&mut self) {
        if let Some((first, last, count)) = self.homeless.take() {
            self.tell(explain::homeless(&first, &last, count));
        }
    }

    fn lone_returns(&mut self, span: Span) {
        let newline = explain::newline(self.text);
        let mended = self.text[span.clone()].replace("\r\n", "\n").replace('\r', "\n").replace('\n', newline);
        self.tell(Slip {
            kind: SlipKind::Unreadable,
            span: span.start..span.start + 1,
            message: "a line ends with a carriage return alone, which other readers of the file refuse"
                .to_owned(),
            related: None,
            mend: Some(("End every line as the others end".to_owned(), mended)),
            statement: span,
            lost_key: None,
        });
    }

    fn finish(mut self) -> Reading {
        self.settle_homeless();
        // A mend that would make a key twice is none.
        for (slip, table, keys) in &self.mended_keys {
            let twice =
                |(index, key): (usize, &Vec<String>)| keys[..index].iter().any(|before| clash(before, key));
            if keys.iter().any(|key| self.merge.clashes(*table, key)) || keys.iter().enumerate().any(twice) {
                self.slips[*slip].mend = None;
            }
        }
        if let Some((first, last, count)) = &self.further {
            self.slips.push(explain::further(first, last, *count));
        }
        self.slips.sort_by_key(|slip| slip.span.start);
        Reading { root: self.merge.finish(), slips: self.slips }
    }
}

/// The keys of the statements in a mended line.
fn keys_in(mended: &str) -> Vec<Vec<String>> {
    let parsed = |line: &str| match parse(line.trim(), 0, &(0..0)) {
        Ok(Parsed::Pair { path, .. }) => Some(names(&path)),
        _ => None,
    };
    match parsed(mended) {
        Some(key) => vec![key],
        None => mended.lines().filter_map(parsed).collect(),
    }
}

/// Of two keys one is the other or a table that the other stands in.
fn clash(one: &[String], other: &[String]) -> bool {
    one.starts_with(other) || other.starts_with(one)
}

fn names(path: &[Segment]) -> Vec<String> {
    path.iter().map(|segment| segment.name.clone()).collect()
}
