//! The natural modes of a liquid whose contact line is held at a brim or an edge.
//!
//! One interface between two layers (a slab at rest in the cell with the gas beside it). Without viscosity a shape
//! η = Σ η_n f_n over the cell's free modes f_n (wavenumbers k_n) has the energies
//!
//! ```text
//! ½ Σ c_n η_n²,  c_n = Δρ g + σ k_n²      ½ ω² Σ m_n η_n²,  m_n = (ρ₁ coth k_n h₁ + ρ₂ coth k_n h₂)/k_n
//! ```
//!
//! (Δρ: lower minus upper density) and the line holds η = 0 on the wall. The mean of η vanishes, as volume is kept.
//!
//! - Circle: each number m of nodal diameters is held by one force, cos mθ along the line. As a Lagrange multiplier it
//!   gives Σ_n a_n/(c_n − ω² m_n) = 0, a_n = f_n(R)²/‖f_n‖² ∝ 1/(1 − m²/(k_n R)²): one pinned mode between each two free ones.
//!   Exact but for the tail of the sum (relative 1e-4 of ω²).
//! - Rectangle: Rayleigh–Ritz in sin(pπx/L) sin(qπy/W), which vanish on the line. The modes that are kept lie above the
//!   true ω² by less than 1 %, the slowest by less than 0.1 % (tests: bounds from below, by multipliers).
//!
//! Either way is that of Benjamin & Scott, J. Fluid Mech. 92, 241 (1979), and Graham-Eagle, Math. Proc. Camb. Phil. Soc. 94, 553
//! (1983) in substance (from memory; measured frequencies and damping: Henderson & Miles, J. Fluid Mech. 275, 285
//! (1994), whose numbers were not at hand).
//!
//! **For the stability of the slab** a pinned mode is handed on as the laterally unbounded wave that has its inertia and its
//! stiffness: its wavenumber k is that of its inertia, m(k) = Σ m_n η_n²/Σ η_n², and the tension is multiplied by
//! k_s²/k², with k_s² = ∫|∇η|²/∫η². The layers' exact viscous solution is then taken at that k. What is approximated:
//! (a) the shape is that of free oscillation without viscosity, whatever the drive does; a drive couples pinned
//! modes of one symmetry, each is taken alone; (b) the viscous solution at one wavenumber for a shape of many;
//! (c) the line is level with the brim, the rest state flat. At the onset of falling without a drive (ω = 0) the
//! shape is exact: a strip falls at k_s = 2π/L, a round cell at k_s R = 3.8317.

use super::layered::Layered;
use super::modes::derivative_zeros;
use crate::stack::Plan;
use nalgebra::{DMatrix, DVector};
use std::f64::consts::PI;

/// Sines in all, for one symmetry of a rectangle, shared between its directions by their lengths.
const SINES: f64 = 144.0;
/// Modes up to this share of the shortest sine's wavenumber are kept.
const KEPT: f64 = 0.6;
/// A circle's modes are kept up to this kR: about two hundred of them.
const LARGEST: f64 = 30.0;
/// Free radial modes that the sums of a circle take at least.
const RADIAL: usize = 30;

/// How the liquid's edge meets the wall.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum ContactLine {
    /// It slides: the modes of the cell.
    Free,
    /// It is held at the faces of a slab with one interface; elsewhere (`is_held_at` says no) it is taken as free.
    Pinned,
}

/// Whether pinned modes are known for a slab: it has one interface, with tension.
pub fn is_held_at(layered: &Layered) -> bool {
    matches!(layered.tensions.as_slice(), &[tension] if tension > 0.0)
}

/// A mode with its contact line held.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PinnedMode {
    /// Of the free mode that it goes with: the same symmetry, and the same place in its order.
    pub indices: [u32; 2],
    /// Square of the natural frequency without viscosity, (rad/s)²; negative where it falls.
    pub frequency_squared: f64,
    /// The wave of equal inertia, 1/m.
    pub wavenumber: f64,
    /// k_s²/k²: what multiplies the tension at that wavenumber.
    pub stiffening: f64,
}

