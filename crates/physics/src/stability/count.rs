//! How many Floquet exponents lie right of a vertical line: the argument principle on Hill's determinant.
//!
//! F(s) is periodic in s with period iω, tends to 1 as Re s → ∞ and satisfies F(s̄) = conj F(s). Going around the
//! strip right of Re s = σ therefore leaves only the line itself, of which the upper half 0 ≤ y ≤ ω/2 is enough:
//!
//! ```text
//! zeros(σ) = poles(σ) − (1/π) [arg F(σ + iω/2) − arg F(σ)]
//! ```
//!
//! The poles right of the line (σ ≥ 0) are the growing exponents without drive, counted exactly by the inertia of
//! a real symmetric matrix (`Stiffness::growing_without_drive`).
//!
//! # Why nothing is missed on the line
//! F can turn quickly only where a pole or a zero lies close to the line. Poles are the damped natural modes: their
//! positions are computed and the line is sampled on a geometric mesh around each. A single zero turns the phase by
//! a half turn wherever it is seen from, so two samples on either side of it disagree. Two zeros between two
//! samples bend |F| between them like the square of their distance, which the mid-point test sees: a piece of the
//! line is accepted only when F at its middle agrees with the mean of its ends to a fraction of |F|. The total must
//! come out as a whole number and is refused otherwise.

use super::exponent::TRUNCATION;
use super::failure::Failure;
use super::hill::{Harmonics, Hill, Meter};
use super::layered::{Forcing, Layered};
use super::stiffness::{Size, Stiffness};
use super::unforced;
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// Pieces of the line before any refinement.
const COARSE: usize = 12;
/// A piece is accepted when the middle departs from the mean of the ends by less than this fraction of |F|.
const STRAIGHT: f64 = 0.3;
/// What one count may cost.
const MOST_BLOCKS: u64 = 20_000_000;
/// Deepest bisection of a piece.
const DEEPEST: u32 = 48;

/// The samples of the line, which serve every acceleration: M does not depend on it.
pub(super) struct Line<D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    sigma: f64,
    /// Sorted by y; M at each.
    samples: Vec<(f64, Harmonics<D>)>,
    poles_right: usize,
}

/// Outcome of a count.
#[derive(Debug, Clone)]
pub(super) struct Count {
    /// Exponents right of the line (both of a conjugate pair).
    pub right: usize,
    /// Local minima of |F| along the line, (y, |F|), smallest first: where exponents are near.
    pub near: Vec<(f64, f64)>,
}

