//! A value without brackets that does not parse: a quantity without quotes, a quote that is missing, a number in a
//! form that TOML does not have.

use super::{Fault, is_control, straightened};
use crate::reader::parse::is_value;

const QUOTES: &str = "Put it in quotes";

/// What is wrong with a value that is none. It holds no line end.
pub(super) fn fault(value: &str) -> Fault {
    if value.is_empty() {
        return Fault::new("the value is missing");
    }
    let checks = [control, typographic, quoted, quote_at_end, trailing, boolean, number];
    checks.iter().find_map(|check| check(value)).unwrap_or_else(|| unquoted(value)).if_mended(is_value)
}

/// A value that can be used: the text itself, or as it is mended.
fn usable(value: &str) -> Option<String> {
    if is_value(value) { Some(value.to_owned()) } else { fault(value).mended }
}

fn control(value: &str) -> Option<Fault> {
    value.contains(is_control).then(|| {
        let cleaned = value.replace(is_control, "");
        Fault {
            words: "a control character that no editor shows stands in it".to_owned(),
            mended: usable(cleaned.trim()),
            title: "Take the control character away".to_owned(),
        }
    })
}

fn typographic(value: &str) -> Option<Fault> {
    if !value.starts_with(['“', '”', '„', '‟', '″', '«', '»', '‘', '’', '‚', '‛'])
        && !value.ends_with(['“', '”', '‟', '«', '»'])
    {
        return None;
    }
    straightened(value).map(|straight| Fault {
        words: "typographic quotes are no quotes in this language".to_owned(),
        mended: usable(&straight),
        title: "Use straight quotes".to_owned(),
    })
}

/// A value that starts with a quote.
fn quoted(value: &str) -> Option<Fault> {
    let quote = value.chars().next().filter(|first| matches!(first, '"' | '\''))?;
    let long = quote.to_string().repeat(3);
    if value.starts_with(&long) && !value.get(3..)?.contains(&long) {
        let words = format!("the closing `{long}` is missing");
        return Some(Fault::mended(words, format!("Add the closing `{long}`"), closed(value, &long)));
    }
    let Some(end) = closing(value, quote) else {
        // `"12 mm'`: the other quote was hit.
        let other = if quote == '"' { '\'' } else { '"' };
        let mended = match value.strip_suffix(other).filter(|inner| inner.len() > 1) {
            Some(inner) => format!("{inner}{quote}"),
            None => closed(value, &quote.to_string()),
        };
        return Some(Fault::mended("the closing quote is missing", "Add the closing quote", mended));
    };
    let (text, rest) = (&value[..=end], value[end + 1..].trim());
    let inner = &value[1..end];
    if rest.is_empty() {
        let words = "a backslash in double quotes starts an escape, and this is none; in single quotes it is a plain one";
        let literal = format!("'{inner}'");
        return Some(if inner.contains('\'') {
            Fault::new(words)
        } else {
            Fault::mended(words, "Use single quotes", literal)
        });
    }
    if rest.chars().all(|c| "]}),;.:".contains(c)) {
        return Some(Fault::mended(
            format!("the `{rest}` at the end is too much"),
            format!("Take the `{rest}` away"),
            text,
        ));
    }
    let number = inner.contains(|c: char| c.is_ascii_digit())
        && inner.chars().all(|c| c.is_ascii_digit() || "+-−.,±eE ".contains(c));
    let unit = rest.starts_with(|c: char| c.is_alphabetic() || "%°µΩ".contains(c))
        && !rest.contains(['"', '\'', '=', ',', '#', '\\']);
    if number && unit {
        let mended = format!("{quote}{} {rest}{quote}", inner.trim());
        return Some(Fault::mended(
            "the unit belongs inside the quotes",
            "Put the unit inside the quotes",
            mended,
        ));
    }
    Some(Fault::new(format!("`{rest}` follows after the closing quote")))
}

/// Where the quote that opens a text is closed.
fn closing(value: &str, quote: char) -> Option<usize> {
    let mut escaped = false;
    for (at, c) in value.char_indices().skip(1) {
        match c {
            _ if escaped => escaped = false,
            '\\' if quote == '"' => escaped = true,
            _ if c == quote => return Some(at),
            _ => {}
        }
    }
    None
}

/// With the closing quotes before a comment that an open quote swallowed, else at the end.
fn closed(value: &str, quotes: &str) -> String {
    let comment = value.match_indices('#').map(|(at, _)| at).find(|at| value[..*at].ends_with([' ', '\t']));
    let end = value[..comment.unwrap_or(value.len())].trim_end().len();
    format!("{}{quotes}{}", &value[..end], &value[end..])
}

fn quote_at_end(value: &str) -> Option<Fault> {
    let inner = value.strip_suffix('"').filter(|inner| !inner.contains(['"', '\\', '\'', '=', '[', '{']))?;
    Some(Fault::mended(
        "the opening quote is missing",
        "Add the opening quote",
        format!("\"{}\"", inner.trim()),
    ))
}

