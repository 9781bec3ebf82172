//! Whole files: two examples that use every key that is looked at between them.

use topheavy_setup::declare::{Attention, Form, declarations};
use topheavy_setup::finding::Finding;
use topheavy_setup::{Understanding, understand};

const EXAMPLES: [&str; 2] =
    [include_str!("examples/levitated.stack.toml"), include_str!("examples/round.stack.toml")];

fn read(text: &str) -> Understanding {
    understand(text)
}

#[test]
fn the_examples_read_without_a_finding() {
    for text in EXAMPLES {
        let findings: Vec<Finding> = read(text).findings;
        assert!(findings.is_empty(), "{findings:#?}");
    }
}

#[test]
fn every_key_that_is_looked_at_is_in_an_example() {
    let read: Vec<Understanding> = EXAMPLES.into_iter().map(read).collect();
    for section in
        declarations().iter().filter(|section| !matches!(section.attention, Attention::NotLooked(_)))
    {
        for key in section.keys.iter().filter(|key| !matches!(key.attention, Attention::NotLooked(_))) {
            let used = read.iter().flat_map(|read| read.places.iter()).any(|(_, spot)| {
                spot.section.path == section.path
                    && spot.declaration.is_some_and(|used| used.name == key.name)
            });
            assert!(used, "no example uses `{}` of `{}`", key.name, section.header());
        }
    }
}

#[test]
fn every_key_is_declared_in_full() {
    for section in declarations() {
        assert!(section.doc.ends_with('.'), "{}", section.path);
        assert!(section.free || !section.keys.is_empty(), "{}", section.path);
        for (index, key) in section.keys.iter().enumerate() {
            let name = format!("{}.{}", section.path, key.name);
            assert!(key.doc.ends_with('.'), "{name}: {:?}", key.doc);
            assert!(!key.example.is_empty(), "{name}");
            assert!(
                !section.keys[..index].iter().any(|other| other.name == key.name),
                "{name} is declared twice"
            );
            assert!(!key.words.contains(&key.name), "{name}: its own name is no near miss");
            for word in key.words {
                let shadowed = section.keys.iter().any(|other| other.name == *word);
                assert!(!shadowed, "{name}: `{word}` is a key of the same section and never a near miss");
                let at_top = declarations()[0].keys.iter().any(|top| top.name == *word);
                assert!(
                    !at_top,
                    "{name}: `{word}` is a top-level key, which a slip of the place is taken for"
                );
                assert_eq!(*word, word.to_lowercase(), "{name}: words are compared in lower case");
            }
            if let Some(bounds) = topheavy_setup::declare::bounds(&key.holds) {
                assert!(bounds.least < bounds.most, "{name}");
                assert!(bounds.least.is_finite() && bounds.most.is_finite(), "{name}");
                assert!(!bounds.said.is_empty() && !bounds.why.is_empty(), "{name}");
            }
        }
    }
}

/// Each declared example is a value that the reader takes, in a file that holds nothing else.
#[test]
fn every_example_of_a_key_reads() {
    for section in declarations().iter().filter(|section| !section.free) {
        for key in section.keys {
            let header = match section.form {
                Form::Root => String::new(),
                Form::Single => format!("[{}]\n", section.path),
                Form::Named => format!("[{}.thing]\n", section.path),
                Form::Repeated => format!("[[{}]]\n", section.path),
            };
            let text = format!("{header}{} = {}\n", key.name, key.example);
            let about_the_value = [
                "line-unreadable",
                "key-not-known",
                "value-of-wrong-type",
                "unit-missing",
                "unit-not-known",
                "unit-of-wrong-kind",
                "amplitude-kind-unsaid",
                "pressure-reference-unsaid",
                "value-out-of-range",
            ];
            let bad: Vec<Finding> = read(&text)
                .findings
                .into_iter()
                .filter(|found| about_the_value.contains(&found.rule))
                .collect();
            assert!(bad.is_empty(), "{text}{bad:#?}");
        }
    }
}

#[test]
fn places_lead_to_the_text_and_back() {
    let text = EXAMPLES[0];
    let places = read(text).places;
    let shown = |place: &str| &text[places.span(place)];
    assert_eq!(shown("layer.oil.thickness"), "\"20 mm\"");
    assert_eq!(shown("layer.oil"), "[[layer]]");
    assert_eq!(shown("layer.oil.viscosity"), "[[layer]]", "not written: the nearest ancestor");
    assert_eq!(shown("interface.oil|air.tension"), "\"21 mN/m\"");
    assert_eq!(shown("interface.air|oil"), "[[interface]]", "either order");
    assert_eq!(shown("interface.air|mixture"), "[[layer]]", "without a section of its own: its first layer");
    assert_eq!(shown("fluid.own brew.density"), "\"1040 kg/m³\"");
    assert_eq!(shown("window"), "", "nothing of it is written: the file as a whole");
    for (needle, place) in [
        ("\"20 mm\"", "layer.oil.thickness"),
        ("[drive]", "drive"),
        ("\"14 g0 peak\"", "drive.acceleration"),
        ("title", "title"),
        ("\ntension = \"21", "interface.oil|air.tension"),
    ] {
        let at = text.find(needle).expect("in the example");
        assert_eq!(places.at(at + 2), Some(place), "{needle}");
    }
}

