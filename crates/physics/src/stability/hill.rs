//! Hill's determinant of a slab at one wavenumber.
//!
//! The harmonics of a Floquet mode form an infinite block-tridiagonal system with M(s + inω) on the diagonal and
//! (a/2) G beside it. Elimination from both ends towards n = 0 leaves the pivots
//!
//! ```text
//! S_n = M_n − (a²/4) G S_{n±1}⁻¹ G   (|n| falling),   S_0 = M_0 − (a²/4) G (S_1⁻¹ + S_{−1}⁻¹) G
//! F(s) = Π det S_n / det M_n
//! ```
//!
//! F is periodic in s with period iω, real where s and −s̄ are equivalent (Im s = 0 and Im s = ω/2), tends to 1 as
//! Re s → ∞, vanishes exactly at the Floquet exponents and has its poles at the exponents without drive. The
//! elimination is backward stable: |M_n| grows like n², so the tail hardly matters and no row is ever scaled by its
//! own entries (which would hide the root at a = 0).

use super::failure::Failure;
use super::stiffness::{Size, Square, Stiffness};
use nalgebra::allocator::Allocator;
use nalgebra::{DefaultAllocator, OVector};
use num_complex::Complex64;
use std::cell::Cell;
use std::rc::Rc;

/// Harmonics beyond which the truncation cannot matter at the accuracy claimed.
const MOST_HARMONICS: usize = 60;

/// Influence of the neglected harmonics on the loci before they are polished.
const ROUGH: f64 = 1e-4;

/// Counts the work that one question costs, in blocks M(Λ), and bounds it.
#[derive(Debug, Clone)]
pub(super) struct Meter {
    spent: Rc<Cell<u64>>,
    most: u64,
}

impl Meter {
    /// A question that may cost so many blocks (a million takes about half a second).
    pub fn up_to(most: u64) -> Meter {
        Meter { spent: Rc::default(), most }
    }

    pub fn charge(&self, blocks: usize) {
        self.spent.set(self.spent.get() + blocks as u64);
    }

    /// Blocks evaluated so far.
    pub fn spent(&self) -> u64 {
        self.spent.get()
    }

    /// # Errors
    /// [`Failure::TooMuchWork`] once the question has cost too much.
    pub fn check(&self) -> Result<(), Failure> {
        let blocks = self.spent.get();
        if blocks > self.most { Err(Failure::TooMuchWork { blocks }) } else { Ok(()) }
    }
}

/// M at every harmonic of one point of the strip, without the drive's amplitude.
pub(super) struct Harmonics<D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// M(s + inω) for n = `first` … ascending.
    blocks: Vec<Square<D>>,
    /// log-free product of the determinants is never formed; each det M_n beside its block.
    determinants: Vec<Complex64>,
    /// Index of n = 0 in `blocks`.
    centre: usize,
}

/// Reference sizes of the blocks' determinants.
pub(super) struct Reference {
    upper_half: bool,
    sizes: Vec<f64>,
}

/// Hill's determinant of one stack at one wavenumber and one frequency.
pub(super) struct Hill<D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    pub stiffness: Stiffness<D>,
    pub omega: f64,
    /// Harmonics kept on either side.
    pub reach: usize,
    /// Harmonics that suffice to tell the loci of critical drives apart (`locus`).
    pub rough: usize,
    /// Where the axis is taken, 1/s: 0, or a hair to the right of it where an interface has no static stiffness at
    /// all (equal fluids), whose neutral exponent at s = 0 would make F indefinite there.
    pub axis: f64,
    /// Shared by everything that belongs to one question.
    pub meter: Meter,
}

