//! The periodic motion of slabs on cushions that are no linear springs: harmonic balance.
//!
//! A gas spring is stiffer compressed than expanded, so it makes overtones of the drive, and a table makes some too.
//! With the equations of `network`, the cell's acceleration Re Σ A_n e^{inωt} and y(t) = y_0 + Re Σ y_n e^{inωt} for every
//! node, each harmonic of each node's equation is balanced:
//!
//! ```text
//! (inω)² m (1 + e_n) y_n + m A_n = [p_below − p_above]_n,   n = 0 … N
//! p_n = P (−N_n ξ_n + [(1 + ξ)^{−ν_n} − 1 + ν_n ξ]_n)
//! ```
//!
//! (e.g. Krack & Gross, Harmonic Balance for Nonlinear Vibration Problems, 2019). The bracket is sampled over a period and
//! projected. Newton's method, followed from rest to the set drive so that the branch found is the one that a slowly
//! raised drive leads to; N starts at 3 and is doubled until no slab's acceleration changes by more than the tolerance.
//! Range: strains short of closing a cushion; approximations as in `network`.

mod balance;

pub(super) use balance::samples;

use super::chain::ResponseError;
use super::network::Network;
use crate::stack::{Drive, Stack};
use balance::{Balance, Lost};
use num_complex::Complex64;
use quantity::vocabulary::Effect;
use std::ops::Range;

/// What the cell does.
#[derive(Debug, Clone, PartialEq)]
pub struct PeriodicDrive {
    /// The fundamental; its phase is 0.
    pub fundamental: Drive,
    /// Overtones of the cell's acceleration over its fundamental, n = 2, 3 …, e^{inωt}.
    pub distortion: Vec<Complex64>,
}

/// How exactly it is solved.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HarmonicOptions {
    /// Doubling the number of harmonics changes no slab's acceleration by more than this share of its fundamental.
    pub tolerance: f64,
    /// Harmonics beyond which a motion is not followed.
    pub most: usize,
}

impl Default for HarmonicOptions {
    fn default() -> Self {
        HarmonicOptions { tolerance: 1e-8, most: 48 }
    }
}

/// The periodic motion.
#[derive(Debug, Clone, PartialEq)]
pub struct HarmonicMotion {
    /// Top first, as in [`super::Chain`].
    pub slabs: Vec<SlabHarmonics>,
    /// Gas layers that are springs, top first.
    pub cushions: Vec<CushionHarmonics>,
    /// How far it can be relied on.
    pub evidence: HarmonicEvidence,
}

/// The motion of one slab: its effective gravity is g + Re Σ a_n e^{inωt}.
#[derive(Debug, Clone, PartialEq)]
pub struct SlabHarmonics {
    /// Indices of its layers.
    pub layers: Range<usize>,
    /// a_n in m/s², n = 1, 2 …, e^{inωt}, phases relative to the cell's fundamental.
    pub acceleration: Vec<Complex64>,
}

/// The strain of one gas layer: ξ_0 + Re Σ ξ_n e^{inωt}.
#[derive(Debug, Clone, PartialEq)]
pub struct CushionHarmonics {
    /// Index of its layer.
    pub layer: usize,
    /// Change of its mean thickness over its thickness at rest.
    pub mean_shift: f64,
    /// Stroke over thickness: ξ_n, n = 1, 2 …
    pub strain: Vec<Complex64>,
    /// Least thickness in a period over that at rest.
    pub least: f64,
}

/// Evidence of a periodic motion.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HarmonicEvidence {
    /// Harmonics kept.
    pub harmonics: usize,
    /// Largest change of a slab's acceleration from half as many, over its fundamental.
    pub change: f64,
    /// Largest unbalanced force over the largest inertia force.
    pub residual: f64,
}

/// Why there is no periodic motion.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum HarmonicFailure {
    /// The stack or the drive cannot be used.
    Response(ResponseError),
    /// The motion that starts from rest ends before the set drive: the slabs jump to a larger one, or a cushion closes.
    BranchEnds {
        /// Share of the set drive up to which it was followed.
        reached: f64,
        /// Largest stroke over thickness there (amplitude of the fundamental).
        stroke_ratio: f64,
    },
    /// The number of harmonics does not suffice.
    NotConverged {
        /// Harmonics kept last.
        harmonics: usize,
        /// Change from half as many, over the fundamental.
        change: f64,
    },
    /// The result was no longer wanted.
    Cancelled,
}

