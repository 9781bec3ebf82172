//! The chain of slabs and cushions under a vibrating cell.
//!
//! Per unit area, with X_i the complex displacement of a floating slab, X_c that of the cell, k = nP/h the complex
//! stiffness of a cushion (several gas layers in contact are in series) and e_i the wall drag (`wall_drag`):
//!
//! ```text
//! [Σk − ω² m_i (1 + e_i)] X_i − Σ k X_neighbour = −ω² m_i e_i X_c
//! ```
//!
//! floor, lid and the slabs that touch them move with X_c. The system is tridiagonal and solved directly, at a cost
//! linear in the number of slabs. T_i = X_i/X_c.

use super::gas_spring::polytropic_exponent_growing;
use super::natural::natural_frequencies;
use super::partition::{Part, Seat, partition};
use super::pressures::{Crushed, static_pressures};
use super::wall_drag::wall_drag_growing;
use crate::stack::{Drive, Stack};
use num_complex::Complex64;
use quantity::vocabulary::Effect;
use std::ops::Range;

/// The response at one frequency.
#[derive(Debug, Clone, PartialEq)]
pub struct Chain {
    /// Top first.
    pub slabs: Vec<SlabMotion>,
    /// Gas layers that are springs, top first.
    pub cushions: Vec<CushionState>,
    /// Lossless natural frequencies, ascending, Hz, each with its exponent at that very frequency.
    pub natural_frequencies: Vec<f64>,
}

/// The motion of a slab.
#[derive(Debug, Clone, PartialEq)]
pub struct SlabMotion {
    /// Indices of its layers.
    pub layers: Range<usize>,
    /// Where it sits.
    pub seat: Seat,
    /// kg/m²
    pub mass_per_area: f64,
    /// T: slab over cell.
    pub amplification: Complex64,
    /// T times the cell's acceleration, m/s² peak.
    pub acceleration: Complex64,
}

/// The state of a gas layer that is a spring.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CushionState {
    /// Index of its layer.
    pub layer: usize,
    /// Mean static pressure, Pa absolute.
    pub pressure: f64,
    /// Complex polytropic exponent at the drive's frequency.
    pub polytropic: Complex64,
    /// Amplitude of the relative motion of its two faces over its thickness.
    pub stroke_ratio: f64,
}

/// Why there is no response.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum ResponseError {
    /// A layer has no positive pressure.
    Crushed(Crushed),
    /// The frequency or the acceleration cannot be used.
    Unusable {
        /// Hz
        frequency: f64,
        /// m/s²
        acceleration: f64,
    },
}

impl std::fmt::Display for ResponseError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            ResponseError::Crushed(crushed) => {
                write!(f, "layer {} has a pressure of {:.0} Pa absolute", crushed.layer + 1, crushed.pressure)
            }
            ResponseError::Unusable { frequency, acceleration } => {
                write!(f, "a drive of {frequency} Hz and {acceleration} m/s² cannot be used")
            }
        }
    }
}

impl std::error::Error for ResponseError {}

/// The response of the stack to the drive.
///
/// # Errors
/// [`ResponseError`].
pub fn chain(stack: &Stack, drive: &Drive) -> Result<Chain, ResponseError> {
    let mechanism = Mechanism::of(stack)?;
    let mut chain = mechanism.response(stack, drive)?;
    chain.natural_frequencies = natural_frequencies(&mechanism, stack);
    Ok(chain)
}

/// The response over frequencies (Hz) at one cell acceleration.
///
/// # Errors
/// [`ResponseError`].
pub fn sweep(stack: &Stack, frequencies: &[f64], acceleration: f64) -> Result<Vec<Chain>, ResponseError> {
    let mechanism = Mechanism::of(stack)?;
    let naturals = natural_frequencies(&mechanism, stack);
    let at = |&frequency: &f64| {
        let mut chain = mechanism.response(stack, &Drive { frequency, acceleration })?;
        chain.natural_frequencies.clone_from(&naturals);
        Ok(chain)
    };
    frequencies.iter().map(at).collect()
}