impl<D: Size> Hill<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// `up_to` is the largest acceleration that will be asked for; it sets how many harmonics are kept: the
    /// neglected ones change a pivot by less than `accuracy` relative.
    pub fn new(stiffness: Stiffness<D>, omega: f64, up_to: f64, accuracy: f64, meter: Meter) -> Self {
        let stiffest = stiffness.statics.amax();
        let idle = stiffness.statics.iter().any(|k| k.abs() <= 1e-13 * stiffest);
        let mut hill = Hill {
            stiffness,
            omega,
            reach: MOST_HARMONICS,
            rough: MOST_HARMONICS,
            axis: if idle { 1e-9 * omega } else { 0.0 },
            meter,
        };
        // Every harmonic up to the fastest natural frequency may resonate, however little those before it answer.
        let fastest = hill.stiffness.inviscid_squares().last().map_or(0.0, |square| square.max(0.0).sqrt());
        let least = (fastest / omega).ceil() as usize + 1;
        let mut influence = 1.0;
        for n in 1..=MOST_HARMONICS {
            let block = hill.stiffness.at(Complex64::new(0.0, (n as f64 - 0.5) * omega));
            let weight = hill.stiffness.weight.amax();
            let strength = smallest_pivot(&block);
            let coupling = up_to / 2.0 * weight / strength.max(f64::MIN_POSITIVE);
            if n + 1 >= least {
                influence *= (coupling * coupling).min(1.0);
            }
            if influence < ROUGH && n >= least && hill.rough == MOST_HARMONICS {
                hill.rough = n;
            }
            if influence < accuracy && n >= least {
                hill.reach = n;
                break;
            }
        }
        hill
    }

    /// M at the harmonics of s. Points in the upper half of the strip take one harmonic more on the lower side, so
    /// that the truncated determinant is exactly real on Im s = ω/2 too.
    pub fn harmonics(&self, s: Complex64) -> Harmonics<D> {
        self.harmonics_for(s, s.im > 0.25 * self.omega)
    }

    fn harmonics_for(&self, s: Complex64, upper_half: bool) -> Harmonics<D> {
        let reach = self.reach as i64;
        let first = if upper_half { -reach - 1 } else { -reach };
        self.meter.charge((reach - first + 1) as usize);
        let blocks: Vec<_> = (first..=reach)
            .map(|n| self.stiffness.at(s + Complex64::new(0.0, n as f64 * self.omega)))
            .collect();
        let determinants = blocks.iter().map(determinant).collect();
        Harmonics { blocks, determinants, centre: (-first) as usize }
    }

    /// F at prepared harmonics for the acceleration a.
    pub fn determinant(&self, harmonics: &Harmonics<D>, a: f64) -> Complex64 {
        self.determinant_at(harmonics, Complex64::new(a * a, 0.0))
    }

    /// The same as a function of x = a², which may be complex.
    pub fn determinant_at(&self, harmonics: &Harmonics<D>, x: Complex64) -> Complex64 {
        let mut value = Complex64::new(1.0, 0.0);
        self.eliminate(harmonics, x, |n, pivot| value *= determinant(pivot) / harmonics.determinants[n]);
        value
    }

    /// Π det S_n(s) over fixed reference sizes: vanishes where F does, but has no poles at the exponents without
    /// drive. For hunting zeros; `upper_half` says which set of harmonics to use throughout the hunt.
    pub fn characteristic(&self, s: Complex64, a: f64, reference: &Reference) -> Complex64 {
        let harmonics = self.harmonics_for(s, reference.upper_half);
        let mut value = Complex64::new(1.0, 0.0);
        self.eliminate(&harmonics, Complex64::new(a * a, 0.0), |n, pivot| {
            value *= determinant(pivot) / reference.sizes[n]
        });
        value
    }

    /// Sizes to divide by, from a point of the axis away from any particular resonance.
    pub fn reference(&self, upper_half: bool) -> Reference {
        let harmonics = self.harmonics_for(Complex64::new(0.05, 0.19) * self.omega, upper_half);
        Reference { upper_half, sizes: harmonics.determinants.iter().map(|d| d.norm()).collect() }
    }

    /// The interface deflections of every harmonic of the mode at an exponent s, ascending in n, with the largest
    /// of them scaled to 1.
    pub fn mode(&self, s: Complex64, a: f64) -> Vec<OVector<Complex64, D>> {
        let harmonics = self.harmonics(s);
        let mut pivots = vec![None; harmonics.blocks.len()];
        self.eliminate(&harmonics, Complex64::new(a * a, 0.0), |n, pivot| pivots[n] = Some(pivot.clone()));
        let centre = harmonics.centre;
        let mut mode =
            vec![OVector::zeros_generic(self.stiffness.size(), nalgebra::Const::<1>); pivots.len()];
        if let Some(pivot) = &pivots[centre] {
            mode[centre] = null_vector(pivot);
        }
        let half = Complex64::new(-a / 2.0, 0.0);
        let outwards = |mode: &mut Vec<OVector<Complex64, D>>, from: usize, to: usize| {
            if let Some(inverse) = pivots[to].clone().and_then(Square::<D>::try_inverse) {
                let driven = mode[from].zip_map(&self.stiffness.weight, |z, g| z * g * half);
                mode[to] = inverse * driven;
            }
        };
        for n in centre + 1..pivots.len() {
            outwards(&mut mode, n - 1, n);
        }
        for n in (0..centre).rev() {
            outwards(&mut mode, n + 1, n);
        }
        let largest = mode.iter().flat_map(|z| z.iter()).map(|z| z.norm()).fold(f64::MIN_POSITIVE, f64::max);
        for z in &mut mode {
            *z /= Complex64::new(largest, 0.0);
        }
        mode
    }

    /// Runs the elimination and hands out each pivot with its index, the centre last.
    fn eliminate(&self, harmonics: &Harmonics<D>, x: Complex64, mut pivot: impl FnMut(usize, &Square<D>)) {
        let quarter = x / 4.0;
        let weight = &self.stiffness.weight;
        let term = |s: &Square<D>| -> Square<D> {
            let mut inverse =
                s.clone().try_inverse().unwrap_or_else(|| s.map(|_| Complex64::new(f64::MAX.sqrt(), 0.0)));
            for c in 0..inverse.ncols() {
                for r in 0..inverse.nrows() {
                    inverse[(r, c)] *= quarter * (weight[r] * weight[c]);
                }
            }
            inverse
        };
        self.meter.charge(harmonics.blocks.len());
        let centre = harmonics.centre;
        let last = harmonics.blocks.len() - 1;
        let mut side = |indices: &mut dyn Iterator<Item = usize>| -> Option<Square<D>> {
            let mut outer: Option<Square<D>> = None;
            for n in indices {
                let s = match &outer {
                    Some(outer) => &harmonics.blocks[n] - outer,
                    None => harmonics.blocks[n].clone(),
                };
                pivot(n, &s);
                outer = Some(term(&s));
            }
            outer
        };
        let above = side(&mut (centre + 1..=last).rev());
        let below = side(&mut (0..centre));
        let mut s = harmonics.blocks[centre].clone();
        for outer in [above, below].into_iter().flatten() {
            s -= outer;
        }
        pivot(centre, &s);
    }
}

