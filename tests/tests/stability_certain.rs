//! The quick verdict on a slab against the slow, certain one on random stacks: the same windows, limits and growth as
//! when every mode of the cell is examined; and the loci of critical drives against counts by the argument
//! principle, which share Hill's determinant with them and nothing else.
//!
//! `TOPHEAVY_SEED` picks another seed, `TOPHEAVY_STACKS` another number (default 30).

use physics::stability::layered::{FluidLayer, Forcing, Layered};
use physics::stability::{
    Failure, SlabStability, UnstableInterval, growing_exponents, slab, slab_by_every_mode, unstable_intervals,
};
use physics::stack::Plan;
use rayon::prelude::*;
use std::f64::consts::TAU;
use topheavy_tests::draw::Draw;

const G: f64 = 9.80665;

fn seed(usual: u64) -> u64 {
    std::env::var("TOPHEAVY_SEED").ok().and_then(|seed| seed.parse().ok()).unwrap_or(usual)
}

fn stacks() -> usize {
    std::env::var("TOPHEAVY_STACKS").ok().and_then(|n| n.parse().ok()).unwrap_or(30)
}

/// A slab on a cushion (or two layers, or a resting layer) in a small cell, oils from thin to thick.
fn question(draw: &mut Draw) -> (Layered, Forcing, Plan) {
    let gas = |draw: &mut Draw, deep: bool| FluidLayer {
        density: draw.between(1.0, 2.0),
        viscosity: 1.8e-5,
        thickness: if deep { f64::INFINITY } else { draw.scaled(3e-3, 4e-2) },
    };
    let liquid = |draw: &mut Draw| {
        let density = draw.between(800.0, 1900.0);
        FluidLayer {
            density,
            viscosity: density * draw.scaled(2e-6, 3e-3),
            thickness: draw.scaled(2e-3, 3e-2),
        }
    };
    let (above, one) = (gas(draw, true), liquid(draw));
    let layered = match draw.one_of(4) {
        0 => Layered { gravity: G, layers: vec![above, one], tensions: vec![draw.between(0.01, 0.07)] },
        1 => {
            let (two, below) = (liquid(draw), gas(draw, false));
            let tensions =
                vec![draw.between(0.01, 0.07), draw.between(0.005, 0.05), draw.between(0.01, 0.07)];
            Layered { gravity: G, layers: vec![above, one, two, below], tensions }
        }
        _ => {
            let below = gas(draw, false);
            let tensions = vec![draw.between(0.01, 0.07), draw.between(0.01, 0.07)];
            Layered { gravity: G, layers: vec![above, one, below], tensions }
        }
    };
    let forcing = Forcing { omega: TAU * draw.scaled(20.0, 150.0), acceleration: draw.scaled(5.0, 400.0) };
    let plan = if draw.chance(0.7) {
        Plan::Rectangle { length: draw.scaled(8e-3, 4e-2), width: draw.scaled(4e-3, 2e-2) }
    } else {
        Plan::Circle { diameter: draw.scaled(8e-3, 3e-2) }
    };
    (layered, forcing, plan)
}

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-6 * a.abs().max(b.abs()) + 1e-9
}

fn differ(quick: &SlabStability, certain: &SlabStability) -> Option<String> {
    let limit = |a: Option<f64>, b: Option<f64>| match (a, b) {
        (Some(a), Some(b)) => close(a, b),
        (a, b) => a == b,
    };
    let windows = quick.windows.len() == certain.windows.len()
        && quick.windows.iter().zip(&certain.windows).all(|(a, b)| close(a.0, b.0) && limit(a.1, b.1));
    if !windows {
        return Some(format!("windows {:?} against {:?}", quick.windows, certain.windows));
    }
    if !limit(quick.hold_limit, certain.hold_limit) || !limit(quick.wave_limit, certain.wave_limit) {
        let both = |s: &SlabStability| (s.hold_limit, s.wave_limit, s.hold_set_by, s.wave_set_by);
        return Some(format!("limits {:?} against {:?}", both(quick), both(certain)));
    }
    let grows = |s: &SlabStability| s.unstable_modes > 0;
    if grows(quick) != grows(certain) || quick.mechanism != certain.mechanism {
        return Some(format!("{:?} against {:?}", quick.mechanism, certain.mechanism));
    }
    let (a, b) = (quick.worst.growth.rate, certain.worst.growth.rate);
    // A decaying mode is an estimate where vorticity modes crowd.
    let tolerance = if grows(quick) { 1e-5 } else { 0.05 };
    ((a - b).abs() > tolerance * a.abs().max(b.abs())).then(|| {
        format!("rate {a} at {} against {b} at {}", quick.worst.wavenumber, certain.worst.wavenumber)
    })
}

