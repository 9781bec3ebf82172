//! The linearised Navier–Stokes problem in its energy form, discretised.
//!
//! With u = (i DW/k, W) e^{ikx} and a test field V of the same kind, the virtual power of a moving stack is
//!
//! ```text
//! d/dt ∫ρ(DW DV + k² W V) dz + ∫μ[(D² + k²)W (D² + k²)V + 4k² DW DV] dz
//!     + Σ k² [(ρ_below − ρ_above) g(t) + σ k²] ζ_i V(z_i) = 0,      dζ_i/dt = W(z_i)
//! ```
//!
//! for every V that vanishes with its slope at the walls and is continuous with its slope everywhere. Continuity of
//! tangential stress and the balance of normal stress are the natural conditions of this form: nothing is imposed at
//! an interface, and there are no algebraic equations. Both forms are symmetric and positive definite, so in the
//! coordinates of the modes of pure viscous decay the flow is a set of first-order lags, each driven by the interfaces.

use super::basis::{gauss, shapes};
use super::mesh::{Mesh, Resolution};
use nalgebra::{DMatrix, SymmetricEigen};
use physics::stability::layered::Layered;

/// The flow as decaying modes y: dy/dt = −decay ∘ y − reachᵀ (stiffness(t) ∘ ζ), dζ/dt = reach y.
#[derive(Debug)]
pub struct Motion {
    /// Decay rate of each mode, 1/s, all positive.
    pub decay: Vec<f64>,
    /// W at each interface (row) in each mode (column).
    pub reach: DMatrix<f64>,
    /// k²[(ρ_below − ρ_above) g + σk²] of each interface.
    pub steady: Vec<f64>,
    /// k²(ρ_below − ρ_above) of each interface: times a cos ωt.
    pub driven: Vec<f64>,
}

impl Motion {
    /// The motion with wavenumber `k` (1/m), resolved for times of the order of 1/`omega`.
    ///
    /// # Panics
    /// When the mass form is not positive definite or the eigenvalues do not settle, which would be a defect here.
    #[allow(clippy::expect_used)]
    pub fn new(layered: &Layered, k: f64, omega: f64, resolution: &Resolution) -> Motion {
        let mesh = Mesh::new(layered, k, omega, resolution);
        let forms = Forms::assemble(&mesh, k, resolution.degree);
        let factor = forms.mass.cholesky().expect("kinetic energy is positive").unpack();
        let half = factor.solve_lower_triangular(&forms.viscous).expect("regular");
        let reduced = factor.solve_lower_triangular(&half.transpose()).expect("regular");
        let symmetric = 0.5 * (&reduced + reduced.transpose());
        let eigen = SymmetricEigen::new(symmetric);
        let modes = factor.tr_solve_lower_triangular(&eigen.eigenvectors).expect("regular");
        let jump = |i: usize| layered.layers[i + 1].density - layered.layers[i].density;
        let tension = |i: usize| layered.tensions[i];
        let interfaces = 0..layered.tensions.len();
        Motion {
            decay: eigen.eigenvalues.iter().copied().collect(),
            reach: DMatrix::from_fn(forms.values.len(), modes.ncols(), |i, m| modes[(forms.values[i], m)]),
            steady: interfaces
                .clone()
                .map(|i| k * k * (jump(i) * layered.gravity + tension(i) * k * k))
                .collect(),
            driven: interfaces.map(|i| k * k * jump(i)).collect(),
        }
    }
}

/// Mass and viscous form, and the unknown that is W at each interface.
struct Forms {
    mass: DMatrix<f64>,
    viscous: DMatrix<f64>,
    values: Vec<usize>,
}

impl Forms {
    fn assemble(mesh: &Mesh, k: f64, degree: usize) -> Forms {
        let bubbles = degree.saturating_sub(3);
        let nodes = mesh.elements.len() + 1;
        // Unknowns: value and slope at every node that is no wall, then the bubbles of every element.
        let mut node_unknown = vec![None; nodes];
        let mut size = 0;
        for (node, unknown) in node_unknown.iter_mut().enumerate() {
            let wall = (node == 0 && !mesh.free[0]) || (node + 1 == nodes && !mesh.free[1]);
            if !wall {
                *unknown = Some(size);
                size += 2;
            }
        }
        let first_bubble = size;
        size += bubbles * mesh.elements.len();
        let mut mass = DMatrix::zeros(size, size);
        let mut viscous = DMatrix::zeros(size, size);
        let rule: Vec<_> = gauss(degree + 1).into_iter().map(|(x, w)| (shapes(degree, x), w)).collect();
        for (e, element) in mesh.elements.iter().enumerate() {
            let half = 0.5 * element.thickness;
            let mut unknowns = Vec::with_capacity(4 + bubbles);
            for node in [node_unknown[e], node_unknown[e + 1]] {
                // A slope with respect to z is that in the reference coordinate over the half thickness; slopes
                // are counted in multiples of k so that all unknowns are of one size.
                unknowns.push(node.map(|at: usize| (at, 1.0)));
                unknowns.push(node.map(|at: usize| (at + 1, half * k)));
            }
            // Bubbles scaled so that their bending energy does not depend on the element.
            let bubble = |b| (first_bubble + e * bubbles + b, (half * k).powf(1.5));
            unknowns.extend((0..bubbles).map(|b| Some(bubble(b))));
            for (jets, weight) in &rule {
                for (row, to) in unknowns.iter().enumerate() {
                    let Some((i, left)) = *to else { continue };
                    for (column, from) in unknowns.iter().enumerate() {
                        let Some((j, right)) = *from else { continue };
                        let (v, w) = (jets[row], jets[column]);
                        let scale = left * right * weight * half;
                        let slopes = v.first * w.first / (half * half);
                        let bend = |f: super::basis::Jet| f.second / (half * half) + k * k * f.value;
                        mass[(i, j)] += scale * element.fluid.density * (slopes + k * k * v.value * w.value);
                        viscous[(i, j)] +=
                            scale * element.fluid.viscosity * (bend(v) * bend(w) + 4.0 * k * k * slopes);
                    }
                }
            }
        }
        let values = mesh.interfaces.iter().filter_map(|node| node_unknown[*node]).collect();
        Forms { mass, viscous, values }
    }
}
