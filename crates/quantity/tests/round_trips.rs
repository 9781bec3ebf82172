//! Printed quantities read back; rewritten ones keep what they said; nothing that can be typed panics.

use proptest::prelude::*;
use topheavy_quantity::{
    Kind, OpenValue, Quantity, Refusal, parse, parse_list, parse_open, parse_range, print, print_amplitude,
    si_unit, units,
};

/// Everything that a screen could be fed with.
const ACCEPTED: &str = include_str!("data/accepted.txt");
const REFUSED: &str = include_str!("data/refused.txt");

fn any_kind() -> impl Strategy<Value = Kind> {
    proptest::sample::select(Kind::ALL.to_vec())
}

/// Pieces of which right and wrong quantities are made.
fn pieces() -> impl Strategy<Value = String> {
    let piece = proptest::sample::select(vec![
        "42", "1", "0", "-", "\u{2212}", "+", "±", "+-", "+/-", ".", ",", " ", "\u{2009}", "\u{a0}", "mm",
        "g0", "g", "°C", "°", "%", "ppm", "Pa", "s", "/", "·", "^", "^-2", "²", "⁻¹", "(", ")", "peak",
        " to ", "pp", "rms", "abs", "gauge", "psi", "rpm", "in", "?", "e5", "×10", "µ", "μ", "h", "1/", "-2",
        "–", "…", "é", "𝟙", "\n",
    ]);
    proptest::collection::vec(piece, 0..9).prop_map(|pieces| pieces.concat())
}

/// A row of the tables with one character changed, taken out or put in.
fn slips() -> impl Strategy<Value = String> {
    let texts: Vec<String> = ACCEPTED
        .lines()
        .chain(REFUSED.lines())
        .filter(|line| !line.starts_with('#') && line.contains('|'))
        .map(|line| line.split('|').next().unwrap_or_default().trim().to_owned())
        .collect();
    (proptest::sample::select(texts), any::<prop::sample::Index>(), any::<char>(), 0..3).prop_map(
        |(text, at, new, how)| {
            let mut characters: Vec<char> = text.chars().collect();
            let at = at.index(characters.len() + 1);
            match how {
                0 => characters.insert(at, new),
                1 if at < characters.len() => characters[at] = new,
                _ if at < characters.len() => drop(characters.remove(at)),
                _ => {}
            }
            characters.into_iter().collect()
        },
    )
}

/// A refusal points into its text, at whole characters, and has words; its mends lead on.
fn sound(text: &str, kind: Kind, refusal: &Refusal) -> Result<(), TestCaseError> {
    prop_assert!(text.get(refusal.range.clone()).is_some(), "{text:?} {:?}", refusal.range);
    prop_assert!(!refusal.message.is_empty());
    for mend in &refusal.mends {
        prop_assert!(!mend.title.is_empty());
        prop_assert!(mend.text != text, "{text:?}: the mend changes nothing");
        if mend.keeps_meaning
            && let Err(next) = parse(&mend.text, kind)
        {
            prop_assert!(
                next.reason != refusal.reason || next.message != refusal.message,
                "{text:?} {mend:?}"
            );
        }
    }
    Ok(())
}

fn read_every_way(text: &str, kind: Kind) -> Result<(), TestCaseError> {
    match parse(text, kind) {
        Ok(quantity) => {
            prop_assert!(quantity.value.is_finite());
            prop_assert!(quantity.digits >= 1);
            prop_assert_eq!(
                parse(&quantity.rewritten(quantity.value, 17), kind).map(|q| q.kind),
                Ok(quantity.kind)
            );
        }
        Err(refusal) => sound(text, kind, &refusal)?,
    }
    let at = |range: std::ops::Range<usize>| text.get(range).is_some();
    if let Err(refusal) = parse_range(text, kind) {
        prop_assert!(at(refusal.range));
    }
    if let Err(refusal) = parse_list(text, kind) {
        prop_assert!(at(refusal.range));
    }
    match parse_open(text, kind) {
        Some(Err(refusal)) => prop_assert!(at(refusal.range)),
        Some(Ok(OpenValue::Between(low, high))) => prop_assert!(low.peak() <= high.peak()),
        _ => {}
    }
    Ok(())
}

/// What a printed value of the kind lacks to be read.
fn word(kind: Kind) -> &'static str {
    if kind == Kind::Pressure { " abs" } else { "" }
}

fn printed(value: f64, kind: Kind, digits: u8) -> String {
    if kind.oscillates() {
        print_amplitude(value, kind, digits)
    } else {
        format!("{}{}", print(value, kind, digits), word(kind))
    }
}

