//! The exponents of a slab's interface modes without drive, by Newton's method on det M(Λ) from the inviscid
//! frequencies.
//!
//! They are hints for meshes and starting points; no verdict rests on them.

use super::hill::muller;
use super::stiffness::{Size, Stiffness};
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// Hints, at most one for each interface: roots of det M(Λ) with Im Λ ≥ 0.
pub(super) fn hints<D: Size>(stiffness: &Stiffness<D>, decay: f64) -> Vec<Complex64>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let mut roots: Vec<Complex64> = Vec::new();
    for square in stiffness.inviscid_squares() {
        // Oscillation with damping `decay` = 2νk²; overdamped: the slow creep −ω0²/(2·decay).
        let start = if square > decay * decay {
            Complex64::new(-decay, (square - decay * decay).sqrt())
        } else if square > 0.0 {
            Complex64::new(-square / (2.0 * decay), 0.0)
        } else {
            Complex64::new(-square / ((decay * decay - square).sqrt() + decay), 0.0)
        };
        if let Some(root) = muller(start, |z| stiffness.at(z).determinant(), 25, 1e-8) {
            let root = Complex64::new(root.re, root.im.abs());
            if !roots.iter().any(|known| (known - root).norm() < 1e-6 * root.norm()) {
                roots.push(root);
            }
        } else {
            roots.push(start);
        }
    }
    roots
}
