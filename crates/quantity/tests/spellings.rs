//! Every spelling of the two tables in `data/`: what is read, with its value; what is refused, with its mends.

use topheavy_quantity::{Kind, Quantity, TextMend, parse};

/// A table's rows: line number and cells, `\u{…}` put in.
fn rows(table: &str) -> impl Iterator<Item = (usize, Vec<String>)> {
    table
        .lines()
        .enumerate()
        .filter(|(_, line)| !line.trim().is_empty() && !line.starts_with('#'))
        .map(|(i, line)| (i + 1, line.split('|').map(|cell| unescaped(cell.trim_matches(' '))).collect()))
}

fn unescaped(cell: &str) -> String {
    let mut parts = cell.split("\\u{");
    let mut out = parts.next().unwrap_or_default().to_owned();
    for part in parts {
        let (code, rest) = part.split_once('}').expect("a closed escape");
        let code = u32::from_str_radix(code, 16).expect("a hexadecimal code point");
        out.push(char::from_u32(code).expect("a character"));
        out.push_str(rest);
    }
    out
}

fn kind(name: &str) -> Kind {
    Kind::ALL.into_iter().find(|kind| format!("{kind:?}") == name).unwrap_or_else(|| panic!("kind {name}"))
}

fn cell(cells: &[String], at: usize) -> &str {
    cells.get(at).map_or("", String::as_str)
}

fn number(cell: &str) -> f64 {
    cell.parse().unwrap_or_else(|_| panic!("number {cell}"))
}

/// Equal but for the rounding of a few products.
fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-14 * a.abs().max(b.abs())
}

fn statement(quantity: &Quantity) -> String {
    let amplitude = quantity.amplitude.map(|amplitude| format!("{amplitude:?}"));
    let reference = quantity.reference.map(|reference| format!("{reference:?}"));
    amplitude.or(reference).unwrap_or_default()
}

#[test]
fn accepted_spellings_have_their_values() {
    let mut wrong = Vec::new();
    let mut count = 0;
    for (line, cells) in rows(include_str!("data/accepted.txt")) {
        count += 1;
        let text = cell(&cells, 0);
        let (wanted, read) = cell(&cells, 1).split_once(" > ").unwrap_or((cell(&cells, 1), cell(&cells, 1)));
        match parse(text, kind(wanted)) {
            Err(refusal) => wrong.push(format!("{line}: \"{text}\" refused: {}", refusal.message)),
            Ok(quantity) => {
                let half_width = quantity.tolerance.map(|tolerance| tolerance.half_width);
                let wanted_half = Some(cell(&cells, 4)).filter(|cell| !cell.is_empty()).map(number);
                let tolerance_agrees = match (half_width, wanted_half) {
                    (Some(a), Some(b)) => close(a, b),
                    (a, b) => a == b,
                };
                if !close(quantity.value, number(cell(&cells, 2)))
                    || quantity.kind != kind(read)
                    || statement(&quantity) != cell(&cells, 3)
                    || !tolerance_agrees
                {
                    wrong.push(format!("{line}: \"{text}\" read as {quantity:?}"));
                }
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    assert!(count >= 150, "{count} rows");
}

#[test]
fn refused_spellings_say_why_where_and_what_instead() {
    let mut wrong = Vec::new();
    let mut count = 0;
    for (line, cells) in rows(include_str!("data/refused.txt")) {
        count += 1;
        let text = cell(&cells, 0);
        let Err(refusal) = parse(text, kind(cell(&cells, 1))) else {
            wrong.push(format!("{line}: \"{text}\" accepted"));
            continue;
        };
        let reason = format!("{:?}", refusal.reason);
        let offending = &text[refusal.range.clone()];
        let mends: Vec<TextMend> =
            refusal.mends.iter().map(|mend| TextMend { title: String::new(), ..mend.clone() }).collect();
        let wanted: Vec<TextMend> = cell(&cells, 4)
            .split(" ;; ")
            .filter(|mend| !mend.is_empty())
            .map(|mend| TextMend {
                title: String::new(),
                text: mend[2..].to_owned(),
                keeps_meaning: mend.starts_with('='),
            })
            .collect();
        if reason != cell(&cells, 2) || offending != cell(&cells, 3) || mends != wanted {
            wrong.push(format!(
                "{line}: \"{text}\": {reason} at \"{offending}\": {}\n    mends {mends:?}",
                refusal.message
            ));
        }
        if refusal.message.is_empty() || refusal.mends.iter().any(|mend| mend.title.is_empty()) {
            wrong.push(format!("{line}: \"{text}\": a message or title is empty"));
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    assert!(count >= 150, "{count} rows");
}

/// A mend is taken once; it may uncover another slip, never the same one.
#[test]
fn mends_lead_on() {
    for (line, cells) in rows(include_str!("data/refused.txt")) {
        let kind = kind(cell(&cells, 1));
        let Err(refusal) = parse(cell(&cells, 0), kind) else { continue };
        for mend in &refusal.mends {
            if let Err(next) = parse(&mend.text, kind) {
                assert_ne!(next.reason, refusal.reason, "{line}: \"{}\": {}", mend.text, next.message);
            }
        }
    }
}
