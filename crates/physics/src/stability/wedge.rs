//! How a level error and cross-axis motion wedge the faces of a slab.
//!
//! Seen from the cell, a uniform sideways force per mass b(t) = θ g + a Re(α e^{iωt}) acts beside the effective
//! gravity g + a cos ωt: θ is the tilt (the end towards which b points is the lower one), α the sideways over the
//! slab's own vertical acceleration (cell moving away from that end while it moves up). A cell that leans by θ from
//! the axis of a plumb vibration has α = θ as well. In each layer b is a gradient, ρ b x, which the pressure takes
//! up; what is left is a jump across the interfaces that pushes deflections of the shape of x. With x = Σ c_m φ_m over
//! the antisymmetric modes of the cell (free contact line, as in `modes`), every mode answers by itself:
//!
//! ```text
//! M(inω) ζ_n + (a/2) G (ζ_{n−1} + ζ_{n+1}) = G b_n c_m,     b_0 = θ g,   b_1 = a α/2,   b_{−1} = a ᾱ/2
//! ```
//!
//! Hill's equations at s = 0 (`hill`, M and G of `stiffness`) with a right-hand side. ζ_{−n} is the conjugate of
//! ζ_n, so that elimination runs from the far positive harmonics inwards to n = 0. For layers at rest without tension
//! the answer is ζ = (b/g) x, as it must be.
//!
//! ```text
//! rectangle, along the side L:  m odd, k = mπ/L,   share of the height at the wall 8/(m²π²), of the mean slope 96/(m⁴π⁴)
//! circle, radius R:             J₁′(z) = 0, k = z/R,  2/(z² − 1)  and  8/(z² (z² − 1))
//! ```
//!
//! (the mean slope is that of the line of least squares; both sums are 1.) High modes beyond `MODES` take the gain
//! of the last. Singular where a harmonic mode is marginal, which is the hold limit of the mode.
//!
//! Source: derived here. Range: linear, |slope| ≪ 1. Accuracy: 1e-8 for a mode; the sum over modes as its evidence says.
//!
//! In fast vibration of thin liquids the mean slopes of deep enough layers are those of [`averaged`].

use super::failure::Failure;
use super::layered::{Forcing, Layered};
use super::modes::derivative_zeros;
use super::stiffness::{Size, Square, Stiffness};
use crate::stack::Plan;
use nalgebra::allocator::Allocator;
use nalgebra::{DefaultAllocator, OVector};
use num_complex::Complex64;
use std::f64::consts::PI;

/// Antisymmetric modes along each axis.
const MODES: usize = 32;
/// Harmonics that are tried first; doubled until nothing changes.
const FIRST_HARMONICS: usize = 8;
/// … and where that is given up.
const MOST_HARMONICS: usize = 128;
/// Change by doubling the harmonics, relative to the largest gain of the mode.
const SETTLED: f64 = 1e-9;
/// A gain above this is no number for a laboratory: the mode is marginal within 1e-6 of the drive.
const MOST_GAIN: f64 = 1e6;

/// The wedges of a slab along each axis of its cell.
#[derive(Debug, Clone, PartialEq)]
pub struct Wedge {
    /// Rectangle: along length, then width. Circle: one.
    pub directions: Vec<Direction>,
}

/// Wedges along one horizontal axis.
#[derive(Debug, Clone, PartialEq)]
pub struct Direction {
    /// Which.
    pub along: Along,
    /// Inner size of the cell along it, m.
    pub size: f64,
    /// One per interface, top first.
    pub faces: Vec<FaceGains>,
    /// How far it is converged.
    pub evidence: Evidence,
}

/// A horizontal axis of the cell.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Along {
    /// Of a rectangle.
    Length,
    /// Of a rectangle.
    Width,
    /// Of a circle.
    Diameter,
}

/// What a face does per unit of each sideways force: the problem is linear.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct FaceGains {
    /// Per rad of tilt θ.
    pub tilt: Slopes,
    /// Per unit of cross-axis ratio in phase with the slab's vertical acceleration (Re α).
    pub in_phase: Slopes,
    /// Per unit of cross-axis ratio that leads it by a quarter of a period (Im α).
    pub quadrature: Slopes,
}

/// Shape of a face, in multiples of a straight line from wall to wall. A height at the wall is its `wall…` times half
/// the size of the cell.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Slopes {
    /// Mean in time: slope of the line of least squares, 1.
    pub mean: f64,
    /// Oscillating at the drive's frequency: its complex peak amplitude, e^{+iωt}, phase relative to the slab.
    pub oscillating: Complex64,
    /// Largest possible sum of all higher harmonics, peak.
    pub higher: f64,
    /// Mean height at the wall over half the size of the cell.
    pub wall: f64,
    /// Oscillating height at the wall over half the size, complex peak.
    pub wall_oscillating: Complex64,
}

