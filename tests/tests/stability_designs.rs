//! Whole slabs in their cells: worked designs, computed once with a separate code (all Floquet exponents), not
//! measured. Hold limits to the digits printed, wave limits within one per cent as stated there.

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use physics::stability::layered::{FluidLayer, Forcing, Layered, Response};
use physics::stability::{Mechanism, SlabStability, slab};
use physics::stack::Plan;
use std::f64::consts::TAU;
use topheavy_tests::stacks::{layer, stack};

const G: f64 = 9.80665;

/// Density, kinematic viscosity and tension of the liquids.
const S1000: (f64, f64, f64) = (971.0, 1e-3, 0.0212);
const S500: (f64, f64, f64) = (971.0, 5e-4, 0.0211);
const S100: (f64, f64, f64) = (971.0, 1e-4, 0.0212);
const GLYCEROL: (f64, f64, f64) = (1261.0, 1.12e-3, 0.0634);

fn gas(thickness: f64) -> FluidLayer {
    FluidLayer { density: 1.2, viscosity: 1.82e-5, thickness }
}

/// A liquid of a depth over a cushion and under a gas, all in mm; open air is a half space.
fn over((density, kinematic, tension): (f64, f64, f64), above: f64, depth: f64, cushion: f64) -> Layered {
    let layers = [gas(above * 1e-3), layer(density, kinematic, depth * 1e-3), gas(cushion * 1e-3)];
    stack(G, &layers, &[tension, tension])
}

fn square(side: f64) -> Plan {
    Plan::Rectangle { length: side * 1e-3, width: side * 1e-3 }
}

fn judge(layered: &Layered, hertz: f64, acceleration: f64, plan: Plan) -> SlabStability {
    slab(layered, &Forcing { omega: TAU * hertz, acceleration }, plan, &|| false).unwrap()
}

const OPEN: f64 = f64::INFINITY;

#[test]
fn designs_that_hold() {
    use Response::{Other, Subharmonic};
    // Acceleration of the slab = that of the table × amplification, g. Hold and wave limit, class of the latter.
    let designs = [
        (
            "D1",
            over(S1000, OPEN, 15.0, 40.0),
            square(50.0),
            50.0,
            13.0 * 1.731,
            175.8,
            287.4,
            Some(Subharmonic),
        ),
        ("D3", over(GLYCEROL, OPEN, 15.0, 12.0), square(40.0), 45.0, 16.5 * 1.152, 140.6, 264.8, Some(Other)),
        (
            "D4",
            over(S500, OPEN, 15.0, 20.0),
            square(30.0),
            60.0,
            15.0 * 1.434,
            162.3,
            259.3,
            Some(Subharmonic),
        ),
        ("D5 lower", over(S1000, 18.0, 12.0, 20.0), square(40.0), 50.0, 13.2 * 1.498, 157.4, 291.2, None),
        (
            "D5 upper",
            over(S1000, OPEN, 10.0, 18.0),
            square(40.0),
            50.0,
            13.2 * 1.719,
            157.3,
            278.1,
            Some(Other),
        ),
        (
            "D6",
            over(S1000, OPEN, 15.0, 35.0),
            Plan::Circle { diameter: 0.06 },
            55.0,
            14.0 * 1.801,
            195.5,
            331.7,
            Some(Subharmonic),
        ),
        (
            "F5",
            over(S1000, OPEN, 8.0, 60.0),
            square(50.0),
            50.0,
            1.302 * 175.6 / G,
            175.6,
            243.9,
            Some(Other),
        ),
    ];
    for (name, layered, plan, hertz, set, hold, wave, class) in designs {
        let found = judge(&layered, hertz, set * G, plan);
        assert_eq!(found.mechanism, Mechanism::None, "{name}");
        assert!((found.hold_limit.unwrap() - hold).abs() <= 0.06, "{name}: {found:?}");
        assert!((found.wave_limit.unwrap() - wave).abs() <= 0.01 * wave, "{name}: {found:?}");
        if let Some(class) = class {
            assert_eq!(found.wave_set_by.unwrap().response, class, "{name}: {found:?}");
        }
        assert_eq!(found.hold_set_by.unwrap().interface, 1, "{name}: it is the lower face that falls");
    }
}

#[test]
fn designs_that_fail() {
    let d1 = over(S1000, OPEN, 15.0, 40.0);
    // F1: D1 at 9 g falls with 8.7 1/s at 63 1/m.
    let falls = judge(&d1, 50.0, 9.0 * 1.731 * G, square(50.0));
    assert_eq!(falls.mechanism, Mechanism::Falls);
    assert!((falls.worst.growth.rate - 8.7).abs() <= 0.05, "{falls:?}");
    assert!((falls.worst.wavenumber - 63.0).abs() <= 0.5, "{falls:?}");
    // F2: D1 at 18.5 g raises waves with 14.7 1/s at 251 1/m, in combination.
    let waves = judge(&d1, 50.0, 18.5 * 1.731 * G, square(50.0));
    assert_eq!(waves.mechanism, Mechanism::Waves);
    assert!((waves.worst.growth.rate - 14.7).abs() <= 0.05, "{waves:?}");
    assert!((waves.worst.wavenumber - 251.0).abs() <= 0.5, "{waves:?}");
    assert_eq!(waves.worst.growth.response, Response::Other);
    // F6: D1 with 100 mm²/s would hold from 175.2 but raises waves from 69.7: no window.
    let none = judge(&over(S100, OPEN, 15.0, 40.0), 50.0, 13.0 * 1.731 * G, square(50.0));
    assert!(none.windows.is_empty(), "{none:?}");
    assert!((none.hold_limit.unwrap() - 175.2).abs() <= 0.06, "{none:?}");
    assert!((none.wave_limit.unwrap() - 69.7).abs() <= 0.01 * 69.7, "{none:?}");
}

#[test]
fn on_resonance_waves_grow_fast() {
    // F3: D1 on a cushion of 95 mm is on resonance: amplification 7.9, 147 1/s. The amplification has two digits, so
    // the rate lies between those at 7.85 and 7.95.
    let layered = over(S1000, OPEN, 15.0, 95.0);
    let rate = |t: f64| judge(&layered, 50.0, 13.0 * t * G, square(50.0)).worst.growth.rate;
    let (low, high) = (rate(7.85), rate(7.95));
    assert!(low - 0.5 <= 147.0 && 147.0 <= high + 0.5, "{low} to {high}");
}

#[test]
fn wider_cells_leave_less_room() {
    // Wave limit over hold limit of 15 mm of 1000 mm²/s against width (mm), to the two decimals printed.
    for (hertz, ratios) in [(50.0, [2.10, 1.63, 1.29, 1.15]), (80.0, [2.70, 2.09, 1.65, 1.47])] {
        for (width, ratio) in [30.0, 50.0, 80.0, 100.0].into_iter().zip(ratios) {
            let found = judge(&over(S1000, OPEN, 15.0, 40.0), hertz, 250.0, square(width));
            let found = found.wave_limit.unwrap() / found.hold_limit.unwrap();
            assert!(
                (found - ratio).abs() <= 0.01 * ratio,
                "{hertz} Hz, {width} mm: {found}, expected {ratio}"
            );
        }
    }
}
