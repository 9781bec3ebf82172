//! From the tree to the sections and keys that are declared.

use super::{Document, Written, WrittenEntry, WrittenSection, folded, join, lost, unknown, value};
use crate::declare::{self, Attention, Form, Holds, Section};
use crate::finding::Span;
use crate::interrupt::Interrupt;
use crate::places::Spot;
use crate::resolved::NotLookedAt;
use crate::rules;
use crate::tree::{Entry, Reading, Table, Value};
use std::collections::BTreeMap;

/// More layers than this are refused: no stack has them, and every one costs time.
pub(crate) const MOST_LAYERS: usize = 200;

/// Reads everything that is declared; what is there when the interrupt is due is of no use.
pub(crate) fn walk(text: &str, reading: &Reading, interrupt: &Interrupt) -> Document {
    let mut walk = Walk {
        text,
        interrupt,
        headers: headers(text, &reading.root),
        names: BTreeMap::new(),
        misplaced: Vec::new(),
        document: Document::default(),
    };
    if let Some(root) = declare::section("") {
        walk.root(root, &reading.root);
    }
    unknown::settle(&mut walk, &reading.root);
    lost::mark(text, reading, &mut walk.document);
    walk.document
}

pub(super) struct Walk<'a> {
    pub text: &'a str,
    pub interrupt: &'a Interrupt<'a>,
    /// Starts of all headers, ascending.
    pub headers: Vec<usize>,
    /// How often a place was used already, for equal names.
    names: BTreeMap<String, usize>,
    /// Keys that belong to another section; judged when all sections are known.
    pub misplaced: Vec<Misplaced>,
    pub document: Document,
}

/// A key that belongs to another section.
pub(crate) struct Misplaced {
    /// Place it would have where it stands.
    pub place: String,
    pub key: String,
    pub key_span: Span,
    pub statement: Span,
    /// Sections that have such a key.
    pub homes: Vec<&'static Section>,
}

