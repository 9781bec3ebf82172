//! Limits of the harmonic balance in closed form. The second method is in `tests/tests/response_second.rs`.

use super::super::testing::{exponent, gas, oil, square, stack};
use super::super::{chain, sweep};
use super::*;

fn never() -> bool {
    false
}

fn solve(stack: &Stack, frequency: f64, acceleration: f64) -> HarmonicMotion {
    let drive = PeriodicDrive::sine(Drive { frequency, acceleration });
    harmonics(stack, &drive, &HarmonicOptions::default(), &never).unwrap()
}

fn two_slabs() -> Stack {
    let layers = vec![
        oil("upper", 10.0, 971.0, 1e-3),
        gas("a", 20.0),
        oil("lower", 12.0, 971.0, 1e-4),
        gas("b", 15.0),
    ];
    stack(square(40.0), layers)
}

/// One slab without loss on gas of exponent n: piston of exact P (h/(h + u))^n.
fn piston(n: f64) -> Stack {
    let mut stack = stack(square(50.0), vec![oil("oil", 20.0, 970.0, 1e-4), exponent(gas("air", 20.0), n)]);
    stack.effects_off = vec![Effect::WallDrag];
    stack
}

#[test]
fn a_small_motion_is_the_linear_chain() {
    let mut sealed = two_slabs();
    sealed.cell.sealed_top = true;
    sealed.layers.insert(0, gas("head", 25.0));
    let series = {
        let layers = vec![oil("oil", 15.0, 971.0, 1e-3), gas("air", 10.0), gas("air below", 30.0)];
        stack(square(50.0), layers)
    };
    for stack in [two_slabs(), sealed, series] {
        for frequency in [30.0, 77.0, 160.0] {
            let drive = Drive { frequency, acceleration: 1e-4 };
            let (linear, found) = (chain(&stack, &drive).unwrap(), solve(&stack, frequency, 1e-4));
            assert_eq!(found.slabs.len(), linear.slabs.len());
            for (slab, expected) in found.slabs.iter().zip(&linear.slabs) {
                let off = (slab.acceleration[0] - expected.acceleration).norm();
                assert!(off < 1e-9 * expected.acceleration.norm(), "{frequency}: {off}");
            }
            for (cushion, expected) in found.cushions.iter().zip(&linear.cushions) {
                assert_eq!(cushion.layer, expected.layer);
                let off = (cushion.strain[0].norm() - expected.stroke_ratio).abs();
                assert!(off < 1e-9 * expected.stroke_ratio, "{frequency}: {off}");
            }
        }
    }
}

/// Second order of a perturbation in the stroke σ = |u|/h, from m(ü + a) = P[(1 + u/h)^{−n} − 1], ω0² = nP/(mh), with
/// the quadratic term of the force n(n + 1)/2 · P (u/h)² (e.g. Nayfeh & Mook, Nonlinear Oscillations, 1979, ch. 4):
/// u_2/h = (n + 1)/4 σ²/(1 − 4r²), u_0/h = (n + 1)/4 σ², r = ω/ω0.
#[test]
fn the_second_harmonic_and_the_mean_follow_their_closed_form() {
    for n in [1.0, 1.25, 1.4] {
        let stack = piston(n);
        let f0 = chain(&stack, &Drive { frequency: 50.0, acceleration: 1.0 }).unwrap().natural_frequencies[0];
        // Clear of 1/2, 1/3 …, where the next orders resonate.
        for r in [0.23, 0.41, 0.55, 0.8, 1.7, 3.0_f64] {
            let found = solve(&stack, r * f0, 0.02);
            let strain = &found.cushions[0].strain;
            let stroke = strain[0].norm();
            let second = (n + 1.0) / 4.0 * stroke * stroke / (1.0 - 4.0 * r * r);
            let (got, mean) = (strain[1] / strain[0].powi(2) * stroke * stroke, found.cushions[0].mean_shift);
            // The next order is smaller by the stroke over the distance from the resonances.
            let left_out = 20.0 * stroke;
            assert!((got - second).norm() < left_out * second.abs(), "{n} {r}: {got} {second} {stroke}");
            assert!((mean / ((n + 1.0) / 4.0 * stroke * stroke) - 1.0).abs() < left_out, "{n} {r}: {mean}");
            // The same as the slab's acceleration over its first: x_1 = T/(T − 1) u_1, T = 1/(1 − r²).
            let share = 4.0 * second.abs() / stroke * (r * r);
            assert!((found.slabs[0].share(2) / share - 1.0).abs() < left_out, "{n} {r}");
        }
    }
}

