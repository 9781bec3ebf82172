//! A broken line never blanks the file.

use proptest::prelude::*;
use topheavy_setup::edit::apply;
use topheavy_setup::finding::Edit;
use topheavy_setup::read;
use topheavy_setup::tree::{SlipKind, Table, Value};

/// Kinds of broken line: most are what a half-typed or pasted line looks like.
const BROKEN: &[&str] = &[
    "bad =",
    "bad = 1 2",
    "bad = 12 mm",
    "bad = hello",
    "bad = \"open",
    "bad = 'open",
    "bad = \"esc \\q\"",
    "bad = 1.2.3",
    "bad = 0x",
    "= 3",
    "a.x. = 3",
    "k2 = 9",
    "[top]",
    "bad = 3]",
    "bad = 3}",
    "bad = \"x\"]",
    "é = 3",
    "bad == 3",
    "bad = [1 2]",
    "bad = {a = , b = 2}",
    "bad",
    "bad word",
    "bad: 3",
    "bad = [1, 2",
    "bad = { a = 1",
    "bad = \"\"\"abc",
    "bad = '''abc",
    "[bad",
    "[]",
    "[bad] junk",
    "[[bad]",
    "bad = “12 mm”",
    "bad = 1,5",
    "]",
    "\"bad = 3",
    "bad = 12 # mm\u{0}",
];

/// Seven good keys around one broken line: (path, value text).
fn file(broken: &str) -> (String, [(&'static str, &'static str, &'static str); 7]) {
    let text = format!(
        "k0 = 0\n[top]\nk1 = \"one\"\nk2 = 2.5\n{broken}\nk3 = true\n[top.sub]\nk4 = 'four'\n[[arr]]\nk5 = [1, 2]\n[[arr]]\nk6 = 6\n"
    );
    let keys = [
        ("", "k0", "0"),
        ("top", "k1", "\"one\""),
        ("top", "k2", "2.5"),
        ("top", "k3", "true"),
        ("top.sub", "k4", "'four'"),
        ("arr.0", "k5", "[1, 2]"),
        ("arr.1", "k6", "6"),
    ];
    (text, keys)
}

fn table<'t>(root: &'t Table, path: &str) -> Option<&'t Table> {
    let mut table = root;
    for part in path.split('.').filter(|part| !part.is_empty()) {
        table = match part.parse::<usize>() {
            Ok(_) => table,
            Err(_) => match &table.get(part)?.value {
                Value::Table(inner) => inner,
                Value::Tables(list) => {
                    let index = path.rsplit('.').next()?.parse::<usize>().ok()?;
                    return list.get(index);
                }
                _ => return None,
            },
        };
    }
    Some(table)
}

#[test]
fn no_good_key_is_lost_and_no_span_is_wrong() {
    for (ending, bom) in [("\n", ""), ("\r\n", ""), ("\n", "\u{feff}")] {
        let mut complete = 0;
        for broken in BROKEN {
            let (text, keys) = file(broken);
            let text = format!("{bom}{}", text.replace('\n', ending));
            let reading = read(&text);
            assert!(!reading.slips.is_empty(), "{broken:?} is no TOML and must be said");
            let mut kept = 0;
            for (path, key, value) in keys {
                // Below a header whose name is clear in spite of the slip, the key belongs to that table.
                let below = path == "top" && key == "k3" && broken.contains("[bad");
                let path = match (below, broken.starts_with("[[")) {
                    (true, true) => "bad.0",
                    (true, false) => "bad",
                    _ => path,
                };
                let Some(entry) = table(&reading.root, path).and_then(|table| table.get(key)) else {
                    continue;
                };
                assert_eq!(&text[entry.key_span.clone()], key, "{broken:?}");
                assert_eq!(&text[entry.value.span()], value, "{broken:?}");
                assert!(text[entry.statement.clone()].starts_with(key), "{broken:?}");
                kept += 1;
            }
            assert!(kept >= 6, "{broken:?}: {kept} of 7 keys");
            complete += usize::from(kept == 7);
            for slip in &reading.slips {
                assert!(
                    text.get(slip.span.clone()).is_some() && text.get(slip.statement.clone()).is_some(),
                    "{broken:?}"
                );
            }
        }
        assert!(complete + 3 >= BROKEN.len(), "{complete} of {} kinds lose no key", BROKEN.len());
        assert!(BROKEN.len() >= 30);
    }
}

