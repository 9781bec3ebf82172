//! The full check of the two-slab sample against the textbook way, both in one run on one thread.
//!
//! `cargo bench -p topheavy-tests --bench ratio`. Every run judges figures never seen before, with empty caches; the textbook's
//! limits must be the check's to 1e-3, and the ratio of the times at least [`LEAST`]. Times themselves are shown and not
//! judged.

#![allow(clippy::unwrap_used, clippy::print_stdout)]

use checks::Engine;
use std::time::{Duration, Instant};
use topheavy_tests::sample::{Measured, two_slabs};
use topheavy_tests::textbook::{self, Limits, Question, cell};

/// The ratio of times that must be reached. Raise it when the solver gets faster; 1000 is wanted.
const LEAST: f64 = 25.0;
/// Checks timed, each of other figures; the median counts.
const CHECKS: u32 = 7;

fn main() {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(1).build().unwrap();
    let (check, textbook) = pool.install(|| (check(), textbook()));
    let ratio = textbook.as_secs_f64() / check.as_secs_f64();
    println!(
        "full check of two slabs: {check:.2?}; the textbook way: {textbook:.2?}; ratio {ratio:.0} (at least {LEAST} asked)"
    );
    assert!(ratio >= LEAST, "the full check is only {ratio:.1} times faster than the textbook way");
}

/// The median time of a check from text to findings, caches empty.
fn check() -> Duration {
    let mut times: Vec<Duration> = (1..=CHECKS)
        .map(|number| {
            let text = two_slabs(number);
            let start = Instant::now();
            let analysis = checks::analyse(&text, &Engine::new(), &|| false);
            let time = start.elapsed();
            assert!(
                analysis
                    .derived
                    .is_some_and(|derived| derived.slabs.iter().all(|slab| slab.stability.is_some()))
            );
            time
        })
        .collect();
    times.sort();
    times[times.len() / 2]
}

/// The time of the textbook way for the slabs of one setup, whose limits are compared with those of its check.
fn textbook() -> Duration {
    let measured = Measured::of(&two_slabs(0));
    let start = Instant::now();
    let limits: Vec<Limits> = measured.slabs.iter().map(|slab| by_textbook(&measured, slab)).collect();
    let time = start.elapsed();
    for (found, slab) in limits.iter().zip(&measured.slabs) {
        println!("textbook: {found:?}");
        let same = |one: f64, other: f64| (one - other).abs() <= 1e-3 * other;
        let (hold, wave) = (found.hold.unwrap().0, found.wave.unwrap().0);
        assert!(same(hold, slab.hold), "hold limit {hold} against {}", slab.hold);
        assert!(same(wave, slab.wave), "wave limit {wave} against {}", slab.wave);
    }
    time
}

fn by_textbook(measured: &Measured, slab: &topheavy_tests::sample::Slab) -> Limits {
    let Measured { omega, length, width, .. } = *measured;
    let wavenumbers = cell::wavenumbers(length, width, cell::cut_off(&slab.layered, omega));
    textbook::limits(&Question {
        layered: &slab.layered,
        omega,
        wavenumbers: &wavenumbers,
        up_to: slab.searched_up_to,
        other_every: 1,
    })
}