fn read(text: &str, kind: Kind) -> Quantity {
    parse(text, kind).unwrap_or_else(|refusal| panic!("\"{text}\": {}", refusal.message))
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 2000, ..ProptestConfig::default() })]

    #[test]
    fn any_text_is_read_or_refused(text in ".{0,40}", kind in any_kind()) {
        read_every_way(&text, kind)?;
    }

    #[test]
    fn any_pieces_are_read_or_refused(text in pieces(), kind in any_kind()) {
        read_every_way(&text, kind)?;
    }

    #[test]
    fn any_slip_is_read_or_refused(text in slips(), kind in any_kind()) {
        read_every_way(&text, kind)?;
    }

    /// Seventeen digits carry a double; the unit's size and offset round once or twice more.
    #[test]
    fn what_is_printed_reads_back(mantissa in -9.999f64..9.999, exponent in -9i32..9, kind in any_kind()) {
        let value = mantissa * 10f64.powi(exponent);
        let back = read(&printed(value, kind, 17), kind);
        let offset = if kind == Kind::Temperature { 273.15 } else { 0.0 };
        let rounding = 8.0 * f64::EPSILON * (value.abs() + offset);
        prop_assert!((back.peak() - value).abs() <= rounding, "{} {value}", printed(value, kind, 17));
    }

    /// With fewer digits the last one is right to half.
    #[test]
    fn few_digits_are_rounded(mantissa in 1.0f64..9.999, exponent in -9i32..9, digits in 1u8..7, kind in any_kind()) {
        prop_assume!(kind != Kind::Temperature);
        let value = mantissa * 10f64.powi(exponent);
        let back = read(&printed(value, kind, digits), kind);
        // Half a unit of the last digit, of a number that begins with 1 at worst.
        let half = 0.5 * 10f64.powi(1 - i32::from(digits)) * value;
        prop_assert!((back.peak() - value).abs() <= half * (1.0 + 1e-9), "{}", printed(value, kind, digits));
    }

    /// Another value in the same text: words, unit and the width of the tolerance stay.
    #[test]
    fn rewritten_keeps_what_was_said(row in any::<prop::sample::Index>(), factor in 0.5f64..2.0) {
        let rows: Vec<&str> = ACCEPTED.lines().filter(|line| line.contains('|') && !line.contains("\\u{") && !line.starts_with('#')).collect();
        let cells: Vec<&str> = rows[row.index(rows.len())].split('|').map(str::trim).collect();
        let name = cells[1].split(" > ").next().unwrap_or_default();
        let kind = Kind::ALL.into_iter().find(|kind| format!("{kind:?}") == name).expect("a kind");
        let old = read(cells[0], kind);
        let value = old.value * factor;
        let text = old.rewritten(value, 12);
        let new = read(&text, kind);
        let offset = if kind == Kind::Temperature { 273.15 } else { 0.0 };
        prop_assert!((new.value - value).abs() <= 1e-11 * (value.abs() + offset), "{} to {}", cells[0], text);
        prop_assert_eq!((new.kind, new.amplitude, new.reference), (old.kind, old.amplitude, old.reference));
        prop_assert_eq!(new.unit_text(), old.unit_text());
        prop_assert_eq!(new.tolerance.is_some(), old.tolerance.is_some());
        if let (Some(old_width), Some(new_width)) = (old.tolerance, new.tolerance) {
            // A share in % follows the value.
            let relative = cells[0].contains('±') && (cells[0].ends_with('%') || cells[0].ends_with("ppm")) && kind != Kind::Ratio;
            let wanted = old_width.half_width * if relative { factor } else { 1.0 };
            prop_assert!((new_width.half_width - wanted).abs() <= 1e-10 * wanted);
        }
    }
}

#[test]
fn natural_units() {
    for (value, kind, digits, text) in [
        (0.042, Kind::Length, 3, "42.0 mm"),
        (42e-6, Kind::Length, 2, "42 µm"),
        (12.5, Kind::Length, 3, "12.5 m"),
        (0.25, Kind::Mass, 3, "250 g"),
        (120.0, Kind::Frequency, 3, "120 Hz"),
        (25_000.0, Kind::Frequency, 3, "25.0 kHz"),
        (294.15, Kind::Temperature, 3, "21.0 °C"),
        (101_325.0, Kind::AbsolutePressure, 4, "101.3 kPa"),
        (3.2e9, Kind::Stress, 2, "3200 MPa"),
        (9.80665, Kind::SteadyAcceleration, 3, "9.81 m/s²"),
        (5e-4, Kind::KinematicViscosity, 3, "500 mm²/s"),
        (0.52, Kind::DynamicViscosity, 3, "520 mPa s"),
        (0.0728, Kind::SurfaceTension, 3, "72.8 mN/m"),
        (0.15, Kind::Ratio, 2, "15 %"),
        (0.005, Kind::Time, 2, "5.0 ms"),
        (998.2, Kind::Density, 3, "998 kg/m³"),
    ] {
        assert_eq!(print(value, kind, digits), text);
    }
    assert_eq!(print_amplitude(137.2931, Kind::VibrationAcceleration, 3), "14.0 g0 peak");
}

#[test]
fn rewritten_keeps_the_style() {
    for (text, kind, value, digits, wanted) in [
        ("42 mm", Kind::Length, 0.0435, 3, "43.5 mm"),
        ("42mm ± 500 µm", Kind::Length, 0.0435, 3, "43.5mm ± 500 µm"),
        ("(16.5 ± 0.3) g0 peak", Kind::VibrationAcceleration, 137.2931, 3, "(14.0 ± 0.3) g0 peak"),
        ("16.5 g0 rms ± 2 %", Kind::VibrationAcceleration, 137.2931, 3, "14.0 g0 rms ± 2 %"),
        ("21 °C", Kind::Temperature, 298.15, 3, "25.0 °C"),
        ("0.5", Kind::Ratio, 0.6, 2, "0.60"),
    ] {
        assert_eq!(read(text, kind).rewritten(value, digits), wanted);
    }
}

/// Completion offers only what is read, and the SI unit of every kind is one.
#[test]
fn every_offered_unit_is_read() {
    for kind in Kind::ALL {
        for unit in units(kind).iter().copied().chain([si_unit(kind)]) {
            let word = if kind.oscillates() {
                " peak"
            } else if matches!(kind, Kind::Pressure) || unit == "psi" && kind == Kind::AbsolutePressure {
                " abs"
            } else {
                ""
            };
            let quantity = read(&format!("1 {unit}{word}"), kind);
            assert_eq!(quantity.unit_text(), unit, "{kind:?}");
        }
        let word = if kind.oscillates() { " peak" } else { word(kind) };
        assert_eq!(read(&format!("1 {}{word}", si_unit(kind)), kind).value, 1.0, "{kind:?}");
    }
}
