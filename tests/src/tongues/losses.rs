//! What a viscosity that is nearly none takes from potential flow, and the exponents with it to the first order.
//!
//! In the bulk the flow stays a potential and loses 2μ e:e; with e the strain rate of the flow of [`super::potential`]
//! that is 4νk² times the form of its mass, layer by layer (a deep liquid decays with 2νk²: Lamb, art. 348). Where a
//! rigid wall or another viscous fluid hinders its slip U = Bᵀ W there is a Stokes layer of impedance Z(Λ) U:
//!
//! ```text
//! δM(Λ) = Λ [Σ 4ν k² m + Σ Z(Λ) B Bᵀ],   wall Z = √(Λρμ),   two fluids 1/Z = 1/√(Λρ₁μ₁) + 1/√(Λρ₂μ₂)
//! ```
//!
//! (wall: decay k √(νω/2)/sinh 2kh, Landau & Lifshitz, Fluid Mechanics, § 25). The harmonics of a Floquet mode form a
//! complex symmetric system, so that a simple exponent s moves by
//!
//! ```text
//! δs = −Σ ζₙᵀ δM(s + inω) ζₙ / Σ ζₙᵀ 2 (s + inω) M ζₙ
//! ```

use super::multipliers::{Multipliers, Root};
use super::period::{Moment, half, steps};
use super::potential::{Potential, Square};
use nalgebra::SVector;
use num_complex::Complex64;
use physics::stability::layered::Layered;

/// Moments of half a period that a mode's harmonics are taken from: harmonics up to this order.
const HARMONICS: usize = 24;

/// The losses of a stack in the coordinates of its [`Potential`].
#[derive(Debug, Clone)]
pub struct Losses<const N: usize> {
    bulk: Square<N>,
    /// Z/√Λ and B of every Stokes layer.
    sheets: Vec<(f64, SVector<f64, N>)>,
}

/// The losses of one mode: δs = −(bulk·f + sheets·√f) where all viscosities are multiplied by f, 1/s.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shift {
    /// Growing as the viscosity.
    pub bulk: Complex64,
    /// Growing as its root.
    pub sheets: Complex64,
}

impl Shift {
    /// δs with all viscosities multiplied.
    pub fn at(&self, factor: f64) -> Complex64 {
        -(self.bulk * factor + self.sheets * factor.sqrt())
    }
}

impl<const N: usize> Losses<N> {
    /// With the viscosities of the stack.
    pub fn new(layered: &Layered, k: f64, potential: &Potential<N>) -> Self {
        let root = &potential.inverse_root;
        let mut bulk = Square::<N>::zeros();
        for (layer, mass) in layered.layers.iter().zip(&potential.masses) {
            if layer.density > 0.0 {
                bulk += mass * (4.0 * layer.viscosity / layer.density * k * k);
            }
        }
        // Horizontal velocity along the upper and the lower face of layer j, over the interfaces' velocities.
        let slip = |j: usize, top: bool| {
            let kh = k * layered.layers[j].thickness;
            let (near, far) = (1.0 / kh.tanh(), 1.0 / kh.sinh());
            let (of_top, of_bottom) = if top { (near, -far) } else { (far, -near) };
            let mut slip = SVector::<f64, N>::zeros();
            if j > 0 {
                slip[j - 1] = of_top;
            }
            if j < N {
                slip[j] = of_bottom;
            }
            slip
        };
        let impedance = |j: usize| (layered.layers[j].density * layered.layers[j].viscosity).sqrt();
        let mut sheets = Vec::new();
        for (j, top) in [(0, true), (N, false)] {
            if layered.layers[j].thickness.is_finite() {
                sheets.push((impedance(j), slip(j, top)));
            }
        }
        for i in 0..N {
            let (above, below) = (impedance(i), impedance(i + 1));
            if above > 0.0 && below > 0.0 {
                sheets.push((above * below / (above + below), slip(i, false) - slip(i + 1, true)));
            }
        }
        let sheets = sheets.into_iter().map(|(z, b)| (z, root * b)).collect();
        Losses { bulk: root * bulk * root.transpose(), sheets }
    }

    /// The shifts of all stable modes at the acceleration a, ascending in x.
    pub fn shifts(&self, potential: &Potential<N>, omega: f64, a: f64) -> Vec<(Root<N>, Shift)> {
        let moments = half(potential, omega, a, steps(potential, omega, a).max(HARMONICS));
        let multipliers = Multipliers::new(&moments[moments.len() - 1]);
        let stable = multipliers.roots.iter().filter(|root| !root.kind.grows());
        stable.map(|root| (*root, self.shift(root, &multipliers.coupling, &moments, omega))).collect()
    }

    /// The mode is η = C u + S v with u = Y w and v = i sin θ w.
    fn shift(&self, root: &Root<N>, coupling: &Square<N>, moments: &[Moment<N>], omega: f64) -> Shift {
        let (u, angle) = (coupling * root.left, root.angle());
        let v = root.left * root.to_end.sin();
        let last = moments.len() - 1;
        let (mut bulk, mut sheets) = (Complex64::default(), Complex64::default());
        let mut action = 0.0;
        for n in -(HARMONICS as i32 / 2)..=HARMONICS as i32 / 2 {
            // In units of ω; η has an even real and an odd imaginary part, so that its harmonics are real.
            let speed = angle / std::f64::consts::TAU + f64::from(n);
            let mut harmonic = SVector::<f64, N>::zeros();
            for (i, at) in moments.iter().enumerate() {
                let weight = if i == 0 || i == last { 0.5 } else { 1.0 };
                let (sin, cos) = (speed * at.phase).sin_cos();
                harmonic += (at.even * u * cos + at.odd * v * sin) * weight;
            }
            let lambda = Complex64::new(0.0, speed * omega);
            action += 2.0 * speed * omega * harmonic.norm_squared();
            bulk += lambda * (harmonic.transpose() * self.bulk * harmonic)[0];
            for (z, b) in &self.sheets {
                sheets += lambda * lambda.sqrt() * (z * harmonic.dot(b).powi(2));
            }
        }
        let action = Complex64::new(0.0, action);
        Shift { bulk: bulk / action, sheets: sheets / action }
    }
}
