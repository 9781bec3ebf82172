//! Every Floquet multiplier from half a period, with its Krein signature.
//!
//! With C, S, C′, S′ at half the period the monodromy matrix of the even equation is [X, Y; Z, Xᵀ],
//!
//! ```text
//! X = 1 + 2 SᵀC′ = 2 S′ᵀC − 1,   Y = S′ᵀS + SᵀS′,   (μ + 1/μ)/2 = x,   X u = x u
//! ```
//!
//! A mode is stable where −1 < x < 1, harmonic where x > 1, subharmonic where x < −1, a combination where two x are
//! complex. det(X + 1) = 2ᴺ det S′ det C vanishes to the first order at each end of a subharmonic tongue, where x + 1 is
//! of the second: signs are taken from the determinants, and a tongue of relative width 10⁻⁸, of which double
//! precision sees nothing in x, is resolved.
//!
//! For −1 < x < 1 the multiplier e^{iθ} with 0 < θ < π has the signature sign(wᵀY w), wᵀX = x wᵀ. Only multipliers of
//! different signature leave the circle where they meet (Krein 1950; Yakubovich & Starzhinskii, Linear Differential
//! Equations with Periodic Coefficients, 1975, ch. III).

use super::period::Moment;
use super::potential::Square;
use nalgebra::{Matrix3, SVector, Vector3};

/// What one multiplier and its inverse do. Ordered as x along the real line when compared in a sequence.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Kind {
    /// x < −1
    Subharmonic,
    /// On the circle; the signature of the multiplier in the upper half is positive.
    Positive,
    /// On the circle, negative.
    Negative,
    /// x > 1
    Harmonic,
    /// Two of them.
    Combination,
}

impl Kind {
    /// Whether it grows.
    pub fn grows(self) -> bool {
        matches!(self, Kind::Subharmonic | Kind::Harmonic | Kind::Combination)
    }
}

/// One root x, or a complex pair of them.
#[derive(Debug, Clone, Copy)]
pub struct Root<const N: usize> {
    /// Class and signature.
    pub kind: Kind,
    /// Growth over a period, ≥ 0.
    pub growth: f64,
    /// Real part of x.
    pub x: f64,
    /// θ, or π − θ where x < 0, to all digits; 0 of what grows.
    pub to_end: f64,
    /// Left eigenvector w of a real x.
    pub left: SVector<f64, N>,
}

impl<const N: usize> Root<N> {
    /// θ of a stable one, 0 to π.
    pub fn angle(&self) -> f64 {
        if self.x < 0.0 { std::f64::consts::PI - self.to_end } else { self.to_end }
    }
}

/// All of them, ascending in x.
#[derive(Debug, Clone)]
pub struct Multipliers<const N: usize> {
    /// Ascending in x; a pair is one.
    pub roots: Vec<Root<N>>,
    /// Y
    pub coupling: Square<N>,
}

impl<const N: usize> Multipliers<N> {
    /// From the solutions at half the period.
    pub fn new(at: &Moment<N>) -> Self {
        let one = Square::<N>::identity();
        // Two expressions of the same matrix, each exact in digits near its own end.
        let below = at.odd_slope.transpose() * at.even * 2.0; // X + 1
        let above = at.odd.transpose() * at.even_slope * 2.0; // X − 1
        let x = (below + above) / 2.0;
        debug_assert!((below - above - one * 2.0).norm() < 1e-6 * (1.0 + x.norm()));
        let coupling = at.odd_slope.transpose() * at.odd + at.odd.transpose() * at.odd_slope;
        let scale = f64::from(1u32 << N);
        let ends = [
            scale * determinant(&at.odd_slope) * determinant(&at.even),
            scale * determinant(&at.odd) * determinant(&at.even_slope),
        ];
        Multipliers { roots: roots(&x, &coupling, ends), coupling }
    }

