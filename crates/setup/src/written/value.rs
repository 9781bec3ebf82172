//! One value read by its declaration.

use super::walk::Walk;
use super::{Written, folded};
use crate::declare::{Bounds, Holds, Key, Word, ranges};
use crate::finding::Span;
use crate::resolved::OpenPlace;
use crate::rules;
use crate::tree::{Entry, Table, Text, Value};
use quantity::{Kind, OpenValue, PressureReference, Quantity};

/// Standard atmosphere, Pa: what a gauge pressure is counted from when its range is checked, before the ambient
/// pressure of the file is known.
const ATMOSPHERE: f64 = 101_325.0;

/// Reads the value of a key; what is wrong with it joins the findings. `None`: unreadable.
pub(super) fn read(walk: &mut Walk, key: &'static Key, place: &str, entry: &Entry) -> Option<Written> {
    Reader { walk, key, place }.holds(&key.holds, &entry.value)
}

/// Whether a folded text may be a name.
pub(crate) fn is_name(text: &str) -> bool {
    !text.is_empty() && !text.contains(['.', '[', ']', '|', '\n', '\r'])
}

struct Reader<'r, 'a> {
    walk: &'r mut Walk<'a>,
    key: &'static Key,
    place: &'r str,
}

impl Reader<'_, '_> {
    fn holds(&mut self, holds: &Holds, value: &Value) -> Option<Written> {
        match holds {
            Holds::Quantity(kind, bounds) => self.quantity(*kind, bounds, value).map(Written::Quantity),
            Holds::Figure(kind, bounds) => match value {
                Value::Array(rows, span) => self.figure(*kind, bounds, rows, span),
                _ => self.quantity(*kind, bounds, value).map(Written::Quantity),
            },
            Holds::Range(kind, bounds) => self.range(*kind, bounds, value),
            Holds::Quantities(kind, bounds) => match value {
                Value::Array(items, _) => {
                    let read: Vec<Quantity> =
                        items.iter().filter_map(|item| self.quantity(*kind, bounds, item)).collect();
                    (read.len() == items.len() && !read.is_empty()).then_some(Written::Quantities(read))
                }
                _ => self.quantity(*kind, bounds, value).map(Written::Quantity),
            },
            Holds::QuantityOrWord(kind, bounds, words) => match value {
                Value::Text(text) if words.iter().any(|word| word.word == text.value.trim()) => {
                    Some(Written::Other)
                }
                _ => self.quantity(*kind, bounds, value).map(Written::Quantity),
            },
            Holds::QuantityOrTable(kind, bounds, keys) => match value {
                Value::Table(table) => self.table(keys, table),
                _ => self.quantity(*kind, bounds, value).map(Written::Quantity),
            },
            Holds::Word(words) => self.word(words, value),
            Holds::Text => self.text(value).map(|text| Written::Text(text.value.clone())),
            Holds::Texts => self.texts(value),
            Holds::Name | Holds::Reference(_) => self.name(value).map(Written::Text),
            Holds::LayerPair => self.pair(value),
            Holds::Integer(least, most) => self.integer(*least, *most, value),
            Holds::Boolean => match value {
                Value::Boolean(value, _) => Some(Written::Boolean(*value)),
                _ => self.wrong(value),
            },
            Holds::Date => match value {
                Value::Datetime(date, _) => Some(Written::Date(date.clone())),
                _ => self.wrong(value),
            },
            Holds::Table(keys) => match value {
                Value::Table(table) => self.table(keys, table),
                _ => self.wrong(value),
            },
            Holds::Tables(keys) => match value {
                Value::Array(items, _) => {
                    for item in items {
                        match item {
                            Value::Table(table) => self.table(keys, table)?,
                            _ => self.wrong(item)?,
                        };
                    }
                    Some(Written::Other)
                }
                Value::Tables(tables) => {
                    for table in tables {
                        self.table(keys, table)?;
                    }
                    Some(Written::Other)
                }
                _ => self.wrong(value),
            },
            Holds::Anything => Some(Written::Other),
        }
    }

