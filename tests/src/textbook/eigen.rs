//! The dense eigensolver.
//!
//! Of nalgebra. At the sizes of this problem (8 to 100) it was found as fast as that of `faer` 0.24 or faster (12: 29 against
//! 86 µs, 36: 0.28 against 0.48 ms, 100 and 140: even), and A⁻¹B faster than the generalised decomposition of the latter, which
//! takes four to ten times as long.

use nalgebra::DMatrix;
use nalgebra::linalg::Schur;
use num_complex::Complex64;

/// Relative size at which an entry below the diagonal counts as nothing.
const NOTHING: f64 = 1e-15;
/// Steps a row, of which two or three are usual.
const MOST_STEPS: usize = 100;

/// All eigenvalues of a real matrix.
///
/// # Panics
/// When they do not settle, which would be a defect here.
#[allow(clippy::expect_used)]
pub fn eigenvalues(matrix: DMatrix<f64>) -> Vec<Complex64> {
    let most = MOST_STEPS * matrix.nrows();
    let schur = Schur::try_new(matrix, NOTHING, most).expect("eigenvalues settle");
    schur.complex_eigenvalues().iter().copied().collect()
}

/// The finite eigenvalues a of A ζ = a B ζ: those of (A + sB)⁻¹B are 1/(a + s).
///
/// The shift s is there because the spectrum is even under a change of sign (half a period later the drive has the other sign),
/// which the iteration cannot part.
///
/// # Panics
/// When A + sB is singular or they do not settle.
#[allow(clippy::expect_used)]
pub fn generalised(a: DMatrix<f64>, b: &DMatrix<f64>, shift: f64) -> Vec<Complex64> {
    let inverses = eigenvalues((a + b * shift).lu().solve(b).expect("regular but at its eigenvalues"));
    inverses.iter().filter(|inverse| inverse.norm() > 0.0).map(|inverse| inverse.inv() - shift).collect()
}