    /// The sequence of classes and signatures along x.
    pub fn word(&self) -> Vec<Kind> {
        self.roots.iter().map(|root| root.kind).collect()
    }

    /// Largest growth over a period, ≥ 0.
    pub fn growth(&self) -> f64 {
        self.roots.iter().map(|root| root.growth).fold(0.0, f64::max)
    }
}

fn determinant<const N: usize>(m: &Square<N>) -> f64 {
    match N {
        1 => m[(0, 0)],
        2 => m[(0, 0)] * m[(1, 1)] - m[(0, 1)] * m[(1, 0)],
        _ => Matrix3::from_fn(|r, c| m[(r, c)]).determinant(),
    }
}

/// Nearer to an end than this, x takes its distance from the determinant.
const CLOSE: f64 = 1e-3;

/// A real x with its left eigenvector, or a pair: real part, imaginary part.
enum Eigen<const N: usize> {
    Real(f64, SVector<f64, N>),
    Pair(f64, f64),
}

/// `ends`: det(X + 1) and det(X − 1), exact in sign.
fn roots<const N: usize>(x: &Square<N>, coupling: &Square<N>, ends: [f64; 2]) -> Vec<Root<N>> {
    let eigen = eigen(x);
    // x + 1 and x − 1 of every real one; the one nearest to an end from the determinant.
    let distance = |end: f64| -> Vec<f64> {
        let mut of: Vec<f64> = eigen
            .iter()
            .map(|eigen| match eigen {
                Eigen::Real(x, _) => x - end,
                Eigen::Pair(..) => f64::NAN,
            })
            .collect();
        let close = (0..of.len()).filter(|i| of[*i].abs() < CLOSE);
        if let Some(nearest) = close.min_by(|i, j| of[*i].abs().total_cmp(&of[*j].abs())) {
            let mut others = 1.0;
            for (i, eigen) in eigen.iter().enumerate() {
                match eigen {
                    Eigen::Real(x, _) if i != nearest => others *= x - end,
                    Eigen::Real(..) => {}
                    Eigen::Pair(re, im) => others *= (re - end).powi(2) + im * im,
                }
            }
            of[nearest] = ends[usize::from(end > 0.0)] / others;
        }
        of
    };
    let (from_below, from_above) = (distance(-1.0), distance(1.0));
    let mut roots: Vec<Root<N>> = eigen
        .iter()
        .enumerate()
        .map(|(i, eigen)| match *eigen {
            Eigen::Real(x, left) => {
                let (kind, beyond) = if from_below[i] < 0.0 && x < 0.0 {
                    (Kind::Subharmonic, -from_below[i])
                } else if from_above[i] > 0.0 && x > 0.0 {
                    (Kind::Harmonic, from_above[i])
                } else if (left.transpose() * coupling * left)[0] >= 0.0 {
                    (Kind::Positive, 0.0)
                } else {
                    (Kind::Negative, 0.0)
                };
                // arcosh(1 + b) = ln(1 + b + √(b(2 + b)))
                let growth = (beyond + (beyond * (2.0 + beyond)).sqrt()).ln_1p();
                let inside = if x < 0.0 { from_below[i] } else { -from_above[i] };
                let to_end = 2.0 * (0.5 * inside.clamp(0.0, 1.0)).sqrt().asin();
                Root { kind, growth, x, to_end, left }
            }
            Eigen::Pair(re, im) => {
                let s = num_complex::Complex64::new(re, im).acos();
                Root {
                    kind: Kind::Combination,
                    growth: s.im.abs(),
                    x: re,
                    to_end: 0.0,
                    left: SVector::zeros(),
                }
            }
        })
        .collect();
    roots.sort_by(|a, b| a.x.total_cmp(&b.x));
    roots
}

