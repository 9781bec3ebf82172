//! What decays most slowly: the mode that the solver names is the least damped one that moves the interfaces.

use physics::stability::growth;
use physics::stability::layered::{Forcing, Layered};
use rayon::prelude::*;
use std::f64::consts::{PI, TAU};
use topheavy_tests::draw::Draw;
use topheavy_tests::galerkin::{Exponent, Resolution, Second};
use topheavy_tests::questions::{Question, marginal, nearest, wide};
use topheavy_tests::stacks::{air, layer, stack};

const SEED: u64 = 20_240_607;
const STACKS: usize = 90;
/// A mode with so much of its energy in gravity and tension at the interfaces is no vorticity mode (judgement; those
/// have 1e-5 to 0.02).
const MOVES: f64 = 0.2;

/// A complaint when a mode that moves the interfaces decays more slowly than the one reported.
fn complaint(question: &Question) -> Option<String> {
    let Question { layered, omega, wavenumber, drive } = question;
    let (marginal, searched) = marginal(layered, *omega, *wavenumber).ok()?;
    let acceleration = drive * marginal.first().map_or(searched, |first| first.0);
    complaint_at(layered, *omega, *wavenumber, acceleration)
}

fn complaint_at(layered: &Layered, omega: f64, wavenumber: f64, acceleration: f64) -> Option<String> {
    let found = growth(layered, &Forcing { omega, acceleration }, wavenumber, &|| false).ok()?;
    let second = Second::new(layered, omega, wavenumber, &Resolution::default());
    let exponents = second.at(acceleration);
    // Growing states, those that want a finer mesh, are compared in stability_random.rs.
    if exponents[0].rate > 0.0 || nearest(&exponents, &found, omega) > 1e-4 {
        return None;
    }
    let slower: Vec<Exponent> =
        exponents.into_iter().filter(|exponent| exponent.rate > found.rate * (1.0 - 1e-4)).collect();
    let shares = second.shares(acceleration, &slower);
    let (mode, share) = slower.iter().zip(&shares).find(|(_, share)| **share > MOVES)?;
    let reported = format!("{:.5} 1/s and {:.5} rad/s", found.rate, found.frequency);
    Some(format!(
        "at {acceleration}: {reported} reported, slower with a share of {share:.3}: {mode:?}\n    at {wavenumber} 1/m, {omega} rad/s of {layered:?}"
    ))
}

#[test]
fn levitated_slabs_ring_down_with_their_least_damped_wave() {
    // A worked design: 15 mm of 1000 mm²/s over a cushion of 40 mm, held at 50 Hz; and 20 mm of 500 mm²/s at 100 Hz.
    let one = stack(9.80665, &[air(0.1), layer(971.0, 1e-3, 0.015), air(0.040)], &[0.0212, 0.0212]);
    let two = stack(9.81, &[air(0.02), layer(970.0, 5e-4, 0.02), air(0.01)], &[0.0211, 0.0211]);
    let mut complaints = Vec::new();
    for (layered, hertz, acceleration) in [(one, 50.0, 220.7), (two, 100.0, 450.0)] {
        for mode in [1.0, 2.0, 4.0, 8.0] {
            complaints.extend(complaint_at(&layered, TAU * hertz, mode * PI / 0.05, acceleration));
        }
    }
    assert!(complaints.is_empty(), "{}", complaints.join("\n"));
}

#[test]
fn the_least_damped_interface_mode_is_reported() {
    let mut draw = Draw::new(SEED);
    let questions: Vec<Question> = (0..STACKS).map(|number| wide(number, &mut draw)).collect();
    let complaints: Vec<String> = questions.par_iter().filter_map(complaint).collect();
    assert!(complaints.is_empty(), "{} of {STACKS} stacks:\n{}", complaints.len(), complaints.join("\n"));
}
