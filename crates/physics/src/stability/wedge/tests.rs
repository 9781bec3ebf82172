//! Limits with closed forms. The second method is in `tests/tests/stability_wedge.rs`.

use super::*;
use crate::stability::layered::FluidLayer;
use crate::stability::slab;

fn liquid(thickness: f64, kinematic: f64) -> FluidLayer {
    FluidLayer { density: 970.0, viscosity: 970.0 * kinematic, thickness }
}

fn free(thickness: f64, kinematic: f64, tension: f64) -> Layered {
    Layered {
        gravity: 9.80665,
        layers: vec![FluidLayer::VACUUM, liquid(thickness, kinematic), FluidLayer::VACUUM],
        tensions: vec![tension, tension],
    }
}

fn at(omega: f64, acceleration: f64) -> Forcing {
    Forcing { omega, acceleration }
}

const SQUARE: Plan = Plan::Rectangle { length: 0.05, width: 0.05 };

/// The moments of a straight line over the modes are all there: Σ 1/m² = π²/8 and Σ 1/m⁴ = π⁴/96 over odd m
/// (Abramowitz & Stegun 23.2); Σ 2/(z² − 1) = 1 over the zeros of J₁′ (a line at the rim of a circle).
#[test]
fn the_modes_make_up_a_straight_line() {
    for along in [Along::Length, Along::Diameter] {
        let shares = shares(along, 0.05);
        assert_eq!(shares.len(), MODES);
        let wall: f64 = shares.iter().map(|share| share.wall).sum();
        let slope: f64 = shares.iter().map(|share| share.slope).sum();
        // The rest of Σ 2/(z² − 1) with z ≈ nπ, and of Σ 8/(m²π²), is 2/(π² · 32) = 0.0063 either way.
        assert!((1.0 - wall - 0.0063).abs() < 3e-4, "{wall}");
        assert!((1.0 - slope).abs() < 1e-5, "{slope}");
    }
    // j′_{1,1} = 1.8412 (published table in `modes`): 2/(z² − 1) = 0.8368.
    assert!((shares(Along::Diameter, 0.05)[0].wall - 0.8368).abs() < 1e-4);
}

/// Hydrostatics: at rest and without tension every face stays level in the laboratory, whatever the layers are.
#[test]
fn at_rest_the_faces_stay_level() {
    let mut layered = free(0.01, 1e-4, 0.0);
    layered.layers[2] = FluidLayer { density: 1300.0, viscosity: 0.01, thickness: 0.02 };
    for plan in [SQUARE, Plan::Circle { diameter: 0.06 }] {
        let found = wedge(&layered, &at(300.0, 0.0), plan, &|| false).unwrap();
        for face in found.directions.iter().flat_map(|direction| &direction.faces) {
            for value in [face.tilt.mean, face.tilt.wall] {
                assert!((value - 1.0).abs() < 1e-9, "{value}");
            }
            assert_eq!(face.tilt.oscillating.norm(), 0.0);
        }
    }
}

/// Leaning the cell against a plumb vibration turns gravity and drive together, so that without tension each face
/// stays level in the laboratory at any drive: slope θ for α = θ, exactly and for every mode, and nothing oscillates.
#[test]
fn a_cell_that_leans_alone_keeps_level_faces_at_any_drive() {
    for (omega, a, kinematic) in [(314.0, 230.0, 1e-3), (500.0, 400.0, 1e-5), (60.0, 8.0, 1e-4)] {
        let found = wedge(&free(0.015, kinematic, 0.0), &at(omega, a), SQUARE, &|| false).unwrap();
        for face in &found.directions[0].faces {
            let slopes = face.under(&Sideways { tilt: 0.01, cross: Complex64::new(0.01, 0.0) });
            assert!((slopes.mean - 0.01).abs() < 1e-9, "{}", slopes.mean);
            assert!((slopes.wall - 0.01).abs() < 1e-9, "{}", slopes.wall);
            assert!(slopes.oscillating.norm() < 1e-9, "{}", slopes.oscillating);
        }
    }
}