/// The pinned modes of a slab with one interface.
#[derive(Debug, Clone, PartialEq)]
pub struct PinnedModes {
    /// Ascending in wavenumber.
    pub modes: Vec<PinnedMode>,
    /// The list is complete up to this wavenumber, 1/m.
    pub complete_to: f64,
}

/// The pinned modes of the one interface of `layered` up to the wavenumber `up_to` (1/m) or as far as they are resolved;
/// `None` with another number of interfaces, or without tension, which is what holds the line.
pub fn pinned_modes(layered: &Layered, plan: Plan, up_to: f64) -> Option<PinnedModes> {
    let ([above, below], &[tension], true) =
        (layered.layers.as_slice(), layered.tensions.as_slice(), is_held_at(layered))
    else {
        return None;
    };
    let inertia = [(above.density, above.thickness), (below.density, below.thickness)];
    let face = Interface { weight: (below.density - above.density) * layered.gravity, tension, inertia };
    let mut found = match plan {
        Plan::Rectangle { length, width } => rectangle(&face, length, width, up_to),
        Plan::Circle { diameter } => circle(&face, diameter / 2.0, up_to),
    };
    found.modes.sort_by(|a, b| a.wavenumber.total_cmp(&b.wavenumber));
    found.modes.retain(|mode| mode.wavenumber <= found.complete_to);
    // The same shape turned, once.
    found.modes.dedup_by(|b, a| {
        let same = (b.wavenumber - a.wavenumber).abs() <= 1e-9 * a.wavenumber;
        if same {
            a.indices = a.indices.min(b.indices);
        }
        same
    });
    Some(found)
}

/// What the interface's energies depend on.
struct Interface {
    /// Δρ g, Pa/m.
    weight: f64,
    /// N/m
    tension: f64,
    /// Density (kg/m³) and thickness (m) of the two layers.
    inertia: [(f64, f64); 2],
}

impl Interface {
    fn stiffness(&self, k: f64) -> f64 {
        self.weight + self.tension * k * k
    }

    fn inertia(&self, k: f64) -> f64 {
        self.inertia.iter().map(|(density, thickness)| density / (k * (k * thickness).tanh())).sum()
    }

    /// The wave of a given inertia, from one of less: inertia falls with k.
    fn wavenumber_of(&self, inertia: f64, mut high: f64) -> f64 {
        while self.inertia(high) > inertia {
            high *= 2.0;
        }
        let mut low = high;
        while self.inertia(low) < inertia {
            low *= 0.5;
        }
        for _ in 0..60 {
            let middle = 0.5 * (low + high);
            if self.inertia(middle) > inertia { low = middle } else { high = middle }
        }
        0.5 * (low + high)
    }

    fn mode(&self, indices: [u32; 2], frequency_squared: f64, inertia: f64, near: f64) -> PinnedMode {
        let wavenumber = self.wavenumber_of(inertia, near);
        // Potential and kinetic energy of a natural mode are equal.
        let slope = (frequency_squared * inertia - self.weight) / self.tension;
        PinnedMode { indices, frequency_squared, wavenumber, stiffening: slope / (wavenumber * wavenumber) }
    }
}

