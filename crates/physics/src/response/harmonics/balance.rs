//! The balance of all harmonics of all nodes at one number of harmonics: residual, its derivative, Newton's method, and
//! the way from rest to the set drive.

use super::super::network::Network;
use nalgebra::{DMatrix, DVector};
use num_complex::Complex64;
use std::f64::consts::TAU;

/// Newton's steps at one drive.
const MOST_STEPS: usize = 25;
/// Residual over the inertia forces at which a balance is taken for solved; one more step is then made.
const SOLVED: f64 = 1e-9;
/// A corrector may move the predicted strains by this share of themselves: what moves more may be another branch.
const TRUST: f64 = 0.15;
/// Shortest step of the drive on the way up, as a share of it.
const SHORTEST: f64 = 1e-4;
/// A strain beyond which a cushion counts as closed.
const CLOSED: f64 = -0.98;

/// Why the motion at the set drive was not reached.
pub(super) enum Lost {
    Branch { reached: f64, stroke_ratio: f64 },
    Cancelled,
}

/// The system at one number of harmonics N. Unknowns of a node, in units of `length`: y_0, then Re y_n, Im y_n.
pub(super) struct Balance<'a> {
    network: &'a Network<'a>,
    count: usize,
    /// m
    length: f64,
    /// Pa: the inertia force of the heaviest node at `length`.
    force: f64,
    /// `[node][n]`
    inertia: Vec<Vec<Complex64>>,
    /// `[gas][n]`, N_n and ν_n.
    exponent: Vec<Vec<Complex64>>,
    real: Vec<Vec<f64>>,
    /// Linear springs.
    linear: bool,
    /// cos and sin of nθ_j: `[n][j]`.
    waves: Vec<Vec<(f64, f64)>>,
}

/// Samples over a period: enough that the overtones of the bracket do not fold back.
pub(super) fn sample_count(count: usize) -> usize {
    (10 * (count + 1)).max(64)
}

/// x_0 + Re Σ x_n e^{inθ} at evenly spaced θ.
pub(in super::super) fn samples(harmonics: &[Complex64], count: usize) -> Vec<f64> {
    let at = |j: usize| {
        let wave = |n: usize| Complex64::from_polar(1.0, TAU * ((n * j) % count) as f64 / count as f64);
        harmonics.iter().enumerate().map(|(n, x)| (x * wave(n)).re).sum()
    };
    (0..count).map(at).collect()
}