/// How far an answer is converged.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Evidence {
    /// Modes summed.
    pub modes: usize,
    /// Largest number of harmonics that a mode needed.
    pub harmonics: usize,
    /// Largest change by doubling them, relative to the mode's largest gain.
    pub harmonics_change: f64,
    /// Largest change of a wall height (over half the size, per unit of force) between half the modes and all.
    pub modes_change: f64,
}

/// The sideways forces on a slab.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sideways {
    /// Tilt θ, rad.
    pub tilt: f64,
    /// Cross-axis ratio α, complex.
    pub cross: Complex64,
}

/// Gains of every face at every kept harmonic for one unit force: `[harmonic][face]`.
type Harmonics<D> = Vec<OVector<Complex64, D>>;

/// How the faces of a slab answer sideways forces. `forcing.acceleration` is the slab's own.
///
/// # Errors
/// [`Failure::Marginal`] at a hold limit (or another harmonic limit), [`Failure::NotSettled`], [`Failure::Cancelled`],
/// [`Failure::Unusable`].
pub fn wedge(
    layered: &Layered,
    forcing: &Forcing,
    plan: Plan,
    cancel: &dyn Fn() -> bool,
) -> Result<Wedge, Failure> {
    layered.check()?;
    forcing.check()?;
    let axes = match plan {
        Plan::Rectangle { length, width } => vec![(Along::Length, length), (Along::Width, width)],
        Plan::Circle { diameter } => vec![(Along::Diameter, diameter)],
    };
    let mut directions: Vec<Direction> = Vec::new();
    for (along, size) in axes {
        if !(size > 0.0 && size.is_finite()) {
            return Err(Failure::Unusable { quantity: "cell size", value: size });
        }
        // A square cell is the same both ways.
        let found = match directions.first() {
            Some(first) if first.size == size => Direction { along, ..first.clone() },
            _ => super::with_size!(layered, n => direction(layered, forcing, along, size, n, cancel)?),
        };
        directions.push(found);
    }
    Ok(Wedge { directions })
}

/// The mean slopes in fast vibration of thin liquids: V = (a/a_hold)² of the longest mode, θ, α as above.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Averaged {
    /// (Vα − θ)/(V − 1)
    pub lower: f64,
    /// (Vα + θ)/(V + 1)
    pub upper: f64,
}

/// The closed form beside the exact solution: averaged over a period, one mode, faces far apart.
///
/// # Errors
/// [`Failure::Marginal`] at the hold limit, V = 1.
pub fn averaged(
    v: f64,
    wavenumber: f64,
    acceleration: f64,
    sideways: &Sideways,
) -> Result<Averaged, Failure> {
    if (v - 1.0).abs() * MOST_GAIN < 1.0 {
        return Err(Failure::Marginal { wavenumber, acceleration, gain: 1.0 / (v - 1.0).abs() });
    }
    let pushed = v * sideways.cross.re;
    Ok(Averaged { lower: (pushed - sideways.tilt) / (v - 1.0), upper: (pushed + sideways.tilt) / (v + 1.0) })
}

impl FaceGains {
    /// The shape under given forces along this axis.
    pub fn under(&self, sideways: &Sideways) -> Slopes {
        let forces = [sideways.tilt, sideways.cross.re, sideways.cross.im];
        let mut sum = Slopes::default();
        for (slopes, force) in [self.tilt, self.in_phase, self.quadrature].iter().zip(forces) {
            sum.add(slopes, force);
        }
        sum
    }
}

impl Slopes {
    fn add(&mut self, other: &Slopes, factor: f64) {
        self.mean += factor * other.mean;
        self.oscillating += factor * other.oscillating;
        self.higher += factor.abs() * other.higher;
        self.wall += factor * other.wall;
        self.wall_oscillating += factor * other.wall_oscillating;
    }
}

/// A mode of the linear shape: wavenumber, share of the height at the wall, share of the mean slope.
struct Share {
    wavenumber: f64,
    wall: f64,
    slope: f64,
}