impl<D: Size> Line<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// The line Re s = `sigma` ≥ 0, sampled on a coarse mesh and around each of the `hints` (exponents without
    /// drive, any strip).
    pub fn new(hill: &Hill<D>, sigma: f64, hints: &[Complex64]) -> Self {
        let (omega, sigma) = (hill.omega, sigma.max(hill.axis));
        let mut ys: Vec<f64> = (0..=COARSE).map(|i| 0.5 * omega * i as f64 / COARSE as f64).collect();
        for hint in hints {
            let folded = fold(hint.im, omega);
            let width = (hint.re - sigma).abs().max(1e-9 * omega);
            ys.push(folded);
            let mut step = 0.5 * width;
            while step < 0.5 * omega / COARSE as f64 {
                ys.extend(
                    [folded - step, folded + step].into_iter().filter(|y| *y > 0.0 && *y < 0.5 * omega),
                );
                step *= 2.0;
            }
        }
        ys.sort_by(f64::total_cmp);
        ys.dedup_by(|b, a| *b - *a < 1e-13 * omega);
        if let Some(last) = ys.last_mut() {
            *last = 0.5 * omega;
        }
        let samples = ys.into_iter().map(|y| (y, hill.harmonics(Complex64::new(sigma, y)))).collect();
        Line { sigma, samples, poles_right: hill.stiffness.growing_without_drive(sigma) }
    }

    /// The number of exponents right of the line at the acceleration `a`. Samples that the refinement needs stay
    /// for later accelerations.
    pub fn count(&mut self, hill: &Hill<D>, a: f64, wavenumber: f64) -> Result<Count, Failure> {
        hill.meter.check()?;
        let mut values: Vec<Complex64> = self.samples.iter().map(|(_, h)| hill.determinant(h, a)).collect();
        let mut i = 0;
        let smallest_gap = 0.5 * hill.omega / (1u64 << DEEPEST) as f64;
        while i + 1 < values.len() {
            let (y0, y1) = (self.samples[i].0, self.samples[i + 1].0);
            let middle = 0.5 * (y0 + y1);
            // A neighbour that already is the middle of a straight piece needs no further sample.
            if self.is_settled(&values, i) || y1 - y0 < smallest_gap {
                i += 1;
                continue;
            }
            hill.meter.check()?;
            let harmonics = hill.harmonics(Complex64::new(self.sigma, middle));
            let value = hill.determinant(&harmonics, a);
            let straight = bends_little(values[i], value, values[i + 1]);
            self.samples.insert(i + 1, (middle, harmonics));
            values.insert(i + 1, value);
            if straight {
                i += 2;
            }
        }
        let turn: f64 =
            values.windows(2).map(|pair| (pair[1] / pair[0]).arg()).sum::<f64>() / std::f64::consts::PI;
        let right = self.poles_right as f64 - turn;
        // The truncated determinant is real at the ends only to the truncation's accuracy.
        if !right.is_finite() || (right - right.round()).abs() > 0.1 || right.round() < 0.0 {
            return Err(Failure::CountUnsure {
                wavenumber,
                acceleration: a,
                turns: right,
                evaluations: values.len(),
            });
        }
        Ok(Count { right: right.round() as usize, near: self.minima(&values) })
    }

    /// Whether the piece from i to i + 1 is so flat already that no sample inside can matter: judged with the
    /// neighbours on either side, when the mesh there is no coarser than the piece.
    fn is_settled(&self, values: &[Complex64], i: usize) -> bool {
        let y = |j: usize| self.samples[j].0;
        let width = y(i + 1) - y(i);
        let left = i > 0 && y(i) - y(i - 1) >= 0.45 * width && y(i) - y(i - 1) <= 2.1 * width;
        let right =
            i + 2 < values.len() && y(i + 2) - y(i + 1) >= 0.45 * width && y(i + 2) - y(i + 1) <= 2.1 * width;
        let close = |a: Complex64, b: Complex64| (b - a).norm() < STRAIGHT * a.norm().min(b.norm());
        close(values[i], values[i + 1])
            && (!left || close(values[i - 1], values[i]))
            && (!right || close(values[i + 1], values[i + 2]))
            && (left || right)
    }

    /// Local minima of |F|, (y, |F|), smallest first.
    fn minima(&self, values: &[Complex64]) -> Vec<(f64, f64)> {
        let n = values.len();
        let size = |i: usize| values[i].norm();
        let mut minima: Vec<(f64, f64)> = (0..n)
            .filter(|&i| (i == 0 || size(i) <= size(i - 1)) && (i + 1 == n || size(i) < size(i + 1)))
            .map(|i| (self.samples[i].0, size(i)))
            .collect();
        minima.sort_by(|a, b| a.1.total_cmp(&b.1));
        minima
    }
}

/// The number of growing Floquet exponents of the slab at one wavenumber (1/m), by counting along the axis: what
/// the loci (`locus`) are held to.
///
/// # Errors
/// [`Failure`], as [`super::growth`].
pub fn growing_exponents(layered: &Layered, forcing: &Forcing, wavenumber: f64) -> Result<usize, Failure> {
    layered.check()?;
    forcing.check()?;
    super::with_size!(layered, size => {
        let stiffness = Stiffness::new(layered, wavenumber, size);
        let meter = Meter::up_to(MOST_BLOCKS);
        let hill = Hill::new(stiffness, forcing.omega, forcing.acceleration, TRUNCATION, meter);
        let hints = unforced::hints(&hill.stiffness, layered.viscous_decay(wavenumber));
        Ok(Line::new(&hill, 0.0, &hints).count(&hill, forcing.acceleration, wavenumber)?.right)
    })
}

/// Whether three samples of F lie nearly on a line that stays away from zero.
fn bends_little(start: Complex64, middle: Complex64, end: Complex64) -> bool {
    let smallest = start.norm().min(middle.norm()).min(end.norm());
    (middle - (start + end) / 2.0).norm() <= STRAIGHT * smallest && (end - start).norm() <= 1.5 * smallest
}

/// An angular frequency folded into 0 … ω/2.
pub(super) fn fold(y: f64, omega: f64) -> f64 {
    let r = y.rem_euclid(omega);
    r.min(omega - r)
}
