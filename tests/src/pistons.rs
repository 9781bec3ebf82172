//! A second method for slabs on cushions: the motion in time, exactly polytropic gas, and the velocity profile of the
//! liquid along the side walls as it develops. Shares no line with the solver.
//!
//! Slab i between two walls a distance L apart: with f = (p_below − p_above)/m − a(t) its velocity profile obeys
//! ∂w/∂t = f + ν ∂²w/∂x², w = 0 at the walls, and ẏ is its mean. Galerkin's method with φ_k = P_k − P_{k+2} (even Legendre
//! polynomials; Shen, SIAM J. Sci. Comput. 15, 1489 (1994)), diagonalised: ẇ_k = f − ν λ_k w_k, ẏ = Σ β_k w_k. y is relative
//! to the cell, p = P[(1 + ξ)^{−n} − 1].

use crate::runge_kutta::integrate;
use nalgebra::{DMatrix, DVector, SymmetricEigen};
use num_complex::Complex64;
use std::f64::consts::TAU;

/// Modes of a profile: a Stokes layer of a sixtieth of the width is resolved to 1e-9.
const MODES: usize = 30;
const TOLERANCE: f64 = 1e-11;

/// A slab.
pub struct Slab {
    /// kg/m²
    pub mass: f64,
    /// m²/s
    pub kinematic: f64,
}

/// A gas layer between slab `above` and slab `below`, `None`: the cell.
pub struct Cushion {
    /// The slab on it.
    pub above: Option<usize>,
    /// The slab under it.
    pub below: Option<usize>,
    /// Pa absolute
    pub pressure: f64,
    /// m
    pub thickness: f64,
    /// n of P (h/(h + u))^n
    pub exponent: f64,
}

/// The chain under a(t) = A cos ωt + Re Σ A r_n e^{inωt}.
pub struct Pistons {
    /// Top first.
    pub slabs: Vec<Slab>,
    /// Top first.
    pub cushions: Vec<Cushion>,
    /// λ_k in 1/m² and β_k of the distance of the walls: [`profile`].
    pub profile: Vec<(f64, f64)>,
    /// rad/s
    pub omega: f64,
    /// m/s² peak
    pub acceleration: f64,
    /// r_2, r_3 …
    pub distortion: Vec<Complex64>,
}

/// A motion that repeats with the drive.
pub struct Orbit {
    /// The state at t = 0.
    pub start: Vec<f64>,
    /// How disturbances of it come back after one period.
    pub monodromy: DMatrix<f64>,
}

/// λ_k and β_k between walls `width` (m) apart.
pub fn profile(width: f64) -> Vec<(f64, f64)> {
    let k = |i: usize| 2.0 * i as f64;
    let scale = |i: usize| 1.0 / (4.0 * k(i) + 6.0).sqrt();
    // On −1 … 1 with unit stiffness: ∫φφ′ of neighbours overlaps in one polynomial, ∫P_k² = 2/(2k + 1).
    let square = |k: f64| 2.0 / (2.0 * k + 1.0);
    let mass = DMatrix::from_fn(MODES, MODES, |i, j| match i.abs_diff(j) {
        0 => scale(i).powi(2) * (square(k(i)) + square(k(i) + 2.0)),
        1 => -scale(i) * scale(j) * square(k(i.max(j))),
        _ => 0.0,
    });
    let modes = SymmetricEigen::new(mass);
    // Only φ_0 has a mean.
    let mean = |j: usize| 2.0 * scale(0) * modes.eigenvectors[(0, j)];
    let mode = |j: usize| {
        let inertia = modes.eigenvalues[j];
        (4.0 / (width * width * inertia), mean(j).powi(2) / (2.0 * inertia))
    };
    (0..MODES).map(mode).collect()
}

impl Pistons {
    const STRIDE: usize = MODES + 1;

    fn size(&self) -> usize {
        self.slabs.len() * Self::STRIDE
    }

