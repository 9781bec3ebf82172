//! Stability of a slab under vertical vibration: full linearised Navier–Stokes, every Floquet exponent.

mod count;
mod curves;
mod eigenvalues;
mod exponent;
mod face_forces;
mod failure;
mod from_stack;
mod hill;
pub mod layered;
mod locus;
mod modes;
mod neutral;
mod pinned;
mod side_walls;
mod slab;
mod spectrum;
mod stiffness;
mod unforced;
pub mod wedge;
mod windows;

pub use count::growing_exponents;
pub use exponent::{Growth, growth};
pub use failure::Failure;
pub use from_stack::layered;
pub use modes::{CellMode, cell_modes};
pub use neutral::{Neutral, UnstableInterval, neutral, unstable_intervals};
pub use pinned::{ContactLine, PinnedMode, PinnedModes, is_held_at, pinned_modes};
pub use side_walls::{SideWalls, WallAction, Walls};
pub use slab::{Mechanism, Mode, SetBy, SlabStability, Worst, slab, slab_by_every_mode, slab_with_line};

/// Runs an expression with the number of interfaces as a constant where it is small, so that the inner loops work
/// on matrices of fixed size.
macro_rules! with_size {
    ($layered:expr, $size:ident => $body:expr) => {
        match $layered.interfaces() {
            1 => {
                let $size = nalgebra::Const::<1>;
                $body
            }
            2 => {
                let $size = nalgebra::Const::<2>;
                $body
            }
            3 => {
                let $size = nalgebra::Const::<3>;
                $body
            }
            n => {
                let $size = nalgebra::Dyn(n);
                $body
            }
        }
    };
}
use with_size;
#[cfg(test)]
mod tests;