#[test]
fn every_mend_reads_cleanly_and_touches_nothing_else() {
    let mut mended = 0;
    for broken in BROKEN {
        for comment in ["", "  # why"] {
            let (text, _) = file(&format!("{broken}{comment}"));
            let reading = read(&text);
            for slip in &reading.slips {
                let Some((title, new_text)) = &slip.mend else { continue };
                let edit = Edit { span: slip.statement.clone(), new_text: new_text.clone() };
                let mended_text = apply(&text, &[edit]).unwrap();
                let again = read(&mended_text);
                assert!(again.slips.len() < reading.slips.len(), "{broken:?} → {new_text:?} ({title})");
                assert!(comment.is_empty() || mended_text.contains(comment), "{broken:?} lost its comment");
                mended += 1;
            }
        }
    }
    assert!(mended >= 30, "only {mended} mends were offered");
}

#[test]
fn mends_say_what_a_person_would() {
    for (broken, mended) in [
        ("thickness = 12 mm", "thickness = \"12 mm\""),
        ("thickness = \"12 mm", "thickness = \"12 mm\""),
        ("thickness = 12 mm\"", "thickness = \"12 mm\""),
        ("thickness: \"12 mm\"", "thickness = \"12 mm\""),
        ("thickness: 12 mm", "thickness = \"12 mm\""),
        ("thickness == \"12 mm\"", "thickness = \"12 mm\""),
        ("thickness = “12 mm”", "thickness = \"12 mm\""),
        ("thickness \"12 mm\"", "thickness = \"12 mm\""),
        ("thickness = \"12 mm\",", "thickness = \"12 mm\""),
        ("vented = True", "vented = true"),
        ("between = [\"a\", \"b\"", "between = [\"a\", \"b\"]"),
        ("[drive", "[drive]"),
        ("[[layer]", "[[layer]]"),
        ("[drive] fast", "[drive] # fast"),
    ] {
        let text = format!("{broken}\n");
        let reading = read(&text);
        let (_, new_text) = reading.slips[0].mend.clone().unwrap_or_else(|| panic!("no mend for {broken:?}"));
        assert_eq!(new_text.trim_end(), mended, "{broken:?}");
    }
}

#[test]
fn lost_keys_are_named() {
    let reading = read("[drive]\nfrequency = 50 Hz\nacceleration =\n");
    let lost: Vec<_> =
        reading.slips.iter().map(|slip| slip.lost_key.clone().unwrap_or_default().join(".")).collect();
    assert_eq!(lost, ["drive.frequency", "drive.acceleration"]);
}

#[test]
fn equal_keys_and_sections_are_said_with_the_first() {
    let text = "[drive]\na = 1\na = 2\n[drive]\nb = 3\n";
    let reading = read(text);
    assert_eq!(reading.slips.len(), 2);
    assert!(reading.slips.iter().all(|slip| slip.kind == SlipKind::GivenTwice && slip.related.is_some()));
    let drive = table(&reading.root, "drive").unwrap();
    assert!(drive.get("b").is_some(), "the section goes on");
    assert!(matches!(drive.get("a").unwrap().value, Value::Integer(1, _)), "the first key stays");
}

#[test]
fn hostile_texts_are_read_in_bounded_time() {
    let many = |s: &str, n: usize| s.repeat(n);
    let texts = [
        many("[", 1_000_000),
        many("a.", 500_000) + "b = 1",
        format!("a = {}1{}", many("[", 10_000), many("]", 10_000)),
        format!("a = \"{}\"", many("x", 1_000_000)),
        many("a = \"\"\"\n", 50_000),
        many("a = [\n", 50_000),
        (0..60_000).map(|i| format!("k{i} = {i}\n")).collect::<String>(),
        many("[[layer]]\nname = \"x\"\n", 40_000),
        many("bad line\n", 100_000),
        "\0\0\0".to_owned(),
        "a = 1\rb = 2\r".to_owned(),
        "\u{feff}".to_owned(),
        String::new(),
    ];
    for text in texts {
        let start = std::time::Instant::now();
        let reading = read(&text);
        assert!(reading.slips.len() <= 202);
        // Not a timed test: a bound a hundred times above what it takes, against accidental quadratic cost.
        assert!(
            start.elapsed().as_secs() < 20,
            "{:?}… took {:?}",
            &text.chars().take(20).collect::<String>(),
            start.elapsed()
        );
    }
}