/// High frequency, low viscosity, faces far apart: (Vα − θ)/(V − 1) and (Vα + θ)/(V + 1), to order k·x = V g k/a·2.
#[test]
fn fast_vibration_of_a_thin_liquid_gives_the_closed_form() {
    let omega = 2.0 * PI * 2000.0;
    let k = PI / 0.05;
    // kh = 12: faces far apart (at kh = 6 the wedge of the lower face still moves the upper one by 2 %); νk²/ω = 3e-7.
    let layered = free(12.0 / k, 1e-6, 0.0);
    for v in [1.4f64, 2.5, 0.5] {
        let a = omega * (2.0 * 9.80665 * v / k).sqrt();
        let stiffness = Stiffness::new(&layered, k, nalgebra::Const::<2>);
        let mode = settled(&stiffness, 9.80665, &at(omega, a), k).unwrap();
        for sideways in [
            Sideways { tilt: 0.002, cross: Complex64::new(0.0, 0.0) },
            Sideways { tilt: 0.001, cross: Complex64::new(0.02, 0.5) },
        ] {
            let expected = averaged(v, k, a, &sideways).unwrap();
            let forces = [sideways.tilt, sideways.cross.re, sideways.cross.im];
            let mean = |face: usize| -> f64 {
                mode.gains.iter().zip(forces).map(|(gain, force)| force * gain[0][face].re).sum()
            };
            // Averaging is off by some (f0/f)² (k·stroke = 3e-4 here) and the boundary layers by √(ν/2ω) k; both act on
            // V and are divided by V − 1. The quadrature part adds a mean only through viscosity.
            let near = |found: f64, expected: f64| (found - expected).abs() < 4e-3 * expected.abs().max(1e-3);
            assert!(near(mean(1), expected.lower), "{v}: {} against {}", mean(1), expected.lower);
            assert!(near(mean(0), expected.upper), "{v}: {} against {}", mean(0), expected.upper);
        }
    }
}

/// The gain diverges at the hold limit that `slab` finds by other means, with opposite signs on either side of it.
#[test]
fn the_gain_diverges_at_the_hold_limit() {
    let layered = free(0.015, 1e-3, 0.0211);
    let forcing = at(314.159_265, 230.0);
    let hold = slab(&layered, &forcing, SQUARE, &|| false).unwrap().hold_limit.unwrap();
    let gain = |a: f64| wedge(&layered, &at(forcing.omega, a), SQUARE, &|| false);
    let tilt = |a: f64| gain(a).unwrap().directions[0].faces[1].tilt.mean;
    let (below, above) = (tilt(hold * (1.0 - 1e-4)), tilt(hold * (1.0 + 1e-4)));
    // −1/(V − 1) = ∓ 5000 at V = 1 ± 2e-4; viscosity and the near face change it by a factor of order 1.
    assert!(below > 1000.0 && above < -1000.0, "{below} {above}");
    assert!((below + above).abs() < 0.01 * above.abs(), "{below} {above}");
    // Found to 1e-8 there: so close the push has no answer.
    let (mut low, mut high) = (hold * (1.0 - 1e-4), hold * (1.0 + 1e-4));
    let failure = loop {
        let middle = 0.5 * (low + high);
        match gain(middle) {
            Ok(found) if found.directions[0].faces[1].tilt.mean > 0.0 => low = middle,
            Ok(_) => high = middle,
            Err(failure) => break failure,
        }
        assert!(high - low > 1e-12 * hold, "never refused");
    };
    assert!(matches!(failure, Failure::Marginal { gain, .. } if gain > MOST_GAIN), "{failure}");
    let middle = 0.5 * (low + high);
    assert!((middle / hold - 1.0).abs() < 1e-6, "{middle} {hold}");
    let refused = averaged(1.0, 60.0, 1.0, &Sideways { tilt: 0.0, cross: Complex64::new(0.0, 0.0) });
    assert!(matches!(refused, Err(Failure::Marginal { .. })));
}

#[test]
fn evidence_and_refusals() {
    let layered = free(0.015, 1e-3, 0.0211);
    let found = wedge(&layered, &at(314.0, 230.0), SQUARE, &|| false).unwrap();
    let evidence = found.directions[0].evidence;
    assert!(evidence.harmonics <= 32 && evidence.harmonics_change < SETTLED, "{evidence:?}");
    assert!(evidence.modes_change < 2e-2, "{evidence:?}");
    assert_eq!(wedge(&layered, &at(314.0, 230.0), SQUARE, &|| true), Err(Failure::Cancelled));
    let flat = Plan::Circle { diameter: 0.0 };
    assert!(matches!(
        wedge(&layered, &at(314.0, 230.0), flat, &|| false),
        Err(Failure::Unusable { quantity: "cell size", .. })
    ));
    // An interface between equal fluids stays determinate and changes nothing.
    let mut split = layered.clone();
    split.layers[1].thickness = 0.01;
    split.layers.insert(2, liquid(0.005, 1e-3));
    split.tensions.insert(1, 0.0);
    let twin = wedge(&split, &at(314.0, 230.0), SQUARE, &|| false).unwrap();
    let (one, two) = (found.directions[0].faces[1].tilt.mean, twin.directions[0].faces[2].tilt.mean);
    assert!((one - two).abs() < 1e-6 * one.abs(), "{one} {two}");
}
