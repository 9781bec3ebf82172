//! Thresholds of waves and of levitation against published values and against digits recomputed elsewhere.
//!
//! "Recomputed" digits come from a separate code (exponentials per layer, temporal harmonics, no part of this
//! repository), which was itself compared with Chebyshev collocation; they agree with the published ones where those
//! are known. Literature values quoted from memory are marked so and are held to the few per cent of an experiment.

use physics::stability::layered::{FluidLayer, Layered, Response};
use physics::stability::neutral;
use std::f64::consts::{PI, TAU};
use topheavy_tests::onset::onset;
use topheavy_tests::stacks::{air, k1, layer, levitated, stack};

fn close(found: f64, expected: f64, tolerance: f64, what: &str) {
    let off = (found - expected).abs() / expected.abs();
    assert!(off <= tolerance, "{what}: {found}, expected {expected}, off by {off:.1e}");
}

/// The minimum of a tongue against its wavelength (mm) and acceleration. The acceleration is stationary in the
/// wavenumber, which therefore is known to half the digits only.
fn tongue(name: &str, layered: &Layered, hertz: f64, class: Response, wavelength: f64, acceleration: f64) {
    let k = TAU / (wavelength * 1e-3);
    let found = onset(layered, TAU * hertz, class, (0.9 * k, 1.1 * k), 1.5 * acceleration);
    let (found_k, found_a) = found.unwrap_or_else(|failure| panic!("{name}: {failure}"));
    close(found_a, acceleration, 1e-4, name);
    close(TAU / found_k * 1e3, wavelength, 2e-4, name);
}

#[test]
fn two_layer_onset_of_waves() {
    // Published: 13.2 mm (J. Fluid Mech. 635, 1 (2009)), 25.8 m/s² (same work, from memory); digits recomputed.
    tongue("K1", &k1(), 12.0, Response::Subharmonic, 13.2043, 25.8242);
    tongue("K1, harmonic", &k1(), 12.0, Response::Harmonic, 7.942, 75.824);
}

#[test]
fn two_layer_marginal_curves() {
    // Recomputed samples (subharmonic, harmonic) of K1.
    let samples = [
        (400.0, 39.1799, 478.547),
        (475.84, 25.8242, 344.020),
        (600.0, 59.3033, 201.480),
        (790.0, 416.720, 75.8302),
    ];
    for (k, subharmonic, harmonic) in samples {
        let found = neutral(&k1(), TAU * 12.0, k, 500.0, &|| false).unwrap();
        let nearest = |list: &[f64], value: f64| {
            list.iter().copied().min_by(|x, y| (x - value).abs().total_cmp(&(y - value).abs())).unwrap()
        };
        close(nearest(&found.subharmonic, subharmonic), subharmonic, 3e-6, "K1 subharmonic");
        close(nearest(&found.harmonic, harmonic), harmonic, 3e-6, "K1 harmonic");
    }
}

#[test]
fn onset_of_waves_in_the_literature_set() {
    let two = |g: f64, depth: f64, density: f64, kinematic: f64, air_depth: f64, tension: f64| {
        stack(g, &[air(air_depth), layer(density, kinematic, depth)], &[tension])
    };
    // Carbon dioxide near its critical point (inputs from memory: J. Fluid Mech. 279, 49 (1994)); recomputed.
    let dense = FluidLayer { density: 519.933, viscosity: 3.908e-5, thickness: 0.1155e-3 };
    let light = FluidLayer { density: 415.667, viscosity: 3.124e-5, thickness: 0.1155e-3 };
    let k2 = stack(9.8066, &[light, dense], &[2.181e-6]);
    tongue("K2", &k2, 100.0, Response::Subharmonic, 0.19269, 37.051);
    tongue("K2, harmonic", &k2, 100.0, Response::Harmonic, 0.10311, 193.85);
    // 20 mm²/s silicone oil, 7 mm, 80 Hz. Literature of bouncing drops: 4.15 to 4.3 g, 4.75 mm (from memory).
    let k3 = two(9.81, 7e-3, 949.0, 20e-6, 30e-3, 0.0206);
    tongue("K3", &k3, 80.0, Response::Subharmonic, 4.7372, 40.949);
    close(
        onset(&k3, TAU * 80.0, Response::Subharmonic, (1250.0, 1400.0), 60.0).unwrap().1 / 9.81,
        4.2,
        0.03,
        "K3",
    );
    tongue(
        "K4",
        &two(9.81, 6e-3, 950.0, 20.9e-6, 30e-3, 0.0206),
        80.0,
        Response::Subharmonic,
        4.7386,
        42.566,
    );
    tongue("K5", &two(9.81, 10e-3, 960.0, 50e-6, 30e-3, 0.0208), 50.0, Response::Subharmonic, 7.1918, 39.905);
    let k6 = two(9.81, 50e-3, 998.2, 1.002e-3 / 998.2, 50e-3, 0.07275);
    tongue("K6", &k6, 60.0, Response::Subharmonic, 8.5974, 1.12563);
    tongue(
        "K7",
        &two(9.81, 2.9e-3, 1220.0, 1.02e-4, 30e-3, 0.065),
        80.0,
        Response::Subharmonic,
        6.653,
        139.07,
    );
}

