//! Numbers in JSON: finite or absent.

use serde_json::{Map, Value};

/// A JSON number; `None` for what is not finite.
pub fn json(value: f64) -> Option<Value> {
    serde_json::Number::from_f64(value).map(Value::Number)
}

/// Puts a number under a key; what is not finite stays absent (a finding says why).
pub fn put(object: &mut Map<String, Value>, key: &str, value: f64) {
    if let Some(number) = json(value) {
        object.insert(key.to_owned(), number);
    }
}

/// Puts a number or `null` ('there is none').
pub fn put_or_null(object: &mut Map<String, Value>, key: &str, value: Option<f64>) {
    match value {
        Some(value) => put(object, key, value),
        None => {
            object.insert(key.to_owned(), Value::Null);
        }
    }
}
