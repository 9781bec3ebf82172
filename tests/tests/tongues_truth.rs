//! The truth that `tongues.rs` holds the solver to, held to handbooks and tables; and that its stacks are no easy ones.

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use physics::stability::layered::{FluidLayer, Layered};
use rayon::prelude::*;
use serde_json::Value;
use topheavy_tests::stacks::{layer, stack};
use topheavy_tests::tongues::intervals::{Inviscid, Tongue};
use topheavy_tests::tongues::judge::{grows, missed_by_grid};
use topheavy_tests::tongues::losses::Losses;
use topheavy_tests::tongues::multipliers::Kind;
use topheavy_tests::tongues::potential::Potential;
use topheavy_tests::tongues::questions::{STACKS, question, seed};

/// Points of the grid that is no certificate.
const GRID: usize = 10_000;
/// Stacks that are looked at on a whole grid.
const LOOKED_AT: usize = 12;
const DEEP: f64 = f64::INFINITY;
const G: f64 = 9.80665;

/// A deep liquid of 1000 kg/m³ under nothing, without tension: ω² = gk.
fn deep(kinematic: f64) -> Layered {
    stack(G, &[FluidLayer::VACUUM, layer(1000.0, kinematic, DEEP)], &[0.0])
}

/// y″ + (a − 2q cos 2t) y = 0 with a = 4gk/ω², q = 2kA/ω². Stored SciPy values.
#[test]
fn a_deep_liquid_is_mathieus_equation() {
    let stored: Value = serde_json::from_str(include_str!("../references/stability.json")).unwrap();
    let k = 80.0;
    let mut compared = 0;
    for row in stored["mathieu"].as_array().unwrap() {
        let q = row["q"].as_f64().unwrap();
        for (name, kind) in [
            ("b1", Kind::Subharmonic),
            ("a1", Kind::Subharmonic),
            ("b2", Kind::Harmonic),
            ("a2", Kind::Harmonic),
        ] {
            let a = row[name].as_f64().unwrap();
            if a <= 0.0 {
                continue;
            }
            let omega = (4.0 * G * k / a).sqrt();
            let inviscid = Inviscid { potential: Potential::<1>::new(&deep(0.0), k), omega };
            let wanted = q * omega * omega / (2.0 * k);
            let tongues = inviscid.tongues(1.5 * wanted);
            let ends = tongues.iter().flat_map(|tongue| {
                [(tongue.low, tongue.kinds[0]), (tongue.high.unwrap_or(0.0), tongue.kinds[1])]
            });
            let nearest = ends
                .filter(|end| end.1 == kind)
                .map(|(end, _)| (end / wanted - 1.0).abs())
                .fold(1.0, f64::min);
            assert!(nearest < 1e-11, "{name} at q = {q}: {nearest}, {tongues:?}");
            compared += 1;
        }
    }
    assert!(compared >= 6, "{compared}");
}

/// Tongues of order n at small q are 2qⁿ/(4ⁿ⁻¹ (n − 1)!²) high in a (the leading term, from memory of Levy & Keller,
/// Comm. Pure Appl. Math. 16, 469 (1963)) and bend up as n² + q²/2(n² − 1) (Abramowitz & Stegun 20.2.25).
#[test]
fn tongues_of_high_order_are_as_narrow_as_in_the_handbook() {
    let k = 80.0;
    for (n, q, factor) in [(3.0, 0.05, 32.0), (4.0, 0.1, 1152.0), (5.0, 0.3, 73728.0)] {
        let (n, q): (f64, f64) = (n, q);
        let gap = q.powf(n) / factor;
        // The middle of the tongue bends up as n² + q²/2(n² − 1): here q is where it is crossed.
        let bend = 0.5 / (n * n - 1.0);
        let omega = (4.0 * G * k / (n * n + bend * q * q)).sqrt();
        let scale = omega * omega / (2.0 * k);
        let inviscid = Inviscid { potential: Potential::<1>::new(&deep(0.0), k), omega };
        let tongues = inviscid.tongues(1.5 * q * scale);
        let [tongue] = tongues[..] else { panic!("{tongues:?}") };
        let width = gap / (2.0 * bend * q * q);
        assert!((tongue.middle() / (q * scale) - 1.0).abs() < 2e-3, "{n}: {tongue:?}");
        assert!((tongue.width() / width - 1.0).abs() < 1e-2, "{n}: {} against {width}", tongue.width());
    }
}

