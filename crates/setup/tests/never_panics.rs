//! Whatever a person types: no panic, and every span and edit fits the text.

use proptest::prelude::*;
use topheavy_setup::finding::Span;
use topheavy_setup::understand;

const EXAMPLES: [&str; 2] =
    [include_str!("examples/levitated.stack.toml"), include_str!("examples/round.stack.toml")];

/// Scraps that people and accidents put into files.
const SCRAPS: [&str; 30] = [
    "",
    "\"",
    "'",
    "\"\"\"",
    "[",
    "]",
    "[[",
    "]]",
    "{",
    "}",
    "=",
    ".",
    ",",
    "#",
    "\n",
    "\r\n",
    "\\u",
    "°",
    "± 0.5 mm",
    "−3",
    "[drive]\n",
    "[[layer]]\n",
    "[layer]\n",
    "title = 1\n",
    "? 5 mm to 20 mm",
    "1e999",
    "nan",
    "-",
    "\u{feff}",
    "a.b.c = ",
];

#[derive(Debug, Clone)]
struct Change {
    at: usize,
    length: usize,
    scrap: usize,
}

fn change() -> impl Strategy<Value = Change> {
    (0..4000usize, 0..60usize, 0..SCRAPS.len()).prop_map(|(at, length, scrap)| Change { at, length, scrap })
}

fn changed(text: &str, changes: &[Change]) -> String {
    let mut out = text.to_owned();
    for change in changes {
        let floor = |at: usize, out: &str| {
            (0..=at.min(out.len())).rev().find(|at| out.is_char_boundary(*at)).unwrap_or(0)
        };
        let start = floor(change.at % (out.len() + 1), &out);
        let end = floor(start + change.length, &out).max(start);
        out.replace_range(start..end, SCRAPS[change.scrap]);
    }
    out
}

fn fits(text: &str, span: &Span) -> bool {
    text.get(span.clone()).is_some()
}

fn check(text: &str) {
    let read = understand(text);
    for finding in &read.findings {
        assert!(fits(text, &finding.span), "{finding:?}\n{text}");
        assert!(!finding.message.what.is_empty(), "{finding:?}");
        assert!(topheavy_setup::RULES.iter().any(|rule| rule.id == finding.rule), "{finding:?}");
        assert!(!finding.message.text().to_lowercase().contains("safe"), "{finding:?}");
        for related in &finding.related {
            assert!(fits(text, &related.span), "{finding:?}\n{text}");
        }
        for fix in &finding.fixes {
            let mut end = 0;
            for edit in &fix.edits {
                assert!(fits(text, &edit.span) && edit.span.start >= end, "{finding:?}\n{text}");
                end = edit.span.end;
            }
        }
    }
    for (place, spot) in read.places.iter() {
        assert!(
            fits(text, &spot.span()) && fits(text, &spot.reach) && fits(text, &spot.statement),
            "{place}: {spot:?}\n{text}"
        );
    }
    for offset in 0..=text.len().min(300) {
        let _ = read.places.at(offset);
    }
    let setup = &read.setup;
    for layer in &setup.layers {
        for given in [&layer.thickness, &layer.volume, &layer.temperature].into_iter().flatten() {
            assert!(given.value.is_finite() && given.value > 0.0, "{given:?}\n{text}");
        }
    }
    if let Some(drive) = &setup.drive {
        assert!(drive.frequency.value > 0.0 && drive.acceleration.value.is_finite(), "{drive:?}\n{text}");
    }
    assert!(!(setup.drive.is_some() && setup.drive_unreadable));
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn mutated_setups(example in 0..2usize, changes in prop::collection::vec(change(), 1..6)) {
        check(&changed(EXAMPLES[example], &changes));
    }

    #[test]
    fn any_text(text in "\\PC{0,200}") {
        check(&text);
    }

    #[test]
    fn any_value_anywhere(key in 0..40usize, value in "[-+0-9a-zA-Z°µ.,/^ ±?\\\\'\"\\[\\]{}]{0,24}") {
        let lines: Vec<&str> = EXAMPLES[0].lines().collect();
        let keyed: Vec<usize> = (0..lines.len()).filter(|line| lines[*line].contains(" = ")).collect();
        let line = keyed[key % keyed.len()];
        let mut lines: Vec<String> = lines.into_iter().map(str::to_owned).collect();
        let name = lines[line].split(" = ").next().unwrap_or_default().to_owned();
        lines[line] = format!("{name} = {value}");
        check(&lines.join("\n"));
    }
}

#[test]
fn a_cut_file_at_every_byte() {
    for text in EXAMPLES {
        for end in (0..text.len()).filter(|end| text.is_char_boundary(*end)) {
            check(&text[..end]);
        }
    }
}