#[test]
fn thin_layers_answer_harmonically_first() {
    // Phys. Rev. Lett. 78, 2357 (1997), from memory: harmonic onset in a thin layer at 6 to 9 Hz; digits recomputed.
    let film = stack(9.81, &[air(30e-3), layer(934.0, 10e-6, 0.7e-3)], &[0.0201]);
    tongue("K8", &film, 6.0, Response::Harmonic, 12.776, 51.833);
    tongue("K8", &film, 6.0, Response::Subharmonic, 9.605, 52.391);
    tongue("K9", &film, 9.0, Response::Harmonic, 9.605, 48.979);
    tongue("K9", &film, 9.0, Response::Subharmonic, 15.474, 49.465);
}

#[test]
fn three_layers_and_a_split_layer() {
    // Water under oil under air, and the oil alone: recomputed.
    let oil = |depth: f64| FluidLayer { density: 960.0, viscosity: 0.048, thickness: depth };
    let water = FluidLayer { density: 998.0, viscosity: 1.0e-3, thickness: 10e-3 };
    let three = stack(9.81, &[air(20e-3), oil(5e-3), water], &[0.0208, 0.040]);
    tongue("K10", &three, 30.0, Response::Subharmonic, 11.711, 15.3694);
    tongue(
        "K11",
        &stack(9.81, &[air(20e-3), oil(15e-3)], &[0.0208]),
        30.0,
        Response::Subharmonic,
        11.685,
        15.5657,
    );
    let split = stack(9.81, &[air(20e-3), oil(7e-3), oil(8e-3)], &[0.0208, 0.0]);
    tongue("K11, split", &split, 30.0, Response::Subharmonic, 11.685, 15.5657);
}

#[test]
fn levitated_layers_are_held_from_the_averaged_bound() {
    // Recomputed; averaged theory (Kapitza) gives sqrt(2gL/π) for the velocity, within one per cent or two.
    let cases = [
        (levitated(970.0, 5e-4, 0.0211, 0.02), 0.020, 217.723),
        (levitated(970.0, 5e-4, 0.0211, 0.02), 0.050, 350.329),
        (levitated(971.0, 1e-3, 0.0212, 0.02), 0.100, 497.787),
        (levitated(1260.0, 1e-3, 0.0630, 0.02), 0.020, 211.618),
    ];
    for (layered, width, acceleration) in cases {
        let found = neutral(&layered, TAU * 100.0, PI / width, 1.2 * acceleration, &|| false).unwrap();
        close(found.harmonic[0], acceleration, 4e-6, "hold limit");
    }
    let found =
        neutral(&levitated(970.0, 5e-4, 0.0211, 0.02), TAU * 100.0, PI / 0.05, 400.0, &|| false).unwrap();
    close(found.harmonic[0] / (TAU * 100.0), (2.0 * 9.81 * 0.05 / PI).sqrt(), 5e-3, "averaged bound");
}

