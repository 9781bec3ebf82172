//! Complex functions that the standard ones overflow on.

use num_complex::Complex64;

/// tanh of a complex number of any size, without overflow: for Re z ≥ 0, with e = exp(−2 Re z),
/// (1 − e² + 2ie sin 2y)/(1 + 2e cos 2y + e²).
pub(crate) fn tanh(z: Complex64) -> Complex64 {
    if z.re < 0.0 {
        return -tanh(-z);
    }
    let e = (-2.0 * z.re).exp();
    let (sin, cos) = (2.0 * z.im).sin_cos();
    let denominator = 1.0 + e * (2.0 * cos + e);
    Complex64::new(-(-4.0 * z.re).exp_m1() / denominator, 2.0 * e * sin / denominator)
}
