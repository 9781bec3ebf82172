//! What was computed for one setup. SI, peak amplitudes, e^{+iωt}, layers and slabs top first, no spans.

mod build;
mod figures;
pub(crate) mod harmonics;
mod intervals;
mod run;
#[cfg(test)]
pub(crate) mod testing;
mod trouble;
mod validity;
mod wedge;
mod window;

#[cfg(test)]
pub(crate) use intervals::drive_intervals;
pub(crate) use run::{Outcome, derive};
pub(crate) use trouble::Trouble;
pub use validity::Validity;
pub use wedge::{FaceWedge, Sideways};
#[cfg(test)]
pub(crate) use window::drive_window;

use std::sync::Arc;

pub use physics::stability::layered::Response;
pub use physics::stability::{Mechanism, Mode};
use physics::stack::Stack;
use quantity::vocabulary::{Effect, Phase};
pub use setup::resolved::{DefaultInForce, NotLookedAt};

/// How far a contact line can move along the wall and still be pinned, m (judgement: about as far as a meniscus flexes).
pub(crate) const LINE_FLEXES: f64 = 1e-4;

/// Everything that was computed for one setup.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Derived {
    /// The drive in its three quantities; `None` when the cell is at rest or the drive is not known.
    pub drive: Option<DriveState>,
    /// The complete stack; `None` when a value that it needs is missing: then only the lists at the end are filled.
    pub stack: Option<Arc<Stack>>,
    /// One per layer of the stack, top first.
    pub layers: Vec<LayerState>,
    /// Liquid slabs, top first.
    pub slabs: Vec<Slab>,
    /// Gas layers that act as springs, top first.
    pub cushions: Vec<Cushion>,
    /// Natural frequencies of slabs on cushions, lossless, ascending, Hz.
    pub natural_frequencies: Vec<f64>,
    /// What the cell may be driven with.
    pub window: Option<DriveWindow>,
    /// Level error and cross-axis motion; `None` while a value of them is unreadable.
    pub sideways: Option<Sideways>,
    /// How far the equations hold, each assumption as a number.
    pub validity: Vec<Validity>,
    /// Whether slabs on cushions leave their motion by themselves; `None`: nothing can, or it is not known.
    pub bounce: Option<Bounce>,
    /// The motion that starts from rest does not reach the set drive; slabs and cushions then have no harmonics.
    pub lost_motion: Option<LostMotion>,
    /// Every interval of the drive in which all slabs hold; `None` when a slab is not judged or nothing is driven.
    pub drive_intervals: Option<DriveIntervals>,
    /// Defaults in force, each with its source.
    pub defaults: Vec<DefaultInForce>,
    /// What the file asks for and was not looked at.
    pub not_looked_at: Vec<NotLookedAt>,
    /// Effects that the file switches off.
    pub effects_off: Vec<Effect>,
}

/// The drive of the cell in its three quantities, peak.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DriveState {
    /// Hz
    pub frequency: f64,
    /// m/s²
    pub acceleration: f64,
    /// m/s
    pub velocity: f64,
    /// m
    pub displacement: f64,
}

/// One layer as the physics has it.
#[derive(Debug, Clone, PartialEq)]
pub struct LayerState {
    /// Its name.
    pub name: String,
    /// Its place, `layer.oil`.
    pub place: String,
    /// Gas or liquid.
    pub phase: Phase,
    /// What it is made of, in words: `silicone oil, 1000 mm²/s at 25 °C`.
    pub made_of: String,
    /// At operating pressure, m.
    pub thickness: f64,
    /// K
    pub temperature: f64,
    /// Mean static pressure, Pa absolute.
    pub pressure: f64,
    /// kg/m³
    pub density: f64,
    /// Dynamic viscosity, Pa s.
    pub viscosity: f64,
    /// Against gas, N/m; `None` for a gas.
    pub surface_tension: Option<f64>,
    /// Why its viscosity depends on how fast it is sheared, where it does.
    pub shear_dependent: Option<String>,
    /// Where density, viscosity and tension come from.
    pub sources: Vec<String>,
}