/// `3]`, `12 mm,`
fn trailing(value: &str) -> Option<Fault> {
    let kept = value.trim_end_matches([']', '}', ')', ',', ';']).trim_end();
    let rest = value[kept.len()..].trim_start();
    if rest.is_empty() || kept.is_empty() || (rest.contains(')') && kept.contains('(')) {
        return None;
    }
    Some(Fault {
        words: format!("the `{rest}` at the end is too much"),
        mended: usable(kept),
        title: format!("Take the `{rest}` away"),
    })
}

fn boolean(value: &str) -> Option<Fault> {
    let small = value.to_ascii_lowercase();
    matches!(small.as_str(), "true" | "false" | "inf" | "nan" | "+inf" | "-inf").then(|| {
        Fault::mended(format!("`{small}` is written in small letters"), format!("Write `{small}`"), small)
    })
}

/// Digits and what may stand among them: a number or date in a form that TOML does not have.
fn number(value: &str) -> Option<Fault> {
    let other_base = ["0x", "0o", "0b"].iter().any(|base| value.starts_with(base));
    let plain = |c: char| c.is_ascii_digit() || "+-.,_eE:/ ".contains(c);
    if !value.contains(|c: char| c.is_ascii_digit()) || !(other_base || value.chars().all(plain)) {
        return None;
    }
    if value.split_whitespace().count() > 1 {
        return Some(Fault::new("more than one value stands here, and a number has no spaces in it"));
    }
    if value.contains(',') {
        return Some(Fault::new("a number has a decimal point, no comma"));
    }
    if let Some(date) = padded_date(value) {
        return Some(Fault::mended(
            "month and day of a date have two digits",
            format!("Write `{date}`"),
            date,
        ));
    }
    if let Some(full) = full_number(value).filter(|full| full != value && is_value(full)) {
        let words = "a number has a digit on either side of its point and no zeros in front";
        return Some(Fault::mended(words, format!("Write `{full}`"), full));
    }
    if value.bytes().all(|byte| byte.is_ascii_digit()) {
        return Some(Fault::new("this number has too many digits"));
    }
    Some(Fault::new("this is no number"))
}

/// `2026-3-14` with two digits each.
fn padded_date(value: &str) -> Option<String> {
    let mut parts = value.split('-');
    let (year, month, day) = (parts.next()?, parts.next()?, parts.next()?);
    let short = |part: &str| (1..=2).contains(&part.len()) && part.bytes().all(|byte| byte.is_ascii_digit());
    let fits = year.len() == 4 && short(month) && short(day) && parts.next().is_none();
    fits.then(|| format!("{year}-{month:0>2}-{day:0>2}")).filter(|date| date != value)
}

/// `.5`, `5.`, `007`, `1.e3` with the digits that TOML wants.
fn full_number(value: &str) -> Option<String> {
    let (sign, digits) = match value.strip_prefix(['+', '-']) {
        Some(digits) => (&value[..1], digits),
        None => ("", value),
    };
    let (mantissa, exponent) = match digits.find(['e', 'E']) {
        Some(at) => digits.split_at(at),
        None => (digits, ""),
    };
    let (whole, fraction) = match mantissa.split_once('.') {
        Some((whole, fraction)) => (whole, Some(fraction)),
        None => (mantissa, None),
    };
    let digits_only = |part: &str| part.bytes().all(|byte| byte.is_ascii_digit());
    if !digits_only(whole) || !fraction.is_none_or(digits_only) {
        return None;
    }
    let trimmed = whole.trim_start_matches('0');
    let whole = if trimmed.is_empty() { "0" } else { trimmed };
    Some(match fraction {
        Some("") => format!("{sign}{whole}.0{exponent}"),
        Some(fraction) => format!("{sign}{whole}.{fraction}{exponent}"),
        None => format!("{sign}{whole}{exponent}"),
    })
}

/// Text without quotes, most often a quantity.
fn unquoted(value: &str) -> Fault {
    if value.contains(['=', '[', ']', '{', '}']) {
        return Fault::new("this is no value");
    }
    let bytes = value.as_bytes();
    let part = |at: &usize| {
        let digit = |at: usize| bytes.get(at).is_some_and(u8::is_ascii_digit);
        // In `16,5 mm` the comma is a decimal one, which is for the reading of quantities to judge.
        !(*at > 0 && digit(at - 1) && digit(at + 1))
    };
    if value.match_indices(',').any(|(at, _)| part(&at)) {
        return Fault::new("several values stand in brackets, each text in quotes");
    }
    let quantity = value.starts_with(|c: char| c.is_ascii_digit() || "+-.−±?(".contains(c));
    let words = if quantity { "a quantity is text and stands in quotes" } else { "text stands in quotes" };
    let mended = if !value.contains(['"', '\\']) {
        format!("\"{value}\"")
    } else if !value.contains('\'') {
        format!("'{value}'")
    } else {
        return Fault::new(words);
    };
    Fault::mended(words, QUOTES, mended)
}
