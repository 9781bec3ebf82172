//! Which physics runs for one setup: the stack, the chain, every slab, and the window through the chain.

use super::build::build;
use super::harmonics;
use super::intervals::drive_intervals;
use super::trouble::Trouble;
use super::window::drive_window;
use super::{Cushion, Derived, DriveState, Face, LINE_FLEXES, Limits, Motion, Seat, SetBy, Slab, Stability};
use super::{validity, wedge};
use crate::engine::Engine;
use physics::response::{self, Chain, PeriodicDrive, SlabMotion};
use physics::stability::layered::{Forcing, Layered};
use physics::stability::{self, ContactLine, Failure, SlabStability};
use physics::stack::{Drive, Plan, Stack};
use quantity::vocabulary::Phase;
use rayon::prelude::*;
use setup::resolved::{NotLookedAt, Setup};
use std::ops::Range;
use std::sync::Arc;

/// Frequency of the formal drive of amplitude zero at which a cell at rest is judged, Hz: the growth without drive
/// does not depend on it.
const AT_REST: f64 = 50.0;

/// What was computed, and why the rest was not.
#[derive(Debug, Clone, Default)]
pub(crate) struct Outcome {
    pub derived: Derived,
    pub troubles: Vec<Trouble>,
    pub cancelled: bool,
}

impl Outcome {
    /// Whether every slab has its verdict.
    pub(crate) fn is_judged(&self) -> bool {
        let slabs = &self.derived.slabs;
        self.derived.stack.is_some()
            && self.troubles.is_empty()
            && slabs.iter().all(|slab| slab.faces.is_empty() || slab.stability.is_some())
    }
}

/// Runs the physics of one setup.
pub(crate) fn derive(setup: &Setup, engine: &Engine, cancel: &(dyn Fn() -> bool + Sync)) -> Outcome {
    let mut outcome = Outcome::default();
    outcome.derived.defaults = setup.defaults.clone();
    outcome.derived.not_looked_at = setup.not_looked_at.clone();
    outcome.derived.effects_off = setup.effects_off.iter().map(|given| given.value).collect();
    if setup.drive_unreadable || setup.is_unreadable("drive") {
        return outcome;
    }
    let drive =
        setup.drive.as_ref().map(|drive| DriveState::new(drive.frequency.value, drive.acceleration.value));
    outcome.derived.drive = drive;
    let Some(built) = build(setup, &mut outcome.troubles) else { return outcome };
    let stack = Arc::new(built.stack);
    outcome.derived.layers = built.states;
    outcome.derived.defaults.extend(built.closed_at_ambient);
    outcome.derived.stack = Some(Arc::clone(&stack));
    let forced = Drive {
        frequency: drive.map_or(AT_REST, |drive| drive.frequency),
        acceleration: drive.map_or(0.0, |drive| drive.acceleration),
    };
    let chain = match response::chain(&stack, &forced) {
        Ok(chain) => chain,
        Err(error) => {
            outcome
                .troubles
                .push(Trouble::NoResponse { place: "layer".to_owned(), detail: error.to_string() });
            return outcome;
        }
    };
    let moving = drive.is_some();
    let pinned = setup.cell.as_ref().is_some_and(|cell| cell.pinned_line.value);
    outcome.derived.natural_frequencies = chain.natural_frequencies.clone();
    outcome.derived.cushions = cushions(&stack, &chain, moving);
    let sideways = wedge::sideways(setup);
    outcome.derived.sideways = sideways;
    let periodic = harmonics::periodic_drive(setup, &forced);
    let cushion = chain.cushions.first().map_or(0, |cushion| cushion.layer);
    let place = outcome.derived.layers[cushion].place.clone();
    let with = |drive: &PeriodicDrive| harmonics::motion(&stack, drive, &place, engine, cancel);
    let harmonic = periodic.as_ref().map(with);
    let judge_all = || -> Vec<_> {
        let one = |motion: &SlabMotion| {
            let mut slab = slab(&stack, motion, &forced, moving);
            let layered = stability::layered(&stack, motion.layers.clone());
            slab.held_line = pinned && slab.seat != Seat::Floating && stability::is_held_at(&layered);
            let line = if slab.held_line { ContactLine::Pinned } else { ContactLine::Free };
            let forcing = Forcing { omega: forced.omega(), acceleration: motion.acceleration.norm() };
            let judged = judge(&layered, &forcing, (stack.cell.plan, line), engine, cancel);
            let holds = matches!(&judged, Some(Ok(found)) if found.worst.growth.rate <= 0.0);
            let wedges = sideways
                .filter(|_| holds)
                .map(|sideways| wedge::wedges(&stack, motion, &forced, &sideways, cancel));
            (slab, judged, wedges)
        };
        chain.slabs.par_iter().map(one).collect()
    };
    let bounce = || match (&periodic, &harmonic) {
        (Some(drive), Some(harmonics::Motion::Known(_))) => {
            harmonics::bounce(&stack, drive, &place, engine, cancel)
        }
        _ => Ok(None),
    };
    let (judged, bounce) = rayon::join(judge_all, bounce);
    for (mut slab, judged, wedges) in judged {
        let place = &outcome.derived.layers[slab.range.start].place;
        match wedges {
            Some(Ok(found)) => slab.wedges = found,
            Some(Err(Failure::Cancelled)) => outcome.cancelled = true,
            Some(Err(failure)) => outcome.troubles.push(Trouble::NotConverged {
                place: place.clone(),
                detail: format!("the wedge of its faces by a level error: {failure}"),
            }),
            None => {}
        }
        match judged {
            Some(Ok(found)) => slab.stability = Some(stability(&found, moving)),
            Some(Err(Failure::Cancelled)) => outcome.cancelled = true,
            Some(Err(failure)) => outcome.troubles.push(Trouble::NotConverged {
                place: outcome.derived.layers[slab.range.start].place.clone(),
                detail: failure.to_string(),
            }),
            None => {}
        }
        outcome.derived.slabs.push(slab);
    }
    match harmonic {
        Some(harmonics::Motion::Known(motion)) => {
            harmonics::tell(&motion, &mut outcome.derived.slabs, &mut outcome.derived.cushions);
        }
        Some(harmonics::Motion::Lost(lost)) => outcome.derived.lost_motion = Some(lost),
        Some(harmonics::Motion::Trouble(trouble)) => outcome.troubles.push(trouble),
        Some(harmonics::Motion::Cancelled) => outcome.cancelled = true,
        None => {}
    }
    match bounce {
        Ok(bounce) => outcome.derived.bounce = bounce,
        Err(trouble) => outcome.troubles.extend(trouble),
    }
    outcome.derived.window = drive.and_then(|drive| drive_window(&outcome.derived.slabs, drive.acceleration));
    outcome.derived.validity = validity::statements(&outcome.derived);
    outcome.derived.drive_intervals =
        drive.and_then(|drive| drive_intervals(&outcome.derived.slabs, drive.acceleration));
    if pinned {
        outcome.derived.not_looked_at.extend(line_not_looked_at(&outcome.derived.slabs));
    }
    outcome
}

