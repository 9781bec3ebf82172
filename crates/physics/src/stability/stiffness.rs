//! The dynamic stiffness of the interfaces of a stack of viscous layers: M(Λ) ζ is the normal stress (times k²)
//! that holds the deflections ζ e^{Λt} of the interfaces under steady gravity.
//!
//! With D(Λ) the response of the layers' normal stresses to the face velocities W = Λζ (face slopes eliminated by
//! the continuity of tangential stress), M(Λ) = K − Λ D(Λ), K = diag((ρ_low − ρ_up) g k² + σ k⁴). Under
//! g(t) = g + a cos ωt the harmonics ζ_n of a Floquet mode obey
//!
//! ```text
//! M(s + inω) ζ_n = −(a/2) G (ζ_{n−1} + ζ_{n+1}),   G = diag((ρ_low − ρ_up) k²)
//! ```
//!
//! (the sign of a is immaterial: it shifts the origin of time by half a period).

use super::face_forces::LayerAtWavenumber;
use super::layered::Layered;
use nalgebra::allocator::Allocator;
use nalgebra::{DefaultAllocator, DimMin, OMatrix, OVector};
use num_complex::Complex64;

/// The size of the interface matrices: a constant for the common stacks, dynamic beyond.
pub(super) trait Size: DimMin<Self, Output = Self> + Send + Sync {}
impl<D: DimMin<D, Output = D> + Send + Sync> Size for D {}

pub(super) type Square<D> = OMatrix<Complex64, D, D>;

/// A stack at one wavenumber.
pub(super) struct Stiffness<D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    size: D,
    layers: Vec<LayerAtWavenumber>,
    /// K: static stiffness of each interface, kg/(m² s²)·1/m … consistent with N·k².
    pub statics: OVector<f64, D>,
    /// G: what a unit of extra gravity adds to K.
    pub weight: OVector<f64, D>,
}

impl<D: Size> Stiffness<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// `size` must be the number of interfaces.
    pub fn new(layered: &Layered, k: f64, size: D) -> Self {
        let layers: Vec<_> = layered.layers.iter().map(|layer| LayerAtWavenumber::new(layer, k)).collect();
        let weight = OVector::<f64, D>::from_fn_generic(size, nalgebra::Const::<1>, |i, _| {
            (layered.layers[i + 1].density - layered.layers[i].density) * k * k
        });
        let statics = OVector::<f64, D>::from_fn_generic(size, nalgebra::Const::<1>, |i, _| {
            weight[i] * layered.gravity + layered.tensions[i] * k.powi(4)
        });
        Stiffness { size, layers, statics, weight }
    }

    pub fn size(&self) -> D {
        self.size
    }

    /// M(Λ).
    pub fn at(&self, lambda: Complex64) -> Square<D> {
        let n = self.size.value();
        let zero = Complex64::new(0.0, 0.0);
        let mut ww = Square::<D>::from_element_generic(self.size, self.size, zero);
        let mut wv = ww.clone();
        let mut vv = ww.clone();
        for (j, layer) in self.layers.iter().enumerate() {
            let f = layer.forces(lambda);
            // The layer's lower face is interface j, its upper face interface j − 1 (top first).
            if j < n {
                ww[(j, j)] -= f.near_n;
                wv[(j, j)] += f.near_a;
                vv[(j, j)] -= f.near_b;
            }
            if j > 0 {
                let i = j - 1;
                ww[(i, i)] -= f.near_n;
                wv[(i, i)] -= f.near_a;
                vv[(i, i)] -= f.near_b;
                if j < n {
                    ww[(j, i)] += f.far_n;
                    ww[(i, j)] += f.far_n;
                    wv[(j, i)] += f.far_a;
                    wv[(i, j)] -= f.far_a;
                    vv[(j, i)] -= f.far_b;
                    vv[(i, j)] -= f.far_b;
                }
            }
        }
        // Continuity of tangential stress: wvᵀ W + vv V = 0 ⇒ V = −vv⁻¹ wvᵀ W.
        let mut m = match vv.try_inverse() {
            Some(inverse) => ww - &wv * inverse * wv.transpose(),
            None => ww,
        };
        m *= -lambda;
        for i in 0..n {
            m[(i, i)] += self.statics[i];
        }
        m
    }

    /// The number of growing exponents with real part above `sigma` ≥ 0 in the absence of a drive: the negative
    /// eigenvalues of M(σ), which is real and symmetric there and grows with σ (viscous dissipation and inertia are
    /// positive), so each negative direction of K gives exactly one real growing exponent.
    pub fn growing_without_drive(&self, sigma: f64) -> usize {
        let m = self.at(Complex64::new(sigma, 0.0));
        // Number of sign changes of the leading pivots (Sylvester's law of inertia).
        let n = self.size.value();
        let mut a = m.map(|z| z.re);
        let mut negative = 0;
        for i in 0..n {
            let pivot = if a[(i, i)] == 0.0 { f64::MIN_POSITIVE } else { a[(i, i)] };
            negative += usize::from(pivot < 0.0);
            for r in i + 1..n {
                let factor = a[(r, i)] / pivot;
                for c in i + 1..n {
                    let above = a[(i, c)];
                    a[(r, c)] -= factor * above;
                }
            }
        }
        negative
    }

    /// Squares of the inviscid natural frequencies, ascending, (rad/s)²; negative where the interface falls.
    /// Serves as a hint only.
    pub fn inviscid_squares(&self) -> Vec<f64> {
        let n = self.size.value();
        let mut mass = nalgebra::DMatrix::<f64>::zeros(n, n);
        for (j, layer) in self.layers.iter().enumerate() {
            let (near, far) = layer.inertia();
            if j < n {
                mass[(j, j)] += near;
            }
            if j > 0 {
                mass[(j - 1, j - 1)] += near;
                if j < n {
                    mass[(j, j - 1)] += far;
                    mass[(j - 1, j)] += far;
                }
            }
        }
        let Some(cholesky) = mass.cholesky() else { return Vec::new() };
        let inverse = cholesky.l().try_inverse().unwrap_or_else(|| nalgebra::DMatrix::identity(n, n));
        let k = nalgebra::DMatrix::from_fn(n, n, |r, c| if r == c { self.statics[r] } else { 0.0 });
        let mut squares: Vec<f64> =
            (&inverse * k * inverse.transpose()).symmetric_eigenvalues().iter().copied().collect();
        squares.sort_by(f64::total_cmp);
        squares
    }
}
