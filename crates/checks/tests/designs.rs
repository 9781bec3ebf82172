//! The worked designs: computed for the project with a separate code (all Floquet exponents by another method, the
//! chain with gas heat loss and Stokes wall drag), not measured; wave limits there ±1 %. Every fluid by its figures,
//! so that no correlation is in play.

use topheavy_checks::derived::{Mechanism, Response};
use topheavy_checks::{Analysis, Engine, Verdict, analyse, changes, hover};
use topheavy_setup::finding::{Finding, Severity};

const FLUIDS: &str = r#"
[ambient]
temperature = "20 °C"
pressure = "101.325 kPa"
gravity = "9.80665 m/s²"

[fluid.gas]
phase = "gas"
density = "1.2 kg/m³"
viscosity = "18.2 µPa s"
adiabatic-index = 1.4
thermal-diffusivity = "22 mm²/s"

[fluid.S1000]
phase = "liquid"
density = "971 kg/m³"
viscosity = "1000 mm²/s"
surface-tension = "21.2 mN/m"

[fluid.S100]
phase = "liquid"
density = "965 kg/m³"
viscosity = "100 mm²/s"
surface-tension = "20.9 mN/m"

[fluid.GLY]
phase = "liquid"
density = "1261 kg/m³"
viscosity = "1120 mm²/s"
surface-tension = "63.4 mN/m"
"#;

/// A square cell; layers from the bottom up as in the table: fluid, mm.
fn design(width: f64, layers: &[(&str, f64)], hertz: f64, drive: &str) -> String {
    let mut text = format!("format = 1\n{FLUIDS}\n[cell]\nlength = \"{width} mm\"\nwidth = \"{width} mm\"\n");
    text += &format!("\n[drive]\nfrequency = \"{hertz} Hz\"\nacceleration = \"{drive}\"\n");
    for (index, (fluid, thickness)) in layers.iter().enumerate().rev() {
        let name = match (*fluid, index) {
            ("gas", 0) => "cushion",
            ("gas", _) => "upper cushion",
            (_, 1) => "oil",
            _ => "upper oil",
        };
        text +=
            &format!("\n[[layer]]\nname = \"{name}\"\nfluid = \"{fluid}\"\nthickness = \"{thickness} mm\"\n");
    }
    text
}

fn d1(drive: &str) -> String {
    design(50.0, &[("gas", 40.0), ("S1000", 15.0)], 50.0, drive)
}

fn check(text: &str) -> Analysis {
    let analysis = analyse(text, &Engine::new(), &|| false);
    for finding in &analysis.findings {
        let message = finding.message.text();
        assert!(!message.to_lowercase().contains("safe"), "{message}");
        assert!(finding.span.end <= text.len(), "{finding:#?}");
    }
    analysis
}

fn rules(analysis: &Analysis) -> Vec<&'static str> {
    analysis.findings.iter().map(|finding| finding.rule).collect()
}

fn only(analysis: &Analysis) -> &Finding {
    assert_eq!(analysis.findings.len(), 1, "{:#?}", analysis.findings);
    &analysis.findings[0]
}

#[track_caller]
fn near(value: f64, expected: f64, relative: f64) {
    assert!((value / expected - 1.0).abs() <= relative, "{value} instead of {expected} ± {relative}");
}

/// |T|, hold and wave limit of a slab.
fn slab(analysis: &Analysis, index: usize) -> (f64, f64, f64) {
    let slab = &analysis.derived.as_ref().expect("computed").slabs[index];
    let limits = slab.stability.as_ref().expect("judged").limits.as_ref().expect("driven");
    (
        slab.motion.as_ref().expect("driven").amplification,
        limits.hold.expect("a hold limit"),
        limits.wave.expect("a wave limit"),
    )
}

/// The text after the edits of a fix.
fn applied(text: &str, fix: &topheavy_setup::finding::Fix) -> String {
    let mut out = text.to_owned();
    for edit in fix.edits.iter().rev() {
        out.replace_range(edit.span.clone(), &edit.new_text);
    }
    out
}

#[test]
fn d1_holds() {
    let analysis = check(&d1("13.0 g0 peak"));
    assert_eq!(analysis.verdict, Verdict::Holds, "{:#?}", analysis.findings);
    assert!(analysis.findings.is_empty(), "{:#?}", analysis.findings);
    let (amplification, hold, wave) = slab(&analysis, 0);
    near(amplification, 1.731, 0.001);
    near(hold, 175.8, 0.001);
    near(wave, 287.4, 0.01);
    let derived = analysis.derived.as_ref().expect("computed");
    near(derived.natural_frequencies[0], 78.4, 0.001);
    let window = derived.window.expect("driven");
    // a/hold 1.256, wave/a 1.302 in the table.
    near(1.0 / (1.0 - window.hold_margin().expect("set")), 1.256, 0.001);
    near(1.0 + window.wave_margin().expect("set"), 1.302, 0.01);
    let by = derived.slabs[0].stability.as_ref().and_then(|s| s.limits.as_ref()).and_then(|l| l.wave_set_by);
    assert_eq!(by.expect("a wave limit").response, Response::Subharmonic);
}

