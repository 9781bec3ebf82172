//! The periodic motion with its overtones, and whether the cushions start to bounce by themselves.

use super::{Bounce, BounceResponse, Cushion, LostMotion, Overtone, Slab, Trouble};
use crate::engine::Engine;
use physics::response::{self, BounceFailure, HarmonicFailure, HarmonicMotion, PeriodicDrive, SlabHarmonics};
use physics::stack::{Drive, Stack};
use setup::resolved::Setup;

/// Overtones below this share of the fundamental are left out: they change no digit that is shown.
pub(crate) const LEAST: f64 = 1e-6;

/// Harmonics that the results tell.
const TOLD: usize = 6;

/// What the cell does; `None` when it is at rest, or its distortion could not be read.
pub(super) fn periodic_drive(setup: &Setup, drive: &Drive) -> Option<PeriodicDrive> {
    let written = setup.drive.as_ref()?;
    if drive.acceleration == 0.0 || setup.is_unreadable("drive.distortion") {
        return None;
    }
    let distortion = written.distortion.iter().map(|given| given.value.into()).collect();
    Some(PeriodicDrive { fundamental: *drive, distortion })
}

/// The motion, or what is known instead.
pub(super) enum Motion {
    Known(HarmonicMotion),
    Lost(LostMotion),
    Trouble(Trouble),
    Cancelled,
}

pub(super) fn motion(
    stack: &Stack,
    drive: &PeriodicDrive,
    place: &str,
    engine: &Engine,
    cancel: &(dyn Fn() -> bool + Sync),
) -> Motion {
    match engine.harmonics(stack, drive, cancel) {
        Ok(motion) => Motion::Known(motion),
        Err(HarmonicFailure::Cancelled) => Motion::Cancelled,
        Err(HarmonicFailure::BranchEnds { reached, stroke_ratio }) => {
            Motion::Lost(LostMotion { reached, stroke_ratio })
        }
        Err(failure) => {
            Motion::Trouble(Trouble::NotConverged { place: place.to_owned(), detail: failure.to_string() })
        }
    }
}

/// `Ok(None)` where nothing can bounce.
pub(super) fn bounce(
    stack: &Stack,
    drive: &PeriodicDrive,
    place: &str,
    engine: &Engine,
    cancel: &(dyn Fn() -> bool + Sync),
) -> Result<Option<Bounce>, Option<Trouble>> {
    match engine.bounce(stack, drive, cancel) {
        Ok(found) => Ok(found.map(|found| told(&found))),
        // Said of the motion itself; or no longer wanted.
        Err(BounceFailure::Motion(_) | BounceFailure::Cancelled) => Err(None),
        Err(failure) => {
            Err(Some(Trouble::NotConverged { place: place.to_owned(), detail: failure.to_string() }))
        }
    }
}

fn told(found: &response::Bounce) -> Bounce {
    let response = |response: response::BounceResponse| match response {
        response::BounceResponse::Half => BounceResponse::Half,
        response::BounceResponse::Same => BounceResponse::Same,
        response::BounceResponse::Pair => BounceResponse::Pair,
    };
    Bounce {
        growth_rate: found.growth_rate,
        frequencies: found.frequencies.clone(),
        response: response(found.response),
        threshold_ratio: found.threshold.as_ref().map(|threshold| threshold.ratio),
        threshold_strokes: found.threshold.as_ref().map(|threshold| threshold.strokes.clone()),
        threshold_frequencies: found.threshold.as_ref().map(|threshold| threshold.frequencies.clone()),
        threshold_response: found.threshold.as_ref().map(|threshold| response(threshold.response)),
        searched_to: found.searched_to,
        estimated_stroke: found.estimate.map(|estimate| estimate.stroke_ratio),
        damping_ratio: found.estimate.map(|estimate| estimate.damping_ratio),
    }
}

/// Writes the motion into slabs and cushions; both are in its order.
pub(super) fn tell(motion: &HarmonicMotion, slabs: &mut [Slab], cushions: &mut [Cushion]) {
    for (slab, found) in slabs.iter_mut().zip(&motion.slabs) {
        slab.overtones = Some(overtones(found));
        if let (Some(own), Some(first)) = (&mut slab.motion, found.acceleration.first()) {
            own.nonlinear_acceleration = Some(first.norm());
        }
    }
    for (cushion, found) in cushions.iter_mut().zip(&motion.cushions) {
        cushion.stroke_harmonics = Some(found.strain.iter().take(TOLD).map(|xi| xi.norm()).collect());
        cushion.mean_shift = Some(found.mean_shift);
    }
}

fn overtones(slab: &SlabHarmonics) -> Vec<Overtone> {
    let ratios = slab.overtones(LEAST);
    let told = ratios.iter().take(TOLD - 1).enumerate();
    told.map(|(i, ratio)| Overtone { order: i + 2, ratio: ratio.norm(), phase: ratio.arg() }).collect()
}