impl<'a> Balance<'a> {
    pub fn new(network: &'a Network<'a>, omega: f64, count: usize, linear: bool) -> Balance<'a> {
        let at = |n: usize| Complex64::new(0.0, n as f64 * omega);
        let nodes = 0..network.nodes.len();
        let gases = 0..network.gases.len();
        let length = network.gases.iter().map(|gas| gas.thickness).fold(f64::INFINITY, f64::min);
        let length = if length.is_finite() { length } else { 1e-3 };
        let heaviest = nodes.clone().map(|node| network.mass(node)).fold(f64::MIN_POSITIVE, f64::max);
        let samples = sample_count(count);
        let wave = |n: usize, j: usize| (TAU * ((n * j) % samples) as f64 / samples as f64).sin_cos();
        Balance {
            network,
            count,
            length,
            force: heaviest * omega * omega * length,
            inertia: nodes.map(|i| (0..=count).map(|n| network.inertia(i, at(n))).collect()).collect(),
            exponent: gases
                .clone()
                .map(|g| (0..=count).map(|n| network.exponent(g, at(n))).collect())
                .collect(),
            real: gases
                .map(|g| (0..=count).map(|n| network.real_exponent(g, n as f64 * omega, omega)).collect())
                .collect(),
            linear,
            waves: (0..=count)
                .map(|n| {
                    (0..samples)
                        .map(|j| {
                            let (sin, cos) = wave(n, j);
                            (cos, sin)
                        })
                        .collect()
                })
                .collect(),
        }
    }

    /// From rest to the set drive.
    pub fn follow(
        &self,
        cell: &[Complex64],
        cancel: &dyn Fn() -> bool,
    ) -> Result<(Vec<Vec<Complex64>>, f64), Lost> {
        let rest = DVector::zeros(self.size());
        let (mut reached, mut at): (f64, _) = (0.0, rest);
        let mut along = self.tangent(&at, cell);
        // The linear motion says how large the first step may be: strains of a few per cent are nearly linear.
        let mut step = match self.largest_strain(&along) {
            strain if strain > 0.0 => (0.03 / strain).min(1.0),
            _ => 1.0,
        };
        while reached < 1.0 {
            if cancel() {
                return Err(Lost::Cancelled);
            }
            let next = (reached + step).min(1.0);
            let guess = &at + &along * (next - reached);
            match self.newton(&guess, cell, next) {
                Some((found, _)) if self.largest_strain(&(&found - &guess)) <= self.trust(&found) => {
                    (reached, at) = (next, found);
                    along = self.tangent(&at, cell);
                    step *= 1.6;
                }
                _ => step *= 0.4,
            }
            if step < SHORTEST {
                return Err(Lost::Branch { reached, stroke_ratio: self.stroke(&at) });
            }
        }
        match self.newton(&at, cell, 1.0) {
            Some((found, residual)) => Ok((self.places(&found), residual)),
            None => Err(Lost::Branch { reached, stroke_ratio: self.stroke(&at) }),
        }
    }

    /// At the set drive, from the motion with fewer harmonics.
    pub fn refine(
        &self,
        cell: &[Complex64],
        start: &[Vec<Complex64>],
        cancel: &dyn Fn() -> bool,
    ) -> Result<(Vec<Vec<Complex64>>, f64), Lost> {
        let mut guess = DVector::zeros(self.size());
        for (node, harmonics) in start.iter().enumerate() {
            for (n, y) in harmonics.iter().enumerate() {
                let y = y / self.length;
                guess[self.row(node, n)] = y.re;
                if n > 0 {
                    guess[self.row(node, n) + 1] = y.im;
                }
            }
        }
        match self.newton(&guess, cell, 1.0) {
            Some((found, residual)) if self.largest_strain(&(&found - &guess)) <= self.trust(&found) => {
                Ok((self.places(&found), residual))
            }
            // Too few harmonics led astray: the way from rest is sure.
            _ => self.follow(cell, cancel),
        }
    }

    fn trust(&self, found: &DVector<f64>) -> f64 {
        (TRUST * self.largest_strain(found)).max(1e-3)
    }

    fn size(&self) -> usize {
        self.network.nodes.len() * (2 * self.count + 1)
    }

    /// Where y_n of a node stands.
    fn row(&self, node: usize, n: usize) -> usize {
        node * (2 * self.count + 1) + if n == 0 { 0 } else { 2 * n - 1 }
    }

    fn harmonic(&self, x: &DVector<f64>, node: usize, n: usize) -> Complex64 {
        let row = self.row(node, n);
        Complex64::new(x[row], if n == 0 { 0.0 } else { x[row + 1] })
    }

    fn places(&self, x: &DVector<f64>) -> Vec<Vec<Complex64>> {
        let node = |node| (0..=self.count).map(|n| self.harmonic(x, node, n) * self.length).collect();
        (0..self.network.nodes.len()).map(node).collect()
    }

    fn strain(&self, x: &DVector<f64>, gas: usize) -> Vec<Complex64> {
        (0..=self.count)
            .map(|n| self.network.gases[gas].strain(|node| self.harmonic(x, node, n)) * self.length)
            .collect()
    }

    /// The largest sum of a gas layer's strain amplitudes: a bound of its strain.
    fn largest_strain(&self, x: &DVector<f64>) -> f64 {
        let of = |gas| self.strain(x, gas).iter().map(|xi| xi.norm()).sum();
        (0..self.network.gases.len()).map(of).fold(0.0, f64::max)
    }

    fn stroke(&self, x: &DVector<f64>) -> f64 {
        (0..self.network.gases.len()).map(|gas| self.strain(x, gas)[1].norm()).fold(0.0, f64::max)
    }

    /// How the motion changes with the share of the drive.
    fn tangent(&self, x: &DVector<f64>, cell: &[Complex64]) -> DVector<f64> {
        let zero = DVector::zeros(self.size());
        let Some((_, jacobian)) = self.residual(x, cell, 0.0) else { return zero };
        let mut push = DVector::zeros(self.size());
        self.add_inertia_of_cell(&mut push, cell, -1.0);
        jacobian.lu().solve(&push).unwrap_or(zero)
    }

    /// The solution near a guess and its residual; `None` where there is none.
    fn newton(&self, guess: &DVector<f64>, cell: &[Complex64], share: f64) -> Option<(DVector<f64>, f64)> {
        let mut x = guess.clone();
        let mut last = f64::INFINITY;
        for _ in 0..MOST_STEPS {
            let (residual, jacobian) = self.residual(&x, cell, share)?;
            let size = residual.amax() / (1.0 + cell[1].norm() * share * self.heaviest() / self.force);
            let solved = size < SOLVED && size >= 0.1 * last;
            if solved || size == 0.0 {
                return Some((x, size));
            }
            last = size;
            x -= jacobian.lu().solve(&residual)?;
        }
        None
    }

    fn heaviest(&self) -> f64 {
        (0..self.network.nodes.len()).map(|node| self.network.mass(node)).fold(0.0, f64::max)
    }

    fn add_inertia_of_cell(&self, to: &mut DVector<f64>, cell: &[Complex64], factor: f64) {
        for node in 0..self.network.nodes.len() {
            for (n, a) in cell.iter().enumerate().skip(1) {
                let push = factor * self.network.mass(node) * a / self.force;
                to[self.row(node, n)] += push.re;
                to[self.row(node, n) + 1] += push.im;
            }
        }
    }

    /// Inertia − forces of every harmonic of every node over `force`, and its derivative; `None` where a cushion is
    /// closed.
    fn residual(
        &self,
        x: &DVector<f64>,
        cell: &[Complex64],
        share: f64,
    ) -> Option<(DVector<f64>, DMatrix<f64>)> {
        let size = self.size();
        let (mut residual, mut jacobian) = (DVector::zeros(size), DMatrix::zeros(size, size));
        self.add_inertia_of_cell(&mut residual, cell, share);
        for node in 0..self.network.nodes.len() {
            for n in 1..=self.count {
                let c = self.inertia[node][n] * self.length / self.force;
                let force = c * self.harmonic(x, node, n);
                let row = self.row(node, n);
                (residual[row], residual[row + 1]) = (residual[row] + force.re, residual[row + 1] + force.im);
                add_complex(&mut jacobian, row, row, c);
            }
        }
        for gas in 0..self.network.gases.len() {
            self.add_gas(gas, x, &mut residual, &mut jacobian)?;
        }
        for &node in &self.network.adrift {
            // Nothing fixes its mean place: it stays where it is.
            let row = self.row(node, 0);
            residual[row] = x[row];
            jacobian.row_mut(row).fill(0.0);
            jacobian[(row, row)] = 1.0;
        }
        Some((residual, jacobian))
    }

    /// A gas layer: −p acts on the node above and p on the one below, in units of residual.
    fn add_gas(
        &self,
        index: usize,
        x: &DVector<f64>,
        residual: &mut DVector<f64>,
        jacobian: &mut DMatrix<f64>,
    ) -> Option<()> {
        let gas = &self.network.gases[index];
        let strain = self.strain(x, index);
        let scale = gas.pressure / self.force;
        let per_length = self.length / gas.thickness;
        let columns = 2 * self.count + 1;
        // p_n and its derivative by ξ_0, Re ξ_m, Im ξ_m.
        let mut pressure = vec![Complex64::default(); self.count + 1];
        let mut slope = DMatrix::<f64>::zeros(columns, columns);
        for n in 0..=self.count {
            pressure[n] = -scale * self.exponent[index][n] * strain[n];
            let row = if n == 0 { 0 } else { 2 * n - 1 };
            match n {
                0 => slope[(0, 0)] -= scale * self.exponent[index][0].re,
                _ => add_complex(&mut slope, row, row, -scale * self.exponent[index][n]),
            }
        }
        if !self.linear {
            let count = sample_count(self.count);
            let xi = samples(&strain, count);
            if xi.iter().any(|xi| xi.is_nan() || *xi < CLOSED) {
                return None;
            }
            self.add_bracket(index, &xi, scale, &mut pressure, &mut slope);
        }
        for (node, sign) in gas.nodes() {
            // The equation is inertia − (p_below − p_above): the layer below a node pushes it up, and for that layer the
            // node is the end above.
            for (n, p) in pressure.iter().enumerate() {
                let row = self.row(node, n);
                residual[row] -= sign * p.re;
                if n > 0 {
                    residual[row + 1] -= sign * p.im;
                }
            }
            for (other, other_sign) in gas.nodes() {
                let mut block =
                    jacobian.view_mut((self.row(node, 0), self.row(other, 0)), (columns, columns));
                block -= sign * other_sign * per_length * &slope;
            }
        }
        Some(())
    }

    /// The nonlinear part (1 + ξ)^{−ν} − 1 + νξ, sampled, projected, and its derivative.
    fn add_bracket(
        &self,
        index: usize,
        xi: &[f64],
        scale: f64,
        pressure: &mut [Complex64],
        slope: &mut DMatrix<f64>,
    ) {
        let per_sample = 1.0 / xi.len() as f64;
        let mut exponent = f64::NAN;
        let (mut bracket, mut derivative) = (Vec::new(), Vec::new());
        for (n, p) in pressure.iter_mut().enumerate() {
            let nu = self.real[index][n];
            if nu != exponent {
                exponent = nu;
                bracket = xi.iter().map(|xi| (-nu * xi.ln_1p()).exp_m1() + nu * xi).collect::<Vec<_>>();
                derivative =
                    xi.iter().map(|xi| nu - nu * (-(nu + 1.0) * xi.ln_1p()).exp()).collect::<Vec<_>>();
            }
            let weight = scale * per_sample * if n == 0 { 1.0 } else { 2.0 };
            let row = if n == 0 { 0 } else { 2 * n - 1 };
            for (j, &(cos, sin)) in self.waves[n].iter().enumerate() {
                *p += weight * bracket[j] * Complex64::new(cos, -sin);
                let (by_cos, by_sin) = (weight * derivative[j] * cos, -weight * derivative[j] * sin);
                slope[(row, 0)] += by_cos;
                if n > 0 {
                    slope[(row + 1, 0)] += by_sin;
                }
                for m in 1..=self.count {
                    let (cos, sin) = self.waves[m][j];
                    let column = 2 * m - 1;
                    slope[(row, column)] += by_cos * cos;
                    slope[(row, column + 1)] -= by_cos * sin;
                    if n > 0 {
                        slope[(row + 1, column)] += by_sin * cos;
                        slope[(row + 1, column + 1)] -= by_sin * sin;
                    }
                }
            }
        }
    }
}

/// Adds a complex factor as a block on real and imaginary parts.
fn add_complex(matrix: &mut DMatrix<f64>, row: usize, column: usize, c: Complex64) {
    matrix[(row, column)] += c.re;
    matrix[(row, column + 1)] -= c.im;
    matrix[(row + 1, column)] += c.im;
    matrix[(row + 1, column + 1)] += c.re;
}