#[test]
fn depth_matters_under_a_lid_only() {
    // 970 kg/m³, 10 mm²/s, no tension, 50 mm wide, 100 Hz, air 50 mm: velocity with a free upper face and with a lid.
    // Both faces free: e^{±kz} meet the conditions of each face by themselves, so depth drops out: sqrt(2g/k). Under
    // a lid: sqrt(2g/(k tanh kh)). Digits recomputed.
    let omega = TAU * 100.0;
    for (depth, free, lidded) in [(5e-3, 0.5607, 1.0228), (10e-3, 0.5602, 0.7524), (20e-3, 0.5600, 0.6077)] {
        let liquid = layer(970.0, 1e-5, depth);
        let open = stack(9.81, &[air(0.05), liquid, air(0.05)], &[0.0, 0.0]);
        let closed = stack(9.81, &[liquid, air(0.05)], &[0.0]);
        let k = PI / 0.05;
        for (layered, velocity, averaged) in [
            (open, free, (2.0 * 9.81 / k).sqrt()),
            (closed, lidded, (2.0 * 9.81 / (k * (k * depth).tanh())).sqrt()),
        ] {
            let found =
                neutral(&layered, omega, k, 1.2 * velocity * omega, &|| false).unwrap().harmonic[0] / omega;
            close(found, velocity, 1e-4, "velocity");
            close(found, averaged, 0.012, "averaged");
        }
    }
}

#[test]
fn levitated_layers_raise_waves_from_the_cap() {
    // Recomputed: density, kinematic viscosity, tension, frequency, wavelength (mm), acceleration.
    let cases = [
        (965.0, 1e-4, 0.0209, 100.0, 5.279, 221.083),
        (970.0, 5e-4, 0.0211, 100.0, 12.104, 571.070),
        (971.0, 1e-3, 0.0212, 60.0, 22.346, 373.922),
        (971.0, 1e-3, 0.0212, 100.0, 17.181, 818.724),
        (971.0, 1e-3, 0.0212, 150.0, 13.988, 1515.06),
        (1261.0, 1.11816e-3, 0.0634, 100.0, 18.089, 862.575),
    ];
    for (density, kinematic, tension, hertz, wavelength, acceleration) in cases {
        let layered = levitated(density, kinematic, tension, 0.02);
        tongue("cap", &layered, hertz, Response::Subharmonic, wavelength, acceleration);
    }
}

#[test]
fn weak_damping_follows_the_expansion() {
    // Phys. Rev. E 60, 559 (1999), from memory and recomputed: with γ = 2νk₀²/ω₀, G = gk₀/ω₀² and f = a k₀/(4ω₀²):
    // f = γ − γ^{3/2}/2 + (11 − 2G)/(8(3 − 2G)) γ^{5/2}.
    let (tension, density, gravity, omega) = (0.072, 1000.0, 9.81, TAU * 60.0);
    let half: f64 = 0.5 * omega;
    let k0 = {
        let (mut low, mut high) = (1.0, 1e4);
        for _ in 0..200 {
            let k: f64 = 0.5 * (low + high);
            if gravity * k + tension * k.powi(3) / density < half * half { low = k } else { high = k }
        }
        low
    };
    for (kinematic, acceleration, expansion) in
        [(1e-7, 0.109197, 2e-5), (1e-6, 1.063640, 2e-4), (1e-5, 9.780837, 4e-3)]
    {
        let liquid = layer(density, kinematic, f64::INFINITY);
        let deep = stack(gravity, &[FluidLayer::VACUUM, liquid], &[tension]);
        // The tongue is as narrow as its damping.
        let (gamma, g) = (2.0 * kinematic * k0 * k0 / half, gravity * k0 / (half * half));
        let around = ((1.0 - gamma) * k0, (1.0 + gamma) * k0);
        let (_, found) = onset(&deep, omega, Response::Subharmonic, around, 4.0 * acceleration).unwrap();
        close(found, acceleration, 1e-4, "recomputed");
        let f = gamma - gamma.powf(1.5) / 2.0 + (11.0 - 2.0 * g) / (8.0 * (3.0 - 2.0 * g)) * gamma.powf(2.5);
        close(found, 4.0 * half * half * f / k0, expansion, "expansion");
    }
}
