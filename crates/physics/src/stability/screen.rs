//! A cheap certificate that a mode stays stable up to some acceleration, without following exponents.
//!
//! On the axis s = iy the harmonics form a tridiagonal system with coupling (a/2) M_n⁻¹ G. If the products of
//! neighbouring couplings stay below a quarter, (a/2)² ‖M_n⁻¹G‖ ‖M_{n+1}⁻¹G‖ ≤ 1/4 for all n and y, the continued
//! fraction of the pivots converges to something invertible (Worpitzky's theorem; for matrices with norms), so no
//! exponent lies on the axis for any smaller acceleration, and the number of growing exponents is that without
//! drive. If moreover every interface is stable at rest, the mode is stable for every
//!
//! ```text
//! a ≤ 1 / √ max_y ‖M(iy)⁻¹G‖ ‖M(iy − iω)⁻¹G‖
//! ```
//!
//! The maximum over y is taken on a mesh that is geometric around each natural frequency (where the gain peaks) and
//! ω/24 wide elsewhere.

use super::count::fold;
use super::hill::Hill;
use super::stiffness::Size;
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// Pieces of a period of y; even.
const PIECES: usize = 24;
/// Periods of y that are looked at; beyond, M grows like y² and the gain only falls.
const PERIODS: f64 = 2.5;
/// … and at most so many for the fastest natural frequencies.
const MOST_PERIODS: f64 = 64.0;

/// The largest acceleration up to which the mode certainly has as many growing exponents as without drive.
pub(super) fn quiet_up_to<D: Size>(hill: &Hill<D>, hints: &[Complex64]) -> f64
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let omega = hill.omega;
    let fastest = hints.iter().map(|hint| hint.im).fold(0.0, f64::max);
    // y and ω − y give the same pair, and the gain is even in y: a mesh from −ω/2 up, whose step divides ω, holds
    // both members of every pair.
    let periods = (PERIODS.max(fastest / omega + 1.5)).min(MOST_PERIODS);
    let step = omega / PIECES as f64;
    let gains: Vec<f64> =
        (0..=(periods * PIECES as f64) as usize + PIECES / 2).map(|i| hill.gain(i as f64 * step)).collect();
    let half = PIECES / 2;
    let mut largest = (half..gains.len())
        .map(|i| gains[i] * gains[(i as i64 - PIECES as i64).unsigned_abs() as usize])
        .fold(0.0, f64::max);
    for hint in hints {
        for centre in [hint.im, hint.im + omega, omega - fold(hint.im, omega)] {
            let width = hint.re.abs().max(1e-9 * omega);
            let mut offset = 0.0;
            while offset < step {
                for y in [centre - offset, centre + offset] {
                    largest = largest.max(hill.gain(y) * hill.gain(y - omega));
                }
                offset = if offset == 0.0 { 0.5 * width } else { 2.0 * offset };
            }
        }
    }
    1.0 / largest.sqrt()
}
