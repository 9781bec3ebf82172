//! An independent second solution of the stability problem, which shares nothing with the solver under test.
//!
//! Space: energy form of the linearised Navier–Stokes equations on a mesh of polynomial elements (Galerkin; interface
//! conditions are natural ones). Time: the monodromy matrix over one period by an L-stable Runge–Kutta method. No
//! exponentials, no harmonics, no determinants; all Floquet exponents come out at once.

mod basis;
mod floquet;
mod mesh;
mod motion;
mod pushed;
mod radau;
mod share;

pub use floquet::{Exponent, exponents, monodromy};
pub use mesh::Resolution;
pub use motion::Motion;
pub use pushed::{Pushed, pushed};
pub use share::interface_share;

use physics::stability::layered::{Forcing, Layered};

/// The Floquet exponents of a stack at one wavenumber, at several accelerations: see [`exponents`].
#[derive(Debug)]
pub struct Second {
    motion: Motion,
    omega: f64,
    steps: usize,
}

impl Second {
    /// Prepares a stack at wavenumber `k`, 1/m, for the angular frequency `omega`, rad/s.
    pub fn new(layered: &Layered, omega: f64, k: f64, resolution: &Resolution) -> Second {
        Second { motion: Motion::new(layered, k, omega, resolution), omega, steps: resolution.steps }
    }

    /// All exponents at an acceleration (m/s²), fastest growing first.
    pub fn at(&self, acceleration: f64) -> Vec<Exponent> {
        exponents(&self.motion, &Forcing { omega: self.omega, acceleration }, self.steps)
    }

    /// Number of growing exponents at an acceleration.
    pub fn growing(&self, acceleration: f64) -> usize {
        self.at(acceleration).iter().filter(|exponent| exponent.rate > 0.0).count()
    }

    /// The acceleration between two brackets at which the number of growing exponents changes, by bisection to a
    /// relative `accuracy`; `None` when the numbers at both ends are the same.
    pub fn threshold(&self, mut low: f64, mut high: f64, accuracy: f64) -> Option<f64> {
        let below = self.growing(low);
        if below == self.growing(high) {
            return None;
        }
        while high - low > accuracy * high {
            let middle = 0.5 * (low + high);
            if self.growing(middle) == below { low = middle } else { high = middle }
        }
        Some(0.5 * (low + high))
    }

    /// Share of the interfaces' energy in each of the given modes at an acceleration: see [`interface_share`].
    pub fn shares(&self, acceleration: f64, modes: &[Exponent]) -> Vec<f64> {
        let monodromy = monodromy(&self.motion, &Forcing { omega: self.omega, acceleration }, self.steps);
        modes.iter().map(|mode| interface_share(&self.motion, &monodromy, mode, self.omega)).collect()
    }

    /// The periodic motion under a sideways force per mass `push(ωt)` at an acceleration: see [`pushed()`].
    pub fn pushed(&self, acceleration: f64, push: &dyn Fn(f64) -> f64) -> Pushed {
        pushed(&self.motion, &Forcing { omega: self.omega, acceleration }, self.steps, push)
    }

    /// Number of unknowns.
    pub fn size(&self) -> usize {
        self.motion.decay.len() + self.motion.steady.len()
    }
}
