//! A value that does not parse: brackets first, then what stands in them.

use super::pieces::{scan, split};
use super::{Fault, key, scalar};
use crate::reader::parse::is_value;

/// Brackets in brackets are followed so deep.
const DEEPEST: usize = 8;

/// What is wrong with a value that is none.
pub(super) fn fault(value: &str) -> Fault {
    nested(value, DEEPEST)
}

fn nested(value: &str, depth: usize) -> Fault {
    if !value.starts_with(['[', '{']) {
        return if value.contains('\n') { over_lines(value) } else { scalar::fault(value) };
    }
    let found = scan(value);
    if found.in_quotes {
        return Fault::new("a closing quote is missing in it");
    }
    if found.comment || depth == 0 {
        // Commas in comments part nothing.
        return Fault::new("something in the brackets is no value");
    }
    if let Some(stray) = found.stray {
        return stray_bracket(value, stray, depth);
    }
    if !found.open.is_empty() {
        return unclosed(value, &found.open, depth);
    }
    elements(value, depth)
}

/// A text over several lines, where it ends is not known.
fn over_lines(value: &str) -> Fault {
    match ["\"\"\"", "'''"].iter().find(|quotes| value.starts_with(**quotes)) {
        Some(quotes) if !value[3..].contains(quotes) => {
            Fault::new(format!("the closing `{quotes}` is missing"))
        }
        Some(quotes) => {
            Fault::new(format!("the text in `{quotes}` ends early, or holds an escape that is none"))
        }
        None => Fault::new("this is no value"),
    }
}

/// A value as it is, or mended.
fn usable(value: &str, depth: usize) -> Option<String> {
    if is_value(value) { Some(value.to_owned()) } else { nested(value, depth - 1).mended }
}

fn stray_bracket(value: &str, at: usize, depth: usize) -> Fault {
    let bracket = &value[at..=at];
    let rest = &value[at + 1..];
    if !rest.trim().chars().all(|c| "]},;".contains(c)) {
        return Fault::new(format!("a `{bracket}` closes nothing"));
    }
    // `[1, 2}`: the wrong bracket was hit; `[1, 2]]`: one too many.
    let open = scan(&value[..at]).open;
    let closing = match open.last() {
        Some(b'[') => "]",
        Some(_) => "}",
        None => "",
    };
    let mended = usable(&format!("{}{closing}", value[..at].trim_end()), depth);
    let (words, title) = if closing.is_empty() {
        (format!("the `{}` at the end is too much", value[at..].trim()), format!("Take the `{bracket}` away"))
    } else {
        (format!("`{bracket}` stands where `{closing}` closes the bracket"), format!("Write `{closing}`"))
    };
    Fault { words, mended, title }
}

fn unclosed(value: &str, open: &[u8], depth: usize) -> Fault {
    let closing: String = open.iter().rev().map(|open| if *open == b'[' { ']' } else { '}' }).collect();
    let kept = value.trim_end_matches(|c: char| c == ',' || c.is_whitespace());
    let space = if closing.starts_with('}') && kept.contains("{ ") { " " } else { "" };
    Fault {
        words: format!("the closing `{closing}` is missing"),
        mended: usable(&format!("{kept}{space}{closing}"), depth),
        title: format!("Add the closing `{closing}`"),
    }
}

/// Brackets that match: something in them is no value.
fn elements(value: &str, depth: usize) -> Fault {
    let is_table = value.starts_with('{');
    let (open, close) = if is_table { ("{", "}") } else { ("[", "]") };
    let Some(inner) = value.strip_suffix(close).and_then(|value| value.strip_prefix(open)) else {
        let end = matching_end(value);
        let rest = value[end..].trim();
        if rest.chars().all(|c| ",;".contains(c)) {
            return Fault {
                words: format!("the `{rest}` at the end is too much"),
                mended: usable(value[..end].trim_end(), depth),
                title: format!("Take the `{rest}` away"),
            };
        }
        return Fault::new(format!("`{rest}` follows after the closing bracket"));
    };
    let mut first = None;
    let mut mended = Some(Vec::new());
    let parts = split(inner);
    let count = parts.len();
    for (index, part) in parts.into_iter().enumerate() {
        let trimmed = part.trim();
        // A comma after the last one is no slip.
        let last_empty = trimmed.is_empty() && index + 1 == count;
        let fault = match trimmed {
            "" if last_empty => None,
            "" => Some(Fault::new("a value is missing between the commas")),
            trimmed if is_table => {
                key::with_value(trimmed, |value| (!is_value(value)).then(|| nested(value, depth - 1)))
            }
            trimmed => (!is_value(trimmed)).then(|| nested(trimmed, depth - 1)),
        };
        let anew = match &fault {
            None => Some(part.to_owned()),
            Some(fault) => fault.mended.as_ref().map(|mended| part.replacen(trimmed, mended, 1)),
        };
        match (&mut mended, anew) {
            (Some(parts), Some(part)) => parts.push(part),
            _ => mended = None,
        }
        first = first.or_else(|| fault.map(|fault| (trimmed.to_owned(), fault)));
    }
    let mended = mended.map(|parts| format!("{open}{}{close}", parts.join(",")));
    match first {
        Some((part, fault)) => {
            let words = if part.is_empty() {
                fault.words
            } else {
                format!("in it `{}`: {}", crate::reader::explain::shown(&part), fault.words)
            };
            Fault { words, mended, title: fault.title }.if_mended(is_value)
        }
        None if is_table => Fault::new("a key is given twice in the braces"),
        None => Fault::new("this is no value"),
    }
}

/// Past the bracket that closes the first one.
fn matching_end(value: &str) -> usize {
    let closings = value.match_indices([']', '}']).map(|(at, _)| at + 1);
    let mut closed = closings.filter(|end| {
        let found = scan(&value[..*end]);
        found.open.is_empty() && !found.in_quotes
    });
    closed.next().unwrap_or(value.len())
}
