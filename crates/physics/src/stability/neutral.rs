//! Every marginal acceleration of a slab at one wavenumber.
//!
//! On the marginal exponents s = iy the system M(iy + inω) ζ_n = −(a/2) G (ζ_{n−1} + ζ_{n+1}) is an eigenproblem
//! for 1/a. For y = 0 (harmonic) and y = ω/2 (subharmonic) all its real positive eigenvalues are neutral; they are
//! found by a dense eigensolver, which misses none, and polished on Hill's determinant. Combination resonances
//! have y between: there the number of growing exponents changes by two, which is looked for between the
//! accelerations found so far (`STEP`) and bisected. Two such changes closer together than `STEP` are not seen.

use super::count::{Count, Line};
use super::exponent::TRUNCATION;
use super::failure::Failure;
use super::hill::{Hill, Meter};
use super::layered::{Forcing, Layered, Response};
use super::stiffness::{Size, Stiffness};
use super::unforced;
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// Relative step of the search for combination resonances.
const STEP: f64 = 1.03;
/// What one wavenumber may cost: nearly inviscid fluids want ten times what a laboratory's do.
const MOST_BLOCKS: u64 = 200_000_000;
/// Relative accuracy of a marginal acceleration.
const ACCURACY: f64 = 1e-10;

/// Marginal accelerations by class, ascending, m/s².
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Neutral {
    /// Multiplier +1.
    pub harmonic: Vec<f64>,
    /// Multiplier −1.
    pub subharmonic: Vec<f64>,
    /// A complex pair on the unit circle.
    pub other: Vec<f64>,
}

/// Every marginal acceleration up to `up_to` (m/s²) at wavenumber `wavenumber` (1/m) and angular frequency `omega`.
///
/// # Errors
/// As [`super::growth`].
pub fn neutral(
    layered: &Layered,
    omega: f64,
    wavenumber: f64,
    up_to: f64,
    cancel: &dyn Fn() -> bool,
) -> Result<Neutral, Failure> {
    layered.check()?;
    Forcing { omega, acceleration: up_to }.check()?;
    super::with_size!(layered, size => all(layered, omega, wavenumber, up_to, size, cancel))
}

fn all<D: Size>(
    layered: &Layered,
    omega: f64,
    k: f64,
    up_to: f64,
    size: D,
    cancel: &dyn Fn() -> bool,
) -> Result<Neutral, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let hill =
        Hill::new(Stiffness::new(layered, k, size), omega, up_to, TRUNCATION, Meter::up_to(MOST_BLOCKS));
    let hints = unforced::hints(&hill.stiffness, layered.viscous_decay(k));
    let mut line = Line::new(&hill, 0.0, &hints);
    let mut neutral = Neutral {
        harmonic: hill.neutral_on(0.0, up_to),
        subharmonic: hill.neutral_on(0.5 * omega, up_to),
        other: Vec::new(),
    };
    let mut edges: Vec<f64> = neutral.harmonic.iter().chain(&neutral.subharmonic).copied().collect();
    edges.sort_by(f64::total_cmp);
    edges.push(up_to);
    // Between two real-class edges only pairs can cross the axis.
    let mut low = 0.0;
    for edge in edges {
        let (inside_low, inside_high) = (low + 1e-7 * edge, edge * (1.0 - 1e-7));
        low = edge;
        if inside_high <= inside_low {
            continue;
        }
        let first = inside_low.max(1e-3 * up_to.min(edge));
        let mut at = inside_low;
        let mut here = line.count(&hill, at, k)?;
        let mut next = first.max(inside_low * STEP);
        while at < inside_high {
            if cancel() {
                return Err(Failure::Cancelled);
            }
            let to = next.min(inside_high);
            let there = line.count(&hill, to, k)?;
            if there.right != here.right {
                let start = here.right;
                let ends = ((at, here), (to, there.clone()));
                neutral.other.push(border(&hill, &mut line, ends.0, ends.1, k, |n| n == start)?.acceleration);
            }
            at = to;
            here = there;
            next = at * STEP;
        }
    }
    Ok(neutral)
}