    fn drive(&self, t: f64) -> f64 {
        let wave = |n: usize, r: Complex64| (r * Complex64::from_polar(1.0, n as f64 * self.omega * t)).re;
        let overtones: f64 = self.distortion.iter().enumerate().map(|(i, r)| wave(i + 2, *r)).sum();
        self.acceleration * ((self.omega * t).cos() + overtones)
    }

    /// dy/dt; with `about`, of a small disturbance of that state.
    fn rate(&self, t: f64, y: &[f64], about: Option<&[f64]>, out: &mut [f64]) {
        let place = |state: &[f64], slab: Option<usize>| slab.map_or(0.0, |i| state[i * Self::STRIDE]);
        let mut push: Vec<f64> =
            self.slabs.iter().map(|_| if about.is_some() { 0.0 } else { -self.drive(t) }).collect();
        for cushion in &self.cushions {
            let strain = |state: &[f64]| {
                (place(state, cushion.above) - place(state, cushion.below)) / cushion.thickness
            };
            let pressure = match about {
                None => cushion.pressure * ((1.0 + strain(y)).powf(-cushion.exponent) - 1.0),
                Some(at) => {
                    let slope = -cushion.exponent * (1.0 + strain(at)).powf(-cushion.exponent - 1.0);
                    cushion.pressure * slope * strain(y)
                }
            };
            for (slab, sign) in [(cushion.above, 1.0), (cushion.below, -1.0)] {
                if let Some(i) = slab {
                    push[i] += sign * pressure / self.slabs[i].mass;
                }
            }
        }
        for (i, slab) in self.slabs.iter().enumerate() {
            let own = &y[i * Self::STRIDE..][..Self::STRIDE];
            let out = &mut out[i * Self::STRIDE..][..Self::STRIDE];
            out[0] = 0.0;
            for (k, (decay, weight)) in self.profile.iter().enumerate() {
                out[0] += weight * own[k + 1];
                out[k + 1] = push[i] - slab.kinematic * decay * own[k + 1];
            }
        }
    }

    fn scale(&self) -> Vec<f64> {
        let travel = self.acceleration / (self.omega * self.omega);
        let one = |i: usize| if i.is_multiple_of(Self::STRIDE) { travel } else { travel * self.omega };
        (0..self.size()).map(one).collect()
    }

    /// From t = `from` to `to`.
    pub fn run(&self, from: f64, to: f64, y: &mut [f64]) {
        integrate(
            |t, y: &[f64], out: &mut [f64]| self.rate(t, y, None, out),
            from,
            to,
            y,
            &self.scale(),
            TOLERANCE,
        );
    }

    /// How a disturbance of `start` along each component comes back.
    fn monodromy(&self, start: &[f64]) -> DMatrix<f64> {
        let n = self.size();
        let scale = self.scale();
        let both: Vec<f64> = scale.iter().chain(&scale).copied().collect();
        let rate = |t: f64, y: &[f64], out: &mut [f64]| {
            let (motion, disturbance) = y.split_at(n);
            let (first, second) = out.split_at_mut(n);
            self.rate(t, motion, None, first);
            self.rate(t, disturbance, Some(motion), second);
        };
        let column = |j: usize| {
            let mut y = [start, &vec![0.0; n]].concat();
            y[n + j] = scale[j];
            integrate(rate, 0.0, TAU / self.omega, &mut y, &both, TOLERANCE);
            DVector::from_iterator(n, (0..n).map(|i| y[n + i] / scale[j]))
        };
        DMatrix::from_columns(&(0..n).map(column).collect::<Vec<_>>())
    }

