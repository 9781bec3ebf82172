//! The textbook way to the limits of a slab, as the literature has it, against which the benchmarks are run.
//!
//! At every wavenumber of the cell up to the usual cut-off ([`cell`]): the flow in each layer as four exponentials with
//! coefficients, one dense system per harmonic ([`coefficients`]); the harmonics coupled by the drive as a dense
//! generalised eigenproblem in the acceleration for each of the two classes, with the fewest harmonics that give
//! 1e-4 ([`classes`]); the monodromy matrix and all its multipliers on a ladder of accelerations for whatever is of
//! neither class ([`other`]). Structure: Kumar & Tuckerman, J. Fluid Mech. 279, 49 (1994), doi
//! 10.1017/S0022112094003812, with the layers and the second face added.
//!
//! One thread, nothing remembered from one wavenumber to the next, dense solvers of `faer`. It is meant to be as good
//! as the method allows: what is not needed is left out (accelerations above the lowest onset known so far, wavenumbers that
//! occur twice), and nothing is made slow. It shares no line with the solver under test.

pub mod cell;
pub mod classes;
pub mod coefficients;
mod eigen;
pub mod other;

use other::Other;
use physics::stability::layered::Layered;

/// Relative accuracy that the number of harmonics is chosen for, and that onsets are bisected to.
pub const ACCURACY: f64 = 1e-4;

/// What comes out for one slab, with what it took.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Limits {
    /// Acceleration (m/s²) at which the last mode ceases to fall, with its wavenumber (1/m); `None` when none falls.
    pub hold: Option<(f64, f64)>,
    /// Smallest acceleration at which waves grow, with its wavenumber.
    pub wave: Option<(f64, f64)>,
    /// Wavenumbers looked at.
    pub wavenumbers: usize,
    /// Most harmonics that one of them took.
    pub harmonics: usize,
    /// Generalised eigenproblems solved.
    pub eigenproblems: usize,
    /// Monodromy matrices made.
    pub monodromies: usize,
    /// Of them those with an exponent of neither class that grows.
    pub of_neither_class: usize,
}

/// What is asked.
#[derive(Debug, Clone)]
pub struct Question<'a> {
    /// The slab with the gas on either side.
    pub layered: &'a Layered,
    /// Of the drive, rad/s.
    pub omega: f64,
    /// 1/m
    pub wavenumbers: &'a [f64],
    /// Largest acceleration looked at, m/s².
    pub up_to: f64,
    /// Exponents of neither class are looked for at every so many-th wavenumber; 1 for the full answer.
    pub other_every: usize,
}

/// The limits of a slab.
///
/// # Panics
/// When an eigensolver does not settle, which would be a defect here.
pub fn limits(question: &Question) -> Limits {
    let Question { layered, omega, wavenumbers, up_to, other_every } = *question;
    let mut limits = Limits { wavenumbers: wavenumbers.len(), ..Limits::default() };
    // The two usual classes first: they bound what is left to look at.
    let mut comes_to_rest = Vec::with_capacity(wavenumbers.len());
    for &k in wavenumbers {
        let marginal = classes::marginal(layered, omega, k, up_to);
        limits.harmonics = limits.harmonics.max(marginal.harmonics);
        limits.eigenproblems += marginal.eigenproblems;
        let falling = coefficients::falling(layered, k);
        let rests = match falling {
            0 => Some(0.0),
            n => marginal.harmonic.get(n - 1).copied(),
        };
        comes_to_rest.push(rests);
        if falling > 0 && rests.is_none_or(|a| limits.hold.is_none_or(|(hold, _)| a > hold)) {
            limits.hold = Some((rests.unwrap_or(f64::INFINITY), k));
        }
        let waves = [marginal.harmonic.get(falling), marginal.subharmonic.first()];
        for &a in waves.into_iter().flatten() {
            keep_smaller(&mut limits.wave, a, k);
        }
    }
    // Then every other exponent, below the lowest onset known.
    for (&k, rests) in wavenumbers.iter().zip(comes_to_rest).step_by(other_every) {
        let end = limits.wave.map_or(up_to, |(a, _)| a);
        let Some(rests) = rests.filter(|rests| *rests < end) else { continue };
        let mut other = Other::new(layered, omega, k);
        if let Some(onset) = other.onset(rests, end) {
            keep_smaller(&mut limits.wave, onset, k);
        }
        limits.monodromies += other.monodromies;
        limits.of_neither_class += other.growing;
    }
    limits
}

fn keep_smaller(wave: &mut Option<(f64, f64)>, a: f64, k: f64) {
    if wave.is_none_or(|(known, _)| a < known) {
        *wave = Some((a, k));
    }
}
