//! What the check costs in instructions, counted by Callgrind: the same on every run and every machine of a kind.
//!
//! `cargo bench -p topheavy-tests --bench instructions`. The program runs itself under `valgrind --tool=callgrind`, once for
//! each case and once for nothing, which is taken off. Asserted: a ceiling for a check, and how cost grows with the width of
//! the cell. (That cost is linear in the number of slabs is counted elsewhere: one verdict a slab, `tests/edits.rs`.)

#![allow(clippy::unwrap_used, clippy::print_stdout)]

use checks::Engine;
use physics::stability::layered::{FluidLayer, Forcing, Layered};
use physics::stability::{SlabStability, slab};
use physics::stack::Plan;
use std::f64::consts::TAU;
use std::process::Command;
use topheavy_tests::sample::two_slabs;

/// Ceiling for the full check of two slabs, millions of instructions. Lower it when the solver gets faster.
const MOST_FOR_TWO_SLABS: f64 = 2900.0;
/// Widths of a cell at 150 Hz, m: four times the modes from one to the next.
const WIDTHS: [f64; 3] = [0.05, 0.1, 0.2];
/// Four times the modes may cost this many times as much.
const PER_FOUR_TIMES_THE_MODES: f64 = 4.0;

fn main() {
    let arguments: Vec<String> = std::env::args().collect();
    if let Some(at) = arguments.iter().position(|argument| argument == "--case") {
        return run(&arguments[at + 1], arguments.get(at + 2).map(|number| number.parse().unwrap()));
    }
    let nothing = count("nothing", 0.0);
    let of = |case: &str, number: f64| {
        let millions = count(case, number) - nothing;
        println!("{case} {number}: {millions:.1} million instructions");
        millions
    };
    let check = of("check", 0.0);
    let cells = WIDTHS.map(|width| of("cell", width));
    assert!(check <= MOST_FOR_TWO_SLABS, "a check of two slabs takes {check:.0} million instructions");
    for pair in cells.windows(2) {
        assert!(pair[1] <= PER_FOUR_TIMES_THE_MODES * pair[0], "cost follows the number of modes: {cells:?}");
    }
}

/// What is counted.
fn run(case: &str, number: Option<f64>) {
    let number = number.unwrap_or_default();
    let pool = rayon::ThreadPoolBuilder::new().num_threads(1).build().unwrap();
    let check = |text: &str| {
        let analysis = pool.install(|| checks::analyse(text, &Engine::new(), &|| false));
        assert!(
            analysis.derived.is_some_and(|derived| derived.slabs.iter().all(|slab| slab.stability.is_some()))
        );
    };
    match case {
        "nothing" => {}
        "check" => check(&two_slabs(0)),
        "cell" => drop(wide(number)),
        other => panic!("no case is named {other}"),
    }
}

/// 20 mm of oil of 1000 mm²/s between air of 20 mm and a cushion of 10 mm in a square cell at 150 Hz, driven a fifth
/// above what the simple formula v = √(2gL/π) asks for.
fn wide(width: f64) -> SlabStability {
    let gas = |thickness| FluidLayer { density: 1.2, viscosity: 1.8e-5, thickness };
    let oil = FluidLayer { density: 971.0, viscosity: 0.971, thickness: 0.02 };
    let layered =
        Layered { gravity: 9.81, layers: vec![gas(0.02), oil, gas(0.01)], tensions: vec![0.0212, 0.0212] };
    let omega = TAU * 150.0;
    let acceleration = 1.2 * omega * (2.0 * 9.81 * width / std::f64::consts::PI).sqrt();
    let plan = Plan::Rectangle { length: width, width };
    slab(&layered, &Forcing { omega, acceleration }, plan, &|| false).unwrap()
}

/// Millions of instructions of this program with a case.
fn count(case: &str, number: f64) -> f64 {
    let output = Command::new("valgrind")
        .args(["--tool=callgrind", "--callgrind-out-file=/dev/null"])
        .arg(std::env::current_exe().unwrap())
        .args(["--case", case, &number.to_string()])
        .output()
        .unwrap_or_else(|error| panic!("valgrind does not start ({error}); it is needed to count"));
    let told = String::from_utf8_lossy(&output.stderr);
    assert!(output.status.success(), "{case} {number}: {told}");
    let line = told.lines().find(|line| line.contains("Collected :")).unwrap_or_else(|| panic!("{told}"));
    let number = line.rsplit(' ').next().unwrap();
    number.parse::<f64>().unwrap() / 1e6
}
