//! The vertical response of a stack: slabs are masses, cushions are springs, the side walls drag.
//!
//! What is left out, with its size: the inertia of the gas itself, ρ_gas h_gas/(3 ρ_liquid h_liquid) of a slab's
//! mass (below 1e-3 for centimetres of each), and sound in the gas, (ω h/c)²/3 of a cushion's stiffness (below 1e-4
//! for 50 mm at 60 Hz).

mod bounce;
mod chain;
mod duct;
mod gas_spring;
mod harmonics;
mod natural;
mod network;
mod partition;
mod pressures;
#[cfg(test)]
mod testing;
#[cfg(test)]
mod tests;
mod wall_drag;

pub use bounce::{Bounce, BounceFailure, BounceOptions, BounceResponse, Estimate, Threshold, bounce};
pub use chain::{Chain, CushionState, ResponseError, SlabMotion, chain, force_on_table, sweep};
pub use duct::duct_mean;
pub use gas_spring::polytropic_exponent;
pub use harmonics::{
    CushionHarmonics, HarmonicEvidence, HarmonicFailure, HarmonicMotion, HarmonicOptions, PeriodicDrive,
    SlabHarmonics, harmonics,
};
pub use natural::natural_frequencies;
pub use partition::{Part, Seat, partition};
pub use pressures::{Conflict, Crushed, Statics, static_pressures};
pub use wall_drag::wall_drag;
