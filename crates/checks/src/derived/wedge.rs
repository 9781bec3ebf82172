//! What the level error and the cross-axis motion do to the faces of a slab.
//!
//! Nobody states in which horizontal direction a cell leans or a table sways, so each axis of the cell takes all of
//! both, and their effects add by magnitude. A cross-axis motion without a phase takes the worst one.

use num_complex::Complex64;
use physics::response::SlabMotion;
use physics::stability::layered::Forcing;
use physics::stability::wedge::{Along, FaceGains, Wedge, wedge};
use physics::stability::{self, Failure};
use physics::stack::{Drive, Stack};
use quantity::vocabulary::Phase;
use setup::resolved::{Given, Origin, Setup};

/// The sideways forces on the cell.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sideways {
    /// Level error of the rig, rad, ≥ 0.
    pub tilt: f64,
    /// Whether it is the default.
    pub tilt_assumed: bool,
    /// Sideways over vertical acceleration of the cell, 1.
    pub cross_axis: f64,
    /// Its phase relative to the vertical motion of the cell, rad; `None`: not known, the worst is taken.
    pub cross_phase: Option<f64>,
}

/// How one face of a slab stands under them, at worst, along the axis of the cell where it stands highest.
#[derive(Debug, Clone, PartialEq)]
pub struct FaceWedge {
    /// Index into [`super::Slab::faces`].
    pub face: usize,
    /// Axis of the cell.
    pub along: &'static str,
    /// Mean in time of its slope, 1.
    pub mean_slope: f64,
    /// Peak of its slope's oscillation at the drive's frequency, 1.
    pub oscillating_slope: f64,
    /// Largest height at the wall above the mean level: mean and oscillation, m.
    pub wall_height: f64,
    /// Mean slope per rad of tilt; positive: towards the lower end.
    pub tilt_gain: f64,
    /// Mean slope per unit of cross-axis ratio of the **slab**, at worst over the phase unless it is known.
    pub cross_gain: f64,
    /// The gas layer that it leans into, and the height from wall to wall over its thickness.
    pub into: Option<(String, f64)>,
    /// Modes summed along this axis.
    pub modes: usize,
    /// Harmonics kept.
    pub harmonics: usize,
    /// Relative change of a gain by doubling the harmonics.
    pub harmonics_change: f64,
    /// Change of a wall height per unit of push, over half the size of the cell, by doubling the modes.
    pub modes_change: f64,
}

/// What the setup says about sideways forces; `None` while a value of it is unreadable.
pub(super) fn sideways(setup: &Setup) -> Option<Sideways> {
    let tilt = setup.cell.as_ref()?.tilt.as_ref()?;
    let (ratio, phase) = match &setup.drive {
        Some(drive) => {
            let cross = drive.cross_axis.as_ref()?;
            (cross.ratio.value, cross.phase.as_ref().map(|phase| phase.value))
        }
        None => (0.0, None),
    };
    let assumed = |given: &Given<f64>| matches!(given.origin, Origin::Default(_));
    Some(Sideways {
        tilt: tilt.value.abs(),
        tilt_assumed: assumed(tilt),
        cross_axis: ratio,
        cross_phase: phase,
    })
}