#[test]
fn d3_and_d5_hold() {
    let analysis = check(&design(40.0, &[("gas", 12.0), ("GLY", 15.0)], 45.0, "16.5 g0 peak"));
    assert_eq!(analysis.verdict, Verdict::Holds, "{:#?}", analysis.findings);
    let (amplification, hold, wave) = slab(&analysis, 0);
    near(amplification, 1.152, 0.001);
    near(hold, 140.6, 0.001);
    near(wave, 264.8, 0.01);
    let two = [("gas", 20.0), ("S1000", 12.0), ("gas", 18.0), ("S1000", 10.0)];
    let analysis = check(&design(40.0, &two, 50.0, "13.2 g0 peak"));
    assert_eq!(analysis.verdict, Verdict::Holds, "{:#?}", analysis.findings);
    // The table lists the lower slab first.
    for (index, t, hold, wave) in [(1, 1.498, 157.4, 291.2), (0, 1.719, 157.3, 278.1)] {
        let found = slab(&analysis, index);
        near(found.0, t, 0.001);
        near(found.1, hold, 0.001);
        near(found.2, wave, 0.01);
    }
    let derived = analysis.derived.as_ref().expect("computed");
    near(derived.natural_frequencies[0], 82.5, 0.001);
    near(derived.natural_frequencies[1], 214.3, 0.001);
}

#[test]
fn f1_falls_and_the_change_holds() {
    let text = d1("9.0 g0 peak");
    let analysis = check(&text);
    assert_eq!(analysis.verdict, Verdict::Fails);
    let finding = only(&analysis);
    assert_eq!((finding.rule, finding.severity), ("interface-falls", Severity::Error));
    assert_eq!(finding.place, "interface.oil|cushion");
    assert_eq!(&text[finding.span.clone()], "\"cushion\"");
    let derived = analysis.derived.as_ref().expect("computed");
    let stability = derived.slabs[0].stability.as_ref().expect("judged");
    near(stability.growth_rate, 8.7, 0.01);
    near(stability.worst.wavenumber, 63.0, 0.01);
    tried(&text, &analysis);
}

/// The first finding has a change of the drive, which clears it and keeps both margins.
fn tried(text: &str, analysis: &Analysis) {
    assert!(analysis.findings[0].fixable);
    let fixes = changes(text, analysis, &Engine::new(), 0, &|| false);
    assert_eq!(fixes.len(), 1, "{fixes:#?}");
    assert!(!fixes[0].keeps_meaning, "it chooses a value");
    assert!(
        fixes[0].title.contains("hold margin") && fixes[0].title.contains("wave margin"),
        "{}",
        fixes[0].title
    );
    let changed = applied(text, &fixes[0]);
    assert!(changed.contains(" g0 peak\""), "in the file's own unit and amplitude word: {changed}");
    let after = check(&changed);
    assert_eq!(after.verdict, Verdict::Holds, "{}: {:#?}", fixes[0].title, after.findings);
    assert!(after.findings.is_empty());
}

#[test]
fn f2_raises_waves_and_the_change_holds() {
    let text = d1("18.5 g0 peak");
    let analysis = check(&text);
    assert_eq!(analysis.verdict, Verdict::Fails);
    assert_eq!(only(&analysis).rule, "waves-on-interface");
    let derived = analysis.derived.as_ref().expect("computed");
    let stability = derived.slabs[0].stability.as_ref().expect("judged");
    assert_eq!(stability.mechanism, Mechanism::Waves);
    near(stability.growth_rate, 14.7, 0.01);
    near(stability.worst.wavenumber, 251.0, 0.01);
    assert_eq!(stability.worst.response, Response::Other);
    tried(&text, &analysis);
}

#[test]
fn f3_is_on_resonance() {
    let analysis = check(&design(50.0, &[("gas", 95.0), ("S1000", 15.0)], 50.0, "13.0 g0 peak"));
    assert_eq!(analysis.verdict, Verdict::Fails);
    assert!(rules(&analysis).contains(&"cushion-near-resonance"), "{:#?}", analysis.findings);
    let waves = analysis.findings.iter().find(|finding| finding.rule == "waves-on-interface").expect("waves");
    assert!(
        waves.related.iter().any(|related| related.message.contains("resonates at 51.0 Hz")),
        "{waves:#?}"
    );
    let derived = analysis.derived.as_ref().expect("computed");
    near(derived.slabs[0].motion.expect("driven").amplification, 7.9, 0.01);
    near(derived.slabs[0].stability.as_ref().expect("judged").growth_rate, 147.0, 0.01);
}