/// The peak force that the table must supply, N: |m_rigid + Σ m_i T_i| A, with the rigid mass in kg and the plan's
/// area in m². The liquid is no dead mass.
pub fn force_on_table(chain: &Chain, rigid_mass: f64, area: f64, acceleration: f64) -> f64 {
    let moving: Complex64 =
        chain.slabs.iter().map(|slab| slab.amplification * (slab.mass_per_area * area)).sum();
    (moving + rigid_mass).norm() * acceleration
}

/// Masses and what lies between them.
pub struct Mechanism {
    /// Slabs, top first.
    pub(super) masses: Vec<Mass>,
    /// `springs[i]` lies above `masses[i]`, the last one below the last mass; `None`: no spring (headspace, contact
    /// with floor or lid).
    pub(super) springs: Vec<Option<Range<usize>>>,
    /// Mean pressure of each layer.
    pressures: Vec<f64>,
}

/// A slab as a mass.
pub(super) struct Mass {
    pub layers: Range<usize>,
    pub seat: Seat,
    pub mass: f64,
}

impl Mechanism {
    pub(super) fn of(stack: &Stack) -> Result<Mechanism, ResponseError> {
        let pressures = static_pressures(stack).map_err(ResponseError::Crushed)?.mean;
        let mut mechanism = Mechanism { masses: Vec::new(), springs: vec![None], pressures };
        for part in partition(stack) {
            match part {
                Part::Slab { layers, seat } => {
                    let mass =
                        layers.clone().map(|i| stack.layers[i].density * stack.layers[i].thickness).sum();
                    mechanism.masses.push(Mass { layers, seat, mass });
                    mechanism.springs.push(None);
                }
                Part::Cushion { layers } => {
                    if let Some(last) = mechanism.springs.last_mut() {
                        *last = Some(layers);
                    }
                }
                Part::Headspace { .. } => {}
            }
        }
        Ok(mechanism)
    }

    /// The exponent of a gas layer at ω.
    pub(super) fn exponent(&self, stack: &Stack, layer: usize, omega: f64) -> Complex64 {
        self.exponent_growing(stack, layer, Complex64::new(0.0, omega))
    }

    /// The exponent of a gas layer in a motion ∝ e^{st}.
    pub(super) fn exponent_growing(&self, stack: &Stack, layer: usize, s: Complex64) -> Complex64 {
        let Some(gas) = stack.layers[layer].gas else { return Complex64::new(1.0, 0.0) };
        match gas.polytropic_exponent {
            Some(prescribed) => Complex64::new(prescribed, 0.0),
            None if stack.has(Effect::GasHeatLoss) => polytropic_exponent_growing(
                stack.cell.plan,
                stack.layers[layer].thickness,
                gas.adiabatic_index,
                gas.thermal_diffusivity,
                s,
            ),
            None => Complex64::new(gas.adiabatic_index, 0.0),
        }
    }

    /// Mean pressure of a layer, Pa absolute.
    pub(super) fn pressure(&self, layer: usize) -> f64 {
        self.pressures[layer]
    }

    /// Stiffness per area of each spring position at ω, 0 where there is none, and the compliance of each layer.
    fn stiffness(&self, stack: &Stack, omega: f64) -> (Vec<Complex64>, Vec<(usize, Complex64, Complex64)>) {
        let mut layers = Vec::new();
        let stiffness = self
            .springs
            .iter()
            .map(|spring| match spring {
                None => Complex64::new(0.0, 0.0),
                Some(range) => {
                    let compliance: Complex64 = range
                        .clone()
                        .map(|i| {
                            let exponent = self.exponent(stack, i, omega);
                            let own = stack.layers[i].thickness / (exponent * self.pressures[i]);
                            layers.push((i, exponent, own));
                            own
                        })
                        .sum();
                    compliance.inv()
                }
            })
            .collect();
        (stiffness, layers)
    }

    /// Real stiffnesses at ω, for the lossless problem.
    pub(super) fn lossless(&self, stack: &Stack, omega: f64) -> Vec<f64> {
        self.springs
            .iter()
            .map(|spring| match spring {
                None => 0.0,
                Some(range) => {
                    let compliance: f64 = range
                        .clone()
                        .map(|i| {
                            stack.layers[i].thickness
                                / (self.exponent(stack, i, omega).re * self.pressures[i])
                        })
                        .sum();
                    1.0 / compliance
                }
            })
            .collect()
    }

