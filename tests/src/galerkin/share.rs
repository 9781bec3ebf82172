//! How much of a mode is motion of the interfaces.

use super::floquet::Exponent;
use super::motion::Motion;
use nalgebra::{DMatrix, DVector};
use num_complex::Complex64;

/// Share of the interfaces' energy (of gravity and tension) in the whole, at the start of the period, in the Floquet
/// mode of an exponent, by inverse iteration; near 0 for vorticity modes, which leave the interfaces alone.
///
/// # Panics
/// When the shifted matrix is exactly singular, which the shift prevents.
#[allow(clippy::expect_used)]
pub fn interface_share(motion: &Motion, monodromy: &DMatrix<f64>, exponent: &Exponent, omega: f64) -> f64 {
    let period = std::f64::consts::TAU / omega;
    let multiplier = (Complex64::new(exponent.rate, exponent.frequency) * period).exp();
    let size = monodromy.nrows();
    let shifted = monodromy.map(|x| Complex64::new(x, 0.0))
        - DMatrix::identity(size, size) * (multiplier * Complex64::new(1.0 + 1e-9, 1e-10));
    let lu = shifted.lu();
    let mut mode = DVector::from_fn(size, |i, _| Complex64::new(1.0, (i % 7) as f64 - 3.0));
    for _ in 0..3 {
        mode = lu.solve(&mode).expect("regular");
        let norm = mode.norm();
        mode.unscale_mut(norm);
    }
    let modes = motion.decay.len();
    let kinetic: f64 = mode.rows(0, modes).iter().map(|y| y.norm_sqr()).sum();
    let stored: f64 =
        motion.steady.iter().enumerate().map(|(i, s)| s.abs() * mode[modes + i].norm_sqr()).sum();
    stored / (stored + kinetic)
}
