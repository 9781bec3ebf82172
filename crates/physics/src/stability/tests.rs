//! Checks of the stability solver against published figures and exact limits. The comparison with an independent
//! second method on random stacks stands in the workspace's `tests` package.

use super::layered::{FluidLayer, Forcing, Layered, Response};
use super::{Failure, Mechanism, growth, neutral, slab};
use crate::stack::Plan;
use std::f64::consts::{PI, TAU};

const G: f64 = 9.80665;

fn never() -> bool {
    false
}

fn gas(thickness: f64) -> FluidLayer {
    FluidLayer { density: 1.2, viscosity: 1.82e-5, thickness }
}

/// A liquid (density, kinematic viscosity, tension, depth) between open air above and a cushion below.
fn levitated(density: f64, nu: f64, tension: f64, depth: f64, cushion: f64) -> Layered {
    Layered {
        gravity: G,
        layers: vec![
            gas(f64::INFINITY),
            FluidLayer { density, viscosity: density * nu, thickness: depth },
            gas(cushion),
        ],
        tensions: vec![tension, tension],
    }
}

/// Data set K1: 1346 kg/m³, 7.2 mPa s, 1.6 mm under 949 kg/m³, 20 mPa s, 8.4 mm, 35 mN/m (inputs: Périnet, Juric &
/// Tuckerman, J. Fluid Mech. 635, 1 (2009), doi 10.1017/S0022112009007551).
fn two_layers() -> Layered {
    Layered {
        gravity: 9.8066,
        layers: vec![
            FluidLayer { density: 949.0, viscosity: 20e-3, thickness: 8.4e-3 },
            FluidLayer { density: 1346.0, viscosity: 7.2e-3, thickness: 1.6e-3 },
        ],
        tensions: vec![0.035],
    }
}

#[test]
fn the_published_two_layer_onset_is_met() {
    // Published: onset at 25.8 m/s², 13.2 mm; further digits recomputed with an independent code.
    let found = neutral(&two_layers(), TAU * 12.0, 475.843, 100.0, &never).unwrap();
    assert!((found.subharmonic[0] - 25.8242073).abs() < 1e-6 * 25.8, "{found:?}");
    for (k, subharmonic, harmonic) in
        [(400.0, 39.1799, 478.547), (600.0, 59.3033, 201.480), (790.0, 416.720, 75.8302)]
    {
        let found = neutral(&two_layers(), TAU * 12.0, k, 480.0, &never).unwrap();
        // Each tongue has more branches; the sampled ones must be among them.
        let has = |list: &[f64], value: f64| list.iter().any(|a| (a - value).abs() < 2e-6 * value);
        assert!(has(&found.subharmonic, subharmonic) && has(&found.harmonic, harmonic), "{k}: {found:?}");
    }
}

#[test]
fn growth_changes_sign_where_the_neutral_curve_says_so() {
    let omega = TAU * 12.0;
    let onset = neutral(&two_layers(), omega, 475.843, 30.0, &never).unwrap().subharmonic[0];
    for (factor, grows) in [(1.0 - 1e-6, false), (1.0 + 1e-6, true)] {
        let forcing = Forcing { omega, acceleration: onset * factor };
        let found = growth(&two_layers(), &forcing, 475.843, &never).unwrap();
        assert_eq!(found.rate > 0.0, grows, "{found:?}");
        assert_eq!(found.unstable, usize::from(grows));
        assert_eq!(found.response, Response::Subharmonic);
    }
}

#[test]
fn an_interface_between_equal_fluids_changes_nothing() {
    let whole = levitated(970.0, 5e-4, 0.0211, 0.02, 0.01);
    let mut split = whole.clone();
    split.layers[1].thickness = 0.013;
    split.layers.insert(2, FluidLayer { thickness: 0.007, ..whole.layers[1] });
    split.tensions.insert(1, 0.0);
    let omega = TAU * 100.0;
    for (k, a) in [(63.0, 300.0), (519.0, 600.0), (200.0, 450.0)] {
        let one = growth(&whole, &Forcing { omega, acceleration: a }, k, &never).unwrap();
        let two = growth(&split, &Forcing { omega, acceleration: a }, k, &never).unwrap();
        assert_eq!(one.unstable, two.unstable);
        assert!((one.rate - two.rate).abs() < 1e-6 * (one.rate.abs() + 1.0), "{one:?} {two:?}");
    }
}