#[test]
fn f5_is_thin_and_short_of_wave_margin() {
    let text = design(50.0, &[("gas", 60.0), ("S1000", 8.0)], 50.0, "15.5 g0 peak");
    let analysis = check(&text);
    let (_, hold, wave) = slab(&analysis, 0);
    near(hold, 175.6, 0.001);
    near(wave, 243.9, 0.01);
    assert_eq!(analysis.verdict, Verdict::Holds, "a short margin is a warning");
    let finding = only(&analysis);
    assert_eq!((finding.rule, finding.severity), ("wave-margin-short", Severity::Warning));
    // wave/a 1.067 in the table.
    let margin = finding.values.iter().find(|(name, _)| *name == "wave_margin").expect("its number").1;
    assert!((margin - 0.067).abs() < 0.01, "{margin}");
    tried(&text, &analysis);
}

#[test]
fn f6_has_no_window() {
    let analysis = check(&design(50.0, &[("gas", 40.0), ("S100", 15.0)], 50.0, "13.0 g0 peak"));
    assert_eq!(analysis.verdict, Verdict::Fails);
    let finding = only(&analysis);
    assert_eq!((finding.rule, finding.place.as_str()), ("no-holding-drive", "layer.oil"));
    assert!(!finding.related.is_empty());
    let (_, hold, wave) = slab(&analysis, 0);
    near(hold, 175.2, 0.01);
    near(wave, 69.7, 0.01);
}

#[test]
fn at_rest_the_jar_falls() {
    let text = d1("13.0 g0 peak");
    let start = text.find("[drive]").expect("a drive");
    let end = start + text[start..].find("[[layer]]").expect("layers");
    let analysis = check(&format!("{}{}", &text[..start], &text[end..]));
    let finding = only(&analysis);
    assert_eq!(finding.rule, "interface-falls");
    assert!(finding.message.remedy.contains("[drive]"));
}

#[test]
fn an_unsaid_amplitude_says_what_each_meaning_leads_to() {
    let text = d1("13.0 g0");
    let analysis = check(&text);
    assert_eq!(only(&analysis).rule, "amplitude-kind-unsaid");
    assert!(
        analysis.derived.as_ref().is_some_and(|derived| derived.slabs.is_empty()),
        "no motion from a guess"
    );
    let fixes = changes(&text, &analysis, &Engine::new(), 0, &|| false);
    let title = |word: &str| {
        let fix = fixes.iter().find(|fix| fix.edits[0].new_text.ends_with(&format!(" {word}\"")));
        fix.unwrap_or_else(|| panic!("{word}: {fixes:#?}")).title.clone()
    };
    // 13.0 g0 peak is D1; 18.4 g0 raises waves as F2 does; 6.5 g0 falls as F1 does.
    assert!(title("peak").contains("holds, hold margin 20"), "{}", title("peak"));
    assert!(title("rms").contains("waves rise"), "{}", title("rms"));
    assert!(title("peak-to-peak").contains("falls"), "{}", title("peak-to-peak"));
}

#[test]
fn hover_tells_what_is_left_for_the_table() {
    let text = d1("13.0 g0 peak");
    let analysis = check(&text);
    let at = |word: &str| {
        hover(&analysis, text.find(word).expect("it is there") + 1).expect("a hover text").markdown
    };
    let oil = at("\"oil\"");
    for part in [
        "15.0 mm thick",
        "971.0 kg/m³",
        "1.73 times the cell",
        "Holds from",
        "Waves from",
        "The drive can go down",
    ] {
        assert!(oil.contains(part), "{part}: {oil}");
    }
    assert!(at("\"cushion\"").contains("78.4 Hz"), "{}", at("\"cushion\""));
    let drive = at("\"13.0 g0 peak\"");
    for part in ["13.00 g0", "9.192 g0", "2.583 mm", "Hold margin"] {
        assert!(drive.contains(part), "{part}: {drive}");
    }
    assert!(at("\"50 mm\"").contains("`length`"));
}

#[test]
fn a_cancelled_check_gives_no_results() {
    let analysis = analyse(&d1("13.0 g0 peak"), &Engine::new(), &|| true);
    assert!(analysis.derived.is_none());
    assert_ne!(analysis.verdict, Verdict::Holds);
}

#[test]
fn an_accepted_finding_is_marked_and_an_idle_acceptance_is_said() {
    let text = d1("9.0 g0 peak")
        + "\n[[accept]]\nfinding = \"interface-falls\"\nreason = \"shown to a class\"\nby = \"M. Quill\"\n"
        + "\n[[accept]]\nfinding = \"waves-on-interface\"\nreason = \"shown to a class\"\nby = \"M. Quill\"\n";
    let analysis = check(&text);
    let falls = analysis.findings.iter().find(|finding| finding.rule == "interface-falls").expect("it falls");
    assert!(falls.accepted);
    assert_eq!(analysis.verdict, Verdict::Fails, "accepted or not");
    assert!(rules(&analysis).contains(&"acceptance-without-finding"));
}