impl Walk<'_> {
    fn root(&mut self, root: &'static Section, table: &Table) {
        let reach = 0..self.headers.first().copied().unwrap_or(self.text.len());
        self.document.places.insert(
            String::new(),
            Spot {
                key: None,
                value: None,
                header: 0..0,
                statement: 0..0,
                reach,
                quantity: None,
                section: root,
                declaration: None,
            },
        );
        let mut written = WrittenSection {
            declaration: root,
            place: String::new(),
            name: String::new(),
            header: 0..0,
            entries: Vec::new(),
        };
        for entry in &table.entries {
            if self.interrupt.is_due() {
                break;
            }
            if root.key(&entry.key).is_some() {
                self.key(root, "", entry, &mut written);
            } else if let Some(section) =
                declare::section(&entry.key).filter(|section| section.form != Form::Root)
            {
                self.headed(section, entry);
            } else {
                unknown::at_top(self, table, entry);
            }
        }
        self.document.sections.push(written);
    }

    /// An entry of the top level that is named like a section.
    fn headed(&mut self, section: &'static Section, entry: &Entry) {
        match (section.form, &entry.value) {
            (Form::Named, Value::Table(table)) => {
                for inner in &table.entries {
                    match &inner.value {
                        Value::Table(table) => self.section(section, table, inner, &folded(&inner.key)),
                        _ => self.document.findings.push(rules::value_of_wrong_type::nameless(
                            section,
                            inner,
                            section.path,
                        )),
                    }
                }
            }
            (Form::Single, Value::Table(table)) => self.section(section, table, entry, ""),
            (Form::Repeated, Value::Tables(tables)) => self.repeated(section, tables.iter().collect(), entry),
            (Form::Repeated, Value::Array(items, _))
                if items.iter().all(|item| matches!(item, Value::Table(_))) =>
            {
                let tables = items.iter().filter_map(|item| match item {
                    Value::Table(table) => Some(table),
                    _ => None,
                });
                self.repeated(section, tables.collect(), entry);
            }
            // Single brackets where double ones are meant and the other way round: what was meant is clear, so it is
            // read, and the brackets are the only finding.
            (Form::Repeated, Value::Table(table)) => {
                self.document.findings.push(rules::value_of_wrong_type::brackets(
                    section,
                    self.text,
                    &table.span,
                ));
                self.repeated(section, vec![table], entry);
            }
            (Form::Single, Value::Tables(tables)) => {
                if let Some(table) = tables.first() {
                    let second = tables.get(1).map(|table| table.span.clone());
                    self.document.findings.push(rules::value_of_wrong_type::brackets(
                        section,
                        self.text,
                        second.as_ref().unwrap_or(&table.span),
                    ));
                    self.section(section, table, entry, "");
                }
            }
            _ => {
                self.document.findings.push(rules::value_of_wrong_type::no_section(section, entry));
                self.document.unreadable.insert(section.path.to_owned());
            }
        }
    }

    fn repeated(&mut self, section: &'static Section, tables: Vec<&Table>, entry: &Entry) {
        if section.path == "layer" && tables.len() > MOST_LAYERS {
            let span =
                tables.get(MOST_LAYERS).map_or_else(|| entry.key_span.clone(), |table| table.span.clone());
            self.document.findings.push(rules::value_out_of_range::layers(tables.len(), span));
            self.document.unreadable.insert("layer".to_owned());
        }
        for (index, table) in tables.into_iter().enumerate().take(MOST_LAYERS) {
            let name = repeated_name(section, table, index);
            self.section(section, table, entry, &name);
        }
    }

    /// One section with all its keys. `name`: of a named or repeated section, else empty.
    fn section(&mut self, section: &'static Section, table: &Table, entry: &Entry, name: &str) {
        let header = if table.span.is_empty() { entry.key_span.clone() } else { table.span.clone() };
        let mut place = join(section.path, name);
        if name.is_empty() {
            place = section.path.to_owned();
        }
        let (place, first) = self.unique(place);
        if let Some(first) = first.filter(|_| section.form != Form::Single) {
            let related = self.document.places.exact(&first).map(|spot| spot.header.clone());
            let span = name_span(table).unwrap_or_else(|| header.clone());
            self.document
                .findings
                .push(rules::name_given_twice::finding(section, name, &place, span, related));
        }
        let reach = self.reach(&header);
        self.document.places.insert(
            place.clone(),
            Spot {
                key: None,
                value: None,
                header: header.clone(),
                statement: header.clone(),
                reach,
                quantity: None,
                section,
                declaration: None,
            },
        );
        if let Attention::NotLooked(check) = section.attention {
            self.not_looked_at(check, &place, header.clone(), &section.header());
        }
        let mut written = WrittenSection {
            declaration: section,
            place: place.clone(),
            name: name.to_owned(),
            header: header.clone(),
            entries: Vec::new(),
        };
        for inner in &table.entries {
            if self.interrupt.is_due() {
                break;
            }
            let below = join(section.path, &inner.key);
            if section.key(&inner.key).is_some() {
                self.key(section, &place, inner, &mut written);
            } else if let (Some(part), Value::Table(table)) = (declare::section(&below), &inner.value) {
                self.section(part, table, inner, "");
            } else if !section.free {
                unknown::in_section(self, section, &place, table, inner);
            }
        }
        self.document.sections.push(written);
    }

    fn key(&mut self, section: &'static Section, place: &str, entry: &Entry, written: &mut WrittenSection) {
        let Some(key) = section.key(&entry.key) else { return };
        let at = join(place, key.name);
        let value = value::read(self, key, &at, entry);
        if value.is_none() {
            self.document.unreadable.insert(at.clone());
        }
        let quantity = match &value {
            Some(Written::Quantity(quantity)) => Some(quantity.clone()),
            _ => None,
        };
        if quantity.as_ref().is_some_and(|quantity| quantity.tolerance.is_some()) {
            self.document.first_tolerance.get_or_insert_with(|| at.clone());
        }
        let span = entry.value.span();
        self.document.places.insert(
            at.clone(),
            Spot {
                key: Some(entry.key_span.clone()),
                value: Some(span.clone()),
                header: written.header.clone(),
                statement: entry.statement.clone(),
                reach: entry.statement.clone(),
                quantity,
                section,
                declaration: Some(key),
            },
        );
        if let (Attention::NotLooked(check), Attention::Looked | Attention::People) =
            (key.attention, section.attention)
        {
            self.not_looked_at(check, &at, entry.key_span.start..span.end, &format!("`{}`", key.name));
        }
        written.entries.push(WrittenEntry { key, place: at, span, value });
    }

    fn not_looked_at(&mut self, check: &str, place: &str, span: Span, what: &str) {
        self.document.findings.push(rules::not_looked_at::finding(check, place, span, what));
        self.document.not_looked_at.push(NotLookedAt {
            check: check.to_owned(),
            needs: rules::not_looked_at::NEEDS.to_owned(),
            place: place.to_owned(),
        });
    }

    /// The place itself, or with a count when it is used already; then also the place that had it first.
    fn unique(&mut self, place: String) -> (String, Option<String>) {
        let count = self.names.entry(place.clone()).or_insert(0);
        *count += 1;
        if *count == 1 { (place, None) } else { (format!("{place}[{count}]"), Some(place)) }
    }

    /// From a header to the next one; an inline table reaches as far as its braces.
    fn reach(&self, header: &Span) -> Span {
        if self.text.get(header.clone()).is_some_and(|text| text.starts_with('[')) {
            let next = self.headers.partition_point(|start| *start <= header.start);
            header.start..self.headers.get(next).copied().unwrap_or(self.text.len())
        } else {
            header.clone()
        }
    }
}

/// The name by which a repeated section is called in places.
fn repeated_name(section: &Section, table: &Table, index: usize) -> String {
    let text = |key: &str| match table.get(key).map(|entry| &entry.value) {
        Some(Value::Text(text)) => Some(folded(&text.value)).filter(|name| value::is_name(name)),
        _ => None,
    };
    if section.keys.iter().any(|key| matches!(key.holds, Holds::Name)) {
        return text("name").unwrap_or_else(|| format!("{} {}", section.path, index + 1));
    }
    let pair = match table.get("between").map(|entry| &entry.value) {
        Some(Value::Array(items, _)) => match items.as_slice() {
            [Value::Text(first), Value::Text(second)] => [folded(&first.value), folded(&second.value)],
            _ => return index.to_string(),
        },
        _ => return index.to_string(),
    };
    if pair.iter().all(|name| value::is_name(name)) { pair.join("|") } else { index.to_string() }
}

fn name_span(table: &Table) -> Option<Span> {
    table.get("name").or_else(|| table.get("between")).map(|entry| entry.value.span())
}

/// Starts of all headers of a tree.
fn headers(text: &str, root: &Table) -> Vec<usize> {
    fn collect(text: &str, table: &Table, starts: &mut Vec<usize>) {
        if text.get(table.span.clone()).is_some_and(|header| header.starts_with('[')) {
            starts.push(table.span.start);
        }
        for entry in &table.entries {
            match &entry.value {
                Value::Table(inner) => collect(text, inner, starts),
                Value::Tables(inner) => inner.iter().for_each(|inner| collect(text, inner, starts)),
                _ => {}
            }
        }
    }
    let mut starts = Vec::new();
    collect(text, root, &mut starts);
    starts.sort_unstable();
    starts.dedup();
    starts
}