/// Eigenvalues of a matrix of size 1 to 3 to the rounding of its entries, the difference of a close pair too.
fn eigen<const N: usize>(x: &Square<N>) -> Vec<Eigen<N>> {
    let entry = |r: usize, c: usize| x[(r, c)];
    match N {
        1 => vec![Eigen::Real(entry(0, 0), SVector::from_element(1.0))],
        2 => {
            let basis = |left: [f64; 2]| SVector::from_fn(|i, _| left[i]);
            two([[entry(0, 0), entry(0, 1)], [entry(1, 0), entry(1, 1)]], basis)
        }
        _ => {
            let full = Matrix3::from_fn(entry);
            let (alone, right) = most_isolated(&full);
            // The plane normal to its right eigenvector holds the left eigenvectors of the two others.
            let e = if right.x.abs() < 0.6 { Vector3::x() } else { Vector3::y() };
            let p = right.cross(&e).normalize();
            let q = right.cross(&p);
            let form = |a: &Vector3<f64>, b: &Vector3<f64>| a.dot(&(full * b));
            let basis = |left: [f64; 2]| {
                let w = p * left[0] + q * left[1];
                SVector::from_fn(|i, _| w[i])
            };
            let mut all = two([[form(&p, &p), form(&p, &q)], [form(&q, &p), form(&q, &q)]], basis);
            let left = null(&(full.transpose() - Matrix3::identity() * alone));
            all.push(Eigen::Real(alone, SVector::from_fn(|i, _| left[i])));
            all
        }
    }
}

/// Of [a, b; c, d]: from (a − d)² + 4bc, which keeps its digits where the two are close.
fn two<const N: usize>(m: [[f64; 2]; 2], basis: impl Fn([f64; 2]) -> SVector<f64, N>) -> Vec<Eigen<N>> {
    let [[a, b], [c, d]] = m;
    let (half, mean) = (0.5 * (a - d), 0.5 * (a + d));
    let square = half * half + b * c;
    if square < 0.0 {
        return vec![Eigen::Pair(mean, (-square).sqrt())];
    }
    let root = square.sqrt();
    [root, -root]
        .into_iter()
        .map(|root| {
            // (w1, w2)·[half − root, b; c, −half − root] = 0
            let (first, second) = ([c, root - half], [half + root, b]);
            let size = |v: [f64; 2]| v[0].abs() + v[1].abs();
            Eigen::Real(mean + root, basis(if size(first) > size(second) { first } else { second }))
        })
        .collect()
}

/// The real eigenvalue of a 3 × 3 matrix that lies farthest from the two others, and its right eigenvector.
fn most_isolated(m: &Matrix3<f64>) -> (f64, Vector3<f64>) {
    let all = m.complex_eigenvalues();
    let gap =
        |i: usize| (0..3).filter(|j| *j != i).map(|j| (all[i] - all[j]).norm()).fold(f64::INFINITY, f64::min);
    // Of a pair that is complex by rounding only neither is taken: the third is farther away.
    let real = (0..3).filter(|i| all[*i].im.abs() <= 1e-9 * (1.0 + all[*i].re.abs()));
    let alone = real.max_by(|i, j| gap(*i).total_cmp(&gap(*j))).map_or(all[0].re, |i| all[i].re);
    let (right, left) =
        (null(&(m - Matrix3::identity() * alone)), null(&(m.transpose() - Matrix3::identity() * alone)));
    // Rayleigh's quotient takes the last rounding of the iteration away.
    let better = left.dot(&(m * right)) / left.dot(&right);
    (better, null(&(m - Matrix3::identity() * better)))
}

/// The direction that a matrix of rank two sends to zero.
fn null(m: &Matrix3<f64>) -> Vector3<f64> {
    let rows: Vec<Vector3<f64>> = (0..3).map(|r| m.row(r).transpose()).collect();
    let crosses = [rows[0].cross(&rows[1]), rows[0].cross(&rows[2]), rows[1].cross(&rows[2])];
    let longest = crosses.into_iter().fold(crosses[0], |a, b| if b.norm() > a.norm() { b } else { a });
    longest.normalize()
}
