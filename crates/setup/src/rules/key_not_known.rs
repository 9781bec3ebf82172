//! key-not-known
//!
//! A key or a header that the setup file does not have.
//!
//! Why it matters: What it sets would be ignored in silence, and the experiment judged without it.
//!
//! What to do: Use the key that was meant; the guide lists all of them.
//!
//! Near misses are looked for by meaning first (`depth` of a layer is its `thickness`), then by letters.

use crate::declare::nearest::Near;
use crate::finding::Finding;
use crate::rules::{found, listed, replace};
use crate::tree::{Entry, Value};

/// A key of the section `path` at `place`. `taken`: the nearest key is there already.
pub(crate) fn key(path: &str, place: &str, entry: &Entry, near: &Near<'static>, taken: bool) -> Finding {
    let heading = if path.is_empty() { "The top of the file".to_owned() } else { format!("`{path}`") };
    let what = format!("{heading} has no key `{}`.", entry.key);
    let remedy = match near.names.as_slice() {
        [] => String::new(),
        names if entry.key == "radius" => {
            format!("Give the {} instead, twice the radius.", listed(&names[..1]))
        }
        names if near.clear => format!("Did you mean {}?", listed(&names[..1])),
        names => format!("Did you mean {}?", listed(names)),
    };
    let finding = found(
        "key-not-known",
        &crate::written::join(place, &entry.key),
        entry.key_span.clone(),
        what,
        &remedy,
    );
    // Renaming a radius would halve the cell.
    if taken || entry.key == "radius" {
        return finding;
    }
    let count = if near.clear { 1 } else { near.names.len() };
    finding.with_fixes(near.names.iter().take(count).map(|name| {
        replace(format!("Rename it to `{name}`"), near.clear, entry.key_span.clone(), (*name).to_owned())
    }))
}

/// A header.
pub(crate) fn header(entry: &Entry, near: &Near<'static>) -> Finding {
    let what = format!("There is no section `{}`.", entry.key);
    let names: Vec<&str> = near.names.iter().copied().take(if near.clear { 1 } else { 3 }).collect();
    let remedy = if names.is_empty() { String::new() } else { format!("Did you mean {}?", listed(&names)) };
    let span = match &entry.value {
        Value::Table(table) if !table.span.is_empty() => table.span.clone(),
        Value::Tables(tables) => {
            tables.first().map_or_else(|| entry.key_span.clone(), |table| table.span.clone())
        }
        _ => entry.key_span.clone(),
    };
    let finding = found("key-not-known", &entry.key, span, what, &remedy);
    let repeated = matches!(&entry.value, Value::Tables(tables) if tables.len() > 1);
    match near.names.first() {
        Some(name) if near.clear && !repeated => finding.with_fix(replace(
            format!("Rename it to `{name}`"),
            true,
            entry.key_span.clone(),
            (*name).to_owned(),
        )),
        _ => finding,
    }
}

/// A header below a section, such as `[cell.floor]`; the names of `near` are whole paths.
pub(crate) fn part(place: &str, entry: &Entry, near: &Near<'static>) -> Finding {
    let last = |path: &&'static str| path.rsplit('.').next().unwrap_or(path);
    let names = near.names.iter().map(last).collect();
    let mut finding = header(entry, &Near { names, clear: near.clear });
    finding.place = crate::written::join(place, &entry.key);
    finding.message.what = format!("`{place}` has no part `{}`.", entry.key);
    finding
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn a_depth_is_renamed_to_thickness_and_not_called_missing() {
        let text = EXAMPLE.replacen("thickness = ", "depth = ", 1);
        let found = only(&text, "key-not-known");
        assert!(found.message.remedy.contains("`thickness`"), "{}", found.message.text());
        assert!(found.fixes[0].keeps_meaning);
        mended(&text, "key-not-known");
    }

    #[test]
    fn an_amplitude_gets_one_fix_per_meaning() {
        let text = EXAMPLE.replace("acceleration = \"14", "amplitude = \"14");
        let found = only(&text, "key-not-known");
        let renamed: Vec<&str> = found.fixes.iter().map(|fix| fix.edits[0].new_text.as_str()).collect();
        assert_eq!(renamed, ["acceleration", "displacement"]);
        assert!(found.fixes.iter().all(|fix| !fix.keeps_meaning));
    }

    #[test]
    fn a_header_is_renamed() {
        let text = EXAMPLE.replace("[cell]", "[container]");
        only(&text, "key-not-known");
        mended(&text, "key-not-known");
    }

    #[test]
    fn a_part_of_the_cell_is_looked_for_among_parts() {
        let text = format!("{EXAMPLE}\n[cell.floor]\nthickness = \"10 mm\"\n");
        let found = only(&text, "key-not-known");
        assert_eq!(found.fixes[0].edits[0].new_text, "base");
    }

    #[test]
    fn a_radius_is_not_renamed_to_a_diameter() {
        let text = EXAMPLE.replace("length = \"120 mm\"\nwidth = \"30 mm\"\n", "radius = \"40 mm\"\n");
        let text = text.replace("\"rectangular\"", "\"circular\"");
        let found = only(&text, "key-not-known");
        assert!(found.fixes.is_empty() && found.message.remedy.contains("twice the radius"), "{found:#?}");
    }

    #[test]
    fn nonsense_gets_no_fix() {
        let text = EXAMPLE.replace("[cell]", "[cell]\nzzqqyy = 3");
        assert!(only(&text, "key-not-known").fixes.is_empty());
    }
}