/// A slab: liquid layers in contact.
#[derive(Debug, Clone, PartialEq)]
pub struct Slab {
    /// The names of its layers joined by ` + `.
    pub name: String,
    /// Indices of its layers in the stack.
    pub range: std::ops::Range<usize>,
    /// Names of its layers, top first.
    pub layers: Vec<String>,
    /// Where it sits.
    pub seat: Seat,
    /// kg/m²
    pub mass_per_area: f64,
    /// How it moves; `None` when the cell is at rest.
    pub motion: Option<Motion>,
    /// Its interfaces, top first; indices of `Face` elsewhere point here.
    pub faces: Vec<Face>,
    /// Whether it was judged with its contact line held: it rests in the cell and the setup says so.
    pub held_line: bool,
    /// Every mode of the cell judged; `None` when that has no answer (a finding says why).
    pub stability: Option<Stability>,
    /// Its harmonics from the second on; `None` when the cell is at rest or they are not known.
    pub overtones: Option<Vec<Overtone>>,
    /// Largest (ω/kc)² ρ_gas/(ρ_liquid tanh kH) of the gas beside it at its longest mode: the share of the wave's
    /// inertia and stiffness that treating this gas as incompressible leaves out, 1.
    pub gas_compressibility: Option<f64>,
    /// How its faces stand under level error and cross-axis motion, top first; empty unless the slab is stable.
    pub wedges: Vec<FaceWedge>,
}

/// Where a slab sits.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Seat {
    /// Between gas and gas (or open air): moves on its cushions.
    Floating,
    /// On the floor: moves with the cell.
    OnFloor,
    /// Under the lid: moves with the cell.
    UnderLid,
    /// From floor to lid.
    Fill,
}

/// Vertical motion of a slab.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Motion {
    /// Peak acceleration, m/s².
    pub acceleration: f64,
    /// |T|: slab over cell.
    pub amplification: f64,
    /// Phase relative to the cell, rad, (−π, π].
    pub phase: f64,
    /// |T − 1|·x: peak of its motion along the wall, m.
    pub slide: f64,
    /// Peak of the fundamental on nonlinear cushions, m/s²; `None` where that is not known.
    pub nonlinear_acceleration: Option<f64>,
}

/// A harmonic of a slab's acceleration a (cos ωt + Re Σ ratio e^{i(nωt + phase)}), time from a crest of the first.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Overtone {
    /// n = 2, 3 …
    pub order: usize,
    /// Over the fundamental.
    pub ratio: f64,
    /// rad, (−π, π]
    pub phase: f64,
}

/// The gas springs as a parametric drive of the slabs.
#[derive(Debug, Clone, PartialEq)]
pub struct Bounce {
    /// Largest Re s, 1/s; positive: the slabs bounce.
    pub growth_rate: f64,
    /// Hz, below the drive's: half of it, or two that add up to it.
    pub frequencies: Vec<f64>,
    /// How it answers the drive.
    pub response: BounceResponse,
    /// Drive over the set one at which it begins; `None`: nowhere up to `searched_to`.
    pub threshold_ratio: Option<f64>,
    /// Strokes over thickness there, one per cushion.
    pub threshold_strokes: Option<Vec<f64>>,
    /// Frequencies of what begins there.
    pub threshold_frequencies: Option<Vec<f64>>,
    /// How it answers the drive there.
    pub threshold_response: Option<BounceResponse>,
    /// Drive over the set one that was looked at last.
    pub searched_to: f64,
    /// An estimate beside it: 4ζ/(n + 1), the stroke over thickness that starts it on f = 2 f0.
    pub estimated_stroke: Option<f64>,
    /// ζ of the natural motion nearest to half the drive.
    pub damping_ratio: Option<f64>,
}

/// How a bounce answers the drive.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum BounceResponse {
    /// At half its frequency.
    Half,
    /// At its frequency: another motion of the same period.
    Same,
    /// At two frequencies that add up to it.
    Pair,
}

/// How far the motion that starts from rest could be followed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LostMotion {
    /// Share of the set drive.
    pub reached: f64,
    /// Largest stroke over thickness there.
    pub stroke_ratio: f64,
}

/// An interface of a slab by the layers on either side of it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Face {
    /// Layer above; `None`: the open air.
    pub above: Option<String>,
    /// Layer below; `None`: the open air.
    pub below: Option<String>,
    /// Whether the denser fluid is above: at rest it falls.
    pub heavier_above: bool,
}