#[test]
fn nearly_inviscid_fall_follows_the_textbook() {
    // Deep liquid over nothing: s² = gk − σk³/ρ (Lamb, Hydrodynamics, art. 267).
    let layered = Layered {
        gravity: 9.81,
        layers: vec![
            FluidLayer { density: 998.0, viscosity: 1e-9, thickness: f64::INFINITY },
            FluidLayer::VACUUM,
        ],
        tensions: vec![0.0728],
    };
    let k: f64 = 150.0;
    let found = growth(&layered, &Forcing { omega: 100.0, acceleration: 0.0 }, k, &never).unwrap();
    let expected = (9.81 * k - 0.0728 * k.powi(3) / 998.0).sqrt();
    assert!((found.rate - expected).abs() < 1e-4 * expected, "{found:?} {expected}");
    assert_eq!(found.response, Response::None);
}

/// Worked designs (laboratory values computed with a separate code; wave limits ±1 %, hold limits to the digits
/// printed): depth, cushion, cell, frequency, set slab acceleration; hold, wave, class of the wave limit.
#[test]
fn worked_designs_are_met() {
    let square = |l: f64| Plan::Rectangle { length: l, width: l };
    let cases = [
        (
            "D1",
            levitated(971.0, 1e-3, 0.0212, 0.015, 0.040),
            square(0.05),
            50.0,
            220.7,
            175.8,
            287.4,
            Response::Subharmonic,
        ),
        (
            "D3",
            levitated(1261.0, 1.12e-3, 0.0634, 0.015, 0.012),
            square(0.04),
            45.0,
            186.4,
            140.6,
            264.8,
            Response::Other,
        ),
        (
            "D4",
            levitated(971.0, 5e-4, 0.0211, 0.015, 0.020),
            square(0.03),
            60.0,
            211.0,
            162.3,
            259.3,
            Response::Subharmonic,
        ),
        (
            "D5 upper",
            levitated(971.0, 1e-3, 0.0212, 0.010, 0.018),
            square(0.04),
            50.0,
            222.5,
            157.3,
            278.1,
            Response::Other,
        ),
        (
            "D6",
            levitated(971.0, 1e-3, 0.0212, 0.015, 0.035),
            Plan::Circle { diameter: 0.06 },
            55.0,
            247.3,
            195.5,
            331.7,
            Response::Subharmonic,
        ),
        (
            "F5",
            levitated(971.0, 1e-3, 0.0212, 0.008, 0.060),
            square(0.05),
            50.0,
            228.6,
            175.6,
            243.9,
            Response::Other,
        ),
    ];
    for (name, layered, plan, frequency, set, hold, wave, class) in cases {
        let forcing = Forcing { omega: TAU * frequency, acceleration: set };
        let found = slab(&layered, &forcing, plan, &never).unwrap();
        assert_eq!(found.mechanism, Mechanism::None, "{name}");
        assert!((found.hold_limit.unwrap() - hold).abs() < 0.06, "{name}: {found:?}");
        assert!((found.wave_limit.unwrap() - wave).abs() < 0.01 * wave, "{name}: {found:?}");
        assert_eq!(found.wave_set_by.unwrap().response, class, "{name}: {found:?}");
        assert_eq!(found.hold_set_by.unwrap().interface, 1, "{name}: the lower face falls");
        assert!(found.ring_down.unwrap() > 0.0);
    }
}

