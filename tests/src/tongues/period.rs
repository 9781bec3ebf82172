//! Half a period of η″ + (P + q cos τ Q) η = 0, τ = ωt, by Taylor series of high order.
//!
//! In a step the solution is Σ y_m h^m with (m + 1)(m + 2) y_{m+2} = −P y_m − q Q Σ_j c_j y_{m−j}, c_j the
//! coefficients of the cosine there. Steps are so short that the remainder is below rounding. The equation is even in
//! τ, so half a period from τ = 0 tells everything.

use super::potential::{Potential, Square};

/// Terms of a step's series.
const TERMS: usize = 24;

/// The two matrix solutions at one moment: C(0) = S′(0) = 1, C′(0) = S(0) = 0; derivatives by τ.
#[derive(Debug, Clone, Copy)]
pub struct Moment<const N: usize> {
    /// τ
    pub phase: f64,
    /// C
    pub even: Square<N>,
    /// S
    pub odd: Square<N>,
    /// C′
    pub even_slope: Square<N>,
    /// S′
    pub odd_slope: Square<N>,
}

/// Steps that half a period needs for full accuracy: the fastest oscillation advances by one radian in a step.
pub fn steps<const N: usize>(potential: &Potential<N>, omega: f64, a: f64) -> usize {
    let size = |m: &Square<N>| m.norm();
    let fastest = ((size(&potential.steady) + a * size(&potential.swing)) / (omega * omega)).sqrt();
    ((std::f64::consts::PI * fastest.max(2.0)).ceil() as usize).max(6)
}

/// The moments τ = 0, π/steps, … π at the acceleration a.
pub fn half<const N: usize>(potential: &Potential<N>, omega: f64, a: f64, steps: usize) -> Vec<Moment<N>> {
    let (p, q) = (potential.steady / (omega * omega), potential.swing * (a / (omega * omega)));
    let (one, zero) = (Square::<N>::identity(), Square::<N>::zeros());
    let mut now = Moment { phase: 0.0, even: one, odd: zero, even_slope: zero, odd_slope: one };
    let mut moments = vec![now];
    let h = std::f64::consts::PI / steps as f64;
    for i in 0..steps {
        let cosine = cosine_series(now.phase);
        let (even, even_slope) = advance(&p, &q, &cosine, h, now.even, now.even_slope);
        let (odd, odd_slope) = advance(&p, &q, &cosine, h, now.odd, now.odd_slope);
        now = Moment { phase: (i + 1) as f64 * h, even, odd, even_slope, odd_slope };
        moments.push(now);
    }
    moments
}

/// The coefficients of cos(τ + h) in h.
fn cosine_series(phase: f64) -> [f64; TERMS] {
    let (sin, cos) = phase.sin_cos();
    let cycle = [cos, -sin, -cos, sin];
    let mut factorial = 1.0;
    std::array::from_fn(|j| {
        factorial *= j.max(1) as f64;
        cycle[j % 4] / factorial
    })
}

fn advance<const N: usize>(
    p: &Square<N>,
    q: &Square<N>,
    cosine: &[f64; TERMS],
    h: f64,
    value: Square<N>,
    slope: Square<N>,
) -> (Square<N>, Square<N>) {
    let mut y = [Square::<N>::zeros(); TERMS];
    (y[0], y[1]) = (value, slope);
    for m in 0..TERMS - 2 {
        let mut driven = y[m] * cosine[0];
        for j in 1..=m {
            driven += y[m - j] * cosine[j];
        }
        y[m + 2] = (p * y[m] + q * driven) * (-1.0 / ((m + 1) * (m + 2)) as f64);
    }
    let (mut value, mut slope) = (y[TERMS - 1], y[TERMS - 1] * (TERMS - 1) as f64);
    for m in (1..TERMS - 1).rev() {
        value = value * h + y[m];
        slope = slope * h + y[m] * m as f64;
    }
    (value * h + y[0], slope)
}