    fn drag(&self, stack: &Stack, mass: &Mass, omega: f64) -> Complex64 {
        self.drag_growing(stack, mass, Complex64::new(0.0, omega))
    }

    /// Wall drag e of a slab in a motion ∝ e^{st}.
    pub(super) fn drag_growing(&self, stack: &Stack, mass: &Mass, s: Complex64) -> Complex64 {
        if !stack.has(Effect::WallDrag) {
            return Complex64::new(0.0, 0.0);
        }
        mass.layers
            .clone()
            .map(|i| {
                let layer = &stack.layers[i];
                let share = layer.density * layer.thickness / mass.mass;
                wall_drag_growing(stack.cell.plan, layer.viscosity / layer.density, s) * share
            })
            .sum()
    }

    fn response(&self, stack: &Stack, drive: &Drive) -> Result<Chain, ResponseError> {
        let omega = drive.omega();
        let usable =
            omega > 0.0 && omega.is_finite() && drive.acceleration >= 0.0 && drive.acceleration.is_finite();
        if !usable {
            return Err(ResponseError::Unusable {
                frequency: drive.frequency,
                acceleration: drive.acceleration,
            });
        }
        let (stiffness, layers) = self.stiffness(stack, omega);
        let amplification = self.solve(stack, &stiffness, omega);
        let one = Complex64::new(1.0, 0.0);
        let travel = drive.acceleration / (omega * omega);
        let cushions = self
            .springs
            .iter()
            .enumerate()
            .flat_map(|(i, spring)| spring.clone().into_iter().flatten().map(move |layer| (i, layer)))
            .map(|(i, layer)| {
                let above = if i == 0 { one } else { amplification[i - 1] };
                let below = amplification.get(i).copied().unwrap_or(one);
                let (exponent, own) = layers
                    .iter()
                    .find(|(index, ..)| *index == layer)
                    .map_or((one, Complex64::new(0.0, 0.0)), |(_, exponent, own)| (*exponent, *own));
                let stroke = (above - below) * stiffness[i] * own * travel;
                CushionState {
                    layer,
                    pressure: self.pressures[layer],
                    polytropic: exponent,
                    stroke_ratio: stroke.norm() / stack.layers[layer].thickness,
                }
            })
            .collect();
        let slabs = self
            .masses
            .iter()
            .zip(&amplification)
            .map(|(mass, t)| SlabMotion {
                layers: mass.layers.clone(),
                seat: mass.seat,
                mass_per_area: mass.mass,
                amplification: *t,
                acceleration: t * drive.acceleration,
            })
            .collect();
        Ok(Chain { slabs, cushions, natural_frequencies: Vec::new() })
    }

    /// T of every slab: a tridiagonal solve (Thomas) over the floating ones.
    fn solve(&self, stack: &Stack, stiffness: &[Complex64], omega: f64) -> Vec<Complex64> {
        let one = Complex64::new(1.0, 0.0);
        let n = self.masses.len();
        let square = omega * omega;
        // Row i: −k_i X_{i−1} + d_i X_i − k_{i+1} X_{i+1} = r_i; walls and fixed slabs have X = 1.
        let mut factor: Vec<Complex64> = vec![Complex64::new(0.0, 0.0); n];
        let mut right: Vec<Complex64> = vec![one; n];
        for i in 0..n {
            let mass = &self.masses[i];
            if mass.seat != Seat::Floating {
                continue;
            }
            let drag = self.drag(stack, mass, omega);
            let (above, below) = (stiffness[i], stiffness[i + 1]);
            let mut diagonal = above + below - square * mass.mass * (1.0 + drag);
            let mut r = -square * mass.mass * drag;
            if i == 0 {
                r += above;
            } else {
                diagonal -= above * factor[i - 1];
                r += above * right[i - 1];
            }
            if i + 1 == n {
                r += below;
            } else {
                factor[i] = below / diagonal;
            }
            right[i] = r / diagonal;
        }
        for i in (0..n.saturating_sub(1)).rev() {
            right[i] = right[i] + factor[i] * right[i + 1];
        }
        right
    }
}
