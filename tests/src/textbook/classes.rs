//! The marginal accelerations of the two usual classes: a dense generalised eigenproblem each.
//!
//! With T the tractions per k² of a harmonic, Δ = ρ_below − ρ_above and g(t) = g + a cos ωt, the balance of the harmonic n is
//!
//! ```text
//! [T(Λₙ) − diag(Δg + σk²)] ζₙ = (a/2) diag(Δ) (ζₙ₋₁ + ζₙ₊₁),     Λₙ = i(α + n)ω,  α = 0 or 1/2
//! ```
//!
//! The displacement is real, so ζ₋ₙ = ζₙ* (harmonic) and ζ₋₁ = ζ₀* (subharmonic): real and imaginary parts of the
//! harmonics n ≥ 0 suffice, A ζ = a B ζ with real matrices.

use super::ACCURACY;
use super::coefficients::{jump, tractions};
use super::eigen::generalised;
use nalgebra::DMatrix;
use num_complex::Complex64;
use physics::stability::layered::Layered;

/// More harmonics than any marginal acceleration of a laboratory's fluids takes.
const MOST_HARMONICS: usize = 256;

/// Marginal accelerations at one wavenumber.
#[derive(Debug, Clone, PartialEq)]
pub struct Marginal {
    /// Ascending, m/s².
    pub harmonic: Vec<f64>,
    /// Ascending, m/s².
    pub subharmonic: Vec<f64>,
    /// Harmonics that it took.
    pub harmonics: usize,
    /// Eigenproblems solved on the way.
    pub eigenproblems: usize,
}

/// The marginal accelerations up to `up_to` at wavenumber `k`, with harmonics doubled until the ones that limits are
/// made of do not change by more than [`ACCURACY`].
///
/// # Panics
/// When they do not settle, which would be a defect here.
pub fn marginal(layered: &Layered, omega: f64, k: f64, up_to: f64) -> Marginal {
    let needed = super::coefficients::falling(layered, k) + 1;
    let mut harmonics = 1;
    let mut problem = Problem { layered, omega, k, up_to, tractions: [Vec::new(), Vec::new()] };
    let mut last = problem.solve(harmonics);
    let mut eigenproblems = 2;
    loop {
        assert!(harmonics < MOST_HARMONICS, "marginal accelerations do not settle at {k}/m");
        harmonics *= 2;
        let next = problem.solve(harmonics);
        eigenproblems += 2;
        let settled = |class: usize, many: usize| {
            let (one, two) = (&last[class], &next[class]);
            let (one, two) = (&one[..many.min(one.len())], &two[..many.min(two.len())]);
            one.len() == two.len() && one.iter().zip(two).all(|(a, b)| (a - b).abs() <= ACCURACY * b)
        };
        if settled(0, needed) && settled(1, 1) {
            // The last doubling only showed that the one before was enough.
            let [harmonic, subharmonic] = next;
            return Marginal { harmonic, subharmonic, harmonics: harmonics / 2, eigenproblems };
        }
        last = next;
    }
}

struct Problem<'a> {
    layered: &'a Layered,
    omega: f64,
    k: f64,
    up_to: f64,
    /// Of the harmonics 0, 1, … of each class, as far as they were needed.
    tractions: [Vec<DMatrix<Complex64>>; 2],
}

impl Problem<'_> {
    /// Marginal accelerations of both classes, ascending, with harmonics up to `harmonics`.
    fn solve(&mut self, harmonics: usize) -> [Vec<f64>; 2] {
        [0, 1].map(|class| {
            for n in self.tractions[class].len()..=harmonics {
                let lambda = Complex64::new(0.0, (n as f64 + 0.5 * class as f64) * self.omega);
                let tractions = tractions(self.layered, self.k, lambda);
                self.tractions[class].push(tractions);
            }
            let (a, b) = self.matrices(class, harmonics);
            real_positive(a, &b, self.up_to)
        })
    }

    /// A and B of a class: unknowns are Re ζₙ, Im ζₙ of every interface, harmonic by harmonic.
    fn matrices(&self, class: usize, harmonics: usize) -> (DMatrix<f64>, DMatrix<f64>) {
        let Problem { layered, k, .. } = *self;
        let interfaces = layered.tensions.len();
        let size = 2 * interfaces * (harmonics + 1);
        let at = |n: usize, part: usize, i: usize| (2 * n + part) * interfaces + i;
        let (mut a, mut b) = (DMatrix::zeros(size, size), DMatrix::zeros(size, size));
        for n in 0..=harmonics {
            for i in 0..interfaces {
                for j in 0..interfaces {
                    let mut entry = self.tractions[class][n][(i, j)];
                    if i == j {
                        entry -= jump(layered, i) * layered.gravity + layered.tensions[i] * k * k;
                    }
                    a[(at(n, 0, i), at(n, 0, j))] = entry.re;
                    a[(at(n, 0, i), at(n, 1, j))] = -entry.im;
                    a[(at(n, 1, i), at(n, 0, j))] = entry.im;
                    a[(at(n, 1, i), at(n, 1, j))] = entry.re;
                }
                let half = 0.5 * jump(layered, i);
                for part in [0, 1] {
                    // ζ₋₁ is the conjugate of ζ₁ or of ζ₀.
                    let sign = if part == 0 { 1.0 } else { -1.0 };
                    let below = if n > 0 { (n - 1, 1.0) } else { (1 - class, sign) };
                    b[(at(n, part, i), at(below.0, part, i))] += half * below.1;
                    if n < harmonics {
                        b[(at(n, part, i), at(n + 1, part, i))] += half;
                    }
                }
            }
        }
        (a, b)
    }
}

/// The real positive a ≤ `up_to` of A ζ = a B ζ, ascending.
fn real_positive(a: DMatrix<f64>, b: &DMatrix<f64>, up_to: f64) -> Vec<f64> {
    let mut found: Vec<f64> = generalised(a, b, up_to / 3.0)
        .iter()
        .filter(|a| a.re > 0.0 && a.re <= up_to && a.im.abs() < 1e-7 * a.re)
        .map(|a| a.re)
        .collect();
    found.sort_by(f64::total_cmp);
    found
}
