//! Limits of the bounce: Mathieu's equation, the linear chain, the rule of thumb. The second method is in
//! `tests/tests/response_second.rs`.

use super::super::chain;
use super::super::testing::{exponent, gas, oil, square, stack};
use super::*;

fn never() -> bool {
    false
}

fn lossless(n: f64) -> Stack {
    let mut stack = stack(square(50.0), vec![oil("oil", 20.0, 970.0, 1e-4), exponent(gas("air", 20.0), n)]);
    stack.effects_off = vec![Effect::WallDrag];
    stack
}

/// The exponents of y″ + (a − 2q cos 2z) y = 0, z = ωt/2, as a slab on a spring k (1 − ε cos ωt) has them: a = 4ω0²/ω²,
/// 2q = aε. The strain is made such that the stiffness swings just so.
fn mathieu(a: f64, q: f64) -> (Vec<Complex64>, f64) {
    let (n, samples) = (1.4, 512);
    let stack = lossless(n);
    let f0 = chain(&stack, &Drive { frequency: 50.0, acceleration: 1.0 }).unwrap().natural_frequencies[0];
    let omega = 2.0 * TAU * f0 / a.sqrt();
    let strain = |j: usize| {
        let stiffness = 1.0 - 2.0 * q / a * (TAU * j as f64 / samples as f64).cos();
        stiffness.powf(-1.0 / (n + 1.0)) - 1.0
    };
    let swing = Swing::sampled(vec![(0..samples).map(strain).collect()]);
    let network = Network::of(&stack).unwrap();
    let rows = Rows::default();
    let starts = multipliers::starts(&network, &swing, omega);
    (Hill::new(&network, &swing, &rows, omega, 16).exponents(&starts).exponents, omega)
}

/// With ε < 1 (springs do not pull). NIST DLMF 28.15.1: a = ν² + q²/(2(ν²−1)) + (5ν²+7)q⁴/(32(ν²−1)³(ν²−4)) + (9ν⁴+58ν²+29)q⁶/(64(ν²−1)⁵(ν²−4)(ν²−9)) + …
#[test]
fn exponents_are_mathieus_between_the_tongues() {
    for (nu, q) in [(0.4, 0.05), (0.5, 0.1), (0.62, 0.15), (0.7, 0.05_f64)] {
        let (v, p) = (nu * nu, q * q);
        let a = v
            + p / (2.0 * (v - 1.0))
            + (5.0 * v + 7.0) * p * p / (32.0 * (v - 1.0).powi(3) * (v - 4.0))
            + (9.0 * v * v + 58.0 * v + 29.0) * p.powi(3)
                / (64.0 * (v - 1.0).powi(5) * (v - 4.0) * (v - 9.0));
        let (found, omega) = mathieu(a, q);
        let s = found[0];
        // The next term is of order q⁸/(1 − ν²)⁷; ν moves by half of a's error over ν.
        let left_out = 3.0 * p.powi(4) / (1.0 - v).powi(7) / nu + 1e-9;
        assert!((s.im / (omega / 2.0) - nu).abs() < left_out && s.re.abs() < 1e-8 * omega, "{nu} {q}: {s}");
    }
}

/// Edges of the first tongue, NIST DLMF 28.6.3 and 28.6.4 (a_1(q), and b_1(q) = a_1(−q)):
/// a_1 = 1 + q − q²/8 − q³/64 − q⁴/1536 + 11q⁵/36864 + …
#[test]
fn the_first_tongue_has_mathieus_edges() {
    let edge = |q: f64| {
        1.0 + q - q.powi(2) / 8.0 - q.powi(3) / 64.0 - q.powi(4) / 1536.0 + 11.0 * q.powi(5) / 36864.0
    };
    for q in [0.02, 0.1, 0.3_f64] {
        for (at, outward) in [(edge(q), 1.0), (edge(-q), -1.0)] {
            let (inside, omega) = mathieu(at - 1e-5 * outward, q);
            assert!(inside[0].re > 1e-4 * omega && inside[0].im == omega / 2.0, "{q} {outward}: {inside:?}");
            let (outside, omega) = mathieu(at + 1e-5 * outward, q);
            let apart = (outside[0].im - omega / 2.0).abs();
            assert!(outside[0].re < 1e-6 * omega && apart > 1e-4 * omega, "{q} {outward}: {outside:?}");
        }
    }
}