/// The wedges of a stable slab, one per face.
pub(super) fn wedges(
    stack: &Stack,
    motion: &SlabMotion,
    drive: &Drive,
    sideways: &Sideways,
    cancel: &(dyn Fn() -> bool + Sync),
) -> Result<Vec<FaceWedge>, Failure> {
    let layered = stability::layered(stack, motion.layers.clone());
    let forcing = Forcing { omega: drive.omega(), acceleration: motion.acceleration.norm() };
    let found: Wedge = wedge(&layered, &forcing, stack.cell.plan, &|| cancel())?;
    // The cell sways; its ratio to the slab's own acceleration is smaller where the slab is amplified.
    let on_slab = Sideways {
        cross_axis: sideways.cross_axis / motion.amplification.norm().max(f64::MIN_POSITIVE),
        cross_phase: sideways.cross_phase.map(|phase| phase - motion.amplification.arg()),
        ..*sideways
    };
    let above = beside(stack, motion.layers.start.checked_sub(1));
    let below = beside(stack, Some(motion.layers.end));
    let count = layered.interfaces();
    // The gas above is beside the first interface where there is one (no lid on the liquid), likewise below.
    let has_upper = motion.layers.start > 0 || !stack.cell.sealed_top;
    let has_lower = motion.layers.end < stack.layers.len() || stack.cell.open_bottom;
    let of_face = |face: usize| {
        let worst = found.directions.iter().max_by(|a, b| {
            let height = |direction: &stability::wedge::Direction| {
                worst_of(&direction.faces[face], &on_slab).wall * direction.size
            };
            height(a).total_cmp(&height(b))
        })?;
        let at_worst = worst_of(&worst.faces[face], &on_slab);
        let wall_height = 0.5 * worst.size * at_worst.wall;
        let gas = match (face == 0 && has_upper, face + 1 == count && has_lower) {
            (_, true) => below.clone(),
            (true, false) => above.clone(),
            (false, false) => None,
        };
        Some(FaceWedge {
            face,
            along: match worst.along {
                Along::Length => "length",
                Along::Width => "width",
                Along::Diameter => "diameter",
            },
            mean_slope: at_worst.mean,
            oscillating_slope: at_worst.oscillating,
            wall_height,
            tilt_gain: worst.faces[face].tilt.mean,
            cross_gain: at_worst.cross_gain,
            into: gas.map(|(name, thickness)| (name, 2.0 * wall_height / thickness)),
            modes: worst.evidence.modes,
            harmonics: worst.evidence.harmonics,
            harmonics_change: worst.evidence.harmonics_change,
            modes_change: worst.evidence.modes_change,
        })
    };
    Ok((0..count).filter_map(of_face).collect())
}

/// A gas layer of finite thickness at an index: one that is open to the air has room above.
fn beside(stack: &Stack, index: Option<usize>) -> Option<(String, f64)> {
    let index = index?;
    let layer = stack.layers.get(index).filter(|layer| layer.phase() == Phase::Gas)?;
    let open =
        (index == 0 && !stack.cell.sealed_top) || (index + 1 == stack.layers.len() && stack.cell.open_bottom);
    (!open).then(|| (layer.name.clone(), layer.thickness))
}

/// Magnitudes when everything adds up.
struct AtWorst {
    mean: f64,
    oscillating: f64,
    /// Height at the wall over half the size.
    wall: f64,
    cross_gain: f64,
}

fn worst_of(gains: &FaceGains, sideways: &Sideways) -> AtWorst {
    // The gain at a known phase, or the largest over all phases.
    let real = |x: f64, y: f64| match sideways.cross_phase {
        Some(phase) => x * phase.cos() + y * phase.sin(),
        None => x.hypot(y),
    };
    let complex = |x: Complex64, y: Complex64| match sideways.cross_phase {
        Some(phase) => (x * phase.cos() + y * phase.sin()).norm(),
        None => largest(x, y),
    };
    let FaceGains { tilt, in_phase, quadrature } = gains;
    let cross_gain = real(in_phase.mean, quadrature.mean);
    let sum =
        |by_tilt: f64, by_cross: f64| by_tilt.abs() * sideways.tilt + by_cross.abs() * sideways.cross_axis;
    let wall_mean = sum(tilt.wall, real(in_phase.wall, quadrature.wall));
    let wall_oscillating =
        sum(tilt.wall_oscillating.norm(), complex(in_phase.wall_oscillating, quadrature.wall_oscillating));
    AtWorst {
        mean: sum(tilt.mean, cross_gain),
        oscillating: sum(tilt.oscillating.norm(), complex(in_phase.oscillating, quadrature.oscillating)),
        wall: wall_mean + wall_oscillating,
        cross_gain,
    }
}

/// max over ψ of |x cos ψ + y sin ψ|: half axis of an ellipse.
fn largest(x: Complex64, y: Complex64) -> f64 {
    let (sum, difference) = (x.norm_sqr() + y.norm_sqr(), x * x + y * y);
    (0.5 * (sum + difference.norm())).sqrt()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_worst_phase_is_the_long_half_axis() {
        let (x, y) = (Complex64::new(1.0, 0.3), Complex64::new(-0.2, 0.7));
        let scanned = (0..100_000)
            .map(|i| {
                let psi = std::f64::consts::PI * f64::from(i) / 1e5;
                (x * psi.cos() + y * psi.sin()).norm()
            })
            .fold(0.0, f64::max);
        assert!((largest(x, y) - scanned).abs() < 1e-9, "{} {scanned}", largest(x, y));
    }
}
