//! Exponents of neither usual class: the monodromy matrix over one period, on a ladder of accelerations.
//!
//! The flow on graded finite elements in depth, an implicit Runge–Kutta method in time (`galerkin`), all multipliers by a
//! dense eigensolver. A complex pair outside the unit circle is a wave with another frequency.

use super::ACCURACY;
use super::eigen::eigenvalues;
use crate::galerkin::{Motion, Resolution, monodromy};
use physics::stability::layered::{Forcing, Layered};
use std::f64::consts::PI;

/// As coarse as gives growth rates to 1e-4 (held by a test).
pub const RESOLUTION: Resolution = Resolution { degree: 8, first: 3.0, growth: 4.0, steps: 8 };
/// Ratio of neighbouring accelerations.
const LADDER: f64 = 1.2;
/// The ladder begins at this part of its end.
const LOWEST: f64 = 0.1;
/// A multiplier whose argument is this close to 0 or π counts as real.
const REAL: f64 = 1e-5;

/// The motion at one wavenumber, and how often it was asked.
#[derive(Debug)]
pub struct Other {
    motion: Motion,
    omega: f64,
    /// Monodromy matrices made.
    pub monodromies: usize,
    /// Of them those with a growing exponent of neither class.
    pub growing: usize,
}

impl Other {
    /// Discretises the flow at wavenumber `k`, 1/m.
    pub fn new(layered: &Layered, omega: f64, k: f64) -> Other {
        Other { motion: Motion::new(layered, k, omega, &RESOLUTION), omega, monodromies: 0, growing: 0 }
    }

    /// The acceleration between `from` and `to` at which a wave of neither class begins to grow.
    pub fn onset(&mut self, from: f64, to: f64) -> Option<f64> {
        let mut low = from;
        let mut high = from.max(LOWEST * to);
        while low < to {
            if self.grows(high) {
                return Some(self.bisect(low, high));
            }
            low = high;
            high = (high * LADDER).min(to);
        }
        None
    }

    fn bisect(&mut self, mut low: f64, mut high: f64) -> f64 {
        while high - low > ACCURACY * high {
            let middle = 0.5 * (low + high);
            if self.grows(middle) { high = middle } else { low = middle }
        }
        0.5 * (low + high)
    }

    /// Whether a multiplier of neither class lies outside the unit circle.
    fn grows(&mut self, acceleration: f64) -> bool {
        let forcing = Forcing { omega: self.omega, acceleration };
        let multipliers = eigenvalues(monodromy(&self.motion, &forcing, RESOLUTION.steps));
        let grows = multipliers.iter().any(|multiplier| {
            let turn = multiplier.arg().abs();
            multiplier.norm() > 1.0 && turn > REAL && turn < PI - REAL
        });
        self.monodromies += 1;
        self.growing += usize::from(grows);
        grows
    }
}
