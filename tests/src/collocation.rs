//! Chebyshev collocation of the layers' equations: a third way to the same numbers, by other means in space.
//!
//! For one temporal factor e^{Λt} each layer's vertical velocity W and Φ = (D² − k²)W are polynomials on
//! Chebyshev–Gauss–Lobatto points (Trefethen, Spectral Methods in MATLAB, 2000, ch. 6), with (D² − k²)W = Φ and
//! ν(D² − k²)Φ = ΛΦ inside, rigid walls outside, and W, DW, tangential and normal stress joined at the interfaces. The
//! response of the normal stresses gives the matrices of the temporal harmonics, whose full determinant (no
//! elimination, no continued fraction) must vanish at a Floquet exponent.

use nalgebra::{DMatrix, DVector};
use num_complex::Complex64;
use physics::stability::layered::{FluidLayer, Layered};

type Matrix = DMatrix<Complex64>;

/// Points a layer may have; a layer that needs more is not resolved.
const MOST_POINTS: usize = 72;

/// The question at one wavenumber, discretised.
pub struct Collocation<'a> {
    layered: &'a Layered,
    k: f64,
    omega: f64,
    /// Temporal harmonics on either side.
    reach: i64,
}

/// The differentiation matrix on n + 1 points, descending from 1 to −1 (Trefethen's `cheb`).
fn differentiation(n: usize) -> DMatrix<f64> {
    let x = |j: usize| (std::f64::consts::PI * j as f64 / n as f64).cos();
    let c =
        |j: usize| if j == 0 || j == n { 2.0 } else { 1.0 } * if j.is_multiple_of(2) { 1.0 } else { -1.0 };
    let mut d = DMatrix::from_fn(n + 1, n + 1, |i, j| if i == j { 0.0 } else { c(i) / c(j) / (x(i) - x(j)) });
    for i in 0..=n {
        let sum: f64 = d.row(i).iter().sum();
        d[(i, i)] = -sum;
    }
    d
}

