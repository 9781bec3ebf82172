//! Values that are lost with a broken line: their places are unreadable, not missing.

use super::Document;
use crate::declare::{self, Form};
use crate::finding::Related;
use crate::places::Spot;
use crate::rules;
use crate::tree::{Reading, Slip, SlipKind};

/// Reports every broken statement, and marks the place of every value that it took away.
pub(super) fn mark(text: &str, reading: &Reading, document: &mut Document) {
    for slip in &reading.slips {
        let place = place_of(slip, document);
        let mut finding = rules::slip(text, slip, &place);
        let first = document.places.exact(&place).and_then(|spot| spot.key.clone());
        if let Some(span) = first.filter(|_| slip.kind == SlipKind::GivenTwice && finding.related.is_empty())
        {
            finding.related.push(Related { span, message: "Given here first.".to_owned() });
        }
        document.findings.push(finding);
        if place.is_empty() {
            mark_unknown(text, slip.span.start, slip.kind, document);
        } else {
            if slip.kind == SlipKind::GivenTwice {
                forget(&place, document);
            }
            document.unreadable.insert(place);
        }
    }
}

/// Of two equal keys it is not sure which is meant, so neither is used.
fn forget(place: &str, document: &mut Document) {
    for entry in document.sections.iter_mut().flat_map(|section| &mut section.entries) {
        if entry.place == place {
            entry.value = None;
        }
    }
}

/// The place of the value that a slip took away; empty when it cannot be told.
fn place_of(slip: &Slip, document: &Document) -> String {
    let first = slip.related.as_ref().filter(|_| slip.kind == SlipKind::GivenTwice).and_then(|first| {
        let has_key = |spot: &Spot| {
            spot.key.as_ref().is_some_and(|key| key.start <= first.start && first.end <= spot.statement.end)
        };
        document.places.iter().find(|(_, spot)| has_key(spot)).map(|(place, _)| place.to_owned())
    });
    match (first, slip.lost_key.as_deref().unwrap_or_default()) {
        (Some(place), _) => place,
        (None, []) => String::new(),
        (None, [key]) => key.clone(),
        (None, [outer, rest @ ..]) => place_below(outer, rest, slip.span.start, document),
    }
}

/// The place of a lost key. In a repeated section the path has no index, so the element is told by position: the last
/// header above the slip.
fn place_below(outer: &str, rest: &[String], start: usize, document: &Document) -> String {
    let repeated = declare::section(outer).is_some_and(|section| section.form == Form::Repeated);
    if !repeated {
        return format!("{outer}.{}", rest.join("."));
    }
    let above = document
        .sections(outer)
        .filter(|section| section.header.start <= start)
        .max_by_key(|section| section.header.start);
    let keys: Vec<&str> =
        rest.iter().map(String::as_str).filter(|part| part.parse::<usize>().is_err()).collect();
    match above {
        Some(section) => format!("{}.{}", section.place, keys.join(".")),
        None => outer.to_owned(),
    }
}

/// A broken line whose key cannot be told. When it is a header, the sections that it may have opened are not known:
/// a broken drive must not be taken as 'no drive', nor a broken layer as 'no layer'.
fn mark_unknown(text: &str, start: usize, kind: SlipKind, document: &mut Document) {
    let line = text.get(start..).unwrap_or_default().lines().next().unwrap_or_default();
    let before = text.get(..start).unwrap_or_default().rsplit('\n').next().unwrap_or_default();
    let line = format!("{before}{line}");
    let is_header = line.trim_start().starts_with('[');
    if is_header || kind == SlipKind::TableUnknown {
        let known: Vec<&str> = declare::declarations()
            .iter()
            .filter(|section| {
                !section.path.is_empty() && !section.path.contains('.') && line.contains(section.path)
            })
            .map(|section| section.path)
            .collect();
        let lost = if known.is_empty() { vec!["drive", "layer", "cell"] } else { known };
        for path in lost {
            if document.section(path).is_none() || path == "layer" {
                document.unreadable.insert(path.to_owned());
            }
        }
        return;
    }
    // A line without a readable key may have been any key of its section.
    let above = document
        .sections
        .iter()
        .filter(|section| section.header.start <= start && !section.place.is_empty())
        .max_by_key(|section| section.header.start);
    if let Some(section) = above {
        let absent: Vec<String> = section
            .declaration
            .keys
            .iter()
            .filter(|key| section.entry(key.name).is_none())
            .map(|key| section.place_of(key.name))
            .collect();
        document.unreadable.extend(absent);
    }
}