#[test]
fn a_weak_drive_leaves_the_damped_natural_motions() {
    // Two slabs: with hardly any swing the exponents are the zeros of the linear chain, s itself in drag and exponent.
    let layers = vec![
        oil("upper", 10.0, 971.0, 1e-3),
        gas("a", 20.0),
        oil("lower", 12.0, 971.0, 1e-4),
        gas("b", 15.0),
    ];
    let stack = stack(square(40.0), layers);
    let drive = PeriodicDrive::sine(Drive { frequency: 333.0, acceleration: 1e-3 });
    let found = bounce(&stack, &drive, &BounceOptions::default(), &never).unwrap().unwrap();
    let naturals = chain(&stack, &drive.fundamental).unwrap().natural_frequencies;
    assert_eq!((found.exponents.len(), naturals.len()), (2, 2));
    let network = Network::of(&stack).unwrap();
    for s in &found.exponents {
        // Back from the fold: the chain's own frequency is s or ω − s.
        let own = |im: f64| Complex64::new(s.re, im);
        let lines = [own(s.im), own(drive.fundamental.omega() - s.im)];
        let smallest = lines.map(|s| determinant(&network, s)).into_iter().fold(f64::INFINITY, f64::min);
        assert!(smallest < 1e-7, "{s}: {smallest}");
        assert!(s.re < 0.0);
    }
    assert!(found.threshold.is_none() && found.searched_to == 2.0);
}

/// |det| of the two-slab chain over its diagonal, written out.
fn determinant(network: &Network<'_>, s: Complex64) -> f64 {
    let k =
        |gas: usize| network.exponent(gas, s) * network.gases[gas].pressure / network.gases[gas].thickness;
    let (a, b) = (k(0), k(1));
    let upper = network.inertia(0, s) + a;
    let lower = network.inertia(1, s) + a + b;
    ((upper * lower - a * a) / (a * a)).norm()
}

#[test]
fn on_twice_the_natural_frequency_the_rule_of_thumb_is_the_limit_of_small_loss() {
    // Damped Mathieu equation at leading order: ε = 4ζ with ε = (n + 1) σ. The second harmonic, cubic stiffness and the
    // drag's own inertia come in at relative order ζ.
    for nu in [1e-6, 1e-5, 5e-5] {
        let stack = stack(square(60.0), vec![oil("oil", 20.0, 970.0, nu), exponent(gas("air", 20.0), 1.3)]);
        let network = Network::of(&stack).unwrap();
        let own = estimate(&network, &stack, TAU * 190.0).unwrap().frequency;
        let drive = PeriodicDrive::sine(Drive { frequency: 2.0 * own, acceleration: 200.0 });
        let options = BounceOptions { up_to: 8.0, ..BounceOptions::default() };
        let found = bounce(&stack, &drive, &options, &never).unwrap().unwrap();
        let estimate = found.estimate.unwrap();
        let strokes = &found.threshold.as_ref().unwrap().strokes;
        let off = strokes[0] / estimate.stroke_ratio - 1.0;
        assert!(off.abs() < 3.0 * estimate.damping_ratio, "{nu}: {off} at ζ {}", estimate.damping_ratio);
        assert_eq!(
            found.response == BounceResponse::Half,
            found.growth_rate > 0.0 || found.frequencies.len() == 1
        );
    }
}

#[test]
fn growth_changes_sign_at_the_threshold() {
    let stack = stack(square(50.0), vec![oil("oil", 20.0, 970.0, 1e-4), gas("air", 20.0)]);
    let at = |acceleration: f64| {
        let drive = PeriodicDrive::sine(Drive { frequency: 190.0, acceleration });
        bounce(&stack, &drive, &BounceOptions::default(), &never).unwrap().unwrap()
    };
    let threshold = 600.0 * at(600.0).threshold.unwrap().ratio;
    let (below, above) = (at(0.999 * threshold), at(1.001 * threshold));
    assert!(below.growth_rate < 0.0 && above.growth_rate > 0.0, "{below:?} {above:?}");
    assert_eq!((above.response, above.frequencies), (BounceResponse::Half, vec![95.0]));
    // From above the same threshold is found.
    let again = above.threshold.unwrap();
    assert!((again.ratio * 1.001 - 1.0).abs() < 1e-4);
    assert_eq!((again.response, again.frequencies), (BounceResponse::Half, vec![95.0]));
}

#[test]
fn nothing_swings_without_drive_cushion_or_effect() {
    let of = |stack: &Stack, acceleration: f64| {
        let drive = PeriodicDrive::sine(Drive { frequency: 190.0, acceleration });
        bounce(stack, &drive, &BounceOptions::default(), &never).unwrap()
    };
    let mut with = stack(square(50.0), vec![oil("oil", 20.0, 970.0, 1e-4), gas("air", 20.0)]);
    assert!(of(&with, 1.0).is_some() && of(&with, 0.0).is_none());
    with.effects_off = vec![Effect::CushionHarmonics];
    assert!(of(&with, 1.0).is_none());
    assert!(of(&stack(square(50.0), vec![oil("oil", 20.0, 970.0, 1e-4)]), 1.0).is_none());
    let drive = PeriodicDrive::sine(Drive { frequency: f64::NAN, acceleration: 1.0 });
    with.effects_off.clear();
    assert!(matches!(
        bounce(&with, &drive, &BounceOptions::default(), &never),
        Err(BounceFailure::Motion(HarmonicFailure::Response(ResponseError::Unusable { .. })))
    ));
}