/// An acceleration at which the number of growing exponents changes.
#[derive(Debug, Clone, Copy)]
pub(super) struct Change {
    /// m/s²
    pub acceleration: f64,
    /// Class of the exponent that crosses.
    pub response: Response,
    /// Where on the axis, rad/s.
    pub frequency: f64,
}

/// Bisects the border between two accelerations of which the lower one satisfies `is_low` (judged by the number of
/// growing exponents) and the upper one does not.
pub(super) fn border<D: Size>(
    hill: &Hill<D>,
    line: &mut Line<D>,
    low: (f64, Count),
    high: (f64, Count),
    k: f64,
    is_low: impl Fn(usize) -> bool,
) -> Result<Change, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let ((mut below, mut under), (mut above, mut over)) = (low, high);
    while above - below > ACCURACY * above {
        let middle = 0.5 * (below + above);
        if middle <= below || middle >= above {
            break;
        }
        let count = line.count(hill, middle, k)?;
        if is_low(count.right) {
            (below, under) = (middle, count);
        } else {
            (above, over) = (middle, count);
        }
    }
    let crosses = |end: usize| under.ends[end] * over.ends[end] < 0.0;
    let (response, frequency) = if crosses(0) {
        (Response::Harmonic, 0.0)
    } else if crosses(1) {
        (Response::Subharmonic, 0.5 * hill.omega)
    } else {
        (Response::Other, over.near.first().map_or(0.0, |near| near.0))
    };
    Ok(Change { acceleration: 0.5 * (below + above), response, frequency })
}

impl<D: Size> Hill<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// The real positive eigenvalues a ≤ `up_to` of the neutral problem at s = iy, y = 0 or ω/2, ascending.
    fn neutral_on(&self, y: f64, up_to: f64) -> Vec<f64> {
        let s = Complex64::new(self.axis, y);
        let harmonics = self.harmonics(s);
        let found = real_positive_inverses(self.neutral_matrix(&harmonics), up_to);
        let value = |a: f64| self.determinant(&harmonics, a).re;
        found.into_iter().map(|a| polish(value, a)).filter(|a| *a <= up_to).collect()
    }
}

/// 1/b of the real positive eigenvalues b of a matrix with 1/b ≤ 2·`up_to`, ascending.
fn real_positive_inverses(matrix: nalgebra::DMatrix<Complex64>, up_to: f64) -> Vec<f64> {
    let schur = nalgebra::linalg::Schur::try_new(matrix, 1e-14, 10_000);
    let Some(eigenvalues) = schur.and_then(|schur| schur.eigenvalues()) else { return Vec::new() };
    let mut found: Vec<f64> = eigenvalues
        .iter()
        .filter(|b| b.re > 0.5 / up_to && b.im.abs() < 1e-6 * b.norm())
        .map(|b| 1.0 / b.re)
        .collect();
    found.sort_by(f64::total_cmp);
    found
}

/// A simple real root near `a` by the secant method, or `a` itself where that does not settle nearby.
fn polish(f: impl Fn(f64) -> f64, a: f64) -> f64 {
    let (mut x0, mut x1) = (a * (1.0 - 1e-7), a * (1.0 + 1e-7));
    let (mut f0, mut f1) = (f(x0), f(x1));
    for _ in 0..20 {
        let slope = f1 - f0;
        if slope == 0.0 || !slope.is_finite() {
            break;
        }
        let x = x1 - f1 * (x1 - x0) / slope;
        if x.is_nan() || (x - a).abs() > 1e-4 * a {
            return a;
        }
        (x0, f0) = (x1, f1);
        (x1, f1) = (x, f(x));
        if (x1 - x0).abs() <= 1e-14 * a {
            break;
        }
    }
    x1
}
