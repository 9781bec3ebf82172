//! The textbook baseline of the benchmarks is right: recomputed and published points, and the limits of the solver that it
//! is measured against, with which it shares nothing.

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use physics::stability;
use physics::stability::layered::{FluidLayer, Forcing, Layered, Response};
use physics::stack::Plan;
use std::f64::consts::{PI, TAU};
use topheavy_tests::galerkin::{Resolution, Second};
use topheavy_tests::stacks::{k1, layer, levitated, stack};
use topheavy_tests::textbook::{Limits, Question, cell, classes, limits, other};

fn close(found: f64, expected: f64, tolerance: f64, what: &str) {
    let off = (found - expected).abs() / expected.abs();
    assert!(off <= tolerance, "{what}: {found}, expected {expected}, off by {off:.1e}");
}

/// Air of 1.2 kg/m³ and 1.82e-5 Pa s.
fn gas(thickness: f64) -> FluidLayer {
    FluidLayer { density: 1.2, viscosity: 1.82e-5, thickness }
}

/// Oil of 1000 mm²/s (971 kg/m³, 21.2 mN/m) of a depth between open air or a gas of `above` and a cushion, m.
fn oil(above: f64, depth: f64, cushion: f64) -> Layered {
    stack(9.80665, &[gas(above), layer(971.0, 1e-3, depth), gas(cushion)], &[0.0212, 0.0212])
}

#[test]
fn both_usual_classes_are_those_of_the_literature() {
    // Published 25.8 m/s² at 13.2 mm (J. Fluid Mech. 635, 1 (2009), doi 10.1017/S0022112009007551; the acceleration
    // from memory); digits and samples of the curves beside it recomputed with a separate code.
    for (k, subharmonic, harmonic) in [
        (475.843, 25.8242073, 344.020),
        (400.0, 39.1799, 478.547),
        (600.0, 59.3033, 201.480),
        (790.0, 416.720, 75.8302),
    ] {
        let found = classes::marginal(&k1(), TAU * 12.0, k, 1000.0);
        close(found.subharmonic[0], subharmonic, 2e-5, "subharmonic");
        close(found.harmonic[0], harmonic, 2e-5, "harmonic");
    }
}

#[test]
fn the_fewest_harmonics_are_those_of_the_literature() {
    // Recomputed with a separate code at the onset of the same set: 25.82276 with one harmonic, 25.824207 with two.
    // Two are therefore the fewest of 1, 2, 4 … that every marginal acceleration needs at least.
    let found = classes::marginal(&k1(), TAU * 12.0, 475.843, 40.0);
    assert_eq!(found.harmonics, 1, "{found:?}: 25.82276 is within 1e-4 of 25.824207");
    let found = classes::marginal(&k1(), TAU * 12.0, 790.0, 1000.0);
    assert!(found.harmonics >= 2, "{found:?}: higher up more are needed");
}

#[test]
fn levitated_layers_are_those_of_the_literature() {
    // Recomputed with a separate code: hold limit of 50 mm at 100 Hz, waves of 12.104 mm; the simple formula for the
    // former is v = √(2gL/π) = 0.5588 m/s, 351.1 m/s².
    let omega = TAU * 100.0;
    let layered = levitated(970.0, 5e-4, 0.0211, 0.02);
    let longest = classes::marginal(&layered, omega, PI / 0.05, 1000.0);
    close(longest.harmonic[0], 350.329, 2e-6, "hold");
    let waves = classes::marginal(&layered, omega, TAU / 12.104e-3, 1000.0);
    close(waves.subharmonic[0], 571.070, 2e-6, "waves");
}

#[test]
fn depth_and_time_are_resolved_to_what_is_claimed() {
    // Against the same problem resolved to 1e-8 (`stability_second`).
    let layered = oil(0.018, 0.012, 0.02);
    for k in [78.54, 248.36, 773.5, 1559.0] {
        for a in [150.0, 300.0] {
            // At 248/m and 300 m/s² it is a growing pair of neither class.
            let fastest = |resolution| Second::new(&layered, TAU * 50.0, k, &resolution).at(a)[0].rate;
            let exact = fastest(Resolution::default());
            close(fastest(other::RESOLUTION), exact, 1e-4, "growth rate");
        }
    }
}

/// The textbook's limits in a square cell, with wavenumbers up to `reach`, and those of the solver.
fn both(
    layered: &Layered,
    side: f64,
    set: f64,
    (reach, other_every): (f64, usize),
) -> (Limits, stability::SlabStability) {
    let omega = TAU * 50.0;
    let plan = Plan::Rectangle { length: side, width: side };
    let forcing = Forcing { omega, acceleration: set };
    let judged = stability::slab(layered, &forcing, plan, &|| false).unwrap();
    let wavenumbers = cell::wavenumbers(side, side, reach.min(cell::cut_off(layered, omega)));
    let question =
        Question { layered, omega, wavenumbers: &wavenumbers, up_to: judged.searched_up_to, other_every };
    (limits(&question), judged)
}

#[test]
fn the_limits_of_a_sample_are_found() {
    // The slabs of samples/two-slabs. Worked designs: hold 157.3 and 157.4, waves 278.1 and 291.2 (within 1 %), the
    // upper ones in combination. Exponents of neither class are looked for at every sixth wavenumber here (among them
    // that of the mode (1, 3), which sets both), at all of them in the benchmark.
    for (layered, set, hold, wave) in [
        (oil(f64::INFINITY, 0.010, 0.018), 222.5, 157.3, 278.1),
        (oil(0.018, 0.012, 0.020), 193.9, 157.4, 291.2),
    ] {
        let (found, judged) = both(&layered, 0.04, set, (f64::INFINITY, 6));
        let (found_hold, found_wave) = (found.hold.unwrap().0, found.wave.unwrap().0);
        close(found_hold, hold, 1e-3, "hold as in the worked design");
        close(found_wave, wave, 1e-2, "waves as in the worked design");
        close(found_hold, judged.hold_limit.unwrap(), 1e-3, "hold");
        close(found_wave, judged.wave_limit.unwrap(), 1e-3, "waves");
        assert!(found.of_neither_class > 0, "{found:?}");
    }
}

#[test]
fn a_thin_slab_stirs_in_combination() {
    // 8 mm at 50 Hz in 50 mm. Worked design: hold 175.6, waves 243.9 (within 1 %) of neither class, while the two usual
    // classes see nothing below 1308 at any wavenumber.
    let layered = oil(f64::INFINITY, 0.008, 0.06);
    let (found, judged) = both(&layered, 0.05, 228.7, (400.0, 1));
    close(found.hold.unwrap().0, 175.6, 1e-3, "hold as in the worked design");
    close(found.wave.unwrap().0, 243.9, 1e-2, "waves as in the worked design");
    close(found.wave.unwrap().0, judged.wave_limit.unwrap(), 1e-3, "waves");
    assert_eq!(judged.wave_set_by.unwrap().response, Response::Other);
    let omega = TAU * 50.0;
    for k in cell::wavenumbers(0.05, 0.05, 600.0) {
        let marginal = classes::marginal(&layered, omega, k, 1300.0);
        assert!(marginal.subharmonic.is_empty(), "at {k}/m: {marginal:?}");
    }
}