#[test]
fn the_third_harmonic_follows_its_closed_form() {
    // Third order: force terms P[n(n+1)/2 ξ² − n(n+1)(n+2)/6 ξ³]; ξ = σ cos + ξ_2 cos 2θ at 3ω gives
    // ξ_3 (1 − 9r²) = (n+1)/2 σ ξ_2 − (n+1)(n+2)/24 σ³ in phase with the first cubed.
    let n = 1.4;
    let stack = piston(n);
    let f0 = chain(&stack, &Drive { frequency: 50.0, acceleration: 1.0 }).unwrap().natural_frequencies[0];
    for r in [0.23, 0.42, 0.7, 1.6_f64] {
        let found = solve(&stack, r * f0, 0.3);
        let strain = &found.cushions[0].strain;
        let s = strain[0].norm();
        let second = (n + 1.0) / 4.0 * s * s / (1.0 - 4.0 * r * r);
        let third = (n + 1.0) / 2.0 * s * second - (n + 1.0) * (n + 2.0) / 24.0 * s.powi(3);
        let third = third / (1.0 - 9.0 * r * r);
        let got = strain[2] / strain[0].powi(3) * s.powi(3);
        assert!((got - third).norm() < 30.0 * s * third.abs(), "{r}: {got} {third} {s}");
    }
}

#[test]
fn distortion_of_the_table_goes_through_the_linear_transmission() {
    let mut stack = two_slabs();
    stack.effects_off = vec![Effect::CushionHarmonics];
    let (frequency, acceleration) = (40.0, 50.0);
    let distortion = vec![Complex64::new(0.03, 0.0), Complex64::from_polar(0.02, 1.1)];
    let drive =
        PeriodicDrive { fundamental: Drive { frequency, acceleration }, distortion: distortion.clone() };
    let found = harmonics(&stack, &drive, &HarmonicOptions::default(), &never).unwrap();
    let linear = sweep(&stack, &[40.0, 80.0, 120.0], acceleration).unwrap();
    for (i, slab) in found.slabs.iter().enumerate() {
        for (n, at) in linear.iter().enumerate() {
            let cell = if n == 0 { Complex64::new(1.0, 0.0) } else { distortion[n - 1] };
            let expected = at.slabs[i].amplification * cell * acceleration;
            assert!((slab.acceleration[n] - expected).norm() < 1e-9 * expected.norm(), "{n}");
        }
        // Phases counted from a crest of the slab's own fundamental.
        let t = -slab.acceleration[0].arg() / drive.fundamental.omega();
        let own = slab.overtones(1e-9);
        assert_eq!(own.len(), 2);
        for (n, ratio) in own.iter().enumerate() {
            let n = n as f64 + 2.0;
            let crest = Complex64::from_polar(1.0, n * drive.fundamental.omega() * t);
            let expected = slab.acceleration[n as usize - 1] * crest / slab.acceleration[0].norm();
            assert!((ratio - expected).norm() < 1e-12, "{n}");
        }
    }
}

#[test]
fn what_touches_the_floor_moves_with_the_cell_and_its_distortion() {
    let stack = stack(square(50.0), vec![oil("oil", 15.0, 971.0, 1e-3)]);
    let drive = PeriodicDrive {
        fundamental: Drive { frequency: 50.0, acceleration: 10.0 },
        distortion: vec![Complex64::new(0.0, 0.05)],
    };
    let found = harmonics(&stack, &drive, &HarmonicOptions::default(), &never).unwrap();
    assert_eq!(found.slabs[0].overtones(1e-9), vec![Complex64::new(0.0, 0.05)]);
    assert!((found.slabs[0].share(2) - 0.05).abs() < 1e-15 && found.slabs[0].share(7) == 0.0);
}

#[test]
fn a_branch_that_ends_and_a_drive_that_cannot_be_used_are_said() {
    // Driven somewhat below resonance the softening spring jumps; a strong drive closes the cushion.
    let stack = stack(square(50.0), vec![oil("oil", 20.0, 970.0, 1e-4), gas("air", 20.0)]);
    let solve = |frequency: f64, acceleration: f64| {
        let drive = PeriodicDrive::sine(Drive { frequency, acceleration });
        harmonics(&stack, &drive, &HarmonicOptions::default(), &never)
    };
    match solve(92.0, 98.0) {
        Err(HarmonicFailure::BranchEnds { reached, stroke_ratio }) => {
            assert!(reached > 0.3 && reached < 1.0 && stroke_ratio > 0.1, "{reached} {stroke_ratio}");
        }
        other => panic!("{other:?}"),
    }
    assert!(matches!(solve(0.0, 1.0), Err(HarmonicFailure::Response(ResponseError::Unusable { .. }))));
    let drive = PeriodicDrive::sine(Drive { frequency: 50.0, acceleration: 1.0 });
    let cancelled = harmonics(&stack, &drive, &HarmonicOptions::default(), &|| true);
    assert_eq!(cancelled.unwrap_err(), HarmonicFailure::Cancelled);
    let few = HarmonicOptions { tolerance: 1e-14, most: 6 };
    let drive = PeriodicDrive::sine(Drive { frequency: 48.0, acceleration: 150.0 });
    let failed = harmonics(&stack, &drive, &few, &never).unwrap_err();
    assert!(matches!(failed, HarmonicFailure::NotConverged { harmonics: 6, change } if change > 1e-14));
}

#[test]
fn a_cell_at_rest_has_no_harmonics() {
    let found = solve(&two_slabs(), 50.0, 0.0);
    assert!(found.slabs.iter().all(|slab| slab.overtones(0.0).is_empty() && slab.share(2) == 0.0));
    assert!(found.cushions.iter().all(|cushion| cushion.mean_shift == 0.0 && cushion.least == 1.0));
}
