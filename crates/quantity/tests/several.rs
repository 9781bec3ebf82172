//! Ranges, lists and open values.

use topheavy_quantity::{Kind, OpenValue, Reason, Refusal, parse_list, parse_open, parse_range};

fn mends(refusal: &Refusal) -> Vec<&str> {
    refusal.mends.iter().map(|mend| mend.text.as_str()).collect()
}

#[test]
fn ranges_are_read() {
    for (text, kind, low, high) in [
        ("5 Hz to 4 kHz", Kind::Frequency, 5.0, 4000.0),
        ("5 mm to 5 mm", Kind::Length, 0.005, 0.005),
        ("20 °C to 25 °C", Kind::Temperature, 293.15, 298.15),
        ("1 g0 peak to peak to 20 g0 peak-to-peak", Kind::VibrationAcceleration, 9.80665, 196.133),
        ("0.1 to 20 %", Kind::Ratio, 0.1, 0.2),
        ("-3 mm to +3 mm", Kind::Length, -0.003, 0.003),
    ] {
        let (read_low, read_high) =
            parse_range(text, kind).unwrap_or_else(|refusal| panic!("{text}: {refusal:?}"));
        assert!((read_low.value - low).abs() < 1e-12 && (read_high.value - high).abs() < 1e-12, "{text}");
    }
}

#[test]
fn range_slips_are_named_and_mended_as_a_whole() {
    for (text, kind, reason, offending, mend) in [
        ("5 Hz", Kind::Frequency, Reason::RangeUnreadable, "5 Hz", None),
        ("5 Hz - 4 kHz", Kind::Frequency, Reason::RangeUnreadable, "5 Hz - 4 kHz", Some("5 Hz to 4 kHz")),
        ("5 Hz – 4 kHz", Kind::Frequency, Reason::RangeUnreadable, "5 Hz – 4 kHz", Some("5 Hz to 4 kHz")),
        ("5-10 Hz", Kind::Frequency, Reason::RangeUnreadable, "5-10 Hz", Some("5 Hz to 10 Hz")),
        ("5 Hz … 4 kHz", Kind::Frequency, Reason::RangeUnreadable, "5 Hz … 4 kHz", Some("5 Hz to 4 kHz")),
        ("4 kHz to 5 Hz", Kind::Frequency, Reason::RangeUnreadable, "4 kHz to 5 Hz", Some("5 Hz to 4 kHz")),
        ("5 to 10 Hz", Kind::Frequency, Reason::UnitMissing, "5", Some("5 Hz to 10 Hz")),
        ("5 hz to 4 kHz", Kind::Frequency, Reason::UnitNotKnown, "hz", Some("5 Hz to 4 kHz")),
        ("5 Hz to 4 khz", Kind::Frequency, Reason::UnitNotKnown, "khz", Some("5 Hz to 4 kHz")),
        ("5,5 Hz to 4 kHz", Kind::Frequency, Reason::DecimalComma, "5,5", Some("5.5 Hz to 4 kHz")),
        ("5 mm to 20 kg", Kind::Length, Reason::UnitOfWrongKind, "kg", None),
        (
            "5 g0 to 20 g0 peak",
            Kind::VibrationAcceleration,
            Reason::AmplitudeUnsaid,
            "5 g0",
            Some("5 g0 peak to 20 g0 peak"),
        ),
        (
            "1 bar to 2 bar abs",
            Kind::Pressure,
            Reason::ReferenceUnsaid,
            "1 bar",
            Some("1 bar abs to 2 bar abs"),
        ),
    ] {
        let refusal = parse_range(text, kind).expect_err(text);
        assert_eq!(refusal.reason, reason, "{text}");
        assert_eq!(&text[refusal.range.clone()], offending, "{text}");
        assert_eq!(mends(&refusal).first().copied(), mend, "{text}");
        if let Some(mend) = mend {
            assert!(parse_range(mend, kind).is_ok(), "{mend}");
        }
    }
}

#[test]
fn lists_are_read_item_by_item() {
    let read = parse_list("120 1/m, 340 1/m,2 cm^-1,500 m⁻¹", Kind::Wavenumber).expect("four wavenumbers");
    let values: Vec<f64> = read.iter().map(|quantity| quantity.value).collect();
    assert_eq!(values, [120.0, 340.0, 200.0, 500.0]);
    let refusal = parse_list("5 mm, 6, 7 mm", Kind::Length).expect_err("a unit is missing");
    assert_eq!((refusal.reason, refusal.range.clone()), (Reason::UnitMissing, 6..7));
    assert_eq!(mends(&refusal)[0], "5 mm, 6 mm, 7 mm");
    let refusal = parse_list("2 mm, 1,5 mm", Kind::Length).expect_err("a decimal comma");
    assert_eq!((refusal.reason, refusal.range.clone()), (Reason::DecimalComma, 6..9));
    assert_eq!(mends(&refusal), ["2 mm, 1.5 mm"]);
    assert_eq!(parse_list("5 mm,", Kind::Length).expect_err("an empty item").reason, Reason::Empty);
}

#[test]
fn open_values_are_told_from_values() {
    assert!(parse_open("5 mm", Kind::Length).is_none());
    assert!(parse_open("", Kind::Length).is_none());
    assert_eq!(parse_open(" ? ", Kind::Length), Some(Ok(OpenValue::Unbounded)));
    for text in ["? 5 mm to 20 mm", "?5 mm to 20 mm"] {
        match parse_open(text, Kind::Length) {
            Some(Ok(OpenValue::Between(low, high))) => assert_eq!((low.value, high.value), (0.005, 0.02)),
            other => panic!("{text}: {other:?}"),
        }
    }
    let Some(Err(refusal)) = parse_open("? 5 to 20 mm", Kind::Length) else { panic!("a unit is missing") };
    assert_eq!((refusal.reason, refusal.range.clone()), (Reason::UnitMissing, 2..3));
    assert_eq!(mends(&refusal)[0], "? 5 mm to 20 mm");
    let Some(Err(refusal)) = parse_open("? 5 mm", Kind::Length) else { panic!("no range") };
    assert_eq!(refusal.reason, Reason::RangeUnreadable);
}

/// What could be read is handed on, so that the verdict of each reading can be shown.
#[test]
fn the_bare_value_is_handed_on() {
    let refusal = topheavy_quantity::parse("14 g0", Kind::VibrationAcceleration).expect_err("unsaid");
    let partial = refusal.partial.expect("the bare value");
    assert!((partial.value - 137.2931).abs() < 1e-12 && partial.amplitude.is_none());
    let refusal = topheavy_quantity::parse("1.2 bar", Kind::Pressure).expect_err("unsaid");
    assert_eq!(refusal.partial.expect("the bare value").value, 120_000.0);
}

/// Every reason is reported by a rule of the reading.
#[test]
fn reasons_have_rules() {
    for (reason, rule) in [
        (Reason::UnitMissing, "unit-missing"),
        (Reason::UnitNotKnown, "unit-not-known"),
        (Reason::UnitOfWrongKind, "unit-of-wrong-kind"),
        (Reason::AmplitudeUnsaid, "amplitude-kind-unsaid"),
        (Reason::ReferenceUnsaid, "pressure-reference-unsaid"),
        (Reason::DecimalComma, "value-of-wrong-type"),
        (Reason::RangeOutOfPlace, "value-of-wrong-type"),
    ] {
        assert_eq!(reason.rule(), rule);
    }
}