#[test]
fn the_quick_verdict_is_the_certain_one() {
    let seed = seed(20260311);
    let mut draw = Draw::new(seed);
    let (mut wrong, mut windows, mut disjoint, mut examined, mut modes, mut refused) = (0, 0, 0, 0, 0, 0);
    let stacks = stacks();
    let questions: Vec<_> = (0..stacks).map(|_| question(&mut draw)).collect();
    let answers: Vec<_> = questions
        .par_iter()
        .map(|(layered, forcing, plan)| {
            let quick = slab(layered, forcing, *plan, &|| false);
            (quick, slab_by_every_mode(layered, forcing, *plan, &|| false))
        })
        .collect();
    for (number, (answers, (layered, forcing, plan))) in answers.into_iter().zip(&questions).enumerate() {
        match answers {
            (Ok(quick), Ok(certain)) => {
                windows += usize::from(!certain.windows.is_empty());
                disjoint += usize::from(certain.windows.len() > 1);
                examined += quick.examined;
                modes += certain.examined;
                if let Some(difference) = differ(&quick, &certain) {
                    wrong += 1;
                    println!("{number}: {difference}\n    {layered:?} {forcing:?} {plan:?}");
                }
            }
            (Err(Failure::TooMuchWork { .. }), _) | (_, Err(Failure::TooMuchWork { .. })) => refused += 1,
            (quick, certain) => {
                let (quick, certain) = (quick.map(|_| ()), certain.map(|_| ()));
                if quick != certain {
                    wrong += 1;
                }
                refused += 1;
                println!("{number}: {quick:?} {certain:?}\n    {layered:?} {forcing:?} {plan:?}");
            }
        }
    }
    println!(
        "seed {seed}: {stacks} stacks, {windows} with a window, {disjoint} with several, {refused} refused, {examined} \
         wavenumbers examined instead of {modes}"
    );
    assert_eq!(wrong, 0, "differences, listed above");
    assert!(refused * 20 <= stacks, "{refused} without a verdict");
}

#[test]
fn the_loci_agree_with_counts() {
    let seed = seed(20260312);
    let mut draw = Draw::new(seed);
    let (mut wrong, mut growing, mut asked) = (0, 0, 0);
    for number in 0..stacks() {
        let (layered, forcing, _) = question(&mut draw);
        let k = draw.scaled(80.0, 2000.0);
        let up_to = 2.0 * forcing.acceleration;
        let intervals = match unstable_intervals(&layered, forcing.omega, k, up_to, &|| false) {
            Ok(intervals) => intervals,
            Err(failure) => {
                wrong += 1;
                println!("{number}: {failure} {layered:?} {k}");
                continue;
            }
        };
        let grows = |a: f64, i: &UnstableInterval| a > i.low && i.high.is_none_or(|high| a < high);
        for _ in 0..4 {
            let acceleration = draw.between(0.05, 0.99) * up_to;
            let edges = intervals.iter().flat_map(|i| [Some(i.low), i.high]).flatten();
            if edges.into_iter().any(|edge| (edge - acceleration).abs() < 1e-7 * acceleration) {
                continue;
            }
            let forcing = Forcing { acceleration, ..forcing };
            let by_loci = intervals.iter().any(|i| grows(acceleration, i));
            asked += 1;
            match growing_exponents(&layered, &forcing, k) {
                Ok(number) if (number > 0) == by_loci => growing += usize::from(by_loci),
                other => {
                    wrong += 1;
                    println!(
                        "{number}: {other:?} at {acceleration}, k {k}: {intervals:?}\n {layered:?} {forcing:?}"
                    );
                }
            }
        }
    }
    println!("seed {seed}: {asked} asked, {growing} grow");
    assert_eq!(wrong, 0, "disagreements, listed above");
    assert!(growing * 10 > asked && growing * 10 < 9 * asked, "the draw has both kinds");
}