fn circle(face: &Interface, radius: f64, up_to: f64) -> PinnedModes {
    let most = (up_to * radius).min(LARGEST);
    let mut modes = Vec::new();
    for m in 0..=most as u32 {
        let wanted = ((most - f64::from(m)) / PI) as usize + 2;
        let count = RADIAL.max(2 * wanted);
        let mut zeros =
            derivative_zeros(m, f64::from(m) + (count as f64 + 2.0) * PI + 2.0 * f64::from(m).cbrt());
        zeros.truncate(count);
        let terms: Vec<Term> = zeros.iter().map(|zero| Term::new(face, m, zero / radius, radius)).collect();
        let last = zeros.last().map_or(1.0, |zero| zero / radius);
        // Beyond: a → 1, c → σk², k in steps of π/R.
        let tail = radius / (PI * face.tension * (last + 0.5 * PI / radius));
        let mut poles: Vec<f64> = terms.iter().map(|term| term.stiffness / term.inertia).collect();
        poles.sort_by(f64::total_cmp);
        let mut family: Vec<PinnedMode> = poles
            .windows(2)
            .take(wanted)
            .map(|pair| {
                let square = root(&terms, tail, pair[0], pair[1]);
                let parts: Vec<f64> =
                    terms.iter().map(|t| (t.part / t.rest(square)).powi(2) / t.part).collect();
                let inertia = terms.iter().zip(&parts).map(|(t, part)| t.inertia * part).sum::<f64>()
                    / parts.iter().sum::<f64>();
                face.mode([m, 0], square, inertia, zeros[0] / radius)
            })
            .collect();
        family.sort_by(|a, b| a.wavenumber.total_cmp(&b.wavenumber));
        for (order, mode) in family.iter_mut().enumerate() {
            mode.indices[1] = order as u32 + 1;
        }
        modes.extend(family);
    }
    PinnedModes { modes, complete_to: most / radius }
}

/// One free mode in the sum of a circle.
struct Term {
    /// a_n
    part: f64,
    stiffness: f64,
    inertia: f64,
}

impl Term {
    fn new(face: &Interface, m: u32, k: f64, radius: f64) -> Term {
        let turning = (f64::from(m) / (k * radius)).powi(2);
        Term { part: 1.0 / (1.0 - turning), stiffness: face.stiffness(k), inertia: face.inertia(k) }
    }

    fn rest(&self, frequency_squared: f64) -> f64 {
        self.stiffness - frequency_squared * self.inertia
    }
}

/// The zero of the sum, which rises from −∞ to ∞ between two neighbouring poles.
fn root(terms: &[Term], tail: f64, mut low: f64, mut high: f64) -> f64 {
    for _ in 0..100 {
        let middle = 0.5 * (low + high);
        if middle <= low || middle >= high {
            break;
        }
        let sum: f64 = terms.iter().map(|term| term.part / term.rest(middle)).sum();
        if sum + tail < 0.0 { low = middle } else { high = middle }
    }
    0.5 * (low + high)
}

fn rectangle(face: &Interface, length: f64, width: f64, up_to: f64) -> PinnedModes {
    let share = |size: f64, other: f64| ((SINES * size / other).sqrt().round() as usize).clamp(4, 36);
    let (along, across) = (share(length, width), share(width, length));
    let shortest = 2.0 * PI * (along as f64 / length).min(across as f64 / width);
    let complete_to = up_to.min(KEPT * shortest);
    let mut modes = Vec::new();
    for x in [0, 1] {
        for y in [0, 1] {
            let mut family: Vec<PinnedMode> = symmetry(face, (length, x, along), (width, y, across))
                .into_iter()
                .map(|(square, inertia)| face.mode([0, 0], square, inertia, PI / length.max(width)))
                .collect();
            family.sort_by(|a, b| a.wavenumber.total_cmp(&b.wavenumber));
            let free = free_indices((length, x), (width, y), family.len());
            for (mode, indices) in family.iter_mut().zip(free) {
                mode.indices = indices;
            }
            modes.extend(family);
        }
    }
    PinnedModes { modes, complete_to }
}

/// The free modes of one symmetry (0 even, 1 odd about the middle, in either direction) by ascending wavenumber.
fn free_indices((length, x): (f64, u32), (width, y): (f64, u32), most: usize) -> Vec<[u32; 2]> {
    let mut all: Vec<[u32; 2]> = (0..40).flat_map(|i| (0..40).map(move |j| [2 * i + x, 2 * j + y])).collect();
    all.retain(|indices| *indices != [0, 0]);
    let size = |i: &[u32; 2]| (f64::from(i[0]) / length).hypot(f64::from(i[1]) / width);
    all.sort_by(|a, b| size(a).total_cmp(&size(b)));
    all.truncate(most);
    all
}