/// The slabs whose pinned line is taken as free although nothing else speaks of it.
fn line_not_looked_at(slabs: &[Slab]) -> Option<NotLookedAt> {
    let slides = |slab: &Slab| slab.motion.is_some_and(|motion| motion.slide > LINE_FLEXES);
    let names: Vec<String> = slabs
        .iter()
        .filter(|slab| !slab.held_line && !slab.faces.is_empty())
        .filter(|slab| slab.seat != Seat::Floating || !slides(slab))
        .map(|slab| format!("\"{}\"", slab.name))
        .collect();
    (!names.is_empty()).then(|| NotLookedAt {
        check: format!("a pinned contact line at {}", names.join(", ")),
        needs: "the pinned modes of a slab with several faces, or a surface tension; the modes of a free line are judged \
                instead"
            .to_owned(),
        place: "cell.contact-line".to_owned(),
    })
}

fn slab(stack: &Stack, motion: &SlabMotion, drive: &Drive, moving: bool) -> Slab {
    let layers: Vec<String> =
        stack.layers[motion.layers.clone()].iter().map(|layer| layer.name.clone()).collect();
    let seat = match motion.seat {
        response::Seat::Floating => Seat::Floating,
        response::Seat::OnFloor => Seat::OnFloor,
        response::Seat::UnderLid => Seat::UnderLid,
        response::Seat::Fill => Seat::Fill,
    };
    let omega = drive.omega();
    let relative = (motion.amplification - 1.0).norm();
    Slab {
        name: layers.join(" + "),
        range: motion.layers.clone(),
        layers,
        seat,
        mass_per_area: motion.mass_per_area,
        motion: moving.then(|| Motion {
            acceleration: motion.acceleration.norm(),
            amplification: motion.amplification.norm(),
            phase: motion.amplification.arg(),
            slide: relative * drive.acceleration / (omega * omega),
            nonlinear_acceleration: None,
        }),
        faces: faces(stack, motion.layers.clone()),
        held_line: false,
        stability: None,
        overtones: None,
        gas_compressibility: compressibility(stack, motion.layers.clone(), omega),
        wedges: Vec::new(),
    }
}

