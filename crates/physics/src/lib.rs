//! The physics of vibrated stacks. No input or output, no spans, no files: numbers in SI in, results with their
//! evidence out, failures as typed outcomes with their numbers.
//!
//! Conventions everywhere: SI units, peak amplitudes, e^{+iωt}, effective gravity g(t) = g + A cos ωt, layers of
//! a stack listed **top first** as the setup file has them.

mod complex;
pub mod materials;
pub mod response;
pub mod stability;
pub mod stack;
