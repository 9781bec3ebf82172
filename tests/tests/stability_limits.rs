//! The stability solver where the answer is known otherwise: exact dispersion relations, viscous fall, Mathieu's
//! equation, zeros of Bessel functions.

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use physics::stability::layered::{FluidLayer, Forcing, Layered, Response};
use physics::stability::{Growth, cell_modes, growth, neutral};
use physics::stack::Plan;
use std::f64::consts::{PI, TAU};
use topheavy_tests::stacks::{layer, stack};

const DEEP: f64 = f64::INFINITY;

fn close(found: f64, expected: f64, tolerance: f64, what: &str) {
    let off = (found - expected).abs() / expected.abs();
    assert!(off <= tolerance, "{what}: {found}, expected {expected}, off by {off:.1e}");
}

fn at_rest(layered: &Layered, k: f64) -> Growth {
    growth(layered, &Forcing { omega: TAU * 50.0, acceleration: 0.0 }, k, &|| false).unwrap()
}

#[test]
fn exact_roots_of_deep_viscous_waves() {
    // Roots of (s + 2νk²)² + ω₀² = 4ν²k³√(k² + s/ν) (Lamb, Hydrodynamics, art. 349), recomputed, g = 9.81 m/s².
    let cases = [
        (998.2, 1.002e-3, 0.07275, 100.0, -0.0198265, 32.463287),
        (950.0, 0.019, 0.0206, 500.0, -8.258458, 85.623930),
        (970.0, 0.485, 0.0211, 100.0, -6.968394, 29.103507),
    ];
    for (density, viscosity, tension, k, rate, frequency) in cases {
        let liquid = FluidLayer { density, viscosity, thickness: DEEP };
        let found = at_rest(&stack(9.81, &[FluidLayer::VACUUM, liquid], &[tension]), k);
        close(found.rate, rate, 3e-6, "decay");
        close(found.frequency, frequency, 1e-7, "frequency");
        assert_eq!(found.unstable, 0);
    }
}

#[test]
fn two_nearly_inviscid_layers_swing_as_the_textbook_says() {
    // ω² = k[(ρ₁ − ρ₂)g + σk²]/(ρ₁ coth kh₁ + ρ₂ coth kh₂): 8.20119 rad/s for 1000/900 kg/m³, 50/30 mm, 30 mN/m,
    // 100 1/m. Stokes layers of the relative thickness k√(2ν/ω) shift it by the like.
    let kinematic = 1e-12;
    let layered = stack(9.81, &[layer(900.0, kinematic, 0.03), layer(1000.0, kinematic, 0.05)], &[0.030]);
    let found = at_rest(&layered, 100.0);
    close(found.frequency, 8.20119, 5e-5, "frequency");
    assert!(found.rate < 0.0 && found.rate > -1e-3, "{found:?}");
}

/// Heavy (above) over light with equal kinematic viscosity, deep, no tension, in units of (g/ν²)^{1/3} and (g²/ν)^{1/3}.
fn falling(atwood: f64) -> Layered {
    let lower = match atwood {
        1.0 => FluidLayer::VACUUM,
        _ => layer((1.0 - atwood) / (1.0 + atwood), 1.0, DEEP),
    };
    stack(1.0, &[layer(1.0, 1.0, DEEP), lower], &[0.0])
}

#[test]
fn viscous_fall_grows_as_tabulated() {
    // Chandrasekhar, Hydrodynamic and Hydromagnetic Stability (1961), §94: 0.4907 and 0.4599 for A = 1 (from memory,
    // recomputed); the other rows recomputed from the same secular equation
    // (references/falls_and_waves.py). Largest growth, then at k = 0.5 and 1.
    let rows = [
        (0.01, 0.113457, 0.0208140, 0.00971760, 0.00498140),
        (0.10, 0.244198, 0.0966319, 0.0808508, 0.0482601),
        (0.25, 0.330320, 0.178213, 0.168581, 0.115151),
        (0.50, 0.411108, 0.284151, 0.280922, 0.215782),
        (0.90, 0.480675, 0.426463, 0.426283, 0.358102),
        (1.00, 0.490673, 0.459863, 0.459820, 0.391242),
    ];
    for (atwood, k_largest, largest, at_half, at_one) in rows {
        let layered = falling(atwood);
        for (k, expected) in [(k_largest, largest), (0.5, at_half), (1.0, at_one)] {
            close(at_rest(&layered, k).rate, expected, 4e-6, &format!("A {atwood}, k {k}"));
        }
        // The maximum is one: a little to either side growth is less.
        for k in [0.98 * k_largest, 1.02 * k_largest] {
            assert!(at_rest(&layered, k).rate < largest, "A {atwood}");
        }
    }
}

#[test]
fn viscous_fall_with_tension() {
    // Liquid over air, recomputed: wavenumber and rate of the fastest growth, g = 9.81 m/s².
    let air = FluidLayer { density: 1.2, viscosity: 1.8e-5, thickness: DEEP };
    for (density, viscosity, tension, k, rate) in
        [(970.0, 970.0 * 5e-4, 0.0211, 144.749, 25.5857), (1260.0, 1.41, 0.063, 86.8188, 19.7024)]
    {
        let liquid = FluidLayer { density, viscosity, thickness: DEEP };
        let found = at_rest(&stack(9.81, &[liquid, air], &[tension]), k);
        close(found.rate, rate, 4e-6, "growth");
    }
}