/// Stability of a slab. Accelerations are the slab's own, peak, m/s².
#[derive(Debug, Clone, PartialEq)]
pub struct Stability {
    /// Largest Re s over all modes, 1/s; positive grows.
    pub growth_rate: f64,
    /// The mode with that growth rate.
    pub worst: SetBy,
    /// Falls, waves or none.
    pub mechanism: Mechanism,
    /// Wavenumbers that grow, 1/m.
    pub unstable_band: Option<(f64, f64)>,
    /// Decay of the least damped interface mode, 1/s, when all decay.
    pub ring_down: Option<f64>,
    /// What holds; `None` without a drive frequency.
    pub limits: Option<Limits>,
}

/// Between which accelerations of its own a slab is stable, m/s² peak.
#[derive(Debug, Clone, PartialEq)]
pub struct Limits {
    /// Intervals in which every mode is stable, ascending; upper end `None`: none found up to `searched_up_to`.
    pub windows: Vec<(f64, Option<f64>)>,
    /// What sets the two ends of each window, in the order of `windows`; `None`: that end is open, 0, or could not
    /// be told.
    pub windows_set_by: Vec<[Option<SetBy>; 2]>,
    /// Lower end of the window that holds the set value, or of the nearest; 0 when no drive is needed; without a
    /// window the acceleration at which the last mode ceases to fall; `None`: nothing up to `searched_up_to` does.
    pub hold: Option<f64>,
    /// Upper end of the same window; without a window the onset of waves; `None`: none up to `searched_up_to`.
    pub wave: Option<f64>,
    /// What sets the lower end.
    pub hold_set_by: Option<SetBy>,
    /// What sets the upper end.
    pub wave_set_by: Option<SetBy>,
    /// Largest acceleration that was looked at.
    pub searched_up_to: f64,
}

/// A mode: what grows first or fastest.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SetBy {
    /// Index into [`Slab::faces`].
    pub face: usize,
    /// 1/m
    pub wavenumber: f64,
    /// Which mode of the cell.
    pub mode: Mode,
    /// How it answers the drive.
    pub response: Response,
}

/// A gas layer that is a spring.
#[derive(Debug, Clone, PartialEq)]
pub struct Cushion {
    /// Index of its layer in the stack.
    pub index: usize,
    /// Name of its layer.
    pub layer: String,
    /// Pa absolute
    pub pressure: f64,
    /// Complex polytropic exponent at the drive's frequency (at rest: at 50 Hz), real part.
    pub polytropic_re: f64,
    /// … and imaginary part: heat loss.
    pub polytropic_im: f64,
    /// Amplitude of the relative motion of its two faces over its thickness; `None` when the cell is at rest.
    pub stroke_ratio: Option<f64>,
    /// The same by harmonic on the nonlinear spring, n = 1, 2 …; `None` when that is not known.
    pub stroke_harmonics: Option<Vec<f64>>,
    /// Change of its mean thickness in motion over its thickness at rest.
    pub mean_shift: Option<f64>,
}

/// The window of the drive for the whole stack: **cell** acceleration, peak, m/s².
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DriveWindow {
    /// Whether some drive at this frequency holds everything.
    pub exists: bool,
    /// Lowest drive that holds everything; without a window the one at which the last face ceases to fall.
    /// `None`: none found.
    pub hold: Option<f64>,
    /// Drive at which the first waves rise; `None`: none found.
    pub wave: Option<f64>,
    /// Index of the slab that sets the lower end.
    pub hold_slab: Option<usize>,
    /// Index of the slab that sets the upper end.
    pub wave_slab: Option<usize>,
    /// The set drive.
    pub set: f64,
}

/// The intervals of the drive in which every slab holds: **cell** acceleration, peak, m/s².
#[derive(Debug, Clone, PartialEq, Default)]
pub struct DriveIntervals {
    /// Ascending, without overlap; empty when no drive at this frequency holds everything.
    pub list: Vec<DriveInterval>,
    /// Index of the one that holds the set drive, or of the nearest.
    pub nearest: Option<usize>,
}

/// One interval of the drive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DriveInterval {
    /// Where it begins.
    pub low: DriveEnd,
    /// Where it ends; `None`: no end found up to the largest acceleration looked at.
    pub high: Option<DriveEnd>,
}

