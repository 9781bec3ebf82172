//! What an editor shows for a key or a section: made from the declaration alone.

use super::key::{Attention, Form, Holds, Key, NameOf, Need, Section};
use super::{kinds, section};

/// Hover text of a place, in two forms.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Hover {
    /// With code marks and emphasis.
    pub markdown: String,
    /// Without.
    pub plain: String,
}

/// The hover text of a place such as `layer.oil.thickness`, `cell.base` or `title`; `None` when nothing is declared
/// there.
pub fn hover_text(place: &str) -> Option<Hover> {
    let (section, key) = declared(place)?;
    let markdown = match key {
        Some(key) => key_text(section, key),
        None => section_text(section),
    };
    let plain = markdown.replace("**", "").replace('`', "");
    Some(Hover { markdown, plain })
}

/// The declaration of a place.
pub fn declared(place: &str) -> Option<(&'static Section, Option<&'static Key>)> {
    let segments: Vec<&str> = place.split('.').collect();
    match segments.as_slice() {
        [] | [""] => Some((section("")?, None)),
        [only] => match section("").and_then(|root| root.key(only)) {
            Some(key) => Some((section("")?, Some(key))),
            None => Some((section(only)?, None)),
        },
        [first, rest @ ..] => {
            let outer = section(first)?;
            let rest = if matches!(outer.form, Form::Named | Form::Repeated) { &rest[1..] } else { rest };
            match rest {
                [] => Some((outer, None)),
                [key, ..] => {
                    if let Some(key) = outer.key(key) {
                        return Some((outer, Some(key)));
                    }
                    let inner = section(&format!("{first}.{key}"))?;
                    Some((inner, rest.get(1).and_then(|key| inner.key(key))))
                }
            }
        }
    }
}

fn section_text(section: &Section) -> String {
    let mut text = format!("**`{}`**\n\n{}", section.header(), section.doc);
    if section.form == Form::Root {
        text = format!("**the top of the file**\n\n{}", section.doc);
    }
    if !section.keys.is_empty() {
        let keys: Vec<String> = section.keys.iter().map(|key| format!("`{}`", key.name)).collect();
        text.push_str(&format!("\n\nKeys: {}.", keys.join(", ")));
    }
    text.push_str(attention(section.attention));
    text
}

fn key_text(section: &Section, key: &Key) -> String {
    let mut text = format!("**`{}`** in `{}`", key.name, section.header());
    if section.form == Form::Root {
        text = format!("**`{}`** at the top of the file", key.name);
    }
    text.push_str(&format!("\n\n{}\n\nHolds {}", key.doc, holds_said(&key.holds)));
    text.push_str(&format!(", for example `{} = {}`.", key.name, key.example));
    if let Some(words) = words_of(&key.holds) {
        for word in words {
            text.push_str(&format!("\n- `\"{}\"`: {}", word.word, word.doc));
        }
    }
    if let Some(bounds) = super::bounds(&key.holds) {
        text.push_str(&format!("\n\nRange: {} ({}).", bounds.said, bounds.why));
    }
    match key.need {
        Need::Needed => text.push_str("\n\nNeeded."),
        Need::Default { value, source } => text.push_str(&format!("\n\nDefault: {value} ({source}).")),
        Need::Sometimes | Need::Optional => {}
    }
    text.push_str(attention(match section.attention {
        Attention::Looked => key.attention,
        other => other,
    }));
    text
}

fn attention(attention: Attention) -> &'static str {
    match attention {
        Attention::Looked => "",
        Attention::People => "\n\nFor people: nothing is computed from it.",
        Attention::NotLooked(_) => {
            "\n\nThis version reads it and checks its unit, but computes nothing from it."
        }
    }
}

/// The words a key may hold.
pub(super) fn words_of(holds: &Holds) -> Option<&'static [super::key::Word]> {
    match holds {
        Holds::Word(words) | Holds::QuantityOrWord(_, _, words) => Some(words),
        _ => None,
    }
}

/// What a key holds, in a sentence.
pub fn holds_said(holds: &Holds) -> String {
    match holds {
        Holds::Quantity(kind, _) => {
            format!("{} with its unit", kinds::called(*kind)).replace("a ratio with its unit", "a ratio")
        }
        Holds::Figure(kind, _) => {
            format!("{} with its unit, or a table of it against temperature", kinds::called(*kind))
        }
        Holds::Range(kind, _) => {
            format!("a range: two values of {} with `to` between them", kinds::called(*kind))
        }
        Holds::Quantities(kind, _) => {
            format!("{} with its unit, or several in an array", kinds::called(*kind))
        }
        Holds::QuantityOrWord(kind, _, _) => format!("{} with its unit, or a word", kinds::called(*kind)),
        Holds::QuantityOrTable(kind, _, keys) => {
            let names: Vec<String> = keys.iter().map(|key| format!("`{}`", key.name)).collect();
            format!("{} with its unit, or a table of {}", kinds::called(*kind), names.join(", "))
                .replace("a ratio with its unit", "a ratio")
        }
        Holds::Word(words) => {
            let words: Vec<String> = words.iter().map(|word| format!("`\"{}\"`", word.word)).collect();
            format!("one of {}", words.join(", "))
        }
        Holds::Text => "text in quotes".to_owned(),
        Holds::Texts => "an array of texts".to_owned(),
        Holds::Name => "a name in quotes".to_owned(),
        Holds::Reference(name) => format!("the name of {}", referred(*name)),
        Holds::LayerPair => "the names of two layers in an array".to_owned(),
        Holds::Integer(_, _) => "a whole number".to_owned(),
        Holds::Boolean => "`true` or `false`".to_owned(),
        Holds::Date => "a date".to_owned(),
        Holds::Table(_) => "a table".to_owned(),
        Holds::Tables(_) => "an array of tables".to_owned(),
        Holds::Anything => "a value".to_owned(),
    }
}

/// What a name leads to, with its article.
pub fn referred(name: NameOf) -> &'static str {
    match name {
        NameOf::Layer => "a layer",
        NameOf::Fluid => "a fluid",
        NameOf::Body => "a body",
        NameOf::VibrationTable => "a vibration table",
        NameOf::Camera => "a camera",
        NameOf::Stage => "a stage",
        NameOf::Library => "something in a library",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_declared_key_has_a_hover_text_with_its_doc() {
        for section in crate::declare::declarations() {
            let within = match section.form {
                Form::Root => String::new(),
                Form::Single => format!("{}.", section.path),
                Form::Named | Form::Repeated => format!("{}.some name.", section.path),
            };
            for key in section.keys {
                let hover = hover_text(&format!("{within}{}", key.name))
                    .unwrap_or_else(|| panic!("{within}{} has no hover text", key.name));
                assert!(hover.markdown.contains(key.doc), "{within}{}", key.name);
                assert!(!hover.plain.contains('`'), "{within}{}", key.name);
            }
        }
    }

    #[test]
    fn what_is_not_declared_has_none() {
        assert_eq!(hover_text("cell.engine"), None);
        assert_eq!(hover_text("engine"), None);
    }

    #[test]
    fn a_default_is_told_with_its_source() {
        let hover = hover_text("ambient.temperature").unwrap();
        assert!(hover.plain.contains("Default: 20 °C (ISO 1"), "{}", hover.plain);
    }
}
