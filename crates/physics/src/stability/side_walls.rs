//! Friction of the side walls on a horizontal mode of the cell.
//!
//! The modes of a cell slip past its side walls: only the velocity normal to a wall vanishes. A real wall holds the
//! liquid, and the layer sheared beside it adds inertia as well as loss. Averaged over the plan, a layer of
//! kinematic viscosity ν that moves like e^{Λt} then obeys the equations without walls with
//!
//! ```text
//! ρΛ → ρΛ(1 + χ),   Λχ = Σ_pairs w (ν/d²) g(Λd²/ν)
//! parallel walls 2d apart:  g(z²) = z² tanh z/(z − tanh z)      = 3 + z²/(5 + z²/(7 + …))
//! round wall, radius d:     g(z²) = 2z² I₁(z)/(z I₀(z) − 2I₁(z)) = 8 + 2z²/(6 + z²/(8 + …))
//! ```
//!
//! g is the mean friction of a flow under a uniform oscillating pressure gradient between these walls: that of the
//! thin gap (Λχ = 12ν/W², apparent inertia 6/5) for small z, of a Stokes layer on each wall for large. w compares the
//! mean square of the velocity that slips at the walls of the pair with that in the volume; with f the mode's shape, the
//! horizontal velocity is along ∇f and the vertical one along f, and w differs between them:
//!
//! | walls | horizontal | vertical |
//! | --- | --- | --- |
//! | rectangle, mode (m, n): the two along its length (gap = width) | (k_m/k)²/e_n | 1/e_n |
//! | the two along its width (gap = length) | (k_n/k)²/e_m | 1/e_m |
//! | circle, mode (m, ·), κ = kR | (m/κ)²/(1 − (m/κ)²) | 1/(1 − (m/κ)²) |
//!
//! with e₀ = 1 and e_j = ½ otherwise. Where motion decays away from a face, as e^{±kz}, horizontal and vertical
//! velocities carry equal energy, and the mean of the two counts; `SideWalls::effective` takes that.
//!
//! **Exact**: a mode that is uniform across a gap, rubbing on its two walls (Womersley, J. Physiol. 127, 553 (1955) for
//! the circle; the plates are in any text on unsteady viscous flow); to first order in Stokes layer over cell, every mode:
//! that is the classic damping of closed basins, frequency shift included (Case & Parkinson, J. Fluid Mech. 2, 172
//! (1957), from memory). **Approximated**: (a) where walls meet, the two layers overlap; adding them up as if alone
//! leaves 8(1 − 2/π)/(qW)² of a square's 1 + χ out, and 16 % of its friction where the layers fill it (tests: against
//! `duct`); (b) a mode with nodes across a gap that its Stokes layers fill is given the profile of
//! a uniform one, too little friction (a third or so, on top of its own bulk viscosity); (c) one χ for both directions of motion,
//! off in shallow layers on a rigid floor, where horizontal motion rules; `SideWalls::directions` has both;
//! (d) menisci, moving contact lines and surface films are not in it; they commonly double the loss of small clean cells.
//!
//! As a function of Λ, each Λχ is a complete Bernstein function (the reciprocal of a mean Σ c_j/(Λ + λ_j) over the decaying
//! shear modes): analytic off the negative real axis, real and growing on the positive one, without a branch cut
//! of its own, and it maps each half plane (upper, right) into itself. So walls only ever add inertia and loss.
//!
//! Accuracy of g: relative 1e-12 for |z| from 0 to 1e4 away from its poles on the negative real axis of z².

use super::modes::CellMode;
use crate::complex::tanh;
use crate::stack::Plan;
use num_complex::Complex64;

/// Walls that act on a mode together.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Walls {
    /// The two of a rectangle along its length.
    AlongLength,
    /// The two of a rectangle along its width.
    AlongWidth,
    /// That of a round cell.
    Round,
}

/// How walls act on a mode.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct WallAction {
    /// Which.
    pub walls: Walls,
    /// Clear distance between them (the diameter of a round cell), m.
    pub gap: f64,
    /// Mean square of the horizontal velocity that slips along them, over that in the volume.
    pub horizontal: f64,
    /// The same of the vertical velocity.
    pub vertical: f64,
}

impl WallAction {
    /// The mean of the two weights: horizontal and vertical motion of equal energy.
    pub fn weight(&self) -> f64 {
        0.5 * (self.horizontal + self.vertical)
    }

    /// (ν/d²) g(Λd²/ν): the friction Λχ of walls of weight 1, 1/s.
    fn friction(&self, nu: f64, lambda: Complex64) -> Complex64 {
        let half = 0.5 * self.gap;
        let scale = nu / (half * half);
        let square = lambda / scale;
        scale * if self.walls == Walls::Round { round(square) } else { plates(square) }
    }
}

/// The side walls' friction on one mode.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SideWalls {
    actions: [WallAction; 2],
    pairs: usize,
}

