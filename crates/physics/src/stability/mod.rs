//! Stability of a slab under vertical vibration: full linearised Navier–Stokes, every Floquet exponent.

pub mod layered;