impl<'a> Collocation<'a> {
    /// `None` when a layer needs more points than are taken at the fastest harmonic kept.
    pub fn new(layered: &'a Layered, omega: f64, k: f64, reach: i64) -> Option<Collocation<'a>> {
        let question = Collocation { layered, k, omega, reach };
        let fastest = Complex64::new(0.0, (reach as f64 + 1.0) * omega);
        layered.layers.iter().all(|layer| question.points(layer, fastest) <= MOST_POINTS).then_some(question)
    }

    fn points(&self, layer: &FluidLayer, lambda: Complex64) -> usize {
        let q = (lambda * (layer.density / layer.viscosity) + self.k * self.k).sqrt();
        // Boundary layers of thickness 1/|q| at both faces want a number of points like the root of |q|h.
        16 + (4.5 * (q.norm() * layer.thickness).sqrt()) as usize
    }

    /// (N, T) at the upper and at the lower face of a layer for unit W and DW of its faces: rows N top, T top, N
    /// bottom, T bottom; columns W top, DW top, W bottom, DW bottom.
    fn faces(&self, layer: &FluidLayer, lambda: Complex64) -> Option<Matrix> {
        let n = self.points(layer, lambda);
        let d = differentiation(n) * (2.0 / layer.thickness);
        let square = &d * &d;
        let (k2, nu) = (self.k * self.k, layer.viscosity / layer.density);
        let size = 2 * (n + 1);
        let real = |x: f64| Complex64::new(x, 0.0);
        let mut system = Matrix::zeros(size, size);
        for i in 1..n {
            for j in 0..=n {
                let laplace = square[(i, j)] - if i == j { k2 } else { 0.0 };
                system[(i, j)] = real(laplace);
                system[(n + 1 + i, n + 1 + j)] = real(laplace);
            }
            system[(i, n + 1 + i)] = real(-1.0);
            system[(n + 1 + i, n + 1 + i)] -= lambda / nu;
        }
        // Rows of the faces: W and DW given.
        for (row, point) in [(0, 0), (n, n)] {
            system[(row, point)] = real(1.0);
        }
        for (row, point) in [(n + 1, 0), (2 * n + 1, n)] {
            for j in 0..=n {
                system[(row, j)] = real(d[(point, j)]);
            }
        }
        let mut given = Matrix::zeros(size, 4);
        for (column, row) in [0, n + 1, n, 2 * n + 1].into_iter().enumerate() {
            given[(row, column)] = real(1.0);
        }
        let solved = system.lu().solve(&given)?;
        let (mu, rho) = (layer.viscosity, layer.density);
        let mut faces = Matrix::zeros(4, 4);
        for column in 0..4 {
            let w = solved.view((0, column), (n + 1, 1));
            let phi = solved.view((n + 1, column), (n + 1, 1));
            for (row, point) in [(0, 0), (2, n)] {
                let slope =
                    |v: &dyn Fn(usize) -> Complex64| (0..=n).map(|j| v(j) * d[(point, j)]).sum::<Complex64>();
                let dw = slope(&|j| w[(j, 0)]);
                let dphi = slope(&|j| phi[(j, 0)]);
                faces[(row, column)] = lambda * rho * dw - dphi * mu + dw * (2.0 * mu * k2);
                faces[(row + 1, column)] = (phi[(point, 0)] + w[(point, 0)] * (2.0 * k2)) * mu;
            }
        }
        Some(faces)
    }

    /// K − Λ D(Λ): the dynamic stiffness of the interfaces.
    fn stiffness(&self, lambda: Complex64) -> Option<Matrix> {
        let m = self.layered.tensions.len();
        let faces: Vec<Matrix> =
            self.layered.layers.iter().map(|layer| self.faces(layer, lambda)).collect::<Option<_>>()?;
        // Unknown: W_i, V_i of each interface; jumps (upper layer's lower face less lower layer's upper face).
        let mut jump = Matrix::zeros(2 * m, 2 * m);
        for i in 0..m {
            for part in 0..2 {
                for of in 0..2 {
                    let row = part * m + i;
                    jump[(row, of * m + i)] += faces[i][(2 + part, 2 + of)] - faces[i + 1][(part, of)];
                    if i > 0 {
                        jump[(row, of * m + i - 1)] += faces[i][(2 + part, of)];
                    }
                    if i + 1 < m {
                        jump[(row, of * m + i + 1)] -= faces[i + 1][(part, 2 + of)];
                    }
                }
            }
        }
        let block = |r: usize, c: usize| jump.view((r * m, c * m), (m, m)).into_owned();
        let slopes = block(1, 1).lu().solve(&block(1, 0))?;
        let response = block(0, 0) - block(0, 1) * slopes;
        let weight = self.weight();
        let statics = DVector::from_fn(m, |i, _| {
            Complex64::new(weight[i] * self.layered.gravity + self.layered.tensions[i] * self.k.powi(4), 0.0)
        });
        Some(Matrix::from_diagonal(&statics) - response * lambda)
    }

    fn weight(&self) -> Vec<f64> {
        let layers = &self.layered.layers;
        layers.windows(2).map(|pair| (pair[1].density - pair[0].density) * self.k * self.k).collect()
    }

    /// The determinant of all harmonics at s under the acceleration a, each block over the size of its own.
    fn determinant(&self, s: Complex64, a: f64) -> Option<Complex64> {
        let m = self.layered.tensions.len();
        let weight = self.weight();
        let blocks = (2 * self.reach + 1) as usize;
        let mut hill = Matrix::zeros(blocks * m, blocks * m);
        for b in 0..blocks {
            let lambda = s + Complex64::new(0.0, (b as i64 - self.reach) as f64 * self.omega);
            let stiffness = self.stiffness(lambda)?;
            let scale = Complex64::new(stiffness.norm(), 0.0);
            for r in 0..m {
                for c in 0..m {
                    hill[(b * m + r, b * m + c)] = stiffness[(r, c)] / scale;
                }
                for other in [b.wrapping_sub(1), b + 1].into_iter().filter(|other| *other < blocks) {
                    hill[(b * m + r, other * m + r)] = Complex64::new(a / 2.0 * weight[r], 0.0) / scale;
                }
            }
        }
        Some(hill.determinant())
    }

    /// The exponent next to `guess` under the acceleration a (secant through points a hair away); `None` when it does
    /// not settle.
    pub fn exponent(&self, guess: Complex64, a: f64) -> Option<Complex64> {
        let hair = 1e-3 * guess.norm();
        let (mut x0, mut x1) = (guess + hair, guess - hair * Complex64::new(0.3, 0.7));
        let (mut f0, mut f1) = (self.determinant(x0, a)?, self.determinant(x1, a)?);
        for _ in 0..12 {
            let step = f1 * (x1 - x0) / (f1 - f0);
            if !step.is_finite() {
                return None;
            }
            (x0, f0) = (x1, f1);
            x1 -= step;
            if step.norm() < 1e-8 * x1.norm() {
                return Some(x1);
            }
            f1 = self.determinant(x1, a)?;
        }
        None
    }
}