impl std::fmt::Display for HarmonicFailure {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            HarmonicFailure::Response(error) => error.fmt(f),
            HarmonicFailure::BranchEnds { reached, stroke_ratio } => write!(
                f,
                "the motion that starts from rest ends at {:.1} % of the drive, with a stroke of {:.1} %",
                1e2 * reached,
                1e2 * stroke_ratio
            ),
            HarmonicFailure::NotConverged { harmonics, change } => {
                write!(
                    f,
                    "with {harmonics} harmonics the motion still changes by {change:.1e} of its fundamental"
                )
            }
            HarmonicFailure::Cancelled => write!(f, "cancelled"),
        }
    }
}

impl std::error::Error for HarmonicFailure {}

impl SlabHarmonics {
    /// What a stability problem asks for: a_n/|a_1| for n = 2, 3 … with the time counted from a crest of the
    /// fundamental, so that the effective gravity is g + |a_1| (cos ωt + Re Σ r_n e^{inωt}). Ends with the last overtone
    /// above `least`; empty for a slab at rest.
    pub fn overtones(&self, least: f64) -> Vec<Complex64> {
        let Some(first) = self.acceleration.first().filter(|first| first.norm() > 0.0) else {
            return Vec::new();
        };
        let mut ratios: Vec<Complex64> = self
            .acceleration
            .iter()
            .enumerate()
            .skip(1)
            .map(|(i, a)| a / first.norm() * Complex64::from_polar(1.0, -(i as f64 + 1.0) * first.arg()))
            .collect();
        let last = ratios.iter().rposition(|ratio| ratio.norm() > least);
        ratios.truncate(last.map_or(0, |last| last + 1));
        ratios
    }

    /// |a_n/a_1|, 0 where there is none.
    pub fn share(&self, n: usize) -> f64 {
        let of = |n: usize| self.acceleration.get(n.wrapping_sub(1)).map_or(0.0, |a| a.norm());
        if of(1) > 0.0 { of(n) / of(1) } else { 0.0 }
    }
}

/// The periodic motion of the stack. With the effect `cushion-harmonics` off the springs are linear and only the
/// table's own overtones remain.
///
/// # Errors
/// [`HarmonicFailure`].
pub fn harmonics(
    stack: &Stack,
    drive: &PeriodicDrive,
    options: &HarmonicOptions,
    cancel: &dyn Fn() -> bool,
) -> Result<HarmonicMotion, HarmonicFailure> {
    let network = Network::of(stack).map_err(HarmonicFailure::Response)?;
    let state = periodic(&network, stack, drive, options, cancel)?;
    Ok(state.motion(&network, drive))
}

/// The state behind a motion, for what is built on it.
pub(super) struct Periodic {
    /// Nodes' displacements relative to the cell, m: `[node][n]`, n = 0 … N.
    pub places: Vec<Vec<Complex64>>,
    pub evidence: HarmonicEvidence,
}