/// A deep, nearly inviscid liquid under vacuum (or over it, for negative `a`), whose interface obeys Mathieu's equation
/// y″ + (a − 2q cos 2t) y = 0 with a = 4gk/ω² and q = 2kA/ω².
fn mathieu(a: f64) -> (Layered, f64, f64) {
    let (k, omega) = (100.0_f64, 100.0_f64);
    let gravity = a.abs() * omega * omega / (4.0 * k);
    let liquid = layer(1000.0, 1e-11, DEEP);
    let layers = if a < 0.0 { [liquid, FluidLayer::VACUUM] } else { [FluidLayer::VACUUM, liquid] };
    (stack(gravity, &layers, &[0.0]), k, omega)
}

#[test]
fn edges_of_mathieu_without_gravity() {
    // (More of the chart: stability_references.rs.)
    // b₁ = 0 at q = 0.9080463, a₁ = 0 at 7.513610, b₂ = 0 at 7.579690 (recomputed).
    // (A stiffness of exactly nothing is no stack; 1e-9 moves the edges by as little.)
    let (layered, k, omega) = mathieu(1e-9);
    let scale = omega * omega / (2.0 * k);
    let found = neutral(&layered, omega, k, 8.0 * scale, &|| false).unwrap();
    close(found.subharmonic[0] / scale, 0.9080463, 1e-6, "b₁");
    close(found.subharmonic[1] / scale, 7.513610, 1e-6, "a₁");
    close(found.harmonic.last().unwrap() / scale, 7.579690, 1e-6, "b₂");
}

#[test]
fn a_levitated_face_is_held_from_the_exact_mathieu_boundary() {
    // 970 kg/m³, 21.1 mN/m, 20 mm wide, 100 Hz, deep, inviscid, no gas: a₀(q) = −0.01475888, q = 0.17208435,
    // 216.2476 m/s² (recomputed); the averaged formula gives 0.3436146 m/s.
    let (k, omega) = (PI / 0.02, TAU * 100.0);
    let layered = stack(9.81, &[layer(970.0, 1e-11, DEEP), FluidLayer::VACUUM], &[0.0211]);
    let found = neutral(&layered, omega, k, 300.0, &|| false).unwrap().harmonic[0];
    close(found, 216.2476, 1e-6, "hold limit");
    close(2.0 * k * found / (omega * omega), 0.17208435, 1e-6, "q");
    close(found / omega, 0.3436146, 2e-3, "averaged formula");
    // With 200 mm of it at 1e-7 m²/s over 200 mm of air of 1.2 kg/m³ (its viscosity is not stated with the value and
    // does not matter at this accuracy).
    let air = FluidLayer { density: 1.2, viscosity: 1.8e-5, thickness: 0.2 };
    let gassy = stack(9.81, &[layer(970.0, 1e-7, 0.2), air], &[0.0211]);
    close(neutral(&gassy, omega, k, 300.0, &|| false).unwrap().harmonic[0], 216.5156, 1e-4, "with air");
}

#[test]
fn modes_of_a_circle_are_zeros_of_the_bessel_derivative() {
    // Zeros of J′ₘ: mathworld.wolfram.com/BesselFunctionZeros.html (four digits), six of them recomputed to ten.
    let table: [[f64; 6]; 3] = [
        [3.8317, 1.8412, 3.0542, 4.2012, 5.3175, 6.4156],
        [7.0156, 5.3314, 6.7061, 8.0152, 9.2824, 10.5199],
        [10.1735, 8.5363, 9.9695, 11.3459, 12.6819, 13.9872],
    ];
    let modes = cell_modes(Plan::Circle { diameter: 2.0 }, 14.5, 1000);
    for (n, row) in table.iter().enumerate() {
        for (m, zero) in row.iter().enumerate() {
            let mode = modes.iter().find(|mode| (mode.wavenumber - zero).abs() < 6e-5);
            let mode = mode.unwrap_or_else(|| panic!("no mode at {zero}: {modes:?}"));
            assert_eq!(mode.indices, [m as u32, n as u32 + 1]);
        }
    }
    for zero in [1.841183781, 3.054236928, 3.831705970, 4.201188941, 5.317553126, 5.331442774] {
        assert!(modes.iter().any(|mode| (mode.wavenumber - zero).abs() < 1e-9), "{zero}");
    }
    assert!(modes.iter().all(|mode| mode.wavenumber > 1.8), "the trivial zero moves volume and is no mode");
}

#[test]
fn classes_follow_the_boundary() {
    // Just above b₁ at q = 0.5 the answer is subharmonic, just above a₀ there is none.
    let (layered, k, omega) = mathieu(0.470654354934);
    let a = 0.5 * omega * omega / (2.0 * k);
    let found = growth(&layered, &Forcing { omega, acceleration: 1.01 * a }, k, &|| false).unwrap();
    assert!(found.rate > 0.0 && found.response == Response::Subharmonic, "{found:?}");
    let (layered, k, omega) = mathieu(-0.121765544941);
    let held = growth(&layered, &Forcing { omega, acceleration: 1.01 * a }, k, &|| false).unwrap();
    assert_eq!(held.unstable, 0, "{held:?}");
    let falls = growth(&layered, &Forcing { omega, acceleration: 0.99 * a }, k, &|| false).unwrap();
    assert!(falls.rate > 0.0 && falls.response == Response::Harmonic, "{falls:?}");
}
