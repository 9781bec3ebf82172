//! Every marginal acceleration of a slab at one wavenumber, and the intervals between them in which it grows.
//!
//! Both are read off the loci of critical drives (`locus`), whose module doc says why none is missed.

use super::exponent::TRUNCATION;
use super::failure::Failure;
use super::hill::{Hill, Meter};
use super::layered::{Forcing, Layered, Response};
use super::locus::{Locus, locus};
use super::stiffness::{Size, Stiffness};
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;

/// What one wavenumber may cost: nearly inviscid fluids want ten times what a laboratory's do.
const MOST_BLOCKS: u64 = 20_000_000;

/// Marginal accelerations by class, ascending, m/s².
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Neutral {
    /// Multiplier +1.
    pub harmonic: Vec<f64>,
    /// Multiplier −1.
    pub subharmonic: Vec<f64>,
    /// A complex pair on the unit circle.
    pub other: Vec<f64>,
}

/// Every marginal acceleration up to `up_to` (m/s²) at wavenumber `wavenumber` (1/m) and angular frequency `omega`.
///
/// # Errors
/// As [`super::growth`].
pub fn neutral(
    layered: &Layered,
    omega: f64,
    wavenumber: f64,
    up_to: f64,
    cancel: &dyn Fn() -> bool,
) -> Result<Neutral, Failure> {
    let found = asked(layered, omega, wavenumber, up_to, cancel)?;
    let of = |response: Response| {
        let class = found.crossings.iter().filter(|crossing| crossing.response == response);
        class.map(|crossing| crossing.acceleration).collect()
    };
    Ok(Neutral {
        harmonic: of(Response::Harmonic),
        subharmonic: of(Response::Subharmonic),
        other: of(Response::Other),
    })
}

/// An interval of the slab's acceleration in which a mode has a growing Floquet exponent.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct UnstableInterval {
    /// Lower end, m/s²; 0 when it grows without drive.
    pub low: f64,
    /// Upper end, m/s²; `None` when it still grows at the largest acceleration asked for.
    pub high: Option<f64>,
    /// Class of the exponent that starts to grow at the lower end; `None` at 0.
    pub at_low: Option<Response>,
    /// Class of the exponent that ceases to grow at the upper end.
    pub at_high: Option<Response>,
}

/// All intervals of acceleration up to `up_to` (m/s²) in which the mode of wavenumber `wavenumber` (1/m) grows under
/// a drive of angular frequency `omega` (rad/s), ascending and disjoint, however narrow.
///
/// # Errors
/// As [`super::growth`].
pub fn unstable_intervals(
    layered: &Layered,
    omega: f64,
    wavenumber: f64,
    up_to: f64,
    cancel: &dyn Fn() -> bool,
) -> Result<Vec<UnstableInterval>, Failure> {
    Ok(asked(layered, omega, wavenumber, up_to, cancel)?.unstable())
}

impl Locus {
    /// The intervals in which some exponent grows.
    pub(super) fn unstable(&self) -> Vec<UnstableInterval> {
        let open = |low, at_low| UnstableInterval { low, high: None, at_low, at_high: None };
        let mut number = self.growing_at_rest as i32;
        let mut intervals: Vec<UnstableInterval> =
            if number > 0 { vec![open(0.0, None)] } else { Vec::new() };
        for crossing in &self.crossings {
            let before = number;
            number += crossing.change;
            if before <= 0 && number > 0 {
                intervals.push(open(crossing.acceleration, Some(crossing.response)));
            } else if before > 0
                && number <= 0
                && let Some(last) = intervals.last_mut()
            {
                last.high = Some(crossing.acceleration);
                last.at_high = Some(crossing.response);
            }
        }
        intervals
    }
}

fn asked(
    layered: &Layered,
    omega: f64,
    wavenumber: f64,
    up_to: f64,
    cancel: &dyn Fn() -> bool,
) -> Result<Locus, Failure> {
    layered.check()?;
    Forcing { omega, acceleration: up_to }.check()?;
    super::with_size!(layered, size => all(layered, omega, wavenumber, up_to, size, cancel))
}

fn all<D: Size>(
    layered: &Layered,
    omega: f64,
    k: f64,
    up_to: f64,
    size: D,
    cancel: &dyn Fn() -> bool,
) -> Result<Locus, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    if cancel() {
        return Err(Failure::Cancelled);
    }
    let stiffness = Stiffness::new(layered, k, size);
    let hill = Hill::new(stiffness, omega, up_to, TRUNCATION, Meter::up_to(MOST_BLOCKS));
    locus(&hill, up_to, k)
}