impl SideWalls {
    /// The walls of a cell on one of its modes.
    pub fn new(plan: Plan, mode: &CellMode) -> SideWalls {
        match plan {
            Plan::Rectangle { length, width } => {
                let inverse_mean = |index: u32| if index == 0 { 1.0 } else { 2.0 };
                let share = |index: u32, size: f64| {
                    (f64::from(index) * std::f64::consts::PI / (size * mode.wavenumber)).powi(2)
                };
                let [m, n] = mode.indices;
                Self::rectangle(
                    (length, width),
                    (share(m, length) * inverse_mean(n), inverse_mean(n)),
                    (share(n, width) * inverse_mean(m), inverse_mean(m)),
                )
            }
            Plan::Circle { diameter } => {
                let turning = (f64::from(mode.indices[0]) / (mode.wavenumber * diameter / 2.0)).powi(2);
                Self::circle(diameter, turning / (1.0 - turning), 1.0 / (1.0 - turning))
            }
        }
    }

    /// The walls on one of many dense modes, whose waves meet the walls from all directions: the mean over them.
    pub fn dense(plan: Plan) -> SideWalls {
        match plan {
            Plan::Rectangle { length, width } => Self::rectangle((length, width), (1.0, 2.0), (1.0, 2.0)),
            Plan::Circle { diameter } => Self::circle(diameter, 1.0, 2.0),
        }
    }

    fn rectangle((length, width): (f64, f64), along_length: (f64, f64), along_width: (f64, f64)) -> Self {
        let action = |walls, gap, (horizontal, vertical)| WallAction { walls, gap, horizontal, vertical };
        SideWalls {
            actions: [
                action(Walls::AlongLength, width, along_length),
                action(Walls::AlongWidth, length, along_width),
            ],
            pairs: 2,
        }
    }

    fn circle(diameter: f64, horizontal: f64, vertical: f64) -> Self {
        let action = WallAction { walls: Walls::Round, gap: diameter, horizontal, vertical };
        SideWalls { actions: [action; 2], pairs: 1 }
    }

    /// Which walls act, and how.
    pub fn actions(&self) -> &[WallAction] {
        &self.actions[..self.pairs]
    }

    /// Λ(1 + χ), 1/s, in a layer of kinematic viscosity `nu` (m²/s, > 0): what stands for Λ in the layer's momentum.
    /// Finite at Λ = 0, where only friction is left.
    pub fn effective(&self, nu: f64, lambda: Complex64) -> Complex64 {
        self.actions().iter().fold(lambda, |sum, action| sum + action.friction(nu, lambda) * action.weight())
    }

    /// 1 + χ; infinite at Λ = 0, where `effective` is not.
    pub fn factor(&self, nu: f64, lambda: Complex64) -> Complex64 {
        self.effective(nu, lambda) / lambda
    }

    /// Λ(1 + χ) of the horizontal and of the vertical motion apart.
    pub fn directions(&self, nu: f64, lambda: Complex64) -> [Complex64; 2] {
        self.actions().iter().fold([lambda; 2], |[horizontal, vertical], action| {
            let friction = action.friction(nu, lambda);
            [horizontal + friction * action.horizontal, vertical + friction * action.vertical]
        })
    }
}

/// g of parallel walls at z².
fn plates(square: Complex64) -> Complex64 {
    if square.norm_sqr() < 4.0 {
        // The continued fraction of tanh (NIST DLMF 4.39.1), where z − tanh z would lose digits; 9 levels: below 1e-16.
        return (0..9)
            .rev()
            .fold(Complex64::new(23.0, 0.0), |inner, level| f64::from(2 * level + 3) + square / inner);
    }
    let z = square.sqrt();
    let t = tanh(z);
    square * t / (z - t)
}

/// The coefficients of 1/z^j in I₁(z)/I₀(z) for large z, from its Riccati equation r′ = 1 − r/z − r².
const RATIO: [f64; 16] = {
    let mut a = [0.0; 16];
    a[0] = 1.0;
    let mut k = 1;
    while k < a.len() {
        let (mut products, mut j) = (0.0, 1);
        while j < k {
            products += a[j] * a[k - j];
            j += 1;
        }
        a[k] = ((k as f64 - 2.0) * a[k - 1] - products) / 2.0;
        k += 1;
    }
    a
};

/// g of the round wall at z².
fn round(square: Complex64) -> Complex64 {
    let size = square.norm();
    let z = square.sqrt();
    if size > 625.0 && z.re > 17.0 {
        let inverse = z.inv();
        let ratio = RATIO.iter().rev().fold(Complex64::new(0.0, 0.0), |sum, a| sum * inverse + *a);
        return 2.0 * square * ratio / (z - 2.0 * ratio);
    }
    // The continued fraction of the ratio (NIST DLMF 10.33.1), from far enough down.
    let levels = 12 + (1.2 * size.sqrt()).min(1e5) as u32;
    let inner = (0..levels).rev().fold(Complex64::new(f64::from(2 * levels + 6), 0.0), |inner, level| {
        f64::from(2 * level + 6) + square / inner
    });
    8.0 + 2.0 * square / inner
}

#[cfg(test)]
mod tests;
