//! The gas springs as a parametric drive of the slabs themselves: a cushion that is squeezed once a period has a
//! stiffness that swings with the drive, and slabs on it begin to bounce at half the drive's frequency when that is near
//! one of their own (f ≈ 2 f_i), or at two frequencies together (f ≈ f_i + f_j).
//!
//! A small disturbance of the periodic motion (`harmonics`), δy = e^{st} Σ δy_n e^{inωt}, obeys
//!
//! ```text
//! (s + inω)² m (1 + e) δy_n = [δp_below − δp_above]_n
//! δp_n = P (−N δξ_n + Σ_m G_{n−m} δξ_m),   G(t) = ν − ν (1 + ξ(t))^{−ν−1}
//! ```
//!
//! with e, N at s + inω and ν as in `network`: Hill's problem with every harmonic of the stiffness and the memory of
//! walls and gas. Starting values: the multipliers of the same chain with constant inertia and damping (those at half the
//! drive), integrated over a period (`multipliers`). From each Newton's method goes to a zero of Hill's determinant
//! (`hill`), zeros already found divided out. The threshold: the drive, at its frequency and distortion, at which the
//! largest growth rate is zero. No rule of thumb enters; [`Estimate`] stands beside it.

mod hill;
mod multipliers;

use super::chain::{Mechanism, ResponseError};
use super::harmonics::{HarmonicFailure, HarmonicOptions, Periodic, PeriodicDrive, periodic};
use super::natural::natural_frequencies;
use super::network::Network;
use crate::stack::{Drive, Stack};
use hill::{Hill, Rows, Swing};
use num_complex::Complex64;
use quantity::vocabulary::Effect;
use std::f64::consts::TAU;

/// How exactly it is solved, and how far the threshold is searched.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BounceOptions {
    /// Of exponents over ω when more harmonics are kept, and of the threshold.
    pub tolerance: f64,
    /// The threshold is searched up to this multiple of the drive.
    pub up_to: f64,
    /// … and up to this stroke over thickness.
    pub longest: f64,
}

impl Default for BounceOptions {
    fn default() -> Self {
        BounceOptions { tolerance: 1e-7, up_to: 2.0, longest: 0.5 }
    }
}

/// Whether the periodic motion is left by itself.
#[derive(Debug, Clone, PartialEq)]
pub struct Bounce {
    /// Largest Re s over the chain's own motions, 1/s; positive grows.
    pub growth_rate: f64,
    /// Frequencies of that motion, Hz, below the drive's: f/2 once, or a pair that adds up to f.
    pub frequencies: Vec<f64>,
    /// How it answers the drive.
    pub response: BounceResponse,
    /// Every exponent found, Im s in [0, ω/2], by growth, 1/s.
    pub exponents: Vec<Complex64>,
    /// Harmonics kept, and the largest change of the leading exponent from half as many, over ω.
    pub harmonics: usize,
    /// See `harmonics`.
    pub change: f64,
    /// Where the growth rate is zero; `None`: nowhere within the options' range.
    pub threshold: Option<Threshold>,
    /// Drive over the set one up to which the threshold was searched.
    pub searched_to: f64,
    /// The rule of thumb beside it.
    pub estimate: Option<Estimate>,
}

/// The lowest drive found at which the motion is left.
#[derive(Debug, Clone, PartialEq)]
pub struct Threshold {
    /// Over the set drive.
    pub ratio: f64,
    /// Strokes (fundamental over thickness) of the gas layers there, in the order of the cushions.
    pub strokes: Vec<f64>,
    /// As of [`Bounce`], of what begins there.
    pub frequencies: Vec<f64>,
    /// See `frequencies`.
    pub response: BounceResponse,
}

/// How a disturbance of the periodic motion moves.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum BounceResponse {
    /// At half the drive's frequency and its odd multiples.
    Half,
    /// At the drive's frequency: the periodic motion itself is left for another one.
    Same,
    /// At two frequencies that add up to the drive's.
    Pair,
}

/// An estimate, not a limit: on f = 2 f_i, one cushion, small loss, a stroke of 4ζ/(n + 1) starts the bounce.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Estimate {
    /// 4ζ/(n + 1)
    pub stroke_ratio: f64,
    /// ζ of the natural motion nearest to half the drive.
    pub damping_ratio: f64,
    /// Its damped frequency, Hz.
    pub frequency: f64,
}

/// Why there is no answer.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum BounceFailure {
    /// There is no periodic motion to leave.
    Motion(HarmonicFailure),
    /// No exponent was found.
    NotConverged {
        /// Newton's starting values.
        starts: usize,
        /// Smallest last step over ω.
        step: f64,
    },
    /// The result was no longer wanted.
    Cancelled,
}

