//! value-of-wrong-type
//!
//! A value of another type than its key holds: a bare number where a quantity with its unit is wanted, a text where true or false is wanted.
//!
//! Why it matters: The value cannot be read without guessing, and a guess would be an experiment that nobody planned.
//!
//! What to do: Write it as the key wants it; the hover text shows an example.

use crate::declare::{Form, Key, Section, Word, holds_said, nearest};
use crate::finding::{Finding, Span};
use crate::rules::{found, listed, replace};
use crate::tree::{Entry, Value};
use crate::written::quoted;
use quantity::Refusal;

/// Any value of a wrong type. `source`: as it stands in the file.
pub(crate) fn finding(key: &Key, place: &str, value: &Value, source: &str) -> Finding {
    let what = format!("`{}` holds {}, not {}.", key.name, holds_said(&key.holds), said(value));
    let remedy = format!("Write for example `{} = {}`.", key.name, key.example);
    let finding = found("value-of-wrong-type", place, value.span(), what, &remedy);
    // `"true"` and `8` in quotes: the quotes alone are wrong. Where a text is wanted a number needs them.
    match (value, key.holds) {
        (Value::Text(text), crate::declare::Holds::Boolean)
            if matches!(text.value.as_str(), "true" | "false") =>
        {
            finding.with_fix(replace("Take the quotes away", true, value.span(), text.value.clone()))
        }
        (
            Value::Integer(..) | Value::Float(..) | Value::Datetime(..),
            crate::declare::Holds::Text | crate::declare::Holds::Name,
        ) => finding.with_fix(replace("Put it in quotes", true, value.span(), quoted(source))),
        _ => finding,
    }
}

/// A number without unit and quotes, with one fix for each likely unit.
pub(crate) fn bare_number(key: &Key, place: &str, span: Span, number: &str, refusal: &Refusal) -> Finding {
    let what = format!("`{}` holds {}; {number} has none.", key.name, holds_said(&key.holds));
    let remedy = format!("Write it in quotes with its unit, for example `{} = {}`.", key.name, key.example);
    let fixes = refusal.mends.iter().map(|mend| {
        replace(format!("Write {}", quoted(&mend.text)), false, span.clone(), quoted(&mend.text))
    });
    found("value-of-wrong-type", place, span.clone(), what, &remedy).with_fixes(fixes.collect::<Vec<_>>())
}

/// A word that is none of the key's.
pub(crate) fn word(key: &Key, place: &str, span: Span, typed: &str, words: &'static [Word]) -> Finding {
    let known: Vec<&str> = words.iter().map(|word| word.word).collect();
    let what = format!("`{}` cannot be '{typed}'.", key.name);
    let remedy = format!("It is {}.", listed(&known));
    let near = nearest::by_letters(typed, known);
    let fixes = near
        .names
        .iter()
        .map(|name| replace(format!("Use '{name}'"), near.clear, span.clone(), quoted(name)));
    found("value-of-wrong-type", place, span.clone(), what, &remedy).with_fixes(fixes.collect::<Vec<_>>())
}

/// A name that cannot be one.
pub(crate) fn name(key: &Key, place: &str, span: Span, name: &str) -> Finding {
    let what = if name.is_empty() {
        format!("`{}` is empty.", key.name)
    } else {
        format!("`{}`: '{name}' cannot be a name.", key.name)
    };
    found("value-of-wrong-type", place, span, what, "A name is one line of text without `.` `[` `]` `|`.")
}

/// A table of figures with fewer than two rows.
pub(crate) fn short_table(key: &Key, place: &str, span: Span, rows: usize) -> Finding {
    let what = format!(
        "The table of `{}` has {rows} row(s); between which values should be interpolated is open.",
        key.name
    );
    found("value-of-wrong-type", place, span, what, "Give two rows or more, or one value without a table.")
}

/// `[layer]` for `[[layer]]` or the other way round.
pub(crate) fn brackets(section: &Section, text: &str, header: &Span) -> Finding {
    let what = match section.form {
        Form::Repeated => format!(
            "`{}` may come several times, so its header has double brackets: `{}`.",
            section.path,
            section.header()
        ),
        _ => format!(
            "There is one `{}`, so its header has single brackets: `{}`.",
            section.path,
            section.header()
        ),
    };
    let finding = found("value-of-wrong-type", section.path, header.clone(), what, "Change the brackets.");
    let written = text.get(header.clone()).unwrap_or_default();
    let name = written.trim_matches(['[', ']', ' ']);
    if section.path == name {
        finding.with_fix(replace(
            format!("Write `{}`", section.header()),
            true,
            header.clone(),
            section.header(),
        ))
    } else {
        finding
    }
}

/// A key where a section is wanted.
pub(crate) fn no_section(section: &Section, entry: &Entry) -> Finding {
    let what = format!("`{}` is a section, not {}.", section.path, said(&entry.value));
    let remedy = format!("Open it with the header `{}` and put its keys below.", section.header());
    found("value-of-wrong-type", section.path, entry.key_span.clone(), what, &remedy)
}

/// A key directly below `[fluid]`, which wants a name.
pub(crate) fn nameless(section: &Section, entry: &Entry, place: &str) -> Finding {
    let what = format!("`{}` stands in `[{}]`, which needs a name.", entry.key, section.path);
    let remedy = format!("Write the header as `{}` with a name of your own.", section.header());
    found("value-of-wrong-type", place, entry.key_span.clone(), what, &remedy)
}

fn said(value: &Value) -> &'static str {
    match value {
        Value::Text(_) => "a text",
        Value::Integer(..) => "a whole number",
        Value::Float(..) => "a number",
        Value::Boolean(..) => "true or false",
        Value::Datetime(..) => "a date",
        Value::Array(..) => "an array",
        Value::Table(_) => "a table",
        Value::Tables(_) => "several tables",
    }
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn a_bare_number_gets_one_fix_per_unit() {
        let text = EXAMPLE.replacen("thickness = \"20 mm\"", "thickness = 20", 1);
        let found = only(&text, "value-of-wrong-type");
        assert!(found.fixes.iter().all(|fix| !fix.keeps_meaning));
        mended(&text, "value-of-wrong-type");
    }

    #[test]
    fn quotes_round_true_are_taken_away() {
        let text = EXAMPLE.replace("wall-drag = true", "wall-drag = \"true\"");
        only(&text, "value-of-wrong-type");
        mended(&text, "value-of-wrong-type");
    }

    #[test]
    fn single_brackets_are_doubled() {
        let text = EXAMPLE.replace("[[accept]]", "[accept]");
        only(&text, "value-of-wrong-type");
        mended(&text, "value-of-wrong-type");
    }

    #[test]
    fn a_word_that_is_none_is_told_the_words() {
        let text = EXAMPLE.replace("top = \"sealed\"", "top = \"seald\"");
        let found = only(&text, "value-of-wrong-type");
        assert!(found.message.remedy.contains("`open` or `sealed`"), "{}", found.message.text());
        mended(&text, "value-of-wrong-type");
    }

    #[test]
    fn a_ratio_may_be_a_bare_number() {
        silent(&EXAMPLE.replace("wave-margin = \"10 %\"", "wave-margin = 0.1"));
    }

    #[test]
    fn names_without_dots() {
        only(&EXAMPLE.replace("title = \"Example\"", "title = 5"), "value-of-wrong-type");
        only(&EXAMPLE.replace("name = \"air\"", "name = \"a.b\""), "value-of-wrong-type");
    }
}
