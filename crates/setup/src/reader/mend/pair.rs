//! A statement that is no header: `key = value`, or what became of it.

use super::pieces::scan;
use super::{Fault, Mended, key, scalar, value};
use crate::reader::parse::{is_statement, is_value, key_names};

/// `key = value`, when it can be told apart.
pub(super) fn look(body: &str) -> Option<Mended> {
    let parts = key::parts(body)?;
    let judge = |text: &str| (!is_value(text)).then(|| value::fault(text));
    let fault = key::with_value(body, judge);
    let names = key_names(parts.key).or_else(|| key_names(&key::fault(parts.key).mended?));
    let value = parts.value_at..parts.value_at + parts.value.len();
    let sign = parts.key.len() + spaces_before(parts.sign)..parts.key.len() + parts.sign.trim_end().len();
    let at = if key_names(parts.key).is_some() && key::sign_fault(parts.sign).is_none() {
        value
    } else if parts.key.is_empty() || key_names(parts.key).is_some() {
        sign
    } else {
        0..parts.key.len()
    };
    let fault = fault.map(|fault| two_on_a_line(body, &parts).unwrap_or(fault));
    Some(mended(fault, names, Some(at).filter(|at| !at.is_empty())))
}

fn spaces_before(sign: &str) -> usize {
    sign.len() - sign.trim_start().len()
}

/// `a = 1 b = 2`
fn two_on_a_line(body: &str, parts: &key::Parts) -> Option<Fault> {
    let second = scan(parts.value).equals.filter(|_| !parts.value.contains('\n'))?;
    let before = parts.value[..second].trim_end();
    let key_at = before.rfind([' ', '\t'])? + 1;
    let (first, second) = (body[..parts.value_at + key_at].trim_end(), &parts.value[key_at..]);
    let fault = Fault::new("a second `=` stands on the line, where one statement has room");
    if !(is_statement(first) && is_statement(second)) {
        return Some(fault);
    }
    let mended = Some(format!("{first}\n{second}"));
    Some(Fault { mended, title: "Put the second on a line of its own".to_owned(), ..fault })
}

/// A statement without `=`.
pub(super) fn without_equals(body: &str) -> Mended {
    if body.trim().is_empty() {
        let words = "a space of a kind that is none in this language stands alone on the line";
        return mended(Some(Fault::mended(words, "Take it away", "")), None, None);
    }
    if body.chars().all(|c| "]}),;".contains(c) || c.is_whitespace()) {
        let fault = Fault::mended("it closes nothing", "Take it away", "");
        return mended(Some(fault), None, None);
    }
    for mark in ["//", ";"] {
        if let Some(comment) = body.strip_prefix(mark).filter(|_| !body.contains('\n')) {
            let fault =
                Fault::mended("a comment starts with `#`", "Start it with `#`", format!("#{comment}"));
            return mended(Some(fault), None, None);
        }
    }
    let (word, rest) = body.split_once([' ', '\t']).unwrap_or((body, ""));
    let rest = rest.trim();
    let Some(names) = key_names(word) else {
        return mended(Some(Fault::new("this is neither a header nor `key = value`")), None, None);
    };
    if rest.is_empty() {
        return mended(Some(Fault::new("`=` and the value are missing")), Some(names), None);
    }
    let mut fault = Fault::new("`=` is missing");
    // A word in quotes or a number can only be the value; prose is left alone.
    if rest.starts_with(|c: char| c == '"' || c.is_ascii_digit() || "“„?".contains(c)) && !rest.contains('\n')
    {
        let value = if is_value(rest) { Some(rest.to_owned()) } else { scalar::fault(rest).mended };
        fault.mended = value.map(|value| format!("{word} = {value}"));
        fault.title = "Write `=`".to_owned();
    }
    mended(Some(fault), Some(names), None)
}

fn mended(fault: Option<Fault>, key: Option<Vec<String>>, at: Option<std::ops::Range<usize>>) -> Mended {
    let Some(fault) = fault else {
        return Mended { key, ..Mended::default() };
    };
    Mended { at, fault: Some(fault.words), key, header: None, body: fault.mended, title: fault.title }
}
