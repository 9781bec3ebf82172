//! Starting values: the multipliers of the chain with inertia and damping of half the drive's frequency, held constant.
//!
//! Gas layers in contact are then one spring, k(t) = 1/Σ h (1 + ξ)^{ν+1}/(νP), with a loss c = Im k/ω′, ω′ = ω/2; walls
//! add −m Im e ω′ to the damping and m Re e to the inertia. Fourth-order Runge–Kutta over one period.

use super::super::network::{End, Network};
use super::hill::Swing;
use nalgebra::{DMatrix, DVector};
use num_complex::Complex64;
use std::f64::consts::TAU;

const STEPS: usize = 400;

/// A run of gas layers between two slabs or a slab and the cell.
struct Run {
    above: Option<usize>,
    below: Option<usize>,
    gases: Vec<usize>,
}

/// Exponents with Im s in [0, ω/2], by growth.
pub(super) fn starts(network: &Network<'_>, swing: &Swing, omega: f64) -> Vec<Complex64> {
    let slabs: Vec<usize> = (0..network.nodes.len()).filter(|&node| network.nodes[node].is_some()).collect();
    let reference = Complex64::new(0.0, omega / 2.0);
    let inertia: Vec<Complex64> =
        slabs.iter().map(|&node| network.inertia(node, reference) / (reference * reference)).collect();
    let runs = runs(network, &slabs);
    let exponents: Vec<Complex64> =
        (0..network.gases.len()).map(|gas| network.exponent(gas, reference)).collect();
    let samples = swing.strain.first().map_or(1, Vec::len);
    let stiffness = |run: &Run, turn: f64| {
        let compliance: Complex64 = run
            .gases
            .iter()
            .map(|&gas| {
                let place = (turn * samples as f64).rem_euclid(samples as f64);
                let (j, part) = (place as usize % samples, place.fract());
                let xi = swing.strain[gas][j] * (1.0 - part) + swing.strain[gas][(j + 1) % samples] * part;
                let exponent = exponents[gas];
                let spring = exponent * network.gases[gas].pressure / network.gases[gas].thickness;
                (spring * (1.0 + xi).powf(-exponent.re - 1.0)).inv()
            })
            .sum();
        compliance.inv()
    };
    let n = slabs.len();
    let matrix = |turn: f64| {
        let mut a = DMatrix::<f64>::zeros(2 * n, 2 * n);
        for i in 0..n {
            a[(i, n + i)] = 1.0;
            a[(n + i, n + i)] += inertia[i].im * omega / 2.0 / inertia[i].re;
        }
        for run in &runs {
            let k = stiffness(run, turn);
            let ends = [(run.above, 1.0), (run.below, -1.0)];
            for (i, sign) in ends.iter().filter_map(|(slab, sign)| Some(((*slab)?, sign))) {
                for (j, other) in ends.iter().filter_map(|(slab, sign)| Some(((*slab)?, sign))) {
                    let factor = -sign * other / inertia[i].re;
                    a[(n + i, j)] += factor * k.re;
                    a[(n + i, n + j)] += factor * k.im / (omega / 2.0);
                }
            }
        }
        a
    };
    let period = TAU / omega;
    let step = period / STEPS as f64;
    let mut monodromy = DMatrix::identity(2 * n, 2 * n);
    for i in 0..STEPS {
        let turn = |part: f64| matrix((i as f64 + part) / STEPS as f64);
        let (start, middle, end) = (turn(0.0), turn(0.5), turn(1.0));
        let a = &start * &monodromy;
        let b = &middle * (&monodromy + &a * (step / 2.0));
        let c = &middle * (&monodromy + &b * (step / 2.0));
        let d = &end * (&monodromy + &c * step);
        monodromy += (a + (b + c) * 2.0 + d) * (step / 6.0);
    }
    let multipliers: DVector<Complex64> = monodromy.complex_eigenvalues();
    let mut found: Vec<Complex64> =
        multipliers.iter().filter(|mu| mu.im >= 0.0).map(|mu| mu.ln() / period).collect();
    found.sort_by(|a, b| b.re.total_cmp(&a.re));
    found
}

/// Gas layers by the slabs that they lie between (positions in `slabs`).
fn runs(network: &Network<'_>, slabs: &[usize]) -> Vec<Run> {
    let slab = |end: End| match end {
        End::Node(node) => slabs.iter().position(|&slab| slab == node),
        End::Cell => None,
    };
    let boundary = |end: End| matches!(end, End::Node(node) if network.nodes[node].is_none());
    let mut runs: Vec<Run> = Vec::new();
    for (index, gas) in network.gases.iter().enumerate() {
        match runs.last_mut() {
            Some(run) if boundary(gas.above) => {
                run.gases.push(index);
                run.below = slab(gas.below);
            }
            _ => runs.push(Run { above: slab(gas.above), below: slab(gas.below), gases: vec![index] }),
        }
    }
    runs
}