impl std::fmt::Display for BounceFailure {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            BounceFailure::Motion(failure) => failure.fmt(f),
            BounceFailure::NotConverged { starts, step } => {
                write!(
                    f,
                    "none of {starts} starting values led to an exponent; smallest last step {step:.1e} of the drive"
                )
            }
            BounceFailure::Cancelled => write!(f, "cancelled"),
        }
    }
}

impl std::error::Error for BounceFailure {}

/// Whether slabs on cushions leave their periodic motion by themselves. `None` where nothing swings: no floating slab
/// on a cushion, no drive, or the effect `cushion-harmonics` off.
///
/// # Errors
/// [`BounceFailure`].
pub fn bounce(
    stack: &Stack,
    drive: &PeriodicDrive,
    options: &BounceOptions,
    cancel: &dyn Fn() -> bool,
) -> Result<Option<Bounce>, BounceFailure> {
    let failed = |error: ResponseError| BounceFailure::Motion(HarmonicFailure::Response(error));
    let network = Network::of(stack).map_err(failed)?;
    let springless = network.gases.is_empty() || network.nodes.iter().all(Option::is_none);
    if springless || drive.fundamental.acceleration == 0.0 || !stack.has(Effect::CushionHarmonics) {
        return Ok(None);
    }
    let rows = Rows::default();
    let problem = Problem { network: &network, stack, drive, options, rows: &rows, cancel };
    let set = problem.at(1.0, None)?;
    let Some(leading) = set.exponents.first().copied() else { return Ok(None) };
    let (threshold, searched_to) = problem.threshold(&set)?;
    let omega = drive.fundamental.omega();
    let (frequencies, response) = class(leading, omega);
    Ok(Some(Bounce {
        growth_rate: leading.re,
        frequencies,
        response,
        exponents: set.exponents,
        harmonics: set.harmonics,
        change: set.change,
        threshold,
        searched_to,
        estimate: estimate(&network, stack, omega),
    }))
}

/// Frequencies below the drive's and the class of an exponent with Im s in [0, ω/2].
fn class(s: Complex64, omega: f64) -> (Vec<f64>, BounceResponse) {
    let near = |value: f64| (s.im - value).abs() < 1e-6 * omega;
    match () {
        () if near(omega / 2.0) => (vec![omega / 2.0 / TAU], BounceResponse::Half),
        () if near(0.0) => (vec![omega / TAU], BounceResponse::Same),
        () => (vec![s.im / TAU, (omega - s.im) / TAU], BounceResponse::Pair),
    }
}

struct Problem<'a> {
    network: &'a Network<'a>,
    stack: &'a Stack,
    drive: &'a PeriodicDrive,
    options: &'a BounceOptions,
    rows: &'a Rows,
    cancel: &'a dyn Fn() -> bool,
}

/// The exponents at one drive.
struct At {
    exponents: Vec<Complex64>,
    strokes: Vec<f64>,
    harmonics: usize,
    change: f64,
}

impl At {
    fn growth(&self) -> f64 {
        self.exponents.first().map_or(f64::NEG_INFINITY, |s| s.re)
    }
}

