//! All eigenvalues of a small complex matrix: reduction to Hessenberg form by stabilised elimination, then the
//! shifted QR iteration with Givens rotations (the classical pair; any text on matrix computations).
//!
//! Written out because it is the inner loop of every verdict: matrices of 4 to 20 rows, hundreds of times a slab, and
//! no vectors wanted. Compared in the tests with the Schur form of the linear algebra library.

use num_complex::Complex64;

/// Iterations for one eigenvalue before the method is given up.
const MOST: usize = 60;
const ZERO: Complex64 = Complex64::new(0.0, 0.0);

/// The eigenvalues of the n × n matrix `a` (row by row, overwritten), in no particular order; `None` when the
/// iteration does not settle or an entry is not finite.
pub(super) fn eigenvalues(a: &mut [Complex64], n: usize) -> Option<Vec<Complex64>> {
    if !a.iter().all(|z| z.is_finite()) {
        return None;
    }
    to_hessenberg(a, n);
    let mut values = vec![ZERO; n];
    let mut rotations = vec![(0.0, ZERO); n];
    let mut end = n;
    let mut tries = 0;
    while end > 0 {
        let start = deflated(a, n, end);
        if start + 1 == end {
            values[end - 1] = a[(end - 1) * n + end - 1];
            end -= 1;
            tries = 0;
            continue;
        }
        if start + 2 == end {
            let (x, y) = pair(a, n, end);
            (values[end - 2], values[end - 1]) = (x, y);
            end -= 2;
            tries = 0;
            continue;
        }
        tries += 1;
        if tries > MOST {
            return None;
        }
        let shift = if tries % 11 == 10 {
            // A stalled iteration is shaken loose.
            a[(end - 1) * n + end - 1] + Complex64::new(size(a[(end - 1) * n + end - 2]), 0.0)
        } else {
            let (x, y) = pair(a, n, end);
            let corner = a[(end - 1) * n + end - 1];
            if size(x - corner) < size(y - corner) { x } else { y }
        };
        sweep(a, n, start..end, shift, &mut rotations);
    }
    Some(values)
}

fn size(z: Complex64) -> f64 {
    z.re.abs() + z.im.abs()
}

/// Similarity by elimination with exchange of rows and columns.
fn to_hessenberg(a: &mut [Complex64], n: usize) {
    for column in 0..n.saturating_sub(2) {
        let below = column + 1;
        let mut pivot = below;
        for r in below + 1..n {
            if size(a[r * n + column]) > size(a[pivot * n + column]) {
                pivot = r;
            }
        }
        if pivot != below {
            for c in column..n {
                a.swap(pivot * n + c, below * n + c);
            }
            for r in 0..n {
                a.swap(r * n + pivot, r * n + below);
            }
        }
        let head = a[below * n + column];
        if head == ZERO {
            continue;
        }
        let inverse = head.inv();
        for r in below + 1..n {
            let factor = a[r * n + column] * inverse;
            if factor == ZERO {
                continue;
            }
            a[r * n + column] = ZERO;
            for c in below..n {
                let above = a[below * n + c];
                a[r * n + c] -= factor * above;
            }
            for row in 0..n {
                let other = a[row * n + r];
                a[row * n + below] += factor * other;
            }
        }
    }
}

/// The first row of the active block that ends before `end`.
fn deflated(a: &mut [Complex64], n: usize, end: usize) -> usize {
    let mut start = end - 1;
    while start > 0 {
        let beside = size(a[start * n + start]) + size(a[(start - 1) * n + start - 1]);
        if size(a[start * n + start - 1]) <= f64::EPSILON * beside {
            a[start * n + start - 1] = ZERO;
            break;
        }
        start -= 1;
    }
    start
}

/// The eigenvalues of the trailing 2 × 2 block.
fn pair(a: &[Complex64], n: usize, end: usize) -> (Complex64, Complex64) {
    let (i, j) = (end - 2, end - 1);
    let (p, q, r, s) = (a[i * n + i], a[i * n + j], a[j * n + i], a[j * n + j]);
    let half = (p - s) / 2.0;
    let root = crate::complex::sqrt(half * half + q * r);
    // The larger step first, the other by the product: no cancellation.
    let step = if (half.conj() * root).re >= 0.0 { half + root } else { half - root };
    if step == ZERO {
        return (s, s);
    }
    (s + step, s - q * r / step)
}

