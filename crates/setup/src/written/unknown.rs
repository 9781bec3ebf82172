//! Keys and headers that are not declared where they stand.

use super::join;
use super::walk::{Misplaced, Walk};
use crate::declare::{self, Attention, Form, Key, Section, nearest};
use crate::finding::Edit;
use crate::rules;
use crate::tree::{Entry, Table, Value};

/// An entry of the top level that is neither a top-level key nor a section.
pub(super) fn at_top(walk: &mut Walk, table: &Table, entry: &Entry) {
    if matches!(entry.value, Value::Table(_) | Value::Tables(_)) {
        let near = nearest::header(declare::declarations(), &entry.key);
        for path in &near.names {
            walk.document.unreadable.insert((*path).to_owned());
        }
        walk.document.findings.push(rules::key_not_known::header(entry, &near));
        return;
    }
    let keys = declare::section("").map(|root| root.keys).unwrap_or_default();
    unknown_key(walk, "", keys, "", table, entry);
}

/// A key of a section that the section does not have.
pub(super) fn in_section(
    walk: &mut Walk,
    section: &'static Section,
    place: &str,
    table: &Table,
    entry: &Entry,
) {
    let below = format!("{}.", section.path);
    let is_part = |part: &&&'static Section| part.path.starts_with(&below);
    let parts: Vec<&'static Section> = declare::declarations().iter().filter(is_part).copied().collect();
    if matches!(entry.value, Value::Table(_)) && !parts.is_empty() {
        let near = nearest::header(&parts, &entry.key);
        walk.document.findings.push(rules::key_not_known::part(place, entry, &near));
        return;
    }
    unknown_key(walk, section.path, section.keys, place, table, entry);
}

fn unknown_key(walk: &mut Walk, path: &str, keys: &'static [Key], place: &str, table: &Table, entry: &Entry) {
    let top_level = declare::section("").and_then(|root| root.key(&entry.key)).is_some();
    let near = nearest::key(keys, &entry.key, |name| table.get(name).is_some());
    let by_meaning = !top_level && !near.names.is_empty() && meant(keys, &entry.key);
    let homes = homes(&entry.key, path);
    if !by_meaning && !homes.is_empty() {
        walk.misplaced.push(Misplaced {
            place: join(place, &entry.key),
            key: entry.key.clone(),
            key_span: entry.key_span.clone(),
            statement: entry.statement.clone(),
            homes,
        });
        return;
    }
    for name in near.names.iter().filter(|name| table.get(name).is_none()) {
        walk.document.unreadable.insert(join(place, name));
    }
    // A mend must not make a second key of the same name.
    let taken = near.names.first().is_some_and(|name| table.get(name).is_some());
    walk.document.findings.push(rules::key_not_known::key(path, place, entry, &near, taken));
}

/// Reports the keys that belong to another section. What they would have set there is unreadable, not missing.
pub(super) fn settle(walk: &mut Walk, root: &Table) {
    for misplaced in std::mem::take(&mut walk.misplaced) {
        if walk.interrupt.is_due() {
            break;
        }
        let key = misplaced.key.as_str();
        for home in &misplaced.homes {
            let sections: Vec<_> = walk.document.sections(home.path).collect();
            let mut lost: Vec<String> = sections
                .iter()
                .filter(|section| section.entry(key).is_none())
                .map(|section| section.place_of(key))
                .collect();
            if sections.is_empty() && home.form == Form::Single {
                lost.push(join(home.path, key));
            }
            walk.document.unreadable.extend(lost);
        }
        let edits = destination(walk, root, &misplaced).map(|at| moved(walk.text, &misplaced, at));
        walk.document.findings.push(rules::key_under_wrong_heading::finding(&misplaced, edits));
    }
}

/// Where the line belongs, when there is just one such place and nothing stands there yet.
fn destination(walk: &Walk, root: &Table, misplaced: &Misplaced) -> Option<usize> {
    let [home] = misplaced.homes.as_slice() else { return None };
    // In an inline table or below a dotted key the statement is more than the key and its value.
    let before_key = walk.text.get(misplaced.statement.start..misplaced.key_span.start)?;
    if !before_key.trim().is_empty() {
        return None;
    }
    let mut sections = walk.document.sections(home.path);
    match (home.form, sections.next(), sections.next()) {
        (Form::Root, _, _) => {
            if root.get(&misplaced.key).is_some() {
                return None;
            }
            let first_header = walk.headers.first().copied().unwrap_or(0);
            let last_key =
                root.entries.iter().map(|entry| entry.statement.end).filter(|end| *end <= first_header);
            Some(last_key.max().unwrap_or(0))
        }
        (_, Some(section), None) => {
            if section.entry(&misplaced.key).is_some() {
                return None;
            }
            let spot = walk.document.places.exact(&section.place)?;
            if !walk.text.get(spot.header.clone())?.starts_with('[') {
                return None;
            }
            let inside = |end: &usize| spot.reach.contains(&(end - 1));
            let last_key = section
                .entries
                .iter()
                .filter_map(|entry| walk.document.places.exact(&entry.place))
                .map(|spot| spot.statement.end)
                .filter(|end| *end > 0 && inside(end));
            let below_header =
                walk.text.get(spot.header.end..)?.find('\n').map(|line| spot.header.end + line + 1);
            Some(last_key.max().or(below_header).unwrap_or(walk.text.len()))
        }
        _ => None,
    }
}

/// Takes the line with its comment away and puts it in at `at`.
fn moved(text: &str, misplaced: &Misplaced, at: usize) -> Vec<Edit> {
    let newline = super::newline(text);
    let mut line =
        text.get(misplaced.statement.clone()).unwrap_or_default().trim_end_matches(['\r', '\n']).to_owned();
    if at > 0 && !text.get(..at).unwrap_or_default().ends_with('\n') {
        line.insert_str(0, newline);
    }
    line.push_str(newline);
    if at == 0 && text.trim_start().starts_with('[') {
        line.push_str(newline);
    }
    let mut edits = vec![
        Edit { span: at..at, new_text: line },
        Edit { span: misplaced.statement.clone(), new_text: String::new() },
    ];
    edits.sort_by_key(|edit| edit.span.start);
    edits
}

/// Whether the words of a key of the section, or its spelling with other joints, name it.
fn meant(keys: &[Key], typed: &str) -> bool {
    let typed = typed.trim().to_lowercase().replace([' ', '_'], "-");
    keys.iter().any(|key| key.name == typed || key.words.contains(&typed.as_str()))
}

/// The sections that have a key of just this name; the top level alone when it is one of its own.
fn homes(key: &str, path: &str) -> Vec<&'static Section> {
    let having = |section: &&&'static Section| section.path != path && section.key(key).is_some();
    let homes: Vec<&'static Section> = declare::declarations().iter().filter(having).copied().collect();
    match homes.iter().find(|section| section.form == Form::Root) {
        Some(root) => vec![*root],
        None => {
            let looked: Vec<_> = homes.iter().filter(|section| looked_at(section, key)).copied().collect();
            if looked.is_empty() { homes } else { looked }
        }
    }
}

fn looked_at(section: &Section, key: &str) -> bool {
    let looked = |attention: Attention| !matches!(attention, Attention::NotLooked(_));
    looked(section.attention) && section.key(key).is_some_and(|key| looked(key.attention))
}