/// Two deep faces of a thick slab meet at ω = Ω₁ + Ω₂ and feel each other as e^−kh: each further e-folding of depth
/// makes the tongue narrower by e, once it is narrow (closed form from the averaged equations: growth
/// a |Q₁₂|/4√(Ω₁Ω₂), Q₁₂ off the diagonal of the swing in the modes).
#[test]
fn a_combination_grows_as_its_coupling() {
    let k = 300.0;
    for depth in [8.0, 11.0, 14.0] {
        let faces = [FluidLayer::VACUUM, layer(970.0, 0.0, depth / k), FluidLayer::VACUUM];
        let potential = Potential::<2>::new(&stack(G, &faces, &[0.021, 0.15]), k);
        let modes = potential.steady.symmetric_eigen();
        let swing = modes.eigenvectors.transpose() * potential.swing * modes.eigenvectors;
        let speeds = modes.eigenvalues.map(f64::sqrt);
        // Where it bends to is not asked here: one of the two sides has it.
        let tongues = [-1e-3, 1e-3].map(|detuning| {
            let omega = (speeds[0] + speeds[1]) * (1.0 + detuning);
            let inviscid = Inviscid { potential: potential.clone(), omega };
            inviscid.tongues(0.5 * omega * omega / k)
        });
        let combined = |tongue: &&Tongue| tongue.kinds == [Kind::Combination; 2] && tongue.width() < 0.1;
        let found = tongues.iter().flatten().find(combined);
        let tongue = found.unwrap_or_else(|| panic!("kh = {depth}: {tongues:?}"));
        let growth = tongue.middle() * swing[(0, 1)].abs() / (4.0 * (speeds[0] * speeds[1]).sqrt());
        println!("kh = {depth}: width {:.3e}, growth {} against {growth}", tongue.width(), tongue.growth);
        assert!((tongue.growth / growth - 1.0).abs() < 0.05, "kh = {depth}: {tongue:?} against {growth}");
    }
}

/// Without a drive: 2νk² in a deep liquid (Lamb, Hydrodynamics, art. 348); in one of depth h over a floor besides
/// k √(νω/2)/sinh 2kh (Landau & Lifshitz, Fluid Mechanics, § 25); between two deep liquids of one ν, which slip with 2W
/// and share the slip as 1/ρ, 2k √(νω/2) ρ₁ρ₂/(ρ₁ + ρ₂)² (worked out by hand from two Stokes layers; no table).
#[test]
fn losses_are_those_of_the_books() {
    let k = 120.0;
    let decays = |layered: &Layered| {
        let potential = Potential::<1>::new(layered, k);
        let natural = potential.steady[(0, 0)].sqrt();
        // The drive is none; its frequency is any.
        let shifts = Losses::new(layered, k, &potential).shifts(&potential, 3.1 * natural, 0.0);
        (natural, shifts[0].1)
    };
    let close = |found: f64, book: f64, what: &str| {
        assert!((found / book - 1.0).abs() < 1e-9, "{what}: {found} against {book}");
    };
    let nu = 1e-6;
    let (_, free) = decays(&deep(nu));
    close(free.bulk.re, 2.0 * nu * k * k, "deep");
    assert!(free.sheets.norm() == 0.0 && free.bulk.im.abs() < 1e-12 * free.bulk.re);

    let depth = 0.01;
    let shallow = stack(G, &[FluidLayer::VACUUM, layer(1000.0, nu, depth)], &[0.07]);
    let (natural, floor) = decays(&shallow);
    close(floor.sheets.re, k * (0.5 * nu * natural).sqrt() / (2.0 * k * depth).sinh(), "floor");
    // A wall that hinders holds back as much as it damps.
    close(floor.sheets.im.abs(), floor.sheets.re, "floor, frequency");

    let (above, below) = (800.0, 1000.0);
    let liquids = stack(G, &[layer(above, nu, DEEP), layer(below, nu, DEEP)], &[0.03]);
    let (natural, between) = decays(&liquids);
    let book = 2.0 * k * (0.5 * nu * natural).sqrt() * above * below / (above + below).powi(2);
    close(between.sheets.re, book, "two liquids");
}

#[test]
fn a_grid_of_ten_thousand_points_misses_them() {
    let mut seen = [[0; 2]; 6];
    let missed: Vec<(f64, usize)> = (0..STACKS)
        .into_par_iter()
        .map(|number| {
            let question = question(number);
            (question.certain[question.wanted].width(), missed_by_grid(&question, GRID))
        })
        .collect();
    for (width, missed) in missed {
        let decade = (width.log10() + 8.0).floor().clamp(0.0, 5.0) as usize;
        seen[decade][usize::from(missed > 0)] += 1;
    }
    println!(
        "stacks with all tongues on the grid, with one between its points, by decade of width: {seen:?}"
    );
    for [all, missed] in &seen[..3] {
        assert!(*missed > 9 * all, "narrower than a tenth of the grid: {seen:?}");
    }
}

/// Whatever grows on a grid lies in one of the intervals that bisection on the sequence of signatures gave.
#[test]
fn nothing_grows_between_the_true_intervals() {
    let grown: usize = (0..LOOKED_AT)
        .into_par_iter()
        .map(|i| {
            let question = question(i * 83 % STACKS);
            let within =
                |tongue: &Tongue, a: f64| tongue.low <= a && tongue.high.is_none_or(|high| a <= high);
            let points = (1..1000).map(|i| question.up_to * f64::from(i) / 1000.0);
            let grown: Vec<f64> = points.filter(|a| grows(&question, *a)).collect();
            for a in &grown {
                let known =
                    question.certain.iter().chain(&question.doubtful).any(|tongue| within(tongue, *a));
                assert!(known, "{a} m/s² of {question:?}");
            }
            grown.len()
        })
        .sum();
    assert!(grown > 0);
}

#[test]
#[ignore = "looks for the seeds of stacks; minutes"]
fn seeds() {
    let found = (0..STACKS).into_par_iter().map(|number| seed(number, 100_000 * number as u32).unwrap());
    println!("{:?}", found.collect::<Vec<u32>>());
}