    fn quantity(&mut self, kind: Kind, bounds: &Bounds, value: &Value) -> Option<Quantity> {
        let quantity = match value {
            Value::Text(text) => self.quantity_text(kind, text)?,
            // A ratio may be a bare number; everywhere else its unit is missing.
            Value::Integer(..) | Value::Float(..) => {
                let number = self.source(&value.span()).trim_start_matches('+').to_owned();
                match quantity::parse(&number, kind) {
                    Ok(quantity) => quantity,
                    Err(refusal) => {
                        let finding = if kind == Kind::Ratio {
                            rules::refused(self.key, self.place, value.span(), value.span(), &refusal)
                        } else {
                            rules::value_of_wrong_type::bare_number(
                                self.key,
                                self.place,
                                value.span(),
                                &number,
                                &refusal,
                            )
                        };
                        self.walk.document.findings.push(finding);
                        return None;
                    }
                }
            }
            _ => return self.wrong(value),
        };
        self.within(bounds, &quantity, value.span()).then_some(quantity)
    }

    fn quantity_text(&mut self, kind: Kind, text: &Text) -> Option<Quantity> {
        let refusal = match quantity::parse_open(&text.value, kind) {
            Some(Ok(open)) => {
                self.open(open, text.span.clone());
                return None;
            }
            Some(Err(refusal)) => refusal,
            None => match quantity::parse(&text.value, kind) {
                Ok(quantity) => return Some(quantity),
                Err(refusal) => refusal,
            },
        };
        let at = text.locate(clamped(&refusal.range, &text.value));
        let at = if at.is_empty() { text.span.clone() } else { at };
        self.walk.document.findings.push(rules::refused(
            self.key,
            self.place,
            at,
            text.span.clone(),
            &refusal,
        ));
        None
    }

    fn open(&mut self, open: OpenValue, span: Span) {
        let bounds = match &open {
            OpenValue::Between(low, high) => Some((low.value, high.value)),
            _ => None,
        };
        self.walk.document.open_values.push(OpenPlace { place: self.place.to_owned(), bounds });
        let count = self.walk.document.open_values.len();
        self.walk
            .document
            .findings
            .push(rules::open_value_unsolved::finding(self.key, self.place, span, count));
    }

    fn within(&mut self, bounds: &Bounds, quantity: &Quantity, span: Span) -> bool {
        let mut value = quantity.peak();
        if quantity.reference == Some(PressureReference::Gauge) {
            value += ATMOSPHERE;
        }
        let bounds = match (quantity.kind, bounds == &ranges::VISCOSITY) {
            (Kind::KinematicViscosity, true) => &ranges::KINEMATIC,
            _ => bounds,
        };
        let within = bounds.hold(value);
        if !within {
            let finding =
                rules::value_out_of_range::finding(self.key, self.place, span, value, quantity.kind, bounds);
            self.walk.document.findings.push(finding);
        }
        within
    }

    fn range(&mut self, kind: Kind, bounds: &Bounds, value: &Value) -> Option<Written> {
        let Value::Text(text) = value else { return self.wrong(value) };
        match quantity::parse_range(&text.value, kind) {
            Ok((low, high)) => {
                let within = self.within(bounds, &low, text.span.clone())
                    && self.within(bounds, &high, text.span.clone());
                within.then_some(Written::Other)
            }
            Err(refusal) => {
                let at = text.locate(clamped(&refusal.range, &text.value));
                let finding = rules::refused(self.key, self.place, at, text.span.clone(), &refusal);
                self.walk.document.findings.push(finding);
                None
            }
        }
    }

    /// `[["20 °C", "520 mPa s"], …]`
    fn figure(&mut self, kind: Kind, bounds: &Bounds, rows: &[Value], span: &Span) -> Option<Written> {
        let mut points = Vec::with_capacity(rows.len());
        for row in rows {
            match row {
                Value::Array(cells, _) if cells.len() == 2 => {
                    let temperature = self.quantity(Kind::Temperature, &ranges::TEMPERATURE, &cells[0])?;
                    points.push((temperature, self.quantity(kind, bounds, &cells[1])?));
                }
                _ => return self.wrong(row),
            }
        }
        if points.len() < 2 {
            let finding =
                rules::value_of_wrong_type::short_table(self.key, self.place, span.clone(), points.len());
            self.walk.document.findings.push(finding);
            return None;
        }
        points.sort_by(|a, b| a.0.value.total_cmp(&b.0.value));
        let twice = points.windows(2).find(|pair| pair[0].0.value == pair[1].0.value);
        let mixed = points.windows(2).find(|pair| pair[0].1.kind != pair[1].1.kind);
        let what = match (twice, mixed) {
            (Some(pair), _) => format!(
                "The table of `{}` has two rows at {}.",
                self.key.name,
                quantity::print(pair[0].0.value, Kind::Temperature, 4)
            ),
            (None, Some(_)) => {
                format!("The table of `{}` mixes dynamic and kinematic viscosities.", self.key.name)
            }
            (None, None) => return Some(Written::Figure(points)),
        };
        let finding = rules::values_disagree::table(self.place, span.clone(), what);
        self.walk.document.findings.push(finding);
        None
    }