impl Problem<'_> {
    /// At `ratio` times the set drive; `reach`: as many harmonics as were seen to suffice.
    fn at(&self, ratio: f64, reach: Option<usize>) -> Result<At, BounceFailure> {
        if (self.cancel)() {
            return Err(BounceFailure::Cancelled);
        }
        let Drive { frequency, acceleration } = self.drive.fundamental;
        let drive = PeriodicDrive {
            fundamental: Drive { frequency, acceleration: acceleration * ratio },
            distortion: self.drive.distortion.clone(),
        };
        let tolerance = if reach.is_some() { 1e-6 } else { HarmonicOptions::default().tolerance };
        let exact = HarmonicOptions { tolerance, ..HarmonicOptions::default() };
        let motion =
            periodic(self.network, self.stack, &drive, &exact, self.cancel).map_err(|f| match f {
                HarmonicFailure::Cancelled => BounceFailure::Cancelled,
                failure => BounceFailure::Motion(failure),
            })?;
        self.exponents(&motion, reach)
    }

    fn exponents(&self, motion: &Periodic, known: Option<usize>) -> Result<At, BounceFailure> {
        let network = self.network;
        let omega = self.drive.fundamental.omega();
        let strains: Vec<Vec<Complex64>> =
            (0..network.gases.len()).map(|gas| motion.strain(network, gas)).collect();
        let strokes = strains.iter().map(|strain| strain[1].norm()).collect();
        let swing = Swing::of(strains);
        let starts = multipliers::starts(network, &swing, omega);
        let mut reach = known.unwrap_or(4);
        let hill = |reach| Hill::new(network, &swing, self.rows, omega, reach);
        let mut found = hill(reach).exponents(&starts);
        loop {
            if (self.cancel)() {
                return Err(BounceFailure::Cancelled);
            }
            let Some(leading) = found.exponents.first().copied() else {
                return Err(BounceFailure::NotConverged { starts: starts.len(), step: found.step });
            };
            if known.is_some() {
                return Ok(At { exponents: found.exponents, strokes, harmonics: reach, change: f64::NAN });
            }
            reach *= 2;
            let finer = hill(reach).exponents(&found.exponents);
            let change = finer.exponents.first().map_or(f64::INFINITY, |s| (s - leading).norm() / omega);
            found = finer;
            if change <= self.options.tolerance {
                return Ok(At { exponents: found.exponents, strokes, harmonics: reach, change });
            }
            if reach >= 32 {
                return Err(BounceFailure::NotConverged { starts: starts.len(), step: change });
            }
        }
    }

    /// The threshold, and how far it was searched.
    fn threshold(&self, set: &At) -> Result<(Option<Threshold>, f64), BounceFailure> {
        let (mut low, mut high) = (0.0, 1.0);
        let mut low_growth = None;
        let mut high_growth = set.growth();
        let mut above: Option<At> = None;
        if high_growth <= 0.0 {
            // Upwards in steps, as far as there is a motion.
            loop {
                (low, low_growth) = (high, Some(high_growth));
                if low >= self.options.up_to {
                    return Ok((None, low));
                }
                high = (low * 1.25).min(self.options.up_to);
                let next = match self.at(high, Some(set.harmonics)) {
                    Ok(next) => next,
                    Err(BounceFailure::Cancelled) => return Err(BounceFailure::Cancelled),
                    Err(_) => return Ok((None, low)),
                };
                if next.strokes.iter().any(|stroke| *stroke > self.options.longest) {
                    return Ok((None, low));
                }
                high_growth = next.growth();
                if high_growth > 0.0 {
                    above = Some(next);
                    break;
                }
            }
        }
        let searched_to = high;
        // At rest every motion decays; the exponents of the linear chain need no answer here.
        let mut unstable: Option<At> = None;
        for _ in 0..60 {
            if high - low <= self.options.tolerance.max(1e-5) * high {
                break;
            }
            // A chord where both ends are known, kept off the ends; else the middle.
            let chord = low_growth
                .map(|low_growth: f64| low - low_growth * (high - low) / (high_growth - low_growth));
            let margin = 0.05 * (high - low);
            let middle = chord.unwrap_or((low + high) / 2.0).clamp(low + margin, high - margin);
            let at = self.at(middle, Some(set.harmonics))?;
            match at.growth() > 0.0 {
                true => {
                    (high, high_growth) = (middle, at.growth());
                    unstable = Some(at);
                }
                false => (low, low_growth) = (middle, Some(at.growth())),
            }
        }
        let at = unstable.as_ref().or(above.as_ref()).unwrap_or(set);
        let leading = at.exponents.first().copied().unwrap_or_default();
        let (frequencies, response) = class(leading, self.drive.fundamental.omega());
        let strokes = at.strokes.clone();
        Ok((Some(Threshold { ratio: high, strokes, frequencies, response }), searched_to))
    }
}

/// 4ζ/(n + 1) of the natural motion nearest to half the drive.
fn estimate(network: &Network<'_>, stack: &Stack, omega: f64) -> Option<Estimate> {
    let mechanism = Mechanism::of(stack).ok()?;
    let off = |f: &f64| (f * TAU / (omega / 2.0)).ln().abs();
    let nearest =
        natural_frequencies(&mechanism, stack).into_iter().min_by(|a, b| off(a).total_cmp(&off(b)))?;
    let still = Swing::of(vec![vec![Complex64::default(); 2]; network.gases.len()]);
    // Without a swing the harmonics are apart: one is enough, and s is not folded.
    let s =
        Hill::new(network, &still, &Rows::default(), omega, 0).from(Complex64::new(0.0, TAU * nearest))?;
    let exponent =
        (0..network.gases.len()).map(|gas| network.real_exponent(gas, s.im, omega)).fold(1.0, f64::max);
    let damping_ratio = -s.re / s.norm();
    Some(Estimate {
        stroke_ratio: 4.0 * damping_ratio / (exponent + 1.0),
        damping_ratio,
        frequency: s.im / TAU,
    })
}

#[cfg(test)]
mod tests;
