//! The periodic motion of a [`Motion`] that is pushed sideways: by stepping through one period, no harmonics.
//!
//! One period takes a state x to Φx + f. The periodic state solves (I − Φ)x = f; a last period from there is averaged.

use super::floquet::propagate;
use super::motion::Motion;
use nalgebra::DMatrix;
use num_complex::Complex64;
use physics::stability::layered::Forcing;

/// Mean and first harmonic (complex peak, e^{+iωt}) of every interface.
pub type Pushed = Vec<(f64, Complex64)>;

/// The answer to the sideways force per mass `push(ωt)`.
///
/// # Panics
/// When a multiplier is 1: then there is no periodic motion.
#[allow(clippy::expect_used)]
pub fn pushed(motion: &Motion, forcing: &Forcing, steps: usize, push: &dyn Fn(f64) -> f64) -> Pushed {
    let (modes, n) = (motion.decay.len(), motion.steady.len());
    let size = modes + n;
    // Columns: the unit states, which are not pushed, and the resting state, which is.
    let mut start = DMatrix::zeros(size, size + 1);
    start.fill_diagonal(1.0);
    let only_last = |column: usize, phase: f64| if column == size { push(phase) } else { 0.0 };
    let end = propagate(motion, forcing, steps, start, &only_last, &mut |_| ());
    let system = DMatrix::identity(size, size) - end.columns(0, size);
    let periodic = system.lu().solve(&end.columns(size, 1).clone_owned()).expect("no multiplier is 1");
    let mut sums = vec![(0.0, Complex64::new(0.0, 0.0)); n];
    let mut step = 0;
    propagate(motion, forcing, steps, periodic, &|_, phase| push(phase), &mut |state| {
        step += 1;
        let turn = Complex64::from_polar(2.0, -std::f64::consts::TAU * step as f64 / steps as f64);
        for (i, (mean, first)) in sums.iter_mut().enumerate() {
            let height = state[(modes + i, 0)] / steps as f64;
            *mean += height;
            *first += turn * height;
        }
    });
    sums
}
