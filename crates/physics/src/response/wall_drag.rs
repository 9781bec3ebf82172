//! The drag of the side walls on a slab that oscillates along them.
//!
//! In the frame of the cell the slab is a duct flow under an oscillating, uniform body force; its mean velocity is
//! M(iω/ν) of what it would be without walls (`duct`). The walls therefore act on a slab of mass m that moves with
//! mean velocity U relative to them with
//!
//! ```text
//! F = iω m U (1/M − 1)
//! ```
//!
//! whose real part of (1/M − 1) is added inertia and whose negative imaginary part is loss, equal in the limit of
//! thin Stokes layers. Each liquid layer drags with its own mass and viscosity; the end effects at the two faces
//! (of relative size: Stokes layer over depth, squared) are left out.

use super::duct::duct_mean;
use crate::stack::Plan;
use num_complex::Complex64;

/// 1/M − 1 for a liquid of kinematic viscosity `nu` (m²/s) at `omega` (rad/s).
pub fn wall_drag(plan: Plan, nu: f64, omega: f64) -> Complex64 {
    wall_drag_growing(plan, nu, Complex64::new(0.0, omega))
}

/// The same for a motion ∝ e^{st}, s ≠ 0 and not on the negative real axis (there the layer at the wall has modes).
pub(super) fn wall_drag_growing(plan: Plan, nu: f64, s: Complex64) -> Complex64 {
    duct_mean(plan, s / nu).inv() - 1.0
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::f64::consts::TAU;

    #[test]
    fn channel_values_of_the_literature() {
        // Two parallel walls L apart, 100 Hz: ν (m²/s), L (mm), added inertia, loss c/(mω) (from the closed form by an
        // independent code).
        for (nu, l, inertia, loss) in [
            (5e-4, 20.0, 1.062509, 0.0715335),
            (5e-4, 50.0, 1.025198, 0.0265366),
            (1e-3, 100.0, 1.017829, 0.0184892),
            (1e-6, 20.0, 1.002821, 0.00283691),
        ] {
            let plan = Plan::Rectangle { length: 1e6, width: 1e-3 * l };
            let drag = wall_drag(plan, nu, TAU * 100.0);
            let expected = Complex64::new(inertia - 1.0, -loss);
            assert!((drag - expected).norm() < 2e-6, "{nu} {l}: {drag}");
        }
    }

    #[test]
    fn thin_layers_add_equal_inertia_and_loss_by_perimeter_over_area() {
        // δ·perimeter/(2·area) each, δ = √(2ν/ω).
        let (nu, omega): (f64, f64) = (1e-6, TAU * 100.0);
        let delta = (2.0 * nu / omega).sqrt();
        for (plan, per_area) in [
            (Plan::Rectangle { length: 0.05, width: 0.03 }, 2.0 * (0.05 + 0.03) / (0.05 * 0.03)),
            (Plan::Circle { diameter: 0.04 }, 4.0 / 0.04),
        ] {
            let drag = wall_drag(plan, nu, omega);
            let first = delta * per_area / 2.0;
            assert!((drag.re - first).abs() < 2.0 * first * first, "{drag} {first}");
            assert!((drag.im + first).abs() < 2.0 * first * first, "{drag} {first}");
        }
    }
}