#[test]
fn failing_designs_fail_as_computed() {
    let plan = Plan::Rectangle { length: 0.05, width: 0.05 };
    let omega = TAU * 50.0;
    let d1 = levitated(971.0, 1e-3, 0.0212, 0.015, 0.040);
    // F1: the first design at 9 g0 (T = 1.731): falls with 8.7 1/s at 63 1/m.
    let weak = slab(&d1, &Forcing { omega, acceleration: 9.0 * 1.731 * G }, plan, &never).unwrap();
    assert_eq!(weak.mechanism, Mechanism::Falls);
    assert!((weak.worst.growth.rate - 8.7).abs() < 0.05 && (weak.worst.wavenumber - 63.0).abs() < 0.5);
    // F2: at 18.5 g0: waves, 14.7 1/s at 251 1/m, a combination of both faces.
    let strong = slab(&d1, &Forcing { omega, acceleration: 18.5 * 1.731 * G }, plan, &never).unwrap();
    assert_eq!(strong.mechanism, Mechanism::Waves);
    assert!((strong.worst.growth.rate - 14.7).abs() < 0.05 && (strong.worst.wavenumber - 251.0).abs() < 1.0);
    assert_eq!(strong.worst.growth.response, Response::Other);
    // F6: with 100 mm²/s there is no window: it would hold from 175.2 but waves start at 69.7.
    let thin = levitated(971.0, 1e-4, 0.0212, 0.015, 0.040);
    let none = slab(&thin, &Forcing { omega, acceleration: 220.0 }, plan, &never).unwrap();
    assert!(none.windows.is_empty());
    assert!((none.hold_limit.unwrap() - 175.2).abs() < 0.06, "{none:?}");
    assert!((none.wave_limit.unwrap() - 69.7).abs() < 0.7, "{none:?}");
}

#[test]
fn no_drive_is_a_case_like_any_other() {
    let plan = Plan::Rectangle { length: 0.05, width: 0.05 };
    let jar = levitated(971.0, 1e-3, 0.0212, 0.015, 0.040);
    let found = slab(&jar, &Forcing { omega: TAU * 50.0, acceleration: 0.0 }, plan, &never).unwrap();
    assert_eq!(found.mechanism, Mechanism::Falls);
    assert_eq!(found.worst.growth.response, Response::None);
    // Upright instead of upside down nothing falls and the window starts at no drive.
    let upright = Layered {
        gravity: G,
        layers: vec![gas(f64::INFINITY), FluidLayer { density: 971.0, viscosity: 0.971, thickness: 0.015 }],
        tensions: vec![0.0212],
    };
    let found = slab(&upright, &Forcing { omega: TAU * 50.0, acceleration: 0.0 }, plan, &never).unwrap();
    assert_eq!(found.mechanism, Mechanism::None);
    assert_eq!(found.hold_limit, Some(0.0));
    assert!(found.ring_down.unwrap() > 0.0);
}

#[test]
fn narrower_than_the_capillary_width_nothing_falls() {
    // π l_c = 4.68 mm for 970 kg/m³ and 21.1 mN/m, free line: K changes sign there.
    let layered = levitated(970.0, 5e-4, 0.0211, 0.02, 0.01);
    for (width, falls) in [(0.00466, false), (0.00471, true)] {
        let plan = Plan::Rectangle { length: width, width };
        let found = slab(&layered, &Forcing { omega: TAU * 100.0, acceleration: 0.0 }, plan, &never).unwrap();
        assert_eq!(found.mechanism == Mechanism::Falls, falls, "{width}");
    }
}

#[test]
fn work_that_is_no_longer_wanted_stops_and_bad_numbers_are_refused() {
    let plan = Plan::Rectangle { length: 0.05, width: 0.05 };
    let d1 = levitated(971.0, 1e-3, 0.0212, 0.015, 0.040);
    let forcing = Forcing { omega: 100.0 * PI, acceleration: 220.0 };
    assert_eq!(slab(&d1, &forcing, plan, &|| true), Err(Failure::Cancelled));
    for bad in [f64::NAN, -1.0, f64::INFINITY] {
        let mut broken = d1.clone();
        broken.layers[1].density = bad;
        assert!(matches!(slab(&broken, &forcing, plan, &never), Err(Failure::Unusable { .. })), "{bad}");
        let forcing = Forcing { acceleration: bad, ..forcing };
        assert!(matches!(slab(&d1, &forcing, plan, &never), Err(Failure::Unusable { .. })), "{bad}");
    }
}
