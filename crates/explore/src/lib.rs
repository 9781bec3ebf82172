//! Many evaluations of one setup: threshold curves of a slab, frequency sweeps of the chain.

pub mod chain;
pub mod curve;
