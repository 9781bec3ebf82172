//! Natural frequencies of the chain without loss.
//!
//! det(K(ω) − ω² M) = 0 with K from the real part of each cushion's exponent *at ω itself*. The j-th frequency is
//! the fixed point of ω → √λ_j(K(ω)), λ_j the j-th eigenvalue of M^{-1/2} K M^{-1/2}; since the exponent moves by
//! less than its whole range 1 … γ over decades of frequency, the iteration contracts quickly. There are as many
//! frequencies as floating slabs that hang on at least one spring of their group.

use super::chain::Mechanism;
use super::partition::Seat;
use crate::stack::Stack;
use nalgebra::DMatrix;
use std::f64::consts::TAU;

/// Where the iteration starts, rad/s: any value serves.
const START: f64 = TAU * 100.0;

/// All natural frequencies, ascending, Hz.
pub fn natural_frequencies(mechanism: &Mechanism, stack: &Stack) -> Vec<f64> {
    let floating: Vec<usize> =
        (0..mechanism.masses.len()).filter(|&i| mechanism.masses[i].seat == Seat::Floating).collect();
    let mut found: Vec<f64> = (0..floating.len())
        .filter_map(|j| {
            let mut omega = START;
            for _ in 0..60 {
                let lambda = eigenvalue(mechanism, stack, &floating, omega, j);
                // A slab without any spring drifts: no frequency.
                if lambda.is_nan() || lambda <= 1e-9 * START {
                    return None;
                }
                let next = lambda.sqrt();
                let settled = (next - omega).abs() <= 1e-13 * next;
                omega = next;
                if settled {
                    break;
                }
            }
            Some(omega / TAU)
        })
        .collect();
    found.sort_by(f64::total_cmp);
    found
}

fn eigenvalue(mechanism: &Mechanism, stack: &Stack, floating: &[usize], omega: f64, j: usize) -> f64 {
    let k = mechanism.lossless(stack, omega);
    let n = floating.len();
    let mass = |a: usize| mechanism.masses[floating[a]].mass;
    let matrix = DMatrix::from_fn(n, n, |r, c| {
        let i = floating[r];
        let coupled = r.abs_diff(c) == 1 && floating[r].abs_diff(floating[c]) == 1;
        let stiffness = match () {
            () if r == c => k[i] + k[i + 1],
            () if coupled => -k[floating[r.max(c)]],
            () => 0.0,
        };
        stiffness / (mass(r) * mass(c)).sqrt()
    });
    let mut eigenvalues: Vec<f64> = matrix.symmetric_eigenvalues().iter().copied().collect();
    eigenvalues.sort_by(f64::total_cmp);
    eigenvalues.get(j).copied().unwrap_or(f64::NAN)
}
