//! `curve` and `chain`: to the contract, and in agreement with `check`.

use crate::program::run;
use serde_json::Value;

fn number(value: &Value) -> f64 {
    let number = value.as_f64().unwrap_or_else(|| panic!("no number: {value}"));
    assert!(number.is_finite());
    number
}

fn numbers(value: &Value) -> Vec<f64> {
    value.as_array().unwrap_or_else(|| panic!("no list: {value}")).iter().map(number).collect()
}

#[test]
fn a_curve_keeps_the_contract() {
    let arguments = [
        "curve",
        "one-slab.stack.toml",
        "--slab",
        "oil",
        "--wavenumber",
        "62.83 1/m, 250 1/m",
        "--format",
        "json",
    ];
    let document = run(&arguments).json();
    assert_eq!((&document["format"], &document["slab"]), (&1.into(), &"oil".into()));
    assert_eq!(number(&document["frequency_hz"]), 50.0);
    assert!(number(&document["acceleration_peak_m_per_s2"]) > 200.0, "the computed one");
    let points = document["points"].as_array().expect("points");
    assert_eq!(points.iter().map(|p| number(&p["wavenumber_per_m"])).collect::<Vec<_>>(), [62.83, 250.0]);
    for point in points {
        number(&point["growth_rate_per_s"]);
        assert!(
            ["harmonic", "subharmonic", "other", "none"]
                .contains(&point["response"].as_str().expect("a word"))
        );
        for class in ["harmonic", "subharmonic", "other"] {
            let list = numbers(&point[format!("neutral_{class}_m_per_s2")]);
            assert!(list.is_sorted(), "{class}: {list:?}");
        }
    }
}

#[test]
fn the_growth_changes_sign_at_the_limits_of_check() {
    let check = run(&["check", "--format", "json", "one-slab.stack.toml"]).json();
    let slab = &check["files"][0]["results"]["slabs"][0];
    for (limit, set_by, stable_side) in
        [("hold_limit_m_per_s2", "hold_set_by", 1.0), ("wave_limit_m_per_s2", "wave_set_by", -1.0)]
    {
        let k = format!("{} 1/m", number(&slab[set_by]["wavenumber_per_m"]));
        for side in [-1.0, 1.0] {
            let a = format!("{} m/s^2 peak", number(&slab[limit]) * (1.0 + 1e-3 * side));
            let arguments = [
                "curve",
                "one-slab.stack.toml",
                "--slab",
                "oil",
                "--wavenumber",
                &k,
                "--acceleration",
                &a,
                "--format",
                "json",
            ];
            let growth = number(&run(&arguments).json()["points"][0]["growth_rate_per_s"]);
            assert_eq!(growth < 0.0, side == stable_side, "{limit} at {a}: {growth}");
        }
    }
}

#[test]
fn a_wavelength_is_a_wavenumber() {
    let common = ["curve", "one-slab.stack.toml", "--slab", "oil", "--format", "json"];
    let with = |extra: [&str; 2]| run(&[&common[..], &extra[..]].concat()).json();
    // λ = 2π/k: 100 mm and 62.831853… 1/m.
    let (by_length, by_number) =
        (with(["--wavelength", "100 mm"]), with(["--wavenumber", "62.83185307179586 1/m"]));
    let growth = |document: &Value| number(&document["points"][0]["growth_rate_per_s"]);
    assert!((growth(&by_length) - growth(&by_number)).abs() < 1e-9 * growth(&by_number).abs());
}

#[test]
fn up_to_bounds_the_marginal_accelerations() {
    let arguments = [
        "curve",
        "one-slab.stack.toml",
        "--slab",
        "oil",
        "--wavenumber",
        "62.83 1/m",
        "--up-to",
        "20 g0",
        "--format",
        "json",
    ];
    let document = run(&arguments).json();
    let harmonic = numbers(&document["points"][0]["neutral_harmonic_m_per_s2"]);
    assert!(!harmonic.is_empty() && harmonic.iter().all(|a| *a <= 20.0 * 9.80665), "{harmonic:?}");
}

#[test]
fn a_chain_keeps_the_contract_and_agrees_with_check() {
    let chain = run(&["chain", "two-slabs.stack.toml", "--format", "json"]).json();
    let check = run(&["check", "two-slabs.stack.toml", "--format", "json"]).json();
    let results = &check["files"][0]["results"];
    assert_eq!(chain["format"], 1);
    for (list, keys) in [
        ("slabs", &["acceleration_peak_m_per_s2", "phase_rad", "amplification"][..]),
        ("cushions", &["pressure_abs_pa", "polytropic_re", "polytropic_im", "stroke_ratio"]),
    ] {
        let pairs =
            chain[list].as_array().expect("a list").iter().zip(results[list].as_array().expect("a list"));
        assert_eq!(pairs.len(), 2);
        for (ours, theirs) in pairs {
            for key in keys {
                let (a, b) = (number(&ours[*key]), number(&theirs[*key]));
                assert!((a - b).abs() <= 1e-9 * b.abs(), "{list} {key}: {a}, {b}");
            }
        }
    }
    // Worked designs: 82.5 and 214 Hz.
    let naturals = numbers(&chain["natural_frequencies_hz"]);
    assert_eq!(naturals.len(), 2);
    assert!(
        (naturals[0] / 82.5 - 1.0).abs() < 0.01 && (naturals[1] / 214.0 - 1.0).abs() < 0.01,
        "{naturals:?}"
    );
}

#[test]
fn a_sweep_passes_the_resonance() {
    let arguments =
        ["chain", "one-slab.stack.toml", "--sweep", "20 Hz to 300 Hz", "--points", "60", "--format", "json"];
    let document = run(&arguments).json();
    let sweep = document["sweep"].as_array().expect("a sweep");
    let frequencies: Vec<f64> = sweep.iter().map(|at| number(&at["frequency_hz"])).collect();
    assert_eq!((frequencies.len(), frequencies[0], frequencies[59]), (60, 20.0, 300.0));
    assert!(frequencies.is_sorted());
    let amplification: Vec<f64> = sweep.iter().map(|at| number(&at["slabs"][0]["amplification"])).collect();
    let peak = (0..60).max_by(|&a, &b| amplification[a].total_cmp(&amplification[b])).expect("not empty");
    // One slab on one cushion resonates near 78.4 Hz (worked designs), a little lower with the drag of the walls.
    assert!((70.0..85.0).contains(&frequencies[peak]), "{}", frequencies[peak]);
    assert!(amplification[0] < 1.2 && amplification[59] < 0.3, "stiff below, isolated above");
}

#[test]
fn tables_for_people_name_the_slab() {
    let run_ = run(&["curve", "one-slab.stack.toml", "--slab", "oil", "--wavenumber", "63 1/m"]);
    assert!(run_.code == 0 && run_.out.contains("slab \"oil\""), "{}", run_.out);
    let run_ = run(&["chain", "two-slabs.stack.toml"]);
    assert!(run_.code == 0 && run_.out.contains("upper cushion"), "{}", run_.out);
}
