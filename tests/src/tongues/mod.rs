//! The truth about narrow tongues, by a method that shares nothing with the stability solver.
//!
//! Without viscosity the interfaces of a vibrated stack are coupled Mathieu equations with a known mass matrix
//! ([`potential`]). They are integrated over half a period ([`period`]), from which every multiplier comes with its
//! Krein signature ([`multipliers`]). A tongue, however narrow, begins and ends where the *sequence of signatures*
//! changes, so bisection on that sequence cannot step over it ([`intervals`]). Viscosity so low that it only trims
//! the tongues is a perturbation of the first order, by the closed forms of the loss in potential flow ([`losses`]).
//! [`questions`] draws stacks that have a tongue of the width asked for, [`judge`] compares an answer with the truth.

pub mod intervals;
pub mod judge;
pub mod losses;
pub mod multipliers;
pub mod period;
pub mod potential;
pub mod questions;
mod seeds;
