//! Times of the parts, for who makes them faster: shown, never asserted.
//!
//! `cargo bench -p topheavy-tests --bench timings`.

use checks::{Analysis, Engine};
use divan::Bencher;
use std::f64::consts::{PI, TAU};
use std::sync::atomic::{AtomicU32, Ordering};
use topheavy_tests::sample::{tower, two_slabs};
use topheavy_tests::stacks::levitated;
use topheavy_tests::textbook::classes;

fn main() {
    divan::main();
}

/// Figures that no run before had.
fn fresh() -> u32 {
    static NUMBER: AtomicU32 = AtomicU32::new(0);
    NUMBER.fetch_add(1, Ordering::Relaxed)
}

/// The full check of the two-slab sample, nothing known before.
#[divan::bench(sample_count = 10, sample_size = 1)]
fn full_check(bencher: Bencher) {
    bencher
        .with_inputs(|| two_slabs(fresh()))
        .bench_values(|text| checks::analyse(&text, &Engine::new(), &|| false));
}

/// The same text again after an edit that changes no meaning.
#[divan::bench]
fn check_after_a_comment(bencher: Bencher) {
    let engine = Engine::new();
    let text = two_slabs(fresh());
    checks::analyse(&text, &engine, &|| false);
    bencher
        .with_inputs(|| format!("# {}\n{text}", fresh()))
        .bench_values(|text| -> Analysis { checks::analyse(&text, &engine, &|| false) });
}

/// Towers of slabs.
#[divan::bench(args = [2, 5, 10], sample_count = 1, sample_size = 1)]
fn slabs(bencher: Bencher, slabs: u32) {
    bencher
        .with_inputs(|| tower(slabs, fresh()))
        .bench_values(|text| checks::analyse(&text, &Engine::new(), &|| false));
}

/// The textbook's two usual classes at one wavenumber.
#[divan::bench]
fn textbook_classes() -> classes::Marginal {
    classes::marginal(&levitated(970.0, 5e-4, 0.0211, 0.02), TAU * 100.0, PI / 0.05, 1000.0)
}
