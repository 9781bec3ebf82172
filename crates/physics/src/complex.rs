//! Complex functions without overflow and without the detour through polar form.

use num_complex::Complex64;

/// Beyond this real part tanh differs from 1 by less than half a rounding (e⁻³⁸ < 2⁻⁵⁴).
const SATURATED: f64 = 19.0;

/// tanh of a complex number of any size, without overflow: for Re z ≥ 0, with e = exp(−2 Re z),
/// (1 − e² + 2ie sin 2y)/(1 + 2e cos 2y + e²).
pub(crate) fn tanh(z: Complex64) -> Complex64 {
    if z.re < 0.0 {
        return -tanh(-z);
    }
    if z.re > SATURATED {
        return Complex64::new(1.0, 0.0);
    }
    let e = (-2.0 * z.re).exp();
    let (sin, cos) = (2.0 * z.im).sin_cos();
    let denominator = 1.0 + e * (2.0 * cos + e);
    // 1 − e² loses digits only where e is close to 1.
    let rise = if z.re < 0.1 { -(-4.0 * z.re).exp_m1() } else { 1.0 - e * e };
    Complex64::new(rise / denominator, 2.0 * e * sin / denominator)
}

/// The square root with non-negative real part, from two real square roots. For moduli between 1e-150 and 1e150.
pub(crate) fn sqrt(z: Complex64) -> Complex64 {
    let size = z.norm_sqr().sqrt();
    if z.re >= 0.0 {
        let re = ((size + z.re) / 2.0).sqrt();
        return if re > 0.0 { Complex64::new(re, z.im / (2.0 * re)) } else { Complex64::new(0.0, 0.0) };
    }
    let im = ((size - z.re) / 2.0).sqrt();
    Complex64::new(z.im.abs() / (2.0 * im), im.copysign(z.im))
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::f64::consts::PI;

    #[test]
    fn the_square_root_is_that_of_the_library() {
        for size in [1e-6, 0.3, 1.0, 7e4, 1e30] {
            for turn in 0..64 {
                let z = Complex64::from_polar(size, PI * (f64::from(turn) / 32.0 - 1.0 + 1e-3));
                assert!((sqrt(z) - z.sqrt()).norm() <= 4e-16 * z.sqrt().norm(), "{z}");
            }
        }
        assert_eq!(sqrt(Complex64::new(-4.0, 0.0)), Complex64::new(0.0, 2.0));
        assert_eq!(sqrt(Complex64::new(0.0, 0.0)), Complex64::new(0.0, 0.0));
    }

    #[test]
    fn tanh_is_that_of_the_library_where_that_does_not_overflow() {
        for re in [-30.0, -3.0, -0.1, 1e-9, 0.09, 0.11, 2.0, 18.9, 19.1, 300.0] {
            for im in [-2.0, 0.0, 1e-6, 0.7, 40.0] {
                let z = Complex64::new(re, im);
                assert!((tanh(z) - z.tanh()).norm() <= 1e-15 * z.tanh().norm().max(1.0), "{z}");
            }
        }
    }
}
