//! Polynomials on one element: cubics that carry value and slope at its ends, and bubbles that vanish there with
//! their slope and whose second derivatives are the Legendre polynomials.

/// Values and first two derivatives of a function at a point of the reference element [−1, 1].
#[derive(Debug, Clone, Copy)]
pub(super) struct Jet {
    pub value: f64,
    pub first: f64,
    pub second: f64,
}

/// All shape functions of degree ≤ `degree` at `x`: value and slope at −1, value and slope at +1 (slopes with
/// respect to the reference coordinate), then the bubbles.
pub(super) fn shapes(degree: usize, x: f64) -> Vec<Jet> {
    let p = legendre(degree, x);
    let (l, r) = (1.0 - x, 1.0 + x);
    let mut all = vec![
        Jet { value: 0.25 * l * l * (2.0 + x), first: 0.75 * (x * x - 1.0), second: 1.5 * x },
        Jet { value: 0.25 * l * l * r, first: 0.25 * l * (-1.0 - 3.0 * x), second: 0.5 * (3.0 * x - 1.0) },
        Jet { value: 0.25 * r * r * (2.0 - x), first: 0.75 * (1.0 - x * x), second: -1.5 * x },
        Jet { value: -0.25 * r * r * l, first: 0.25 * r * (3.0 * x - 1.0), second: 0.5 * (3.0 * x + 1.0) },
    ];
    for j in 2..=degree.saturating_sub(2) {
        let n = j as f64;
        let size = (n + 0.5).sqrt();
        let upper = (p[j + 2] - p[j]) / (2.0 * n + 3.0);
        let lower = (p[j] - p[j - 2]) / (2.0 * n - 1.0);
        all.push(Jet {
            value: size * (upper - lower) / (2.0 * n + 1.0),
            first: size * (p[j + 1] - p[j - 1]) / (2.0 * n + 1.0),
            second: size * p[j],
        });
    }
    all
}

/// P₀ … P_degree at `x`.
fn legendre(degree: usize, x: f64) -> Vec<f64> {
    let mut p = vec![1.0, x];
    for n in 1..degree {
        let next = ((2 * n + 1) as f64 * x * p[n] - n as f64 * p[n - 1]) / (n + 1) as f64;
        p.push(next);
    }
    p
}

/// Nodes and weights of the Gauss–Legendre rule with `n` points on [−1, 1].
pub(super) fn gauss(n: usize) -> Vec<(f64, f64)> {
    (0..n)
        .map(|i| {
            let mut x = (std::f64::consts::PI * (i as f64 + 0.75) / (n as f64 + 0.5)).cos();
            let slope = |x: f64| {
                let p = legendre(n, x);
                (p[n], n as f64 * (x * p[n] - p[n - 1]) / (x * x - 1.0))
            };
            for _ in 0..20 {
                let (value, derivative) = slope(x);
                x -= value / derivative;
            }
            let (_, derivative) = slope(x);
            (x, 2.0 / ((1.0 - x * x) * derivative * derivative))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn derivatives_are_those_of_the_values() {
        for x in [-0.83, -0.1, 0.4, 0.97] {
            let (h, here) = (1e-6, shapes(9, x));
            let (before, after) = (shapes(9, x - h), shapes(9, x + h));
            for i in 0..here.len() {
                assert!(((after[i].value - before[i].value) / (2.0 * h) - here[i].first).abs() < 1e-8);
                assert!(((after[i].first - before[i].first) / (2.0 * h) - here[i].second).abs() < 1e-8);
            }
        }
    }

    #[test]
    fn ends_carry_one_value_or_one_slope_each() {
        for (x, own) in [(-1.0, 0), (1.0, 2)] {
            for (i, jet) in shapes(9, x).iter().enumerate() {
                assert!((jet.value - f64::from(i == own)).abs() < 1e-14, "{i}");
                assert!((jet.first - f64::from(i == own + 1)).abs() < 1e-14, "{i}");
            }
        }
    }

    #[test]
    fn quadrature_is_exact_for_polynomials() {
        for power in 0..20 {
            let sum: f64 = gauss(10).iter().map(|(x, w)| w * x.powi(power)).sum();
            let exact = if power % 2 == 0 { 2.0 / f64::from(power + 1) } else { 0.0 };
            assert!((sum - exact).abs() < 1e-14, "{power}");
        }
    }
}