/// ω² and mean inertia of the pinned modes of one symmetry; (size, parity of the free modes, number of sines) along
/// either direction.
fn symmetry(
    face: &Interface,
    (length, x, along): (f64, u32, usize),
    (width, y, across): (f64, u32, usize),
) -> Vec<(f64, f64)> {
    // Even cosines go with odd sines. The cosines reach further, as the inertia of short waves is small but not nothing.
    let sine = |i: usize, parity: u32| (2 * i + 1 + parity as usize) as f64;
    let cosine = |j: usize, parity: u32| (2 * j + parity as usize) as f64;
    let table = |sines: usize, parity: u32| {
        DMatrix::from_fn(sines, 2 * sines + 8, |i, j| {
            let (p, m) = (sine(i, parity), cosine(j, parity));
            let norm = if m == 0.0 { 1.0 } else { 2f64.sqrt() };
            norm * 2f64.sqrt() * 2.0 * p / (PI * (p * p - m * m))
        })
    };
    let (by_x, by_y) = (table(along, x), table(across, y));
    let n = along * across;
    let stiffness = DVector::from_fn(n, |i, _| {
        let (p, q) = (sine(i / across, x) * PI / length, sine(i % across, y) * PI / width);
        face.stiffness(p.hypot(q))
    });
    // M = Σ over cosines of m C Cᵀ, first over one direction, then over the other.
    let mut inertia = DMatrix::<f64>::zeros(n, n);
    for j in 0..by_x.ncols() {
        let kx = cosine(j, x) * PI / length;
        let masses = DVector::from_fn(by_y.ncols(), |l, _| {
            let k = kx.hypot(cosine(l, y) * PI / width);
            if k == 0.0 { 0.0 } else { face.inertia(k) }
        });
        let weighted = DMatrix::from_fn(across, by_y.ncols(), |q, l| by_y[(q, l)] * masses[l]);
        let block = weighted * by_y.transpose();
        for p in 0..along {
            for other in 0..along {
                let factor = by_x[(p, j)] * by_x[(other, j)];
                for q in 0..across {
                    for another in 0..across {
                        inertia[(p * across + q, other * across + another)] += factor * block[(q, another)];
                    }
                }
            }
        }
    }
    let mut stiffness = DMatrix::from_diagonal(&stiffness);
    let mut overlap = DMatrix::<f64>::identity(n, n);
    if x == 0 && y == 0 {
        // No mean: the first sine takes back what the others have of it.
        let mean = DVector::from_fn(n, |i, _| by_x[(i / across, 0)] * by_y[(i % across, 0)]);
        let keep = DMatrix::from_fn(n, n - 1, |r, c| {
            if r == 0 { -mean[c + 1] / mean[0] } else { f64::from(u8::from(r == c + 1)) }
        });
        for matrix in [&mut stiffness, &mut inertia, &mut overlap] {
            *matrix = keep.transpose() * &*matrix * &keep;
        }
    }
    let Some(cholesky) = inertia.cholesky() else { return Vec::new() };
    let lower = cholesky.l();
    let halfway = lower.solve_lower_triangular(&stiffness).unwrap_or_else(|| stiffness.clone());
    let Some(reduced) = lower.solve_lower_triangular(&halfway.transpose()) else { return Vec::new() };
    let eigen = reduced.symmetric_eigen();
    // Shapes of unit kinetic energy; what they measure by ∫η² is the inverse of their mean inertia.
    let Some(shapes) = lower.transpose().solve_upper_triangular(&eigen.eigenvectors) else {
        return Vec::new();
    };
    eigen
        .eigenvalues
        .iter()
        .enumerate()
        .map(|(i, square)| {
            let shape = shapes.column(i);
            (*square, 1.0 / shape.dot(&(&overlap * shape)))
        })
        .collect()
}

#[cfg(test)]
mod tests;
