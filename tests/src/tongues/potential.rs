//! Potential flow of a stack at one wavenumber: M ζ″ + (K + a cos ωt G) ζ = 0 for the deflections ζ of the interfaces.
//!
//! In a layer of depth h whose faces move with W_t (top) and W_b (bottom), w(z) = [W_t sinh kz + W_b sinh k(h − z)] /
//! sinh kh and, by continuity, the horizontal velocity is w′/k. Its kinetic energy
//! (ρ/4) ∫ (w² + w′²/k²) dz per unit area is (1/4) Wᵀ m W with
//!
//! ```text
//! m = (ρ/k) [coth kh, −1/sinh kh; −1/sinh kh, coth kh]        (half space: ρ/k for its one face)
//! K = diag(Δρ g + σk²),   G = diag(Δρ),   Δρ = density below − density above
//! ```
//!
//! Lamb, Hydrodynamics, arts. 228 and 231 has the one and the two liquids; the matrix is derived here.

use nalgebra::SMatrix;
use physics::stability::layered::Layered;

/// Square of the number of interfaces.
pub type Square<const N: usize> = SMatrix<f64, N, N>;

/// The stack in coordinates η = Lᵀζ, M = L Lᵀ, in which the mass matrix is 1: η″ + (steady + a cos ωt swing) η = 0.
#[derive(Debug, Clone)]
pub struct Potential<const N: usize> {
    /// L⁻¹ K L⁻ᵀ, 1/s².
    pub steady: Square<N>,
    /// L⁻¹ G L⁻ᵀ, 1/m.
    pub swing: Square<N>,
    /// L⁻¹: a force on the interfaces, or a form in ζ from both sides, in the new coordinates.
    pub inverse_root: Square<N>,
    /// Of each layer, top first, in ζ: kg/m².
    pub masses: Vec<Square<N>>,
}

impl<const N: usize> Potential<N> {
    /// Of a stack with N interfaces; viscosities are not looked at.
    ///
    /// # Panics
    /// When the stack has another number of interfaces, or fluids without mass on both sides of one.
    #[allow(clippy::expect_used)]
    pub fn new(layered: &Layered, k: f64) -> Self {
        assert_eq!(layered.interfaces(), N);
        let masses: Vec<Square<N>> = layered
            .layers
            .iter()
            .enumerate()
            .map(|(j, layer)| {
                let mut mass = Square::zeros();
                let (near, far) = (layer.density / k / (k * layer.thickness).tanh(), {
                    // Beyond e^700 the sinh is infinite and the faces feel nothing of each other.
                    -layer.density / k / (k * layer.thickness).sinh()
                });
                let top = j.checked_sub(1);
                let bottom = (j < N).then_some(j);
                for face in [top, bottom].into_iter().flatten() {
                    mass[(face, face)] = near;
                }
                if let (Some(top), Some(bottom)) = (top, bottom) {
                    mass[(top, bottom)] = far;
                    mass[(bottom, top)] = far;
                }
                mass
            })
            .collect();
        let total: Square<N> = masses.iter().sum();
        let inverse_root = invert_lower(&total.cholesky_lower());
        let excess = |i: usize| layered.layers[i + 1].density - layered.layers[i].density;
        let weight = Square::from_fn(|r, c| if r == c { excess(r) } else { 0.0 });
        let rest = Square::from_fn(|r, c| match r == c {
            true => excess(r) * layered.gravity + layered.tensions[r] * k * k,
            false => 0.0,
        });
        let changed = |form: Square<N>| inverse_root * form * inverse_root.transpose();
        Potential { steady: changed(rest), swing: changed(weight), inverse_root, masses }
    }
}

/// Cholesky's factor, for any N.
trait Lower<const N: usize> {
    fn cholesky_lower(&self) -> Square<N>;
}

impl<const N: usize> Lower<N> for Square<N> {
    fn cholesky_lower(&self) -> Square<N> {
        let mut root = Square::<N>::zeros();
        for r in 0..N {
            for c in 0..=r {
                let known: f64 = (0..c).map(|j| root[(r, j)] * root[(c, j)]).sum();
                let rest = self[(r, c)] - known;
                root[(r, c)] = if r == c { rest.sqrt() } else { rest / root[(c, c)] };
            }
        }
        assert!((0..N).all(|i| root[(i, i)] > 0.0), "an interface between two fluids without mass");
        root
    }
}

fn invert_lower<const N: usize>(lower: &Square<N>) -> Square<N> {
    let mut inverse = Square::<N>::zeros();
    for c in 0..N {
        for r in c..N {
            let known: f64 = (c..r).map(|j| lower[(r, j)] * inverse[(j, c)]).sum();
            inverse[(r, c)] = (f64::from(u8::from(r == c)) - known) / lower[(r, r)];
        }
    }
    inverse
}
