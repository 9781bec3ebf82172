//! Radau IIA: the collocation Runge–Kutta method with a node at the end of the step, L-stable, of order 2s − 1
//! (Hairer & Wanner, Solving Ordinary Differential Equations II, IV.5; from memory, checked below).

use nalgebra::{DMatrix, DVector};

/// Nodes and matrix of the method with `stages` stages.
#[derive(Debug, Clone)]
pub(super) struct Radau {
    /// In (0, 1], the last one 1.
    pub nodes: Vec<f64>,
    /// `matrix[(i, j)]` = ∫₀^{c_i} of the Lagrange polynomial of node j.
    pub matrix: DMatrix<f64>,
}

impl Radau {
    /// # Panics
    /// Never for the few stages used here: the nodes are distinct.
    #[allow(clippy::expect_used)]
    pub fn new(stages: usize) -> Radau {
        let nodes = nodes(stages);
        // Σ_j a_ij c_j^p = c_i^{p+1}/(p+1) for p < s.
        let powers = DMatrix::from_fn(stages, stages, |p, j| nodes[j].powi(p as i32));
        let lu = powers.lu();
        let mut matrix = DMatrix::zeros(stages, stages);
        for (i, node) in nodes.iter().enumerate() {
            let moments = DVector::from_fn(stages, |p, _| node.powi(p as i32 + 1) / (p + 1) as f64);
            matrix.set_row(i, &lu.solve(&moments).expect("distinct nodes").transpose());
        }
        Radau { nodes, matrix }
    }
}

/// Zeros of P_{s−1}(x) − P_s(x), mapped from [−1, 1] to [0, 1] (x = 1 among them), ascending.
fn nodes(stages: usize) -> Vec<f64> {
    let f = |x: f64| {
        let (mut before, mut here) = (1.0, x);
        for n in 1..stages {
            let next = ((2 * n + 1) as f64 * x * here - n as f64 * before) / (n + 1) as f64;
            (before, here) = (here, next);
        }
        before - here
    };
    let samples = 400 * stages;
    // Equally spaced in angle; the end x = 1 itself is left out and added.
    let at = |i: usize| -(std::f64::consts::PI * i as f64 / samples as f64).cos();
    let mut found = Vec::new();
    for i in 0..samples - 1 {
        let (mut low, mut high) = (at(i), at(i + 1));
        if f(low) * f(high) > 0.0 {
            continue;
        }
        let sign = f(low).signum();
        for _ in 0..80 {
            let middle = 0.5 * (low + high);
            if f(middle) * sign > 0.0 { low = middle } else { high = middle }
        }
        found.push(0.5 * (1.0 + 0.5 * (low + high)));
    }
    found.push(1.0);
    found
}

#[cfg(test)]
mod tests {
    use super::Radau;

    #[test]
    fn three_stages_are_the_textbook_method() {
        // Hairer & Wanner, table IV.5.6 (from memory): c = (4 ∓ √6)/10, 1; last row (16 ∓ √6)/36, 1/9.
        let method = Radau::new(3);
        let root = 6f64.sqrt();
        for (found, expected) in method.nodes.iter().zip([(4.0 - root) / 10.0, (4.0 + root) / 10.0, 1.0]) {
            assert!((found - expected).abs() < 1e-14);
        }
        for (j, expected) in [(16.0 - root) / 36.0, (16.0 + root) / 36.0, 1.0 / 9.0].into_iter().enumerate() {
            assert!((method.matrix[(2, j)] - expected).abs() < 1e-13);
        }
    }

    #[test]
    fn the_order_is_twice_the_stages_less_one() {
        for stages in [3, 5] {
            let method = Radau::new(stages);
            assert_eq!(method.nodes.len(), stages);
            for p in 0..2 * stages - 1 {
                let quadrature: f64 = (0..stages)
                    .map(|j| method.matrix[(stages - 1, j)] * method.nodes[j].powi(p as i32))
                    .sum();
                assert!((quadrature - 1.0 / (p + 1) as f64).abs() < 1e-12, "{stages} {p}");
            }
        }
    }
}
