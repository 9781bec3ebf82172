//! The second method on its own, without the solver under test: it converges, and to what others have published.

use physics::stability::layered::{FluidLayer, Layered, Response};
use std::f64::consts::{PI, TAU};
use topheavy_tests::galerkin::{Resolution, Second};
use topheavy_tests::stacks::{air, k1, layer, levitated, stack};

fn close(found: f64, expected: f64, tolerance: f64, what: &str) {
    let off = (found - expected).abs() / expected.abs();
    assert!(off <= tolerance, "{what}: {found}, expected {expected}, off by {off:.1e}");
}

fn second(layered: &Layered, omega: f64, k: f64) -> Second {
    Second::new(layered, omega, k, &Resolution::default())
}

#[test]
fn the_two_layer_onset_is_met() {
    // Published 25.8 m/s² at 13.2 mm (J. Fluid Mech. 635, 1 (2009); the acceleration from memory); digits recomputed
    // with a separate code: 25.8242073 at 475.843 1/m, and samples of both curves beside it.
    let omega = TAU * 12.0;
    close(second(&k1(), omega, 475.843).threshold(20.0, 30.0, 1e-9).unwrap(), 25.8242073, 2e-9, "onset");
    for (k, subharmonic, harmonic) in
        [(400.0, 39.1799, 478.547), (600.0, 59.3033, 201.480), (790.0, 416.720, 75.8302)]
    {
        let second = second(&k1(), omega, k);
        for value in [subharmonic, harmonic] {
            let found = second.threshold(value * 0.999, value * 1.001, 1e-8).unwrap();
            close(found, value, 3e-6, "marginal curve");
        }
    }
}

#[test]
fn levitated_layers_are_met() {
    // Recomputed with the separate code: hold limit at k = π/(50 mm), cap at 12.104 mm.
    let omega = TAU * 100.0;
    let layered = levitated(970.0, 5e-4, 0.0211, 0.02);
    close(second(&layered, omega, PI / 0.05).threshold(300.0, 400.0, 1e-8).unwrap(), 350.329, 2e-6, "hold");
    let found = second(&layered, omega, TAU / 12.104e-3).threshold(560.0, 580.0, 1e-8).unwrap();
    close(found, 571.070, 2e-6, "cap");
}

#[test]
fn layers_at_rest_have_their_exact_roots() {
    // Roots of (s + 2νk²)² + ω₀² = 4ν²k³√(k² + s/ν) for a deep liquid (Lamb, Hydrodynamics, art. 349), recomputed.
    let liquid = FluidLayer { density: 950.0, viscosity: 0.019, thickness: f64::INFINITY };
    let waves = second(&stack(9.81, &[FluidLayer::VACUUM, liquid], &[0.0206]), 400.0, 500.0).at(0.0);
    let wave = waves.iter().find(|exponent| exponent.response == Response::Other).unwrap();
    close(wave.rate, -8.258458, 1e-6, "decay");
    close(wave.frequency, 85.623930, 1e-7, "frequency");
    // Fall: Chandrasekhar (1961), §94: 0.4599 at 0.4907 for a single fluid (from memory, recomputed), and A = 0.5.
    let heavy = layer(1.0, 1.0, f64::INFINITY);
    let light = layer(1.0 / 3.0, 1.0, f64::INFINITY);
    for (lower, k, rate) in [(FluidLayer::VACUUM, 0.490673, 0.459863), (light, 0.411108, 0.284151)] {
        let found = second(&stack(1.0, &[heavy, lower], &[0.0]), 1.0, k).at(0.0);
        close(found[0].rate, rate, 4e-6, "fall");
        assert!(found[1].rate < 0.0);
    }
}

#[test]
fn finer_in_space_and_time_is_the_same() {
    let slab = stack(9.80665, &[air(0.05), layer(971.0, 1e-3, 0.008), air(0.06)], &[0.0212, 0.0212]);
    for (layered, omega, k, a) in [
        (k1(), TAU * 12.0, 475.843, 30.0),
        (slab, TAU * 50.0, 226.5, 260.0),
        (k1(), TAU * 12.0, 790.0, 100.0),
    ] {
        let reference = Resolution { degree: 22, first: 1.25, growth: 2.0, steps: 128 };
        let exact = Second::new(&layered, omega, k, &reference).at(a)[0].rate;
        let off = |resolution: Resolution| {
            (Second::new(&layered, omega, k, &resolution).at(a)[0].rate - exact).abs() / omega
        };
        let standard = Resolution::default();
        assert!(off(standard) < 1e-8, "{}", off(standard));
        // Every refinement on the way there pays, in space and in time.
        let [coarse, middle] = [6, 8].map(|degree| off(Resolution { degree, ..standard }));
        assert!(middle < 0.2 * coarse && coarse < 1e-2, "degree: {coarse:.1e} {middle:.1e}");
        let [coarse, middle] = [4, 8].map(|steps| off(Resolution { steps, degree: 16, ..standard }));
        assert!(middle < 0.05 * coarse, "steps: {coarse:.1e} {middle:.1e}");
    }
}

#[test]
fn an_interface_between_equal_fluids_changes_nothing() {
    let whole = levitated(970.0, 5e-4, 0.0211, 0.02);
    let mut split = whole.clone();
    split.layers[1].thickness = 0.013;
    split.layers.insert(2, FluidLayer { thickness: 0.007, ..whole.layers[1] });
    split.tensions.insert(1, 0.0);
    for (k, a) in [(63.0, 300.0), (519.0, 600.0)] {
        let [one, two] = [&whole, &split].map(|layered| second(layered, TAU * 100.0, k).at(a)[0].rate);
        assert!((one - two).abs() < 1e-7 * one.abs(), "{one} {two}");
    }
}
