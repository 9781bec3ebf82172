//! A header that does not parse. Often its name is clear all the same.

use super::{Mended, key, pair, straightened};
use crate::reader::parse::{Parsed, Segment, is_statement, key_names, parse};
use std::collections::HashSet;

/// A statement that starts like a header; `None`: it is something else.
pub(super) fn look(body: &str, base: usize, repeated: &HashSet<Vec<String>>) -> Option<Mended> {
    // `drive]`: the opening bracket is missing.
    let opened = body.starts_with(['[', '{']);
    let lone_end = !opened && body.ends_with(']') && key_names(body.trim_end_matches(']')).is_some();
    if !(opened || lone_end) || body.contains('\n') {
        return None;
    }
    let inner = body.trim_start_matches(['[', '{']);
    let open = body.len() - inner.len();
    let end = inner.find([']', '}', ')']).unwrap_or(inner.len());
    let name = inner[..end].trim();
    let after = inner[end..].trim_start_matches([']', '}', ')']);
    let close = inner.len() - end - after.len();
    let rest = after.trim();
    if name.contains([',', '=']) || name.starts_with(|c: char| c.is_ascii_digit()) || body.starts_with("{}") {
        // What is left of an array or an inline table above.
        return None;
    }
    let fault_of_name = match (key_names(name), straightened(name)) {
        (Some(_), _) => None,
        (None, Some(straight)) if key_names(&straight).is_some() => Some(straight),
        (None, _) => key::fault(name).mended,
    };
    let written = fault_of_name.clone().unwrap_or_else(|| name.to_owned());
    let Some(names) = key_names(&written).filter(|_| open <= 2) else {
        let words = if name.is_empty() { "the name is missing" } else { "the name cannot be read" };
        return Some(Mended { fault: Some(words.to_owned()), header: Some(None), ..Mended::default() });
    };
    // With brackets missing at one end the other end counts, or how the name is written elsewhere.
    let double = match (open, close) {
        (2, _) => true,
        (1, 1) => false,
        (0 | 1, 2) => true,
        _ => repeated.contains(&names),
    };
    let anew = if double { format!("[[{written}]]") } else { format!("[{written}]") };
    let start = base + (name.as_ptr() as usize).saturating_sub(body.as_ptr() as usize);
    let path = match parse(&format!("[{written}]"), 0, &(0..0)) {
        // Where each part stands, unless the name itself had to be mended.
        Ok(Parsed::Header { path, .. }) => path
            .into_iter()
            .map(|part| {
                let inner = part.span.start.saturating_sub(1)..part.span.end.saturating_sub(1);
                let inner = if fault_of_name.is_some() { 0..name.len() } else { inner };
                Segment { name: part.name, span: start + inner.start..start + inner.end }
            })
            .collect(),
        _ => return Some(Mended { header: Some(None), ..Mended::default() }),
    };
    let (words, title, body) = if fault_of_name.is_some() {
        let words = if straightened(name).is_some() {
            "typographic quotes are no quotes in this language"
        } else {
            "a name of other characters than letters A to Z, digits, `-` and `_` stands in quotes"
        };
        (words.to_owned(), format!("Write `{anew}`"), Some(anew).filter(|_| rest.is_empty()))
    } else if rest.is_empty() {
        let words = match (open, close) {
            (0, _) => "the opening bracket is missing",
            (_, 0) => "the closing bracket is missing",
            _ => "the brackets do not match",
        };
        (words.to_owned(), format!("Write `{anew}`"), Some(anew))
    } else {
        let (title, body) = with_rest(&anew, rest);
        (format!("`{rest}` follows after the header"), title.to_owned(), body)
    };
    Some(Mended { fault: Some(words), header: Some(Some((path, double))), body, title, ..Mended::default() })
}

/// A header with what was written behind it: a key of its own on the next line, anything else as a comment.
fn with_rest(header: &str, rest: &str) -> (&'static str, Option<String>) {
    if rest.starts_with('[') {
        return ("", None);
    }
    let below = |line: String| format!("{header}\n{line}");
    if is_statement(rest) {
        return ("Put it on a line of its own", Some(below(rest.to_owned())));
    }
    if let Some(found) = pair::look(rest) {
        return ("Put it on a line of its own", found.body.map(below));
    }
    let comment = rest.strip_prefix("//").or_else(|| rest.strip_prefix(';')).unwrap_or(rest).trim_start();
    ("Make it a comment", Some(format!("{header} # {comment}")))
}
