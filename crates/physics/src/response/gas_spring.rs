//! The complex polytropic exponent of a gas layer that is squeezed between isothermal faces and side walls.
//!
//! A cushion answers a change of volume with −V dP/dV = n P. Far from walls the gas is adiabatic (n = γ); within a
//! thermal layer δ = √(2α/ω) of a wall it is isothermal (n = 1). With θ the temperature swing over the adiabatic
//! one, ∇²θ − σθ = −σ, σ = iω/α, θ = 0 on all walls, and ⟨θ⟩ its mean,
//!
//! ```text
//! n = γ / (1 + (γ − 1)(1 − ⟨θ⟩))
//! ```
//!
//! Between two wide faces 1 − ⟨θ⟩ = tanh(z)/z, z = √σ H/2 (Zwikker & Kosten, Sound Absorbing Materials, 1949;
//! Stinson, J. Acoust. Soc. Am. 89, 550 (1991)). With side walls each odd mode across the thickness diffuses to
//! them too: ⟨θ⟩ = Σ_{m odd} 8/(π²m²) (σ/σ_m) M(σ_m), σ_m = σ + (mπ/H)², M the mean over the plan (`duct`).
//! Uniform pressure: H and the cell are short against the wavelength of sound. Accuracy 1e-7.

use super::duct::duct_mean;
use crate::complex::tanh;
use crate::stack::Plan;
use num_complex::Complex64;
use std::f64::consts::PI;

/// n(ω) for a layer of thickness `thickness` (m) in a cell of the given plan; `adiabatic_index` γ,
/// `diffusivity` α in m²/s, `omega` in rad/s > 0. Time factor e^{+iωt}: Im n > 0 is a loss.
pub fn polytropic_exponent(
    plan: Plan,
    thickness: f64,
    adiabatic_index: f64,
    diffusivity: f64,
    omega: f64,
) -> Complex64 {
    polytropic_exponent_growing(plan, thickness, adiabatic_index, diffusivity, Complex64::new(0.0, omega))
}

/// The same for a motion ∝ e^{st}, s ≠ 0 and not on the negative real axis.
pub(super) fn polytropic_exponent_growing(
    plan: Plan,
    thickness: f64,
    adiabatic_index: f64,
    diffusivity: f64,
    s: Complex64,
) -> Complex64 {
    let sigma = s / diffusivity;
    let z = sigma.sqrt() * (thickness / 2.0);
    let slit = 1.0 - tanh(z) / z;
    // What the side walls take away from the slit's mean: Σ 8/(π²m²) (σ/σ_m)(1 − M(σ_m)), terms like m⁻⁵ beyond
    // the thermal layer.
    let last = 4.0 * (sigma.norm().sqrt() * thickness / PI) + 60.0;
    let mut sides = Complex64::new(0.0, 0.0);
    let mut m = 1.0;
    while m < last {
        let sigma_m = sigma + (m * PI / thickness).powi(2);
        sides += 8.0 / (PI * m).powi(2) * (sigma / sigma_m) * (1.0 - duct_mean(plan, sigma_m));
        m += 2.0;
    }
    adiabatic_index / (1.0 + (adiabatic_index - 1.0) * (1.0 - slit + sides))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A plan so wide that the side walls do not matter.
    const WIDE: Plan = Plan::Rectangle { length: 1e6, width: 1e6 };

    #[test]
    fn slit_values_of_the_literature() {
        // γ 1.4, α 2.14e-5 m²/s: thickness (mm), frequency (Hz), Re n, loss factor (computed from the slit formula
        // by an independent code).
        for (h, f, re, loss) in [
            (0.1, 100.0, 1.000156, 0.006986),
            (0.5, 100.0, 1.073698, 0.123631),
            (1.0, 100.0, 1.254418, 0.100355),
            (2.0, 100.0, 1.327239, 0.049553),
            (5.0, 100.0, 1.370793, 0.020453),
            (10.0, 100.0, 1.385387, 0.010332),
            (20.0, 50.0, 1.389666, 0.007328),
        ] {
            let n = polytropic_exponent(WIDE, 1e-3 * h, 1.4, 2.14e-5, 2.0 * PI * f);
            assert!((n.re - re).abs() < 2e-6, "{h} mm: {n}");
            assert!((n.im / n.re - loss).abs() < 2e-6, "{h} mm: {n}");
        }
    }

    #[test]
    fn largest_loss_is_where_the_half_thickness_is_1_21_thermal_layers() {
        let (alpha, omega): (f64, f64) = (2.14e-5, 2.0 * PI * 100.0);
        let delta = (2.0 * alpha / omega).sqrt();
        let n = polytropic_exponent(WIDE, 2.0 * 1.21 * delta, 1.4, alpha, omega);
        assert!((n.im / n.re - 0.136666).abs() < 1e-6 && (n.re - 1.13605).abs() < 1e-5, "{n}");
        for factor in [0.97, 1.03] {
            let beside = polytropic_exponent(WIDE, 2.0 * 1.21 * factor * delta, 1.4, alpha, omega);
            assert!(beside.im / beside.re < n.im / n.re);
        }
    }

    #[test]
    fn side_walls_count_like_faces() {
        // A layer as tall as the cell is wide, between walls far away in the third direction, loses as much through
        // its side walls as through its faces: to first order in the thermal layer δ,
        // n = γ [1 − (γ − 1)(1 − i) δ/2 · (2/H + 2/L)].
        let (alpha, omega): (f64, f64) = (2.14e-5, 2.0 * PI * 50.0);
        let delta = (2.0 * alpha / omega).sqrt();
        let plan = Plan::Rectangle { length: 1e4, width: 0.05 };
        let n = polytropic_exponent(plan, 0.05, 1.4, alpha, omega);
        let first = 1.4 * (1.0 - 0.4 * Complex64::new(1.0, -1.0) * delta / 2.0 * (2.0 / 0.05 + 2.0 / 0.05));
        assert!((n - first).norm() < 4.0 * (delta / 0.05).powi(2), "{n} {first}");
        // A round and a square cell of equal ratio of perimeter to area differ in the second order only.
        let square =
            polytropic_exponent(Plan::Rectangle { length: 0.04, width: 0.04 }, 0.03, 1.4, alpha, omega);
        let round = polytropic_exponent(Plan::Circle { diameter: 0.04 }, 0.03, 1.4, alpha, omega);
        assert!((square - round).norm() < 1e-4, "{square} {round}");
    }

    #[test]
    fn limits_are_isothermal_and_adiabatic() {
        let slow = polytropic_exponent(Plan::Circle { diameter: 0.01 }, 0.01, 1.4, 2e-5, 1e-4);
        assert!((slow.re - 1.0).abs() < 1e-4 && slow.im > 0.0);
        let fast = polytropic_exponent(Plan::Circle { diameter: 0.05 }, 0.05, 1.4, 2e-5, 1e7);
        assert!((fast.re - 1.4).abs() < 1e-2);
    }
}