    fn word(&mut self, words: &'static [Word], value: &Value) -> Option<Written> {
        let Value::Text(text) = value else { return self.wrong(value) };
        let typed = folded(&text.value);
        if let Some(word) = words.iter().find(|word| word.word == typed) {
            return Some(Written::Word(word.word));
        }
        let finding =
            rules::value_of_wrong_type::word(self.key, self.place, text.span.clone(), &typed, words);
        self.walk.document.findings.push(finding);
        None
    }

    fn text<'v>(&mut self, value: &'v Value) -> Option<&'v Text> {
        match value {
            Value::Text(text) => {
                let is_path = rules::path_leaves_root::PATH_KEYS.contains(&self.key.name);
                if is_path && rules::path_leaves_root::leaves(&text.value) {
                    let finding =
                        rules::path_leaves_root::finding(self.place, text.span.clone(), &text.value);
                    self.walk.document.findings.push(finding);
                }
                Some(text)
            }
            _ => self.wrong(value),
        }
    }

    fn texts(&mut self, value: &Value) -> Option<Written> {
        let Value::Array(items, _) = value else { return self.wrong(value) };
        let mut texts = Vec::with_capacity(items.len());
        for item in items {
            texts.push(self.text(item)?.value.clone());
        }
        Some(Written::Texts(texts))
    }

    fn name(&mut self, value: &Value) -> Option<String> {
        let text = self.text(value)?;
        let name = folded(&text.value);
        let one_line = !text.value.trim().contains(['\n', '\r']);
        if is_name(&name) && one_line {
            return Some(name);
        }
        let finding = rules::value_of_wrong_type::name(self.key, self.place, text.span.clone(), &name);
        self.walk.document.findings.push(finding);
        None
    }

    fn pair(&mut self, value: &Value) -> Option<Written> {
        match value {
            Value::Array(items, _) if items.len() == 2 => {
                let first = self.name(&items[0]);
                let second = self.name(&items[1]);
                Some(Written::Texts(vec![first?, second?]))
            }
            _ => self.wrong(value),
        }
    }

    fn integer(&mut self, least: i64, most: i64, value: &Value) -> Option<Written> {
        let Value::Integer(number, span) = value else { return self.wrong(value) };
        if (least..=most).contains(number) {
            return Some(Written::Other);
        }
        let finding =
            rules::value_out_of_range::integer(self.key, self.place, span.clone(), *number, least, most);
        self.walk.document.findings.push(finding);
        None
    }

    /// A table within a key.
    fn table(&mut self, keys: &'static [Key], table: &Table) -> Option<Written> {
        let mut whole = true;
        let mut parts = Vec::new();
        for entry in &table.entries {
            let place = super::join(self.place, &entry.key);
            match keys.iter().find(|key| key.name == entry.key) {
                Some(key) => {
                    let mut reader = Reader { walk: self.walk, key, place: &place };
                    match reader.holds(&key.holds, &entry.value) {
                        Some(Written::Quantity(quantity)) => parts.push((key.name, quantity)),
                        Some(_) => {}
                        None => whole = false,
                    }
                }
                None => {
                    let near =
                        crate::declare::nearest::key(keys, &entry.key, |name| table.get(name).is_some());
                    let taken = near.names.first().is_some_and(|name| table.get(name).is_some());
                    let finding = rules::key_not_known::key(self.key.name, self.place, entry, &near, taken);
                    self.walk.document.findings.push(finding);
                    whole = false;
                }
            }
        }
        whole.then_some(Written::Parts(parts))
    }

    fn wrong<T>(&mut self, value: &Value) -> Option<T> {
        let source = self.source(&value.span()).to_owned();
        let finding = rules::value_of_wrong_type::finding(self.key, self.place, value, &source);
        self.walk.document.findings.push(finding);
        None
    }

    fn source(&self, span: &Span) -> &str {
        self.walk.text.get(span.clone()).unwrap_or_default()
    }
}

/// A range that lies inside the text, whatever it was.
fn clamped(range: &Span, text: &str) -> Span {
    let end = range.end.min(text.len());
    range.start.min(end)..end
}