fn shares(along: Along, size: f64) -> Vec<Share> {
    match along {
        Along::Length | Along::Width => (0..MODES)
            .map(|i| {
                let x = (2 * i + 1) as f64 * PI;
                Share { wavenumber: x / size, wall: 8.0 / (x * x), slope: 96.0 / x.powi(4) }
            })
            .collect(),
        // The zeros of J₁′ lie a hair more than π apart, so that this reach holds all of them.
        Along::Diameter => derivative_zeros(1, (MODES as f64 + 0.5) * PI)
            .into_iter()
            .take(MODES)
            .map(|z| Share {
                wavenumber: 2.0 * z / size,
                wall: 2.0 / (z * z - 1.0),
                slope: 8.0 / (z * z * (z * z - 1.0)),
            })
            .collect(),
    }
}

fn direction<D: Size>(
    layered: &Layered,
    forcing: &Forcing,
    along: Along,
    size: f64,
    n: D,
    cancel: &dyn Fn() -> bool,
) -> Result<Direction, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let shares = shares(along, size);
    let count = layered.interfaces();
    let mut faces = vec![FaceGains::default(); count];
    let mut evidence =
        Evidence { modes: shares.len(), harmonics: 0, harmonics_change: 0.0, modes_change: 0.0 };
    // What the modes so far leave of the line: it takes the gain of the last of them.
    let (mut wall_left, mut slope_left) = (1.0, 1.0);
    let mut halfway = Vec::new();
    for (i, share) in shares.iter().enumerate() {
        if cancel() {
            return Err(Failure::Cancelled);
        }
        let stiffness = Stiffness::new(layered, share.wavenumber, n);
        let mode = settled(&stiffness, layered.gravity, forcing, share.wavenumber)?;
        evidence.harmonics = evidence.harmonics.max(mode.harmonics);
        evidence.harmonics_change = evidence.harmonics_change.max(mode.change);
        wall_left -= share.wall;
        slope_left -= share.slope;
        let last = i + 1 == shares.len();
        if i + 1 == shares.len() / 2 {
            let mut all = faces.clone();
            collect(&mut all, &mode.gains, share.wall + wall_left, share.slope + slope_left);
            halfway = all;
        }
        let (wall, slope) = if last { (wall_left, slope_left) } else { (0.0, 0.0) };
        collect(&mut faces, &mode.gains, share.wall + wall, share.slope + slope);
    }
    let walls = |face: &FaceGains| [face.tilt.wall, face.in_phase.wall, face.quadrature.wall];
    for (half, all) in halfway.iter().zip(&faces) {
        for (half, all) in walls(half).into_iter().zip(walls(all)) {
            evidence.modes_change = evidence.modes_change.max((half - all).abs());
        }
    }
    Ok(Direction { along, size, faces, evidence })
}

/// Adds a mode's gains to the faces.
fn collect<D: Size>(faces: &mut [FaceGains], gains: &[Harmonics<D>; 3], wall: f64, slope: f64)
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    for (i, face) in faces.iter_mut().enumerate() {
        let of_force = [&mut face.tilt, &mut face.in_phase, &mut face.quadrature];
        for (slopes, harmonics) in of_force.into_iter().zip(gains) {
            let (mean, first) = (harmonics[0][i].re, 2.0 * harmonics[1][i]);
            slopes.mean += slope * mean;
            slopes.oscillating += slope * first;
            slopes.higher += slope * harmonics[2..].iter().map(|z| 2.0 * z[i].norm()).sum::<f64>();
            slopes.wall += wall * mean;
            slopes.wall_oscillating += wall * first;
        }
    }
}

/// The converged gains of one mode.
struct Settled<D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// For a unit of tilt, of in-phase and of quadrature cross-axis motion.
    gains: [Harmonics<D>; 3],
    harmonics: usize,
    change: f64,
}

