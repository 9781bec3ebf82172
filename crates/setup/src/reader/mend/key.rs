//! Keys that are none, and a key with its value where both may need mending.

use super::pieces::scan;
use super::{Fault, straightened};
use crate::reader::parse::key_names;

/// What is wrong with a key that is none.
pub(super) fn fault(key: &str) -> Fault {
    if key.is_empty() {
        return Fault::new("the key is missing in front of `=`");
    }
    let plain = key.trim_matches(|c: char| c.is_whitespace() || matches!(c, '\u{200b}' | '\u{feff}'));
    if plain != key && key_names(plain).is_some() {
        let words = "a space of a kind that is none in this language stands at the key";
        return Fault::mended(words, "Use plain spaces", plain);
    }
    if let Some(straight) = straightened(key) {
        let words = "typographic quotes are no quotes in this language";
        return Fault::mended(words, "Use straight quotes", straight)
            .if_mended(|key| key_names(key).is_some());
    }
    if key.contains(['"', '\'']) {
        let bare = key.replace(['"', '\''], "");
        let words = "a quote is missing at the key";
        return Fault::mended(words, "Write the key without quotes", bare)
            .if_mended(|key| key_names(key).is_some());
    }
    let parts: Vec<&str> = key.split('.').map(str::trim).collect();
    if parts.iter().any(|part| part.is_empty()) {
        return Fault::new("a name is missing at a dot of the key");
    }
    let quoted = |part: &&str| match key_names(part) {
        Some(_) => (*part).to_owned(),
        None => format!("\"{part}\""),
    };
    let mended = parts.iter().map(quoted).collect::<Vec<_>>().join(".");
    let words = "a key of other characters than letters A to Z, digits, `-` and `_` stands in quotes";
    if key.split_whitespace().count() > 3 || key.contains(['=', '\\', '[', ']', '{', '}', ',', '\n']) {
        return Fault::new(words);
    }
    Fault::mended(words, "Put the key in quotes", mended).if_mended(|key| key_names(key).is_some())
}

/// A key with its value, in its parts.
pub(super) struct Parts<'a> {
    pub key: &'a str,
    /// All between key and value.
    pub sign: &'a str,
    pub value: &'a str,
    /// Where the value starts.
    pub value_at: usize,
}

/// Parts a statement at its first `=`, or at a `:` that stands for it.
pub(super) fn parts(body: &str) -> Option<Parts<'_>> {
    let found = scan(body);
    let named = |at: &usize| {
        let key = body[..*at].trim_end();
        key.starts_with(|c: char| c.is_ascii_alphabetic() || c == '"') && key_names(key).is_some()
    };
    let colon = found.colon.filter(|at| found.equals.is_none_or(|equals| *at < equals) && named(at));
    // An open quote hides the sign.
    let at = colon.or(found.equals).or_else(|| body.find('=').filter(|_| found.in_quotes))?;
    let key = body[..at].trim_end_matches([' ', '\t']);
    let rest = &body[at..];
    let value = rest.trim_start_matches(|c: char| matches!(c, '=' | ':' | '>') || c.is_whitespace());
    let value_at = body.len() - value.len();
    Some(Parts { key, sign: &body[key.len()..value_at], value: value.trim_end(), value_at })
}

/// What is wrong with a sign between key and value.
pub(super) fn sign_fault(sign: &str) -> Option<Fault> {
    let core = sign.trim_matches([' ', '\t']);
    match core {
        "=" => None,
        _ if core.chars().any(char::is_whitespace) && core.trim() == "=" => {
            let words = "a space of a kind that is none in this language stands beside `=`";
            Some(Fault::mended(words, "Use plain spaces", " = "))
        }
        _ => Some(Fault::mended(
            format!("`{}` stands where `=` belongs", core.trim()),
            "Write `=`",
            if sign.starts_with(' ') || sign.ends_with(' ') || sign.contains(':') { " = " } else { "=" },
        )),
    }
}

/// What is wrong with `key = value`, whose value is judged by `judge`; nothing when all is well.
pub(super) fn with_value(body: &str, judge: impl Fn(&str) -> Option<Fault>) -> Option<Fault> {
    let Some(parts) = parts(body) else {
        return Some(Fault::new("`=` is missing"));
    };
    let of_key = key_names(parts.key).is_none().then(|| fault(parts.key));
    let of_sign = sign_fault(parts.sign);
    let of_value = judge(parts.value);
    let anew = |fault: &Option<Fault>, old: &str| match fault {
        None => Some(old.to_owned()),
        Some(fault) => fault.mended.clone(),
    };
    let pieces = (anew(&of_key, parts.key), anew(&of_sign, parts.sign), anew(&of_value, parts.value));
    let mended = match pieces {
        (Some(key), Some(sign), Some(value)) => Some(format!("{key}{sign}{value}")),
        _ => None,
    };
    let first = of_key.or(of_sign).or(of_value)?;
    Some(Fault { mended, ..first })
}
