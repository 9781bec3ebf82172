//! The monodromy matrix of a [`Motion`] over one period of the drive, and all its Floquet exponents.

use super::motion::Motion;
use super::radau::Radau;
use nalgebra::DMatrix;
use num_complex::Complex64;
use physics::stability::layered::{Forcing, Response};

/// Stages of the time stepping: order 9.
const STAGES: usize = 5;
/// A multiplier whose argument is this close to 0 or π is real (double real multipliers split by the square root of
/// the rounding).
const REAL: f64 = 1e-6;

/// One Floquet exponent.
#[derive(Debug, Clone, Copy)]
pub struct Exponent {
    /// Re s, 1/s.
    pub rate: f64,
    /// |Im s| folded into 0 … ω/2, rad/s.
    pub frequency: f64,
    /// From the multiplier's argument.
    pub response: Response,
}

/// All Floquet exponents, the fastest growing first; complex pairs appear twice.
pub fn exponents(motion: &Motion, forcing: &Forcing, steps: usize) -> Vec<Exponent> {
    let period = std::f64::consts::TAU / forcing.omega;
    let multipliers = monodromy(motion, forcing, steps).complex_eigenvalues();
    let mut all: Vec<Exponent> = multipliers
        .iter()
        .map(|multiplier: &Complex64| {
            let turn = multiplier.arg().abs();
            let response = if turn < REAL {
                Response::Harmonic
            } else if turn > std::f64::consts::PI - REAL {
                Response::Subharmonic
            } else {
                Response::Other
            };
            Exponent { rate: multiplier.norm().ln() / period, frequency: turn / period, response }
        })
        .collect();
    all.sort_by(|x, y| y.rate.total_cmp(&x.rate));
    all
}

/// The linear map of the state (y, ζ) over one period.
pub fn monodromy(motion: &Motion, forcing: &Forcing, steps: usize) -> DMatrix<f64> {
    let size = motion.decay.len() + motion.steady.len();
    propagate(motion, forcing, steps, DMatrix::identity(size, size), &|_, _| 0.0, &mut |_| ())
}

/// Carries states (y, ζ), one a column, through one period of the drive. `push(column, ωt)` is a sideways force per
/// mass, in multiples of the wave's own shape of x, which acts on the interfaces beside their stiffness; `each` sees
/// the states after every step.
///
/// With one step of length h and stage values Y, Z: the stages of a mode are Y = R(1y − hA Σ_i v_i S_i ∘ Z_i), R =
/// (1 + hλA)⁻¹, so that only the few Z are left to be solved for together.
///
/// # Panics
/// When a stage system is singular, which would be a defect here.
#[allow(clippy::expect_used)]
pub(super) fn propagate(
    motion: &Motion,
    forcing: &Forcing,
    steps: usize,
    mut state: DMatrix<f64>,
    push: &dyn Fn(usize, f64) -> f64,
    each: &mut dyn FnMut(&DMatrix<f64>),
) -> DMatrix<f64> {
    let method = Radau::new(STAGES);
    let h = std::f64::consts::TAU / forcing.omega / steps as f64;
    let ha = h * &method.matrix;
    let (n, modes) = (motion.steady.len(), motion.decay.len());
    let columns = state.ncols();
    let slot = |i: usize, stage: usize| i * STAGES + stage;

    // What does not depend on the step: stages of ζ from y, stages of ζ from forces, end of y from forces.
    let mut from_modes = DMatrix::zeros(n * STAGES, modes);
    let mut feedback = DMatrix::zeros(n * STAGES, n * STAGES);
    let mut to_modes = DMatrix::zeros(modes, n * STAGES);
    let mut kept = Vec::with_capacity(modes);
    for m in 0..modes {
        let resolvent =
            (DMatrix::identity(STAGES, STAGES) + motion.decay[m] * &ha).try_inverse().expect("L-stable");
        let ends = resolvent.column_sum();
        let moved = &ha * &ends;
        let forced = &resolvent * &ha;
        let felt = &ha * &forced;
        kept.push(ends[STAGES - 1]);
        for i in 0..n {
            let reach = motion.reach[(i, m)];
            for p in 0..STAGES {
                from_modes[(slot(i, p), m)] = reach * moved[p];
                to_modes[(m, slot(i, p))] = -reach * forced[(STAGES - 1, p)];
                for j in 0..n {
                    for q in 0..STAGES {
                        feedback[(slot(i, p), slot(j, q))] += reach * motion.reach[(j, m)] * felt[(p, q)];
                    }
                }
            }
        }
    }

    for step in 0..steps {
        let phase = |p: usize| std::f64::consts::TAU * (step as f64 + method.nodes[p]) / steps as f64;
        let stiffness = DMatrix::from_fn(n * STAGES, n * STAGES, |row, column| {
            if row != column {
                return 0.0;
            }
            let (i, p) = (row / STAGES, row % STAGES);
            motion.steady[i] + motion.driven[i] * forcing.acceleration * phase(p).cos()
        });
        let pushes = DMatrix::from_fn(n * STAGES, columns, |row, column| {
            motion.driven[row / STAGES] * push(column, phase(row % STAGES))
        });
        let mut stages = &from_modes * state.rows(0, modes);
        for i in 0..n {
            for p in 0..STAGES {
                for column in 0..columns {
                    stages[(slot(i, p), column)] += state[(modes + i, column)];
                }
            }
        }
        let system = DMatrix::identity(n * STAGES, n * STAGES) + &feedback * &stiffness;
        stages += &feedback * &pushes;
        let stages = system.lu().solve(&stages).expect("a regular stage system");
        let forces = stiffness * &stages - pushes;
        let mut flow = state.rows_mut(0, modes);
        for (m, kept) in kept.iter().enumerate() {
            flow.row_mut(m).scale_mut(*kept);
        }
        flow.gemm(1.0, &to_modes, &forces, 1.0);
        for i in 0..n {
            state.row_mut(modes + i).copy_from(&stages.row(slot(i, STAGES - 1)));
        }
        each(&state);
    }
    state
}
