//! A day of editing leaves no more behind than its first minutes. One test, so that the memory of the process is its.

use rayon::prelude::*;
use topheavy_checks::{Engine, SLABS, Usage, analyse};

/// Edits after which the memory is looked at first, and how many there are.
const FIRST: usize = 100;
const EDITS: usize = 10_000;
/// What the allocator may keep aside, and the cache fill up from the first look to its bound, bytes.
const ASIDE: u64 = 4 << 20;

/// Oil at rest in a small cell, judged in milliseconds. Every tenth edit goes back to a value of a hundred edits ago.
fn text(edit: usize) -> String {
    let step = if edit % 10 == 9 { edit - 105 * usize::from(edit > 105) } else { edit };
    let thickness = 3.0 + 1e-3 * step as f64;
    format!(
        r#"format = 1
[ambient]
temperature = "20 °C"
pressure = "101.325 kPa"
[fluid.gas]
phase = "gas"
density = "1.2 kg/m³"
viscosity = "18.2 µPa s"
adiabatic-index = 1.4
thermal-diffusivity = "22 mm²/s"
[fluid.oil]
phase = "liquid"
density = "971 kg/m³"
viscosity = "1000 mm²/s"
surface-tension = "21.2 mN/m"
[cell]
length = "2 mm"
width = "2 mm"
[[layer]]
name = "air"
fluid = "gas"
thickness = "2 mm"
[[layer]]
name = "oil"
fluid = "oil"
thickness = "{thickness:.4} mm"
"#
    )
}

/// Resident memory, bytes, where the system tells it.
fn resident() -> Option<u64> {
    let status = std::fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find_map(|line| line.strip_prefix("VmRSS:"))?;
    Some(line.trim().trim_end_matches("kB").trim().parse::<u64>().ok()? * 1024)
}

#[test]
fn ten_thousand_edits_leave_memory_where_a_hundred_did() {
    let engine = Engine::new();
    let mut first: Option<(Usage, Option<u64>)> = None;
    // As many at once as there are cores, as with several files open.
    for start in (0..EDITS).step_by(FIRST) {
        (start..start + FIRST).into_par_iter().for_each(|edit| {
            let analysis = analyse(&text(edit), &engine, &|| false);
            let derived = analysis.derived.expect("computed");
            assert!(derived.slabs[0].stability.is_some(), "judged: {:#?}", analysis.findings);
            let held = engine.slabs_held();
            assert!(held.entries <= SLABS.entries && held.bytes <= SLABS.bytes, "edit {edit}: {held:?}");
        });
        first.get_or_insert_with(|| (engine.slabs_held(), resident()));
    }
    let (early, early_resident) = first.expect("looked at");
    let late = engine.slabs_held();
    println!("after {FIRST} edits {early:?}, {early_resident:?}; after {EDITS} {late:?}, {:?}", resident());
    // What is counted is what one entry has, times the entries.
    assert_eq!(late.bytes * early.entries, early.bytes * late.entries);
    assert_eq!(late.entries, SLABS.entries, "full");
    assert_eq!(late.hits + late.misses, EDITS as u64);
    // Two threads may have asked for the same value at once.
    assert!(late.misses - late.evictions >= late.entries as u64);
    assert!(late.hits > 0, "earlier values come back");
    if let (Some(early), Some(late)) = (early_resident, resident()) {
        assert!(late <= early + ASIDE, "{early} bytes resident after {FIRST} edits, {late} after {EDITS}");
    }
}