    /// The periodic motion that a drive raised from rest over `periods` periods leads to, closed by Newton's method.
    pub fn orbit(&self, periods: usize) -> Orbit {
        let period = TAU / self.omega;
        let mut y = vec![0.0; self.size()];
        let raised = |t: f64| (t / (0.7 * periods as f64 * period)).min(1.0);
        let rate = |t: f64, y: &[f64], out: &mut [f64]| {
            self.rate(t, y, None, out);
            // What the drive is still short of.
            let short = (1.0 - raised(t)) * self.drive(t);
            let profiles = out.iter_mut().enumerate().filter(|(i, _)| !i.is_multiple_of(Self::STRIDE));
            profiles.for_each(|(_, rate)| *rate += short);
        };
        integrate(rate, 0.0, periods as f64 * period, &mut y, &self.scale(), 1e-8);
        for _ in 0..12 {
            let mut end = y.clone();
            self.run(0.0, period, &mut end);
            let gap = DVector::from_iterator(self.size(), end.iter().zip(&y).map(|(end, start)| end - start));
            let monodromy = self.monodromy(&y);
            let open =
                gap.iter().zip(self.scale()).map(|(gap, scale)| (gap / scale).abs()).fold(0.0, f64::max);
            if open < 1e-9 {
                return Orbit { start: y, monodromy };
            }
            let step = (DMatrix::identity(self.size(), self.size()) - monodromy)
                .lu()
                .solve(&gap)
                .expect("an orbit by itself");
            y.iter_mut().zip(step.iter()).for_each(|(y, step)| *y += step);
        }
        panic!("the motion does not close");
    }

    /// Each slab's acceleration in the lab, a_n for n = 1 … `count`, e^{inωt}.
    pub fn accelerations(&self, start: &[f64], count: usize) -> Vec<Vec<Complex64>> {
        let samples = 256;
        let period = TAU / self.omega;
        let mut y = start.to_vec();
        let mut found = vec![vec![Complex64::default(); count]; self.slabs.len()];
        for j in 0..samples {
            for (i, slab) in found.iter_mut().enumerate() {
                for (k, a) in slab.iter_mut().enumerate() {
                    let n = k as f64 + 1.0;
                    let wave =
                        Complex64::from_polar(2.0 / samples as f64, -n * TAU * j as f64 / samples as f64);
                    *a -= (n * self.omega).powi(2) * y[i * Self::STRIDE] * wave;
                }
            }
            let at = |j: usize| j as f64 * period / samples as f64;
            self.run(at(j), at(j + 1), &mut y);
        }
        for slab in &mut found {
            slab[0] += self.acceleration;
            for (a, r) in slab[1..].iter_mut().zip(&self.distortion) {
                *a += r * self.acceleration;
            }
        }
        found
    }

    /// Exponents of disturbances, by growth, Im s in [0, ω/2], 1/s, without the profiles' own creeping decay.
    pub fn exponents(&self, orbit: &Orbit) -> Vec<Complex64> {
        let multipliers = orbit.monodromy.complex_eigenvalues();
        let mut found: Vec<Complex64> = multipliers
            .iter()
            .filter(|mu| mu.im >= 0.0 && mu.norm() > 1e-9)
            .map(|mu| mu.ln() * self.omega / TAU)
            .filter(|s| s.im > 0.0 || s.re > 0.0)
            .collect();
        found.sort_by(|a, b| b.re.total_cmp(&a.re));
        found
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_profile_is_that_of_an_oscillating_channel() {
        // Mean velocity over that without walls: 1 − tanh(z)/z, z = √(iω/ν) L/2 (e.g. Womersley 1955, plane channel).
        let (width, nu) = (0.05, 1e-4);
        for omega in [100.0, 600.0, 2500.0] {
            let sigma = Complex64::new(0.0, omega / nu);
            let z = sigma.sqrt() * (width / 2.0);
            let mean: Complex64 =
                profile(width).iter().map(|(decay, weight)| sigma * *weight / (sigma + *decay)).sum();
            assert!((mean - (1.0 - z.tanh() / z)).norm() < 1e-9, "{omega}: {mean}");
        }
    }
}
