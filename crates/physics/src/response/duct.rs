//! Diffusion from the walls of the cell's plan: the mean M(σ) over the plan of u with
//!
//! ```text
//! ∇²u − σ u = −σ inside, u = 0 on the wall
//! ```
//!
//! With σ = iω/ν this is oscillating duct flow under a uniform pressure gradient (u: velocity over that without
//! walls), with σ = iω/α the temperature swing of a gas between isothermal walls. M → σ·(area of torsion type) for
//! small σ and → 1 for large.
//!
//! Circle of radius R: M = 1 − 2 I₁(z)/(z I₀(z)), z = √σ R (exact; e.g. Womersley, J. Physiol. 127, 553 (1955)).
//! Rectangle a × b: one sum over the odd sine modes across b, the other direction in closed form,
//!
//! ```text
//! M = Σ_{m odd} 8/(π²m²) · (σ/σ_m) (1 − tanh(√σ_m a/2)/(√σ_m a/2)),  σ_m = σ + (mπ/b)²
//! ```
//!
//! and, when the layers at the walls are thin (Re √σ times the shorter side above 40), the same summed exactly:
//! M = 1 − 2/(qa) − 2/(qb) + 16/(π q²ab), q = √σ, up to terms of size e^{−40}. Accuracy 1e-9.

use crate::complex::tanh;
use crate::stack::Plan;
use num_complex::Complex64;
use std::f64::consts::PI;

/// The mean M(σ) over the plan; σ in 1/m², Re √σ > 0.
pub fn duct_mean(plan: Plan, sigma: Complex64) -> Complex64 {
    match plan {
        Plan::Circle { diameter } => {
            let z = sigma.sqrt() * (diameter / 2.0);
            1.0 - 2.0 * bessel_ratio(z) / z
        }
        Plan::Rectangle { length, width } => rectangle(length.max(width), length.min(width), sigma),
    }
}

fn rectangle(long: f64, short: f64, sigma: Complex64) -> Complex64 {
    let q = sigma.sqrt();
    if q.re * short > 40.0 {
        return 1.0 - 2.0 / (q * long) - 2.0 / (q * short) + 16.0 / (PI * q * q * long * short);
    }
    let term = |m: f64| {
        let sigma_m = sigma + (m * PI / short).powi(2);
        let z = sigma_m.sqrt() * (long / 2.0);
        8.0 / (PI * m).powi(2) * (sigma / sigma_m) * (1.0 - tanh(z) / z)
    };
    // Terms fall like m⁻⁴; the tail behind N is summed by its leading behaviour.
    const TERMS: usize = 200;
    let sum: Complex64 = (0..TERMS).map(|i| term(2.0 * i as f64 + 1.0)).sum();
    let next = 2.0 * TERMS as f64;
    let tail = 8.0 * sigma * short * short / PI.powi(4) / (6.0 * next.powi(3));
    sum + tail
}

/// I₁(z)/I₀(z) for Re z > 0: continued fraction (NIST DLMF 10.33.1) for moderate z, asymptotic series (from the
/// Riccati equation r′ = 1 − r/z − r²) for large.
fn bessel_ratio(z: Complex64) -> Complex64 {
    if z.norm() > 40.0 && z.re > 25.0 {
        let mut a = [0.0; 14];
        a[0] = 1.0;
        for k in 1..a.len() {
            let products: f64 = (1..k).map(|j| a[j] * a[k - j]).sum();
            a[k] = ((k as f64 - 2.0) * a[k - 1] - products) / 2.0;
        }
        let inverse = z.inv();
        return a
            .iter()
            .rev()
            .fold(Complex64::new(0.0, 0.0), |sum, coefficient| sum * inverse + *coefficient);
    }
    let levels = 40 + 2 * z.norm() as usize;
    let mut ratio = Complex64::new(0.0, 0.0);
    for k in (1..=levels).rev() {
        ratio = (2.0 * k as f64 / z + ratio).inv();
    }
    ratio
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bessel_ratio_matches_the_tables() {
        // Abramowitz & Stegun table 9.8: I0(1) = 1.2660658778, I1(1) = 0.5651591040; I0(5) = 27.2398718236,
        // I1(5) = 24.3356421424.
        for (x, ratio) in
            [(1.0, 0.565_159_104_0 / 1.266_065_877_8), (5.0, 24.335_642_142_4 / 27.239_871_823_6)]
        {
            assert!((bessel_ratio(Complex64::new(x, 0.0)).re - ratio).abs() < 1e-9);
        }
    }

    #[test]
    fn bessel_ratio_is_continuous_across_its_two_forms() {
        for angle in [0.0, 0.4, PI / 4.0] {
            let at = |r: f64| bessel_ratio(Complex64::from_polar(r, angle));
            let low = Complex64::from_polar(39.999, angle);
            let high = at(40.001);
            assert!((at(low.norm()) - high).norm() < 1e-6, "{angle}");
            // The Riccati equation itself, by central differences.
            for r in [3.0, 39.0, 60.0] {
                let (z, h) = (Complex64::from_polar(r, angle), 1e-4);
                let slope = (bessel_ratio(z + h) - bessel_ratio(z - h)) / (2.0 * h);
                let ratio = bessel_ratio(z);
                assert!((slope - (1.0 - ratio / z - ratio * ratio)).norm() < 1e-7, "{r} {angle}");
            }
        }
    }

    #[test]
    fn a_wide_rectangle_is_a_channel_and_the_two_forms_agree() {
        let sigma = Complex64::new(0.0, 2.0 * PI * 100.0 / 5e-4);
        // Channel: 1 − tanh(z)/z (slit acoustics).
        let z = sigma.sqrt() * 0.01;
        let channel = 1.0 - tanh(z) / z;
        let wide = rectangle(1e4, 0.02, sigma);
        assert!((wide - channel).norm() < 1e-6, "{wide} {channel}");
        // Just below and above the switch.
        let short = 40.0 / sigma.sqrt().re;
        let (series, closed) = (
            rectangle(2.0 * short, short * 0.999_999, sigma),
            rectangle(2.0 * short, short * 1.000_001, sigma),
        );
        assert!((series - closed).norm() < 1e-7, "{series} {closed}");
    }

    #[test]
    fn slow_flow_follows_torsion() {
        // Poiseuille: M → σ·⟨velocity for unit gradient⟩: circle R²/8; square a²·0.035144 (Timoshenko & Goodier,
        // Theory of Elasticity: torsion constant 0.1406 a⁴ = 4·0.03515 a⁴).
        let sigma = Complex64::new(1e-3, 0.0);
        let circle = duct_mean(Plan::Circle { diameter: 2.0 }, sigma);
        assert!((circle.re / sigma.re - 0.125).abs() < 1e-4);
        let square = duct_mean(Plan::Rectangle { length: 1.0, width: 1.0 }, sigma);
        assert!((square.re / sigma.re - 0.1406 / 4.0).abs() < 2e-5, "{}", square.re / sigma.re);
    }
}
