//! A JSON Schema (draft 07) of the setup file, for editors that know TOML by schema. It is self-contained and looser
//! than the tool: units and ranges are the tool's own business, keys and words are here.

use super::declarations;
use super::hover::{holds_said, words_of};
use super::key::{Form, Holds, Key, Need, Section};
use serde_json::{Map, Value, json};

/// The schema.
pub fn schema() -> Value {
    let mut root = Map::new();
    for section in declarations() {
        match section.form {
            Form::Root => root.extend(properties(section.keys)),
            Form::Single => nest(&mut root, section),
            Form::Named => {
                let named = json!({
                    "type": "object",
                    "description": section.doc,
                    "additionalProperties": object(section),
                });
                root.insert(section.path.to_owned(), named);
            }
            Form::Repeated => {
                let repeated =
                    json!({ "type": "array", "description": section.doc, "items": object(section) });
                root.insert(section.path.to_owned(), repeated);
            }
        }
    }
    json!({
        "$schema": "http://json-schema.org/draft-07/schema#",
        "title": "Setup file (*.stack.toml)",
        "type": "object",
        "properties": root,
        "additionalProperties": false,
    })
}

/// `cell.base` becomes a property of `cell`, which is declared before it.
fn nest(root: &mut Map<String, Value>, section: &Section) {
    match section.path.split_once('.') {
        None => {
            root.insert(section.path.to_owned(), object(section));
        }
        Some((outer, inner)) => {
            let properties = root.get_mut(outer).and_then(|outer| outer.get_mut("properties"));
            if let Some(Value::Object(properties)) = properties {
                properties.insert(inner.to_owned(), object(section));
            }
        }
    }
}

fn object(section: &Section) -> Value {
    let needed: Vec<&str> =
        section.keys.iter().filter(|key| key.need == Need::Needed).map(|key| key.name).collect();
    let mut object = json!({
        "type": "object",
        "description": section.doc,
        "properties": properties(section.keys),
        "additionalProperties": section.free,
    });
    if !needed.is_empty() {
        object["required"] = json!(needed);
    }
    object
}

fn properties(keys: &[Key]) -> Map<String, Value> {
    keys.iter().map(|key| (key.name.to_owned(), property(key))).collect()
}

fn property(key: &Key) -> Value {
    let mut property = shape(&key.holds);
    let mut description = format!("{} Holds {}.", key.doc, holds_said(&key.holds)).replace('`', "");
    if let Some(bounds) = super::bounds(&key.holds) {
        description.push_str(&format!(" Range: {}.", bounds.said));
    }
    if let Need::Default { value, source } = key.need {
        description.push_str(&format!(" Default: {value} ({source})."));
    }
    property["description"] = json!(description);
    property
}

fn shape(holds: &Holds) -> Value {
    let text = json!({ "type": "string" });
    let quantity = |kind: quantity::Kind| match kind {
        quantity::Kind::Ratio => json!({ "type": ["string", "number"] }),
        _ => json!({ "type": "string" }),
    };
    match holds {
        Holds::Quantity(kind, _) => quantity(*kind),
        Holds::Figure(kind, _) => {
            let row = json!({ "type": "array", "items": quantity(*kind), "minItems": 2, "maxItems": 2 });
            json!({ "anyOf": [quantity(*kind), { "type": "array", "items": row, "minItems": 2 }] })
        }
        Holds::Quantities(kind, _) => {
            json!({ "anyOf": [quantity(*kind), { "type": "array", "items": quantity(*kind), "minItems": 1 }] })
        }
        Holds::QuantityOrTable(kind, _, keys) => {
            let table =
                json!({ "type": "object", "properties": properties(keys), "additionalProperties": false });
            json!({ "anyOf": [quantity(*kind), table] })
        }
        Holds::Word(_) => {
            let words: Vec<&str> = words_of(holds).unwrap_or_default().iter().map(|word| word.word).collect();
            json!({ "enum": words })
        }
        Holds::Range(_, _) | Holds::QuantityOrWord(_, _, _) | Holds::Text | Holds::Reference(_) => text,
        Holds::Name => json!({ "type": "string", "pattern": "^[^.\\[\\]|\\r\\n]+$" }),
        Holds::Texts => json!({ "type": "array", "items": text }),
        Holds::LayerPair => json!({ "type": "array", "items": text, "minItems": 2, "maxItems": 2 }),
        Holds::Integer(least, most) => json!({ "type": "integer", "minimum": least, "maximum": most }),
        Holds::Boolean => json!({ "type": "boolean" }),
        // A TOML date reaches a JSON Schema as text.
        Holds::Date => text,
        Holds::Table(keys) => {
            json!({ "type": "object", "properties": properties(keys), "additionalProperties": false })
        }
        Holds::Tables(keys) => json!({
            "type": "array",
            "items": { "type": "object", "properties": properties(keys), "additionalProperties": false },
        }),
        Holds::Anything => json!({}),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_declared_key_is_in_the_schema() {
        let schema = schema();
        for section in declarations() {
            let object = match section.form {
                Form::Root => &schema,
                Form::Single => {
                    section.path.split('.').fold(&schema, |outer, part| &outer["properties"][part])
                }
                Form::Named => &schema["properties"][section.path]["additionalProperties"],
                Form::Repeated => &schema["properties"][section.path]["items"],
            };
            for key in section.keys {
                let property = &object["properties"][key.name];
                assert!(
                    property["description"]
                        .as_str()
                        .is_some_and(|doc| doc.contains(&key.doc.replace('`', ""))),
                    "{}.{}",
                    section.path,
                    key.name
                );
            }
        }
    }
}
