//! A broken line never blanks the file.

use proptest::prelude::*;
use toml_edit::{Item, TableLike};
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
    "bad = 12\u{a0}mm",
    "\u{feff}bad = 12",
    "bad = True",
    "bad = [oil, water]",
    "bad = 1 worse = 2",
    "bad = [1, 2}",
    "[bad}",
    "bad]",
    "// bad",
    "},",
    "bad = 99999999999999999999",
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
    for (ending, bom) in [("\n", ""), ("\r\n", ""), ("\n", "\u{feff}"), ("\r\n", "\u{feff}")] {
        let mut complete = 0;
        for broken in BROKEN {
            let (text, keys) = file(broken);
            let text = format!("{bom}{}", text.replace('\n', ending));
            let reading = read(&text);
            assert!(!reading.slips.is_empty(), "{broken:?} is no TOML and must be said");
            let mut kept = 0;
            for (path, key, value) in keys {
                // Below a header whose name is clear in spite of the slip, the key belongs to that table.
                let below =
                    path == "top" && key == "k3" && (broken.contains("[bad") || broken.ends_with("bad]"));
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
        ("thickness = 16,5 mm # c", "thickness = \"16,5 mm\" # c"),
        ("thickness = \"12\" mm", "thickness = \"12 mm\""),
        ("thickness = \"12 mm # as filled", "thickness = \"12 mm\" # as filled"),
        ("thickness \"12 mm\"", "thickness = \"12 mm\""),
        ("fluid = water", "fluid = \"water\""),
        ("between = [oil, \"water\"]", "between = [\"oil\", \"water\"]"),
        ("between = [\"oil\", \"water\"}", "between = [\"oil\", \"water\"]"),
        ("drive = { frequency = 50 Hz", "drive = { frequency = \"50 Hz\" }"),
        ("links = [{ length: 5 mm }]", "links = [{ length = \"5 mm\" }]"),
        ("adiabatic-index = .4", "adiabatic-index = 0.4"),
        ("until = 2026-3-4", "until = 2026-03-04"),
        ("source = \"C:\\lab\"", "source = 'C:\\lab'"),
        ("größe = 1", "\"größe\" = 1"),
        ("a = 1 b = 2", "a = 1\nb = 2"),
        ("// note", "# note"),
        ("drive]", "[drive]"),
        ("[layer]]", "[[layer]]"),
        ("[fluid.own brew]", "[fluid.\"own brew\"]"),
        ("[drive] frequency = 50 Hz", "[drive]\nfrequency = \"50 Hz\""),
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

/// Where more than one thing may be meant, nothing is offered: a mend never chooses a value.
#[test]
fn no_mend_where_it_is_not_clear() {
    for broken in [
        "thickness =",
        "thickness",
        "fluid oil",
        "thickness = 1 2",
        "thickness = 1,5",
        "thickness = 1.2.3",
        "thickness = 0xZZ",
        "thickness = 12 mm, 5 mm",
        "thickness = \"12 mm\" 5",
        "between = [\"oil, \"water\"]",
        "between = [\"oil\",, \"water\"]",
        "notes = \"\"\"first\n second\n third",
        "drive = { frequency = , control = 2 }",
        "= 3",
        "a.x. = 3",
        "[]",
        "[drive] [cell]",
    ] {
        let reading = read(&format!("{broken}\n"));
        assert!(!reading.slips.is_empty(), "{broken:?}");
        assert!(reading.slips.iter().all(|slip| slip.mend.is_none()), "{broken:?}: {:?}", reading.slips);
    }
    // The mended line would give the key twice.
    assert!(read("a = 1\na = 2 mm\n").slips.iter().all(|slip| slip.mend.is_none()));
    assert!(read("a = 2 mm\na = 1\n").slips.iter().all(|slip| slip.mend.is_none()));
}

/// Keys below a header that cannot be read are in no table, and one slip says so.
#[test]
fn keys_without_a_table_are_said_once() {
    let text = "[cell]\na = 1\n[]\nb = 2\nc = 3 mm\nd = 4\n[drive]\ne = 5\n";
    let reading = read(text);
    let kinds: Vec<SlipKind> = reading.slips.iter().map(|slip| slip.kind).collect();
    assert_eq!(kinds, [SlipKind::Unreadable, SlipKind::TableUnknown, SlipKind::Unreadable]);
    assert_eq!(&text[reading.slips[1].span.clone()], "b = 2\nc = 3 mm\nd = 4");
    let mut found = Vec::new();
    flatten(&reading.root, "", text, &mut found);
    let paths: Vec<&str> = found.iter().map(|(path, _)| path.as_str()).collect();
    assert_eq!(paths, ["/cell", "/cell/a", "/drive", "/drive/e"]);
}

/// One pair of brackets forgotten: the elements are kept apart all the same.
#[test]
fn single_brackets_among_double_ones_make_an_element() {
    for text in [
        "[[layer]]\nn = 1\n[[layer]]\nn = 2\n[layer]\nn = 3\n",
        "[layer]\nn = 1\n[[layer]]\nn = 2\n[[layer]]\nn = 3\n",
    ] {
        let reading = read(text);
        assert_eq!(reading.slips.len(), 1, "{:?}", reading.slips);
        let Value::Tables(layers) = &reading.root.get("layer").unwrap().value else { panic!("{text}") };
        let numbers: Vec<_> = layers.iter().map(|layer| layer.get("n").unwrap().value.clone()).collect();
        assert!(matches!(numbers[..], [Value::Integer(1, _), Value::Integer(2, _), Value::Integer(3, _)]));
    }
}

/// An inner span is what `Text::locate` counts from: between the quotes, without the line end after three of them.
#[test]
fn text_is_located_between_its_quotes() {
    for (raw, inner) in [
        ("\"12 mm\"", "12 mm"),
        ("'12 mm'", "12 mm"),
        ("\"\"\"12 mm\"\"\"", "12 mm"),
        ("\"\"\"\n12\nmm\"\"\"", "12\nmm"),
        ("'''\r\n12'mm'''", "12'mm"),
        ("\"\"", ""),
        ("\"\"\"\"\"\"", ""),
    ] {
        let text = format!("\u{feff}k = {raw} # c\n");
        let reading = read(&text);
        let Value::Text(string) = &reading.root.get("k").unwrap().value else { panic!("{raw}") };
        assert_eq!((&text[string.span.clone()], &text[string.inner.clone()]), (raw, inner));
        assert_eq!(string.value, inner);
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
        many("a = 12 mm\n", 100_000),
        many("[bad\n", 200_000),
        many("a = \\\"\"\"\n", 100_000),
        many("a = \"\"\"x\n", 100_000),
        many("a = '''\nb = \"\"\"\n", 50_000),
        format!("a = [\n{}", many("[\n", 400_000)),
        format!("a = [{} mm]", many("1, ", 330_000)),
        format!("a = {}", many("x ", 500_000)),
        format!("[{}a]", many("a.", 500_000)),
        // A look to the end for every line, in a text that is mostly blank.
        many("a = \\\"\"\"\n", 40_000) + &many("\n", 500_000),
        many("a = \\\"\"\"\n", 40_000) + &many("# x\n", 200_000),
        many("a = [\n\n", 1_000) + &many("\n", 500_000),
        many("\u{feff}", 300_000),
        many("\0\n", 400_000),
        many("a = 1\r", 160_000),
        many("\r", 1_000_000),
        "\0\0\0".to_owned(),
        "a = 1\rb = 2\r".to_owned(),
        "\u{feff}".to_owned(),
        String::new(),
    ];
    for text in texts {
        let start = std::time::Instant::now();
        let reading = read(&text);
        assert!(reading.slips.len() <= 202);
        // Not a timed test: a bound well above what a slow machine takes, against cost that grows as the square.
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
        "[ a-z0-9µ°/²#]{0,12}".prop_map(|s| format!("\"{s}\"")),
        "[a-z#=\\\\]{0,5}".prop_map(|s| format!("'{s}'")),
        Just("[1, 2, 3]".to_owned()),
        Just("[[\"20 °C\", \"5 mPa s\"],\n # in between\n [\"25 °C\", \"4 mPa s\"],\n]".to_owned()),
        Just("{ a = 1, b.c = \"x\", b.d = [{ e = 1 }, {}] }".to_owned()),
        Just("2026-03-14".to_owned()),
        Just("2026-03-14 07:32:00.5Z".to_owned()),
        Just("\"\"\"\nlong\n[text]\nkey = 1\"\"\"".to_owned()),
        Just("'''x\n'y' '''".to_owned()),
        Just("\"esc \\u00B5 \\\" \\t\"".to_owned()),
        Just("0x1F".to_owned()),
        Just("-1_000.5e-3".to_owned()),
        Just("-inf".to_owned()),
    ]
}

/// Pieces of the language, whole and broken.
const SCRAPS: &[&str] = &[
    "a",
    "bc",
    "a.b",
    " = ",
    "=",
    ": ",
    "\"",
    "\"",
    "'",
    "\"\"\"",
    "'''",
    "[",
    "]",
    "[[",
    "]]",
    "{",
    "}",
    ",",
    ".",
    "#",
    " ",
    "\n",
    "\n",
    "\n",
    "\r\n",
    "\\",
    "\\u",
    "1",
    "12 mm",
    "1.5",
    "-",
    "true",
    "2026-3-4",
    "é",
    "“",
    "”",
    "\u{feff}",
    "\u{a0}",
    "\0",
    "a = 1\n",
    "b = \"x\"\n",
    "[a]\n",
    "[[d]]\n",
    "[e.f]\n",
    "g = [1, 2]\n",
    "\t",
];

/// One of few names, so that keys and tables meet.
fn name() -> impl Strategy<Value = &'static str> {
    prop_oneof![
        Just("a"),
        Just("b"),
        Just("layer"),
        Just("\"a\""),
        Just("'two words'"),
        Just("\"ö.ß\""),
        Just("1")
    ]
}

fn path() -> impl Strategy<Value = String> {
    (proptest::collection::vec(name(), 1..4), prop_oneof![Just("."), Just(" . ")])
        .prop_map(|(names, dot)| names.join(dot))
}

fn statement() -> impl Strategy<Value = String> {
    prop_oneof![
        4 => (path(), value_text()).prop_map(|(path, value)| format!("{path} = {value}")),
        1 => (path(), value_text()).prop_map(|(path, value)| format!("  {path}={value}\t# [note] = 1")),
        2 => path().prop_map(|path| format!("[{path}]")),
        1 => path().prop_map(|path| format!("[[{path}]] # several")),
        1 => Just(String::new()),
        1 => Just("# a = [".to_owned()),
    ]
}

fn flatten(table: &Table, path: &str, text: &str, out: &mut Vec<(String, String)>) {
    for entry in &table.entries {
        let path = format!("{path}/{}", entry.key);
        assert!(text[entry.statement.clone()].contains(&text[entry.key_span.clone()]));
        match &entry.value {
            Value::Table(inner) => {
                out.push((path.clone(), "table".to_owned()));
                flatten(inner, &path, text, out);
            }
            Value::Tables(list) => {
                for (i, inner) in list.iter().enumerate() {
                    out.push((format!("{path}[{i}]"), text[inner.span.clone()].to_owned()));
                    flatten(inner, &format!("{path}[{i}]"), text, out);
                }
            }
            value => out.push((path, shown(value, text))),
        }
    }
}

/// What a value is, with the text at its span.
fn shown(value: &Value, text: &str) -> String {
    let raw = &text[value.span()];
    match value {
        Value::Text(string) => format!("{:?} {raw}", string.value),
        Value::Integer(number, _) => format!("{number} {raw}"),
        Value::Float(number, _) => format!("{number:?} {raw}"),
        Value::Boolean(truth, _) => format!("{truth} {raw}"),
        Value::Datetime(date, _) => format!("{date} {raw}"),
        Value::Array(items, _) => {
            format!("{:?} {raw}", items.iter().map(|item| shown(item, text)).collect::<Vec<_>>())
        }
        Value::Table(table) => {
            let mut inner = Vec::new();
            flatten(table, "", text, &mut inner);
            inner.sort();
            format!("{inner:?}")
        }
        Value::Tables(_) => unreachable!("no header in an array"),
    }
}

fn flatten_oracle(table: &dyn TableLike, path: &str, text: &str, out: &mut Vec<(String, String)>) {
    for (key, item) in table.iter() {
        let path = format!("{path}/{key}");
        match item {
            Item::Value(toml_edit::Value::InlineTable(inner)) => {
                out.push((path.clone(), "table".to_owned()));
                flatten_oracle(inner, &path, text, out);
            }
            Item::Value(value) => out.push((path, shown_oracle(value, text))),
            Item::Table(inner) => {
                out.push((path.clone(), "table".to_owned()));
                flatten_oracle(inner, &path, text, out);
            }
            Item::ArrayOfTables(list) => {
                for (i, inner) in list.iter().enumerate() {
                    out.push((format!("{path}[{i}]"), text[inner.span().unwrap_or_default()].to_owned()));
                    flatten_oracle(inner, &format!("{path}[{i}]"), text, out);
                }
            }
            Item::None => {}
        }
    }
}

fn shown_oracle(value: &toml_edit::Value, text: &str) -> String {
    let raw = &text[value.span().unwrap_or_default()];
    match value {
        toml_edit::Value::String(string) => format!("{:?} {raw}", string.value()),
        toml_edit::Value::Integer(number) => format!("{} {raw}", number.value()),
        toml_edit::Value::Float(number) => format!("{:?} {raw}", number.value()),
        toml_edit::Value::Boolean(truth) => format!("{} {raw}", truth.value()),
        toml_edit::Value::Datetime(_) => format!("{raw} {raw}"),
        toml_edit::Value::Array(items) => {
            format!("{:?} {raw}", items.iter().map(|item| shown_oracle(item, text)).collect::<Vec<_>>())
        }
        toml_edit::Value::InlineTable(table) => {
            let mut inner = Vec::new();
            flatten_oracle(table, "", text, &mut inner);
            inner.sort();
            format!("{inner:?}")
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(1000))]

    /// Second reader: the library `toml_edit` on the whole file, which knows nothing of our cutting and merging. What
    /// it takes reads the same, what it refuses has a slip.
    #[test]
    fn files_read_as_the_library_reads_them(
        statements in proptest::collection::vec(statement(), 0..9),
        crlf in any::<bool>(),
        bom in any::<bool>(),
        ended in any::<bool>(),
    ) {
        let mut text = format!("{}{}", if bom { "\u{feff}" } else { "" }, statements.join("\n"));
        if ended {
            text += "\n";
        }
        if crlf {
            text = text.replace('\n', "\r\n");
        }
        let oracle = toml_edit::Document::parse(text.clone());
        let reading = read(&text);
        // A dotted key of two parts and more adds to the last `[[table]]` in `toml_edit`; one part does not, and by the
        // text of TOML 1.0 ("Array of Tables") none may. We hold to the text.
        prop_assume!(!reading.slips.iter().any(|slip| slip.message.contains("clashes with `[[")));
        prop_assert_eq!(reading.slips.is_empty(), oracle.is_ok(), "{:?} {:?}", reading.slips, oracle);
        if let Ok(oracle) = oracle {
            let (mut ours, mut theirs) = (Vec::new(), Vec::new());
            flatten(&reading.root, "", &text, &mut ours);
            flatten_oracle(oracle.as_table(), "", &text, &mut theirs);
            ours.sort();
            theirs.sort();
            prop_assert_eq!(ours, theirs);
        }
    }

    /// The same on single statements, where most texts are sound.
    #[test]
    fn statements_read_as_the_library_reads_them(path in path(), value in value_text(), below in path()) {
        let text = format!("[[{path}]]\n{below} = {value}\n");
        let oracle = toml_edit::Document::parse(text.clone()).unwrap();
        let (mut ours, mut theirs) = (Vec::new(), Vec::new());
        flatten(&read(&text).root, "", &text, &mut ours);
        flatten_oracle(oracle.as_table(), "", &text, &mut theirs);
        prop_assert_eq!(ours, theirs);
    }

    /// Scraps of the language put together at random: every span fits, and every mend does what it says.
    #[test]
    fn scraps_are_read_and_their_mends_read_cleanly(
        scraps in proptest::collection::vec(proptest::sample::select(SCRAPS), 0..14),
    ) {
        let text = scraps.concat();
        check_spans(&text);
        check_spans(&text.replace('é', "\r"));
        let reading = read(&text);
        for slip in &reading.slips {
            let Some((title, new_text)) = &slip.mend else { continue };
            let edit = Edit { span: slip.statement.clone(), new_text: new_text.clone() };
            let mended = apply(&text, &[edit]).unwrap();
            let again = read(&mended);
            prop_assert!(
                again.slips.len() < reading.slips.len(),
                "{title}: {text:?} → {mended:?}\n{:#?}\n{:#?}", reading.slips, again.slips
            );
        }
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
