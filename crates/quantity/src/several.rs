//! Ranges, lists and open values: texts with more than one quantity, or none.

use crate::explain::example;
use crate::kind::Kind;
use crate::measure::trimmed;
use crate::parse::{Quantity, parse};
use crate::refusal::{Reason, Refusal};
use crate::{comma, number};
use std::ops::Range;

/// A value that is left open for the tool to find.
#[derive(Debug, Clone, PartialEq)]
pub enum OpenValue {
    /// `?`
    Unbounded,
    /// `? 5 mm to 20 mm`
    Between(Box<Quantity>, Box<Quantity>),
}

/// Reads a range `5 Hz to 4 kHz`.
///
/// # Errors
/// [`Refusal`], also where the second is below the first.
pub fn parse_range(text: &str, kind: Kind) -> Result<(Quantity, Quantity), Refusal> {
    if let Some(refusal) = comma::refuse(text) {
        return Err(refusal);
    }
    let Some(at) = word_to(text) else { return Err(no_range(text, kind)) };
    let (before, behind) = (&text[..at.start], &text[at.end..]);
    let high = parse(behind, kind);
    let low = parse(before, kind).map_err(|refusal| {
        let refusal = match &high {
            Ok(high) => said_once(before, refusal, high, kind),
            Err(_) => refusal,
        };
        refusal.embedded("", &text[before.len()..])
    })?;
    let high = high.map_err(|refusal| refusal.embedded(&text[..at.end], ""))?;
    if high.peak() >= low.peak() {
        return Ok((low, high));
    }
    let message = format!("the range \"{}\" runs downwards; write the lower value first.", text.trim());
    let turned = format!("{} to {}", behind.trim(), before.trim());
    let refusal = Refusal::new(Reason::RangeUnreadable, whole(text), message);
    Err(refusal.mend(format!("Turn it round: \"{turned}\""), turned, true))
}

/// Reads a comma-separated list (command line).
///
/// # Errors
/// [`Refusal`] of the first item that is no quantity.
pub fn parse_list(text: &str, kind: Kind) -> Result<Vec<Quantity>, Refusal> {
    items(text)
        .into_iter()
        .map(|item| {
            parse(&text[item.clone()], kind)
                .map_err(|refusal| refusal.embedded(&text[..item.start], &text[item.end..]))
        })
        .collect()
}

/// Reads an open value; `None` when the text is none.
pub fn parse_open(text: &str, kind: Kind) -> Option<Result<OpenValue, Refusal>> {
    let at = text.find(|c: char| !c.is_whitespace())?;
    let rest = text[at..].strip_prefix('?')?;
    if rest.trim().is_empty() {
        return Some(Ok(OpenValue::Unbounded));
    }
    Some(match parse_range(rest, kind) {
        Ok((low, high)) => Ok(OpenValue::Between(Box::new(low), Box::new(high))),
        Err(refusal) => Err(refusal.embedded(&text[..at + 1], "")),
    })
}

/// The text without the blanks at its ends.
pub(crate) fn whole(text: &str) -> Range<usize> {
    trimmed(text, 0..text.len())
}

/// The ` to ` of a range; that of `peak to peak` is none.
fn word_to(text: &str) -> Option<Range<usize>> {
    text.match_indices(" to ").map(|(i, to)| i..i + to.len()).find(|at| {
        let behind = text[at.end..].trim_start();
        !["peak", "pk"]
            .iter()
            .any(|word| behind.get(..word.len()).is_some_and(|b| b.eq_ignore_ascii_case(word)))
    })
}

/// Where behind `from` something says that a second value follows: ` to `, a dash, dots.
pub(crate) fn range_mark(text: &str, from: usize) -> Option<Range<usize>> {
    if let Some(at) = word_to(&text[from..]) {
        return Some(from + at.start..from + at.end);
    }
    let body = &text[from..];
    let mut before = None;
    for (i, c) in body.char_indices() {
        let length = match c {
            '–' | '—' | '…' | '~' => c.len_utf8(),
            '.' if body[i..].starts_with("..") => body[i..].len() - body[i..].trim_start_matches('.').len(),
            // A hyphen at the number, or with blanks on both sides.
            '-' | '−' if i == 0 => c.len_utf8(),
            '-' | '−'
                if before.is_some_and(char::is_whitespace) && body[i + c.len_utf8()..].starts_with(' ') =>
            {
                c.len_utf8()
            }
            _ => 0,
        };
        before = Some(c);
        let behind = body[i + length..].trim_start();
        if length > 0 && behind.starts_with(|c: char| c.is_ascii_digit() || c == '.') {
            return Some(from + i..from + i + length);
        }
    }
    None
}

/// `5 to 10 Hz`, `5 g0 to 20 g0 peak`: what the second value says may have been meant for both.
fn said_once(before: &str, refusal: Refusal, high: &Quantity, kind: Kind) -> Refusal {
    let tail = match refusal.reason {
        Reason::UnitMissing => high.tail(),
        Reason::AmplitudeUnsaid | Reason::ReferenceUnsaid => high.words(),
        _ => return refusal,
    };
    let said = format!("{} {tail}", before.trim_end());
    if tail.is_empty() || high.tolerance.is_some() || parse(&said, kind).is_err() {
        return refusal;
    }
    let title = format!("Say it at both ends: \"{}\"", said.trim());
    let partial = refusal.partial;
    Refusal {
        partial,
        ..Refusal::new(refusal.reason, refusal.range, refusal.message).mend(title, said, true)
    }
}

fn no_range(text: &str, kind: Kind) -> Refusal {
    let message =
        format!("a range is wanted, such as \"{0} to {0}\" with the lower value first.", example(kind));
    let refusal = Refusal::new(Reason::RangeUnreadable, whole(text), message);
    let Ok(number) = number::read(text, 0..text.len()) else { return refusal };
    let Some(mark) = range_mark(text, number.range.end) else { return refusal };
    let said = format!("{} to {}", text[..mark.start].trim(), text[mark.end..].trim());
    let said = match parse_range(&said, kind) {
        Ok(_) => said,
        Err(inner) => match inner.mends.into_iter().find(|mend| mend.keeps_meaning) {
            Some(mend) => mend.text,
            None => return refusal,
        },
    };
    refusal.mend(format!("Write \"{said}\""), said, true)
}

/// Items between commas. A comma between the digits of a bare number is no separator, but a slip of its own.
fn items(text: &str) -> Vec<Range<usize>> {
    let digit = |c: char| c.is_ascii_digit();
    let mut items = Vec::new();
    let mut start = 0;
    for (i, _) in text.match_indices(',') {
        let item = &text[start..i];
        let bare =
            item.ends_with(digit) && !item.contains(|c: char| c.is_alphabetic() || matches!(c, '%' | '°'));
        if !(bare && text[i + 1..].starts_with(digit)) {
            items.push(start..i);
            start = i + 1;
        }
    }
    items.push(start..text.len());
    items
}