fn value_text() -> impl Strategy<Value = String> {
    prop_oneof![
        any::<i64>().prop_map(|i| i.to_string()),
        (-1e6..1e6f64).prop_map(|x| format!("{x:.3}")),
        any::<bool>().prop_map(|b| b.to_string()),
        "[ a-z0-9µ°/²]{0,12}".prop_map(|s| format!("\"{s}\"")),
        "[a-z]{0,5}".prop_map(|s| format!("'{s}'")),
        Just("[1, 2, 3]".to_owned()),
        Just("[[\"20 °C\", \"5 mPa s\"],\n [\"25 °C\", \"4 mPa s\"]]".to_owned()),
        Just("{ a = 1, b.c = \"x\" }".to_owned()),
        Just("2026-03-14".to_owned()),
        Just("\"\"\"\nlong\ntext\"\"\"".to_owned()),
    ]
}

fn flatten(table: &Table, path: &str, text: &str, out: &mut Vec<(String, String)>) {
    for entry in &table.entries {
        let path = format!("{path}.{}", entry.key);
        match &entry.value {
            Value::Table(inner) => flatten(inner, &path, text, out),
            Value::Tables(list) => {
                for (i, inner) in list.iter().enumerate() {
                    flatten(inner, &format!("{path}[{i}]"), text, out);
                }
            }
            value => out.push((path, text[value.span()].to_owned())),
        }
    }
}

fn flatten_oracle(table: &dyn toml_edit::TableLike, path: &str, text: &str, out: &mut Vec<(String, String)>) {
    for (key, item) in table.iter() {
        let path = format!("{path}.{key}");
        match item {
            toml_edit::Item::Value(toml_edit::Value::InlineTable(inner)) => {
                flatten_oracle(inner, &path, text, out)
            }
            toml_edit::Item::Value(value) => out.push((path, text[value.span().unwrap()].to_owned())),
            toml_edit::Item::Table(inner) => flatten_oracle(inner, &path, text, out),
            toml_edit::Item::ArrayOfTables(list) => {
                for (i, inner) in list.iter().enumerate() {
                    flatten_oracle(inner, &format!("{path}[{i}]"), text, out);
                }
            }
            toml_edit::Item::None => {}
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    /// Second reader: the TOML library on the whole file.
    #[test]
    fn sound_files_read_as_the_library_reads_them(
        top in proptest::collection::vec(value_text(), 0..4),
        sections in proptest::collection::vec((any::<bool>(), proptest::collection::vec(value_text(), 0..4)), 0..5),
        crlf in any::<bool>(),
    ) {
        let mut text = String::new();
        for (i, value) in top.iter().enumerate() {
            text += &format!("k{i} = {value} # note\n");
        }
        for (s, (repeated, values)) in sections.iter().enumerate() {
            text += &if *repeated { "\n[[layer]]\n".to_owned() } else { format!("\n[s{s}.inner]\n") };
            for (i, value) in values.iter().enumerate() {
                text += &format!("  k{i} = {value}\n");
            }
        }
        if crlf {
            text = text.replace('\n', "\r\n");
        }
        let oracle = toml_edit::Document::parse(text.clone());
        prop_assume!(oracle.is_ok());
        let (mut ours, mut theirs) = (Vec::new(), Vec::new());
        let reading = read(&text);
        prop_assert!(reading.slips.is_empty(), "{:?}", reading.slips);
        flatten(&reading.root, "", &text, &mut ours);
        flatten_oracle(oracle.unwrap().as_table(), "", &text, &mut theirs);
        ours.sort();
        theirs.sort();
        prop_assert_eq!(ours, theirs);
    }

    #[test]
    fn no_text_makes_it_panic(text in "(?s).{0,200}") {
        check_spans(&text);
    }

    #[test]
    fn no_mutilation_makes_it_panic(cut in 0usize..900, length in 0usize..40, insert in "(?s).{0,6}") {
        let sample = include_str!("examples/levitated.stack.toml");
        let floor = |mut at: usize| { at = at.min(sample.len()); while !sample.is_char_boundary(at) { at -= 1; } at };
        let (from, to) = (floor(cut), floor(cut + length));
        check_spans(&format!("{}{insert}{}", &sample[..from], &sample[to..]));
    }
}

fn check_spans(text: &str) {
    let reading = read(text);
    for slip in &reading.slips {
        assert!(text.get(slip.span.clone()).is_some(), "{slip:?}");
        assert!(text.get(slip.statement.clone()).is_some(), "{slip:?}");
    }
    let mut leaves = Vec::new();
    flatten(&reading.root, "", text, &mut leaves);
}