/// An end of an interval of the drive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DriveEnd {
    /// Of the cell, peak, m/s².
    pub acceleration: f64,
    /// Index of the slab that sets it.
    pub slab: usize,
    /// What happens beyond it; none at a drive of 0.
    pub mechanism: Mechanism,
    /// Face and mode of that slab; `None` where nothing sets it or it could not be told.
    pub set_by: Option<SetBy>,
}

impl DriveInterval {
    /// Whether a drive lies in it.
    pub fn holds(&self, set: f64) -> bool {
        self.distance(set) == 0.0
    }

    /// From a drive to the interval, m/s²; 0 inside.
    pub fn distance(&self, set: f64) -> f64 {
        let above = self.high.map_or(0.0, |high| set - high.acceleration);
        (self.low.acceleration - set).max(above).max(0.0)
    }
}

impl DriveWindow {
    /// Hold margin: 1 − hold/set. `None` without a drive or a limit.
    pub fn hold_margin(&self) -> Option<f64> {
        (self.set > 0.0).then_some(())?;
        self.hold.map(|hold| 1.0 - hold / self.set)
    }

    /// Wave margin: wave/set − 1. `None` without a drive or a limit.
    pub fn wave_margin(&self) -> Option<f64> {
        (self.set > 0.0).then_some(())?;
        self.wave.map(|wave| wave / self.set - 1.0)
    }
}

impl Slab {
    /// The share of the n-th harmonic in its acceleration, 0 where there is none; `None` when not known.
    pub fn share(&self, order: usize) -> Option<f64> {
        let overtones = self.overtones.as_ref()?;
        Some(overtones.iter().find(|overtone| overtone.order == order).map_or(0.0, |overtone| overtone.ratio))
    }
}

impl DriveState {
    /// All three from frequency (Hz) and peak acceleration (m/s²).
    pub fn new(frequency: f64, acceleration: f64) -> DriveState {
        let omega = std::f64::consts::TAU * frequency;
        DriveState {
            frequency,
            acceleration,
            velocity: acceleration / omega,
            displacement: acceleration / (omega * omega),
        }
    }
}

impl Face {
    /// `oil|cushion`, the open air as `air above` or `air below`.
    pub fn name(&self) -> String {
        format!(
            "{}|{}",
            self.above.as_deref().unwrap_or("air above"),
            self.below.as_deref().unwrap_or("air below")
        )
    }

    /// `interface.oil|cushion`; the open face of a layer belongs to the layer.
    pub fn place(&self) -> String {
        match (&self.above, &self.below) {
            (Some(above), Some(below)) => format!("interface.{above}|{below}"),
            (Some(only), None) | (None, Some(only)) => format!("layer.{only}"),
            (None, None) => "layer".to_owned(),
        }
    }

    /// In a sentence: `the interface of "oil" over "cushion"`, `the upper face of "oil"`.
    pub fn words(&self) -> String {
        match (&self.above, &self.below) {
            (Some(above), Some(below)) => format!("the interface of \"{above}\" over \"{below}\""),
            (None, Some(below)) => format!("the upper face of \"{below}\""),
            (Some(above), None) => format!("the lower face of \"{above}\""),
            (None, None) => "the face".to_owned(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn margins_follow_the_one_wording() {
        let window = DriveWindow {
            exists: true,
            hold: Some(100.0),
            wave: Some(150.0),
            hold_slab: Some(0),
            wave_slab: Some(0),
            set: 125.0,
        };
        assert!((window.hold_margin().unwrap_or_default() - 0.2).abs() < 1e-12);
        assert!((window.wave_margin().unwrap_or_default() - 0.2).abs() < 1e-12);
        assert_eq!(DriveWindow { set: 0.0, ..window }.hold_margin(), None, "no ratio to a drive of zero");
    }

    #[test]
    fn drive_in_three_quantities() {
        // D1 of the worked designs: 13.0 g0 peak at 50 Hz is 2.58 mm peak-to-peak.
        let drive = DriveState::new(50.0, 13.0 * 9.80665);
        assert!((2.0 * drive.displacement - 2.58e-3).abs() < 0.005e-3);
        assert!((drive.velocity.powi(2) - drive.acceleration * drive.displacement).abs() < 1e-12);
    }
}