#[test]
fn a_value_is_rewritten_in_its_own_unit() {
    let text = EXAMPLES[0];
    let places = read(text).places;
    let new = |place: &str, value: f64, digits: u8| {
        places.rewritten(place, value, digits, 101_325.0).map(|edit| edit.new_text).unwrap_or_default()
    };
    assert_eq!(new("layer.oil.thickness", 0.0345, 3), "\"34.5 mm\"");
    assert_eq!(new("drive.acceleration", 16.5 * 9.80665, 3), "\"16.5 g0 peak\"");
    let text = EXAMPLES[1];
    let places = read(text).places;
    let edit = places.rewritten("drive.displacement", 0.0015, 3, 101_325.0).expect("written");
    assert_eq!(edit.new_text, "\"3.00 mm peak-to-peak\"", "peak in, the statement of the file out");
    let edit = places.rewritten("layer.cushion.pressure", 104_325.0, 3, 101_325.0).expect("written");
    assert_eq!(edit.new_text, "\"30.0 mbar gauge\"", "absolute in, gauge out");
}

#[test]
fn values_arrive_in_si() {
    let setup = read(EXAMPLES[0]).setup;
    let drive = setup.drive.expect("a drive");
    assert_eq!(drive.frequency.value, 50.0);
    assert!((drive.acceleration.value - 14.0 * 9.80665).abs() < 1e-9);
    assert_eq!(setup.layers.len(), 5);
    assert!((setup.layers[0].thickness.as_ref().map_or(0.0, |given| given.value) - 0.02).abs() < 1e-12);
    assert_eq!(setup.layers[0].thickness.as_ref().map(|given| given.digits), Some(2));
    assert_eq!(setup.interfaces[0].between, ["oil", "air"]);
    assert!(setup.unreadable_places.is_empty(), "{:?}", setup.unreadable_places);
    assert!(setup.not_looked_at.is_empty());
    assert!(setup.cell.is_some_and(|cell| cell.sealed_top.value && !cell.open_bottom.value));
}

#[test]
fn what_means_the_same_is_equal() {
    let text = EXAMPLES[0];
    let other = text.replace("\"20 mm\"", "\"20   mm\"").replace("[drive]", "# a comment\n[drive]");
    assert_eq!(read(text).setup, read(&other).setup);
}

/// Every word that a declaration says people type is told apart and one of its fixes brings the key back.
#[test]
fn every_word_that_people_type_leads_to_its_key() {
    for text in EXAMPLES {
        for (place, spot) in read(text).places.iter() {
            let (Some(key), Some(span)) = (spot.declaration, spot.key.clone()) else { continue };
            for word in key.words.iter().filter(|word| **word != "radius") {
                let mut typed = text.to_owned();
                typed.replace_range(span.clone(), word);
                let findings = read(&typed).findings;
                assert_eq!(findings.len(), 1, "`{word}` for {place}: {findings:#?}");
                let restores = findings[0].fixes.iter().any(|fix| {
                    let mut mended = typed.clone();
                    for edit in fix.edits.iter().rev() {
                        mended.replace_range(edit.span.clone(), &edit.new_text);
                    }
                    mended == text
                });
                assert!(restores, "`{word}` for {place}: {findings:#?}");
            }
        }
    }
}

/// A key that is taken away is missed by at most one finding, and never by the physics in silence.
#[test]
fn a_key_taken_away_makes_at_most_one_finding() {
    for text in EXAMPLES {
        for (place, spot) in read(text).places.iter().filter(|(_, spot)| spot.declaration.is_some()) {
            let without = format!("{}{}", &text[..spot.statement.start], &text[spot.statement.end..]);
            let findings: Vec<Finding> = read(&without).findings;
            // A layer that loses its name is called in vain by its interface and by an accept.
            let most = if place == "layer.oil.name" { 2 } else { 1 };
            assert!(findings.len() <= most, "without {place}: {findings:#?}");
        }
    }
}

/// A value that cannot be read makes one finding, and nothing downstream complains.
#[test]
fn a_broken_value_makes_one_finding() {
    for text in EXAMPLES {
        for (place, spot) in read(text).places.iter() {
            let Some(value) = spot.value.clone() else { continue };
            for broken in ["\"@\"", "[[]]", "nan"] {
                let free_text = matches!(
                    spot.declaration.map(|key| key.holds),
                    Some(topheavy_setup::declare::Holds::Text | topheavy_setup::declare::Holds::Name)
                );
                let reference = spot.declaration.is_some_and(|key| key.name == "fluid");
                if broken == "\"@\"" && (free_text || reference) {
                    continue;
                }
                let mut typed = text.to_owned();
                typed.replace_range(value.clone(), broken);
                let findings: Vec<Finding> = read(&typed).findings;
                assert_eq!(findings.len(), 1, "{place} = {broken}: {findings:#?}");
            }
        }
    }
}