/// One QR step with a shift on the active block.
fn sweep(
    a: &mut [Complex64],
    n: usize,
    active: std::ops::Range<usize>,
    shift: Complex64,
    rotations: &mut [(f64, Complex64)],
) {
    let (start, end) = (active.start, active.end);
    for i in start..end {
        a[i * n + i] -= shift;
    }
    for i in start..end - 1 {
        let (f, g) = (a[i * n + i], a[(i + 1) * n + i]);
        let length = (f.norm_sqr() + g.norm_sqr()).sqrt();
        // [c s; −s̄ c] (f, g) = (r, 0), c real.
        let (c, s, r) = if length == 0.0 {
            (1.0, ZERO, ZERO)
        } else {
            let modulus = f.norm_sqr().sqrt();
            if modulus == 0.0 {
                (0.0, g.conj() / length, Complex64::new(length, 0.0))
            } else {
                let phase = f / modulus;
                (modulus / length, phase * g.conj() / length, phase * length)
            }
        };
        rotations[i] = (c, s);
        a[i * n + i] = r;
        a[(i + 1) * n + i] = ZERO;
        for k in i + 1..end {
            let (x, y) = (a[i * n + k], a[(i + 1) * n + k]);
            a[i * n + k] = x * c + s * y;
            a[(i + 1) * n + k] = y * c - s.conj() * x;
        }
    }
    for i in start..end - 1 {
        let (c, s) = rotations[i];
        for k in start..(i + 2).min(end) {
            let (x, y) = (a[k * n + i], a[k * n + i + 1]);
            a[k * n + i] = x * c + s.conj() * y;
            a[k * n + i + 1] = y * c - s * x;
        }
    }
    for i in start..end {
        a[i * n + i] += shift;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A reproducible stream of numbers in (−1, 1).
    fn numbers() -> impl FnMut() -> f64 {
        let mut state = 0x9e37_79b9_7f4a_7c15_u64;
        move || {
            state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
            (state >> 11) as f64 / (1u64 << 52) as f64 - 1.0
        }
    }

    fn compared(n: usize, matrix: &[Complex64], tolerance: f64) {
        let scale = matrix.iter().map(|z| z.norm()).fold(0.0, f64::max);
        let mut theirs: Vec<Complex64> = nalgebra::DMatrix::from_row_slice(n, n, matrix)
            .schur()
            .eigenvalues()
            .unwrap()
            .iter()
            .copied()
            .collect();
        for ours in eigenvalues(&mut matrix.to_vec(), n).unwrap() {
            let (at, distance) = theirs
                .iter()
                .map(|z| (z - ours).norm())
                .enumerate()
                .min_by(|x, y| x.1.total_cmp(&y.1))
                .unwrap();
            assert!(distance < tolerance * scale, "{n}: {ours} is {distance:e} away");
            theirs.remove(at);
        }
    }

    #[test]
    fn they_are_those_of_the_library() {
        let mut next = numbers();
        for n in 1..=16 {
            for _ in 0..20 {
                let matrix: Vec<_> = (0..n * n).map(|_| Complex64::new(next(), next())).collect();
                compared(n, &matrix, 1e-11);
            }
        }
    }

    #[test]
    fn graded_and_triangular_matrices_are_met() {
        let mut next = numbers();
        for n in [2, 3, 6, 10] {
            let graded: Vec<_> = (0..n * n)
                .map(|i| Complex64::new(next(), next()) * 10f64.powi(-2 * ((i / n) + (i % n)) as i32))
                .collect();
            compared(n, &graded, 1e-13);
            let triangular: Vec<_> = (0..n * n)
                .map(|i| if i % n >= i / n { Complex64::new(next(), next()) } else { ZERO })
                .collect();
            compared(n, &triangular, 1e-11);
        }
        assert_eq!(eigenvalues(&mut [ZERO; 9], 3).unwrap(), vec![ZERO; 3]);
        assert_eq!(eigenvalues(&mut [Complex64::new(f64::NAN, 0.0)], 1), None);
    }
}
