//! Wedges by level error and cross-axis motion against direct integration in time (`tests/src/galerkin`), which shares
//! nothing with the solver but the problem.

use num_complex::Complex64;
use physics::stability::layered::{FluidLayer, Forcing, Layered};
use physics::stability::wedge::{Sideways, Slopes, wedge};
use physics::stack::Plan;
use std::f64::consts::{PI, TAU};
use topheavy_tests::galerkin::{Resolution, Second};
use topheavy_tests::stacks::{air, layer, levitated, stack};

/// Largest difference relative to the largest gain; 1e-3 is asked for.
const CLOSE: f64 = 1e-6;

/// The sum over the modes of a rectangle (m odd, line of least squares 96/(m⁴π⁴), wall 8/(m²π²)) of the second method.
fn second(layered: &Layered, forcing: &Forcing, size: f64, sideways: &Sideways, modes: usize) -> Vec<Slopes> {
    let a = forcing.acceleration;
    let push = |phase: f64| {
        let cross = sideways.cross * Complex64::from_polar(1.0, phase);
        sideways.tilt * layered.gravity + a * cross.re
    };
    let mut faces = vec![Slopes::default(); layered.interfaces()];
    let (mut wall_left, mut slope_left) = (1.0, 1.0);
    for i in 0..modes {
        let m = (2 * i + 1) as f64 * PI;
        let second = Second::new(layered, forcing.omega, m / size, &Resolution::default());
        let mut share = (8.0 / (m * m), 96.0 / m.powi(4));
        wall_left -= share.0;
        slope_left -= share.1;
        if i + 1 == modes {
            share = (share.0 + wall_left, share.1 + slope_left);
        }
        for (face, (mean, first)) in faces.iter_mut().zip(second.pushed(a, &push)) {
            face.mean += share.1 * mean;
            face.oscillating += share.1 * first;
            face.wall += share.0 * mean;
            face.wall_oscillating += share.0 * first;
        }
    }
    faces
}

fn slab(kinematic: f64) -> Layered {
    stack(9.80665, &[air(0.05), layer(971.0, kinematic, 0.015), air(0.04)], &[0.0212, 0.0212])
}

/// Stable slabs of worked designs and their like: oil of 1000 and 100 mm²/s in 50 mm at 50 Hz, the levitated layer of
/// 500 mm²/s at 100 Hz, two liquids in one slab, a pool on the floor near a slosh at the drive's frequency.
fn cases() -> Vec<(&'static str, Layered, Forcing, f64)> {
    let two = stack(
        9.80665,
        &[air(0.03), layer(960.0, 5e-4, 0.006), layer(1230.0, 3e-4, 0.009), air(0.012)],
        &[0.021, 0.02, 0.06],
    );
    let pool = stack(9.81, &[FluidLayer::VACUUM, layer(1000.0, 1e-5, 0.02)], &[0.03]);
    let at = |hertz: f64, acceleration: f64| Forcing { omega: TAU * hertz, acceleration };
    vec![
        ("oil 1000", slab(1e-3), at(50.0, 217.0), 0.05),
        ("oil 1000, narrow", slab(1e-3), at(55.0, 195.5), 0.035),
        ("oil 100, fast", slab(1e-4), at(120.0, 560.0), 0.05),
        ("levitated", levitated(970.0, 5e-4, 0.0211, 0.02), at(100.0, 450.0), 0.05),
        ("two liquids", two, at(45.0, 185.0), 0.04),
        ("pool", pool, at(4.2, 0.8), 0.05),
    ]
}

#[test]
fn integration_in_time_gives_the_same_wedges() {
    let sideways = Sideways { tilt: 0.003, cross: Complex64::from_polar(0.05, 0.7) };
    for (name, layered, forcing, size) in cases() {
        // A second direction of another size, so that each axis is seen to have its own modes.
        let plan = Plan::Rectangle { length: size, width: 1.1 * size };
        let found = wedge(&layered, &forcing, plan, &|| false).unwrap();
        let modes = found.directions[0].evidence.modes;
        for direction in &found.directions {
            let expected = second(&layered, &forcing, direction.size, &sideways, modes);
            let largest =
                expected.iter().map(|s| s.wall.abs().max(s.wall_oscillating.norm())).fold(0.0, f64::max);
            for (face, expected) in direction.faces.iter().zip(&expected) {
                let found = face.under(&sideways);
                for (found, expected, what) in [
                    (found.mean.into(), expected.mean.into(), "mean"),
                    (found.wall.into(), expected.wall.into(), "wall"),
                    (found.oscillating, expected.oscillating, "oscillating"),
                    (found.wall_oscillating, expected.wall_oscillating, "wall, oscillating"),
                ] {
                    let off: f64 = (found - expected as Complex64).norm() / largest;
                    assert!(off < CLOSE, "{name}, {what}: {found} against {expected}, off by {off:.1e}");
                }
            }
        }
    }
}

/// The second method by itself: a free face of a deep inviscid-like liquid that is pushed sideways at rest follows
/// 1/(1 − ω²/gk) (a driven oscillator), off resonance.
#[test]
fn the_second_method_is_a_driven_oscillator_at_rest() {
    let layered = stack(9.81, &[FluidLayer::VACUUM, layer(1000.0, 1e-7, 0.2)], &[0.0]);
    let k = PI / 0.05;
    for ratio in [0.3f64, 0.6, 1.5] {
        let omega = ratio * (9.81 * k).sqrt();
        let second = Second::new(&layered, omega, k, &Resolution::default());
        let (mean, first) = second.pushed(0.0, &|phase| 9.81 * (0.5 + phase.cos()))[0];
        let expected = 1.0 / (1.0 - ratio * ratio);
        assert!((mean - 0.5).abs() < 1e-6, "{mean}");
        // Boundary layers at the floor are e^{−2·12} away; damping 2νk²/ω acts at 1e-4.
        assert!((first.re - expected).abs() < 1e-3 * expected.abs(), "{first} {expected}");
    }
}