/// det of a small matrix.
fn determinant<D: Size>(m: &Square<D>) -> Complex64
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    m.determinant()
}

/// A lower estimate of how stiff a block is: its smallest diagonal entry in magnitude.
fn smallest_pivot<D: Size>(m: &Square<D>) -> f64
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    match m.clone().try_inverse() {
        Some(inverse) => 1.0 / inverse.norm(),
        None => 0.0,
    }
}

/// The vector that a nearly singular matrix sends (nearly) to zero, by inverse iteration.
fn null_vector<D: Size>(m: &Square<D>) -> OVector<Complex64, D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let (d, _) = m.shape_generic();
    let scale = m.norm().max(f64::MIN_POSITIVE);
    let mut shifted = m.clone();
    for i in 0..shifted.nrows() {
        shifted[(i, i)] += Complex64::new(scale * 1e-14, scale * 1e-14);
    }
    let mut vector = OVector::<Complex64, D>::from_fn_generic(d, nalgebra::Const::<1>, |i, _| {
        Complex64::new(1.0, 0.1 * i as f64)
    });
    if let Some(inverse) = shifted.try_inverse() {
        for _ in 0..3 {
            vector = &inverse * vector;
            let norm = vector.norm();
            if norm > 0.0 {
                vector /= Complex64::new(norm, 0.0);
            }
        }
    }
    vector
}

/// A root of an analytic function near `start` by Muller's method (three points, quadratic convergence, no
/// derivative); `None` when it does not settle within `most` steps to the relative accuracy.
pub(super) fn muller(
    start: Complex64,
    mut f: impl FnMut(Complex64) -> Complex64,
    most: usize,
    accuracy: f64,
) -> Option<Complex64> {
    let scale = start.norm().max(1e-3);
    let step = Complex64::new(1e-3 * scale, 0.0);
    let (mut x0, mut x1, mut x2) = (start - step, start, start + step);
    let (mut f0, mut f1, mut f2) = (f(x0), f(x1), f(x2));
    for _ in 0..most {
        let (h1, h2) = (x1 - x0, x2 - x1);
        let (d1, d2) = ((f1 - f0) / h1, (f2 - f1) / h2);
        let a = (d2 - d1) / (h2 + h1);
        let b = a * h2 + d2;
        let root = (b * b - 4.0 * a * f2).sqrt();
        let denominator = if (b + root).norm() > (b - root).norm() { b + root } else { b - root };
        if denominator.norm() == 0.0 || !denominator.is_finite() {
            return None;
        }
        let dx = -2.0 * f2 / denominator;
        if !dx.is_finite() {
            return None;
        }
        let x = x2 + dx;
        if dx.norm() <= accuracy * x.norm().max(1e-6 * scale) {
            return Some(x);
        }
        (x0, x1, x2) = (x1, x2, x);
        (f0, f1, f2) = (f1, f2, f(x));
        if f2.norm() == 0.0 {
            return Some(x2);
        }
    }
    None
}