/// The interfaces in the order of `physics::stability::layered`: the gas above, inside, the gas below.
fn faces(stack: &Stack, range: Range<usize>) -> Vec<Face> {
    let mut faces = Vec::new();
    let last = stack.layers.len();
    let face = |above: Option<usize>, below: Option<usize>| {
        let density = |index: Option<usize>| index.map_or(stack.ambient_density, |i| stack.layers[i].density);
        let name = |index: Option<usize>| index.map(|i| stack.layers[i].name.clone());
        Face { above: name(above), below: name(below), heavier_above: density(above) > density(below) }
    };
    if range.start > 0 {
        faces.push(face(Some(range.start - 1), Some(range.start)));
    } else if !stack.cell.sealed_top {
        faces.push(face(None, Some(0)));
    }
    for i in range.start..range.end.saturating_sub(1) {
        faces.push(face(Some(i), Some(i + 1)));
    }
    if range.end < last {
        faces.push(face(Some(range.end - 1), Some(range.end)));
    } else if stack.cell.open_bottom {
        faces.push(face(Some(last - 1), None));
    }
    faces
}

/// The slab's stability; `None` where it has no interface.
fn judge(
    layered: &Layered,
    forcing: &Forcing,
    (plan, line): (Plan, ContactLine),
    engine: &Engine,
    cancel: &(dyn Fn() -> bool + Sync),
) -> Option<Result<SlabStability, Failure>> {
    if cancel() {
        return Some(Err(Failure::Cancelled));
    }
    (layered.interfaces() > 0).then(|| engine.slab(layered, forcing, plan, line, cancel))
}

fn set_by(by: &stability::SetBy) -> SetBy {
    SetBy { face: by.interface, wavenumber: by.wavenumber, mode: by.mode, response: by.response }
}

fn stability(found: &SlabStability, moving: bool) -> Stability {
    let worst = &found.worst;
    Stability {
        growth_rate: worst.growth.rate,
        worst: SetBy {
            face: worst.growth.interface,
            wavenumber: worst.wavenumber,
            mode: worst.mode,
            response: worst.growth.response,
        },
        mechanism: found.mechanism,
        unstable_band: found.unstable_band,
        ring_down: found.ring_down,
        limits: moving.then(|| Limits {
            windows: found.windows.clone(),
            windows_set_by: found
                .windows_set_by
                .iter()
                .map(|ends| ends.each_ref().map(|by| by.as_ref().map(set_by)))
                .collect(),
            hold: found.hold_limit,
            wave: found.wave_limit,
            hold_set_by: found.hold_set_by.as_ref().map(set_by),
            wave_set_by: found.wave_set_by.as_ref().map(set_by),
            searched_up_to: found.searched_up_to,
        }),
    }
}

fn cushions(stack: &Stack, chain: &Chain, moving: bool) -> Vec<Cushion> {
    chain
        .cushions
        .iter()
        .map(|cushion| Cushion {
            index: cushion.layer,
            layer: stack.layers[cushion.layer].name.clone(),
            pressure: cushion.pressure,
            polytropic_re: cushion.polytropic.re,
            polytropic_im: cushion.polytropic.im,
            stroke_ratio: moving.then_some(cushion.stroke_ratio),
            stroke_harmonics: None,
            mean_shift: None,
        })
        .collect()
}

/// (ω/kc)² ρ_gas/(ρ_liquid tanh kH), the largest of the gas layers beside the slab, at the longest mode of the cell.
fn compressibility(stack: &Stack, range: Range<usize>, omega: f64) -> Option<f64> {
    let k = longest_mode(stack.cell.plan);
    let beside = [(range.start.checked_sub(1), range.start), (Some(range.end), range.end.saturating_sub(1))];
    beside
        .into_iter()
        .filter_map(|(gas, liquid)| {
            let layer = stack.layers.get(gas?)?;
            let index = match layer.phase() {
                Phase::Gas => layer.gas?.adiabatic_index,
                Phase::Liquid => return None,
            };
            // c² = γ p/ρ; the pressure of a gas with known density: within the weight of one slab of ambient.
            let pressure = layer.gas?.pressure.unwrap_or(stack.ambient_pressure);
            let sound = index * pressure / layer.density;
            let liquid = stack.layers.get(liquid)?.density;
            Some(omega * omega / (k * k * sound) * layer.density / (liquid * (k * layer.thickness).tanh()))
        })
        .reduce(f64::max)
}

fn longest_mode(plan: Plan) -> f64 {
    stability::cell_modes(plan, f64::INFINITY, 1).first().map_or(f64::NAN, |mode| mode.wavenumber)
}