fn settled<D: Size>(
    stiffness: &Stiffness<D>,
    gravity: f64,
    forcing: &Forcing,
    wavenumber: f64,
) -> Result<Settled<D>, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let a = forcing.acceleration;
    // An interface between equal fluids has no stiffness at all: a hair off s = 0 keeps it determinate (as in `hill`).
    let stiffest = stiffness.statics.amax();
    let idle = stiffness.statics.iter().any(|k| k.abs() <= 1e-13 * stiffest);
    let axis = if idle { 1e-9 * forcing.omega } else { 0.0 };
    let mut blocks: Vec<Square<D>> = Vec::new();
    let mut before: Option<[Harmonics<D>; 3]> = None;
    let mut reach = FIRST_HARMONICS;
    let mut change = f64::INFINITY;
    while reach <= MOST_HARMONICS {
        let more = blocks.len()..=reach;
        blocks.extend(more.map(|n| stiffness.at(Complex64::new(axis, n as f64 * forcing.omega))));
        let marginal = |gain: f64| Failure::Marginal { wavenumber, acceleration: a, gain };
        let gains = solve(&blocks, stiffness, gravity, a).ok_or(marginal(f64::INFINITY))?;
        let largest = gains.iter().flatten().map(|z| z.amax_norm()).fold(0.0, f64::max);
        if !largest.is_finite() || largest > MOST_GAIN {
            return Err(marginal(largest));
        }
        if let Some(before) = &before {
            let off = |(now, then): (&Harmonics<D>, &Harmonics<D>)| {
                now.iter().zip(then).map(|(x, y)| (x - y).amax_norm()).fold(0.0, f64::max)
            };
            change = gains.iter().zip(before).map(off).fold(0.0, f64::max) / largest.max(f64::MIN_POSITIVE);
            if change < SETTLED {
                return Ok(Settled { gains, harmonics: reach, change });
            }
        }
        before = Some(gains);
        reach *= 2;
    }
    Err(Failure::NotSettled { wavenumber, acceleration: a, change })
}

/// The largest entry in magnitude.
trait Largest {
    fn amax_norm(&self) -> f64;
}

impl<D: nalgebra::Dim> Largest for OVector<Complex64, D>
where
    DefaultAllocator: Allocator<D>,
{
    fn amax_norm(&self) -> f64 {
        self.iter().map(|z| z.norm()).fold(0.0, f64::max)
    }
}

/// Block elimination from the highest harmonic inwards, for the three unit forces at once; `None` when singular.
///
/// ```text
/// S_n = M_n − (a²/4) G S_{n+1}⁻¹ G,   r_n = b_n G − (a/2) G S_{n+1}⁻¹ r_{n+1}      n = N … 1
/// Re(S_0) ζ_0 = Re(r_0) with twice the terms from n = 1 (n = −1 is their conjugate)
/// ζ_{n+1} = S_{n+1}⁻¹ (r_{n+1} − (a/2) G ζ_n)
/// ```
fn solve<D: Size>(
    blocks: &[Square<D>],
    stiffness: &Stiffness<D>,
    gravity: f64,
    a: f64,
) -> Option<[Harmonics<D>; 3]>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    let weight = &stiffness.weight;
    let half = a / 2.0;
    // (a/2) G times a vector.
    let coupled = |z: &OVector<Complex64, D>| z.zip_map(weight, |z, g| z * (g * half));
    let pushed = |b: Complex64| weight.map(|g| b * g);
    let force = |n: usize, which: usize| match (n, which) {
        (0, 0) => pushed(Complex64::new(gravity, 0.0)),
        (1, 1) => pushed(Complex64::new(half, 0.0)),
        (1, 2) => pushed(Complex64::new(0.0, half)),
        _ => pushed(Complex64::new(0.0, 0.0)),
    };
    let top = blocks.len() - 1;
    let mut inverses: Vec<Option<Square<D>>> = vec![None; blocks.len()];
    let mut rights: [Vec<OVector<Complex64, D>>; 3] =
        std::array::from_fn(|which| (0..=top).map(|n| force(n, which)).collect());
    for n in (0..=top).rev() {
        let mut pivot = blocks[n].clone();
        if let Some(Some(outer)) = inverses.get(n + 1) {
            let twice = if n == 0 { 2.0 } else { 1.0 };
            for r in 0..pivot.nrows() {
                for c in 0..pivot.ncols() {
                    pivot[(r, c)] -= outer[(r, c)] * (twice * half * half * weight[r] * weight[c]);
                }
            }
            for right in &mut rights {
                let from_outside = coupled(&(outer * &right[n + 1])) * Complex64::new(twice, 0.0);
                right[n] -= from_outside;
            }
        }
        if n == 0 {
            // n = 1 and n = −1 are conjugates, so their sum is real.
            pivot = pivot.map(|z| Complex64::new(z.re, 0.0));
            for right in &mut rights {
                right[0] = right[0].map(|z| Complex64::new(z.re, 0.0));
            }
        }
        inverses[n] = Some(pivot.try_inverse()?);
    }
    let inverses: Vec<Square<D>> = inverses.into_iter().collect::<Option<_>>()?;
    Some(rights.map(|right| {
        let mut answer = vec![&inverses[0] * &right[0]];
        for n in 1..=top {
            let driven = &right[n] - coupled(&answer[n - 1]);
            answer.push(&inverses[n] * driven);
        }
        answer
    }))
}

#[cfg(test)]
mod tests;