/// As [`harmonics`], of a network.
pub(super) fn periodic(
    network: &Network<'_>,
    stack: &Stack,
    drive: &PeriodicDrive,
    options: &HarmonicOptions,
    cancel: &dyn Fn() -> bool,
) -> Result<Periodic, HarmonicFailure> {
    let Drive { frequency, acceleration } = drive.fundamental;
    let usable = frequency > 0.0 && frequency.is_finite() && acceleration >= 0.0 && acceleration.is_finite();
    if !usable {
        return Err(HarmonicFailure::Response(ResponseError::Unusable { frequency, acceleration }));
    }
    let omega = drive.fundamental.omega();
    let linear = !stack.has(Effect::CushionHarmonics);
    let stated = drive.distortion.len() + 1;
    let mut count = stated.max(3);
    let mut before: Option<Vec<Vec<Complex64>>> = None;
    if network.nodes.is_empty() {
        // Everything moves with the cell.
        let evidence = HarmonicEvidence { harmonics: count, change: 0.0, residual: 0.0 };
        return Ok(Periodic { places: Vec::new(), evidence });
    }
    loop {
        if cancel() {
            return Err(HarmonicFailure::Cancelled);
        }
        let balance = Balance::new(network, omega, count, linear);
        let (places, residual) = match &before {
            None => balance.follow(&drive.cell(count), cancel),
            Some(start) => balance.refine(&drive.cell(count), start, cancel),
        }
        .map_err(|lost| match lost {
            Lost::Branch { reached, stroke_ratio } => HarmonicFailure::BranchEnds { reached, stroke_ratio },
            Lost::Cancelled => HarmonicFailure::Cancelled,
        })?;
        let change = match &before {
            None if linear || network.gases.is_empty() => 0.0,
            None => f64::INFINITY,
            Some(before) => change(before, &places, acceleration / (omega * omega)),
        };
        let evidence = HarmonicEvidence { harmonics: count, change, residual };
        if change <= options.tolerance || acceleration == 0.0 {
            return Ok(Periodic { places, evidence });
        }
        if 2 * count > options.most && before.is_some() {
            return Err(HarmonicFailure::NotConverged { harmonics: count, change });
        }
        before = Some(places);
        count *= 2;
    }
}

/// Largest change of n² y_n over the largest fundamental motion (at least the cell's).
fn change(before: &[Vec<Complex64>], after: &[Vec<Complex64>], travel: f64) -> f64 {
    let scale = after.iter().map(|node| node[1].norm()).fold(travel, f64::max);
    let difference = |old: &Vec<Complex64>, new: &Vec<Complex64>| {
        let at = |n: usize| old.get(n).copied().unwrap_or_default();
        new.iter().enumerate().map(|(n, y)| (n * n).max(1) as f64 * (y - at(n)).norm()).fold(0.0, f64::max)
    };
    before.iter().zip(after).map(|(old, new)| difference(old, new)).fold(0.0, f64::max) / scale
}

impl PeriodicDrive {
    /// A pure sine.
    pub fn sine(drive: Drive) -> PeriodicDrive {
        PeriodicDrive { fundamental: drive, distortion: Vec::new() }
    }

    /// A_n in m/s², n = 0 … `count`.
    pub(super) fn cell(&self, count: usize) -> Vec<Complex64> {
        let a = Complex64::new(self.fundamental.acceleration, 0.0);
        let overtone = |n: usize| self.distortion.get(n - 2).map_or(Complex64::default(), |ratio| a * ratio);
        (0..=count)
            .map(|n| match n {
                0 => Complex64::default(),
                1 => a,
                n => overtone(n),
            })
            .collect()
    }
}

impl Periodic {
    fn motion(&self, network: &Network<'_>, drive: &PeriodicDrive) -> HarmonicMotion {
        let count = self.evidence.harmonics;
        let omega = drive.fundamental.omega();
        let cell = drive.cell(count);
        let slabs = network
            .mechanism
            .masses
            .iter()
            .enumerate()
            .map(|(i, mass)| {
                let node = network.nodes.iter().position(|node| *node == Some(i));
                let relative = |n: usize| node.map_or(Complex64::default(), |node| self.places[node][n]);
                let acceleration =
                    (1..=count).map(|n| cell[n] - (n as f64 * omega).powi(2) * relative(n)).collect();
                SlabHarmonics { layers: mass.layers.clone(), acceleration }
            })
            .collect();
        let cushions = (0..network.gases.len())
            .map(|gas| {
                let strain = self.strain(network, gas);
                let samples = samples(&strain, balance::sample_count(count));
                CushionHarmonics {
                    layer: network.gases[gas].layer,
                    mean_shift: strain[0].re,
                    least: 1.0 + samples.into_iter().fold(f64::INFINITY, f64::min),
                    strain: strain[1..].to_vec(),
                }
            })
            .collect();
        HarmonicMotion { slabs, cushions, evidence: self.evidence }
    }

    /// ξ_n of a gas layer, n = 0 … N.
    pub fn strain(&self, network: &Network<'_>, gas: usize) -> Vec<Complex64> {
        (0..=self.evidence.harmonics)
            .map(|n| network.gases[gas].strain(|node| self.places[node][n]))
            .collect()
    }
}

#[cfg(test)]
mod tests;
