//! The verdict on a slab: every mode of its cell, the worst of them, and the window of the drive.
//!
//! Each mode of the cell is a `Probe`. A mode whose heavier side is below at rest is certified quiet up to some
//! acceleration without following exponents (`screen`); wherever that does not suffice its growing exponents are
//! counted (`count`). Of every mode that falls at rest the *hold limit* is the acceleration at which it comes to
//! rest; of every mode the *wave limit* is the next acceleration at which it stirs again. The slab's hold limit is
//! the largest of the former, its wave limit the smallest of the latter; where they are in that order there is a
//! window. Above the first window further ones are looked for on a grid (`STEP`).
//!
//! Modes far up are dense; beyond [`MOST_CELL_MODES`] of them the wavenumber is treated as continuous, on a
//! geometric mesh (`DENSE_STEP`).

use super::count::{Count, Line};
use super::exponent::{Growth, TRUNCATION, leading_of, liveliest};
use super::failure::Failure;
use super::hill::{Hill, Meter};
use super::layered::{Forcing, Layered, Response};
use super::modes::{cell_modes, mode_density};
use super::neutral::border;
use super::screen::quiet_up_to;
use super::stiffness::{Size, Stiffness};
use super::unforced;
use crate::stack::Plan;
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// Cell modes that are judged one by one; a denser spectrum continues as a continuum.
const MOST_CELL_MODES: usize = 800;
/// Relative step of wavenumber in the continuum.
const DENSE_STEP: f64 = 1.004;
/// Relative step of acceleration between counts when a window is looked for.
const STEP: f64 = 1.05;
/// The same when the onset of waves of one mode is looked for: a mode that stirs keeps stirring over a wider range.
const WIDE_STEP: f64 = 1.2;
/// Modes whose decay is computed when nothing grows: so many with an exponent estimated closest to the axis.
const CLOSEST: usize = 8;
/// What a slab may cost. Beyond it lie thousands of stirring modes (thin liquids in wide cells far above their first
/// waves), 100 standard gravities at a fifth of a hertz, films of micrometres; they end as a typed outcome.
const MOST_BLOCKS: u64 = 20_000_000;
/// The search ends at this multiple of the set acceleration …
const BEYOND_SET: f64 = 3.0;
/// … or of the averaged estimate of the hold limit …
const BEYOND_HOLD: f64 = 3.0;
/// … or at this acceleration, m/s² (50 standard gravities), whichever is largest.
const AT_LEAST: f64 = 490.3325;

/// Which horizontal shape a result belongs to.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Mode {
    /// A mode of the cell, by its indices.
    Cell([u32; 2]),
    /// One of many dense modes.
    Continuum,
}

/// What makes a slab unstable.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Mechanism {
    /// Heavier above lighter and the drive too weak to hold it.
    Falls,
    /// Parametric waves.
    Waves,
    /// Nothing grows.
    None,
}

/// Which disturbance sets a limit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SetBy {
    /// Index into `Layered::tensions`.
    pub interface: usize,
    /// 1/m
    pub wavenumber: f64,
    /// Its shape in the cell.
    pub mode: Mode,
    /// Its class.
    pub response: Response,
}

/// The worst disturbance at the set drive: the fastest growing or, when nothing grows, the least damped.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Worst {
    /// 1/m
    pub wavenumber: f64,
    /// Its shape in the cell.
    pub mode: Mode,
    /// Its leading exponent.
    pub growth: Growth,
}

/// The stability of one slab.
#[derive(Debug, Clone, PartialEq)]
pub struct SlabStability {
    /// Worst disturbance at the set acceleration.
    pub worst: Worst,
    /// Falls, waves or none.
    pub mechanism: Mechanism,
    /// Range of wavenumbers with a growing exponent at the set acceleration, 1/m.
    pub unstable_band: Option<(f64, f64)>,
    /// Number of modes (or mesh points of the continuum) that grow at the set acceleration.
    pub unstable_modes: usize,
    /// Intervals of slab acceleration in which every mode is stable, ascending, m/s²; the upper end is `None` where
    /// none was found up to `searched_up_to`.
    pub windows: Vec<(f64, Option<f64>)>,
    /// Lower end of the window that holds the set value, or of the nearest; without a window the acceleration at
    /// which the last mode would cease to fall. 0 when no drive is needed; `None` when nothing up to
    /// `searched_up_to` holds the slab.
    pub hold_limit: Option<f64>,
    /// Upper end of the same window; without a window the onset of waves.
    pub wave_limit: Option<f64>,
    /// What sets the hold limit.
    pub hold_set_by: Option<SetBy>,
    /// What sets the wave limit.
    pub wave_set_by: Option<SetBy>,
    /// Decay of the least damped interface mode, 1/s, when all decay.
    pub ring_down: Option<f64>,
    /// Largest acceleration looked at, m/s².
    pub searched_up_to: f64,
    /// Wavenumber beyond which every mode is certified quiet up to there, 1/m.
    pub wavenumbers_up_to: f64,
    /// Modes judged.
    pub modes: usize,
}

/// Judges a slab in a cell of the given plan under the given drive.
///
/// # Errors
/// [`Failure`], as [`super::growth`].
pub fn slab(
    layered: &Layered,
    forcing: &Forcing,
    plan: Plan,
    cancel: &dyn Fn() -> bool,
) -> Result<SlabStability, Failure> {
    layered.check()?;
    forcing.check()?;
    for size in match plan {
        Plan::Rectangle { length, width } => [length, width],
        Plan::Circle { diameter } => [diameter, diameter],
    } {
        if !(size > 0.0 && size.is_finite()) {
            return Err(Failure::Unusable { quantity: "cell size", value: size });
        }
    }
    super::with_size!(layered, size => Judge::new(layered, forcing, plan, size, cancel)?.judge())
}

/// One mode under examination.
struct Probe<D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    wavenumber: f64,
    mode: Mode,
    hill: Hill<D>,
    hints: Vec<Complex64>,
    /// Made when first needed.
    line: Option<Line<D>>,
    falls_at_rest: bool,
    /// Certified quiet up to here, m/s².
    quiet: f64,
    /// Estimated distance of its nearest exponent from the axis at the set drive, 1/s; infinite where not looked.
    distance: f64,
}

impl<D: Size> Probe<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    fn new(judge: &Judge<D>, wavenumber: f64, mode: Mode) -> Self {
        let stiffness = Stiffness::new(judge.layered, wavenumber, judge.size);
        let omega = judge.forcing.omega;
        let hill = Hill::new(stiffness, omega, judge.up_to, TRUNCATION, judge.meter.clone());
        let hints = unforced::hints(&hill.stiffness, judge.layered.viscous_decay(wavenumber));
        let falls_at_rest = hill.stiffness.growing_without_drive(0.0) > 0;
        let quiet = quiet_up_to(&hill, &hints);
        Probe { wavenumber, mode, hill, hints, line: None, falls_at_rest, quiet, distance: f64::INFINITY }
    }

    /// Whether the certificate alone says that nothing grows at `a`.
    fn is_screened(&self, a: f64) -> bool {
        !self.falls_at_rest && a <= self.quiet
    }

    fn line(&mut self) -> (&Hill<D>, &mut Line<D>) {
        let Probe { hill, hints, line, .. } = self;
        (hill, line.get_or_insert_with(|| Line::new(hill, 0.0, hints)))
    }

    fn count(&mut self, a: f64) -> Result<Count, Failure> {
        let k = self.wavenumber;
        let (hill, line) = self.line();
        line.count(hill, a, k)
    }

    fn grows(&mut self, a: f64) -> Result<bool, Failure> {
        Ok(!self.is_screened(a) && self.count(a)?.right > 0)
    }

    fn leading(&mut self, a: f64, cancel: &dyn Fn() -> bool) -> Result<Growth, Failure> {
        let k = self.wavenumber;
        let Probe { hill, hints, line, .. } = self;
        let line = line.get_or_insert_with(|| Line::new(hill, 0.0, hints));
        leading_of(hill, hints, line, a, k, cancel)
    }

    /// Brackets the acceleration at which the last of the exponents that grow at rest leaves the right half plane
    /// along the real line; `None` when that does not happen up to `up_to`.
    fn end_of_fall(&mut self, up_to: f64) -> Result<Option<(f64, f64)>, Failure> {
        let mut falling = self.hill.stiffness.growing_without_drive(0.0);
        let mut low = 1e-4 * up_to;
        // F = 1 without drive.
        let mut sign = 1.0;
        let mut high = low;
        while high <= up_to {
            if self.hill.on_real_line(high) * sign < 0.0 {
                sign = -sign;
                falling -= 1;
                if falling == 0 {
                    return Ok(Some((low, high)));
                }
            }
            low = high;
            high *= STEP;
        }
        Ok(None)
    }

    /// Bisects the sign change on the real line.
    fn end_of_fall_between(&mut self, mut low: f64, mut high: f64) -> Result<(f64, SetBy), Failure> {
        let above = self.hill.on_real_line(high);
        while high - low > 1e-11 * high {
            let middle = 0.5 * (low + high);
            if middle <= low || middle >= high {
                break;
            }
            if self.hill.on_real_line(middle) * above > 0.0 { high = middle } else { low = middle }
        }
        let a = 0.5 * (low + high);
        let interface = liveliest(&self.hill, Complex64::new(0.0, 0.0), a);
        let (wavenumber, mode) = (self.wavenumber, self.mode);
        Ok((a, SetBy { interface, wavenumber, mode, response: Response::Harmonic }))
    }

    /// The border between `low`, where it grows (or not), and `high`, where it is the other way round.
    fn border(&mut self, low: f64, high: f64, grows_at_low: bool) -> Result<(f64, SetBy), Failure> {
        let (k, mode) = (self.wavenumber, self.mode);
        let ends = ((low, self.count(low)?), (high, self.count(high)?));
        let (hill, line) = self.line();
        let change = border(hill, line, ends.0, ends.1, k, |n| (n > 0) == grows_at_low)?;
        let interface = liveliest(hill, Complex64::new(0.0, change.frequency), change.acceleration);
        Ok((change.acceleration, SetBy { interface, wavenumber: k, mode, response: change.response }))
    }
}

/// All modes of one slab under examination.
struct Judge<'a, D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    layered: &'a Layered,
    forcing: &'a Forcing,
    plan: Plan,
    size: D,
    cancel: &'a dyn Fn() -> bool,
    up_to: f64,
    /// Beyond this wavenumber every mode is certified quiet up to the acceleration `covered`.
    wavenumbers_up_to: f64,
    covered: f64,
    meter: Meter,
    /// Ascending in wavenumber, complete up to `wavenumbers_up_to`.
    probes: Vec<Probe<D>>,
}

impl<'a, D: Size> Judge<'a, D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    fn new(
        layered: &'a Layered,
        forcing: &'a Forcing,
        plan: Plan,
        size: D,
        cancel: &'a dyn Fn() -> bool,
    ) -> Result<Self, Failure> {
        let first = cell_modes(plan, f64::INFINITY, 1)[0];
        let averaged = forcing.omega * (2.0 * layered.gravity.max(0.0) / first.wavenumber).sqrt();
        let up_to = (BEYOND_SET * forcing.acceleration).max(BEYOND_HOLD * averaged).max(AT_LEAST);
        let mut judge = Judge {
            layered,
            forcing,
            plan,
            size,
            cancel,
            up_to,
            wavenumbers_up_to: first.wavenumber,
            covered: -1.0,
            meter: Meter::up_to(MOST_BLOCKS),
            probes: Vec::new(),
        };
        // The lowest mode is always there, so that something rings down even where nothing can stir.
        judge.probes.push(judge.probe(first.wavenumber, Mode::Cell(first.indices)));
        Ok(judge)
    }

    fn probe(&self, wavenumber: f64, mode: Mode) -> Probe<D> {
        Probe::new(self, wavenumber, mode)
    }

    /// Makes the probes complete for accelerations up to `a`: viscosity and tension keep everything quiet beyond
    /// some wavenumber, which is found by stepping up and bisecting.
    fn cover(&mut self, a: f64) -> Result<(), Failure> {
        if a <= self.covered {
            return Ok(());
        }
        let start = self.wavenumbers_up_to;
        let quiet = |k: f64| self.probe(k, Mode::Continuum).is_screened(a);
        let mut high = start;
        while ![1.0, 1.5, 2.2].iter().all(|factor| quiet(factor * high)) {
            high *= 1.4;
            self.alive()?;
            if high > 1e9 {
                return Err(Failure::Unusable { quantity: "largest wavenumber", value: high });
            }
        }
        let mut low = (high / 1.4).max(start);
        for _ in 0..4 {
            let middle = 0.5 * (low + high);
            if quiet(middle) { high = middle } else { low = middle }
        }
        let modes = cell_modes(self.plan, high, MOST_CELL_MODES + 1);
        let last = self.probes.last().map_or(0.0, |probe| probe.wavenumber);
        for mode in modes.iter().take(MOST_CELL_MODES).filter(|mode| mode.wavenumber > last * (1.0 + 1e-12)) {
            self.alive()?;
            let probe = self.probe(mode.wavenumber, Mode::Cell(mode.indices));
            self.probes.push(probe);
        }
        if modes.len() > MOST_CELL_MODES {
            let step = |k: f64| (k * DENSE_STEP).max(k + 1.0 / mode_density(self.plan, k));
            let last = self.probes.last().map_or(0.0, |probe| probe.wavenumber);
            let mut k = if last >= modes[MOST_CELL_MODES].wavenumber {
                step(last)
            } else {
                modes[MOST_CELL_MODES].wavenumber
            };
            while k <= high {
                self.alive()?;
                let probe = self.probe(k, Mode::Continuum);
                self.probes.push(probe);
                k = step(k);
            }
        }
        self.wavenumbers_up_to = high;
        self.covered = a;
        Ok(())
    }

    fn alive(&self) -> Result<(), Failure> {
        self.meter.check()?;
        if (self.cancel)() { Err(Failure::Cancelled) } else { Ok(()) }
    }

    fn judge(mut self) -> Result<SlabStability, Failure> {
        let set = self.forcing.acceleration;
        self.cover(set)?;
        let mut growing = Vec::new();
        for i in 0..self.probes.len() {
            self.alive()?;
            let probe = &mut self.probes[i];
            let grows = if set == 0.0 {
                probe.falls_at_rest
            } else if probe.is_screened(set) {
                false
            } else {
                let count = probe.count(set)?;
                probe.distance = count.distance;
                count.right > 0
            };
            if grows {
                growing.push(i);
            }
        }
        let hold = self.hold_limit()?;
        let wave = self.wave_limit(hold.map(|(a, _)| a))?;
        let windows = self.windows(hold.map(|(a, _)| a), wave.map(|(a, _)| a))?;
        let chosen = nearest(&windows, set);
        // The first window's ends come with what sets them; another window's ends are looked up.
        let (hold, wave) = match chosen {
            Some((low, high)) if Some(low) != hold.map(|(a, _)| a) => (
                Some((low, self.culprit(low, true)?)),
                match high {
                    Some(high) => Some((high, self.culprit(high, false)?)),
                    None => None,
                },
            ),
            _ => (hold, wave.map(|(a, by)| (a, Some(by)))),
        };
        let worst = self.worst(&growing, set)?;
        let mechanism = match growing.is_empty() {
            true => Mechanism::None,
            false if self.is_falling(worst.wavenumber, set)? => Mechanism::Falls,
            false => Mechanism::Waves,
        };
        let band = |f: fn(f64, f64) -> f64| growing.iter().map(|&i| self.probes[i].wavenumber).reduce(f);
        Ok(SlabStability {
            worst,
            mechanism,
            unstable_band: band(f64::min).zip(band(f64::max)),
            unstable_modes: growing.len(),
            windows,
            hold_limit: hold.map(|(a, _)| a),
            wave_limit: wave.map(|(a, _)| a),
            hold_set_by: hold.and_then(|(_, by)| by),
            wave_set_by: wave.and_then(|(_, by)| by),
            ring_down: growing.is_empty().then_some(-worst.growth.rate),
            searched_up_to: self.up_to,
            wavenumbers_up_to: self.wavenumbers_up_to,
            modes: self.probes.len(),
        })
    }

    /// The acceleration at which the last mode ceases to fall: (0, nothing) when none falls at rest, `None` when
    /// some mode falls at every acceleration looked at.
    ///
    /// A fall is a real exponent; it ends where the determinant on the real line changes sign. (Where waves set in
    /// before, the mode as a whole never comes to rest, but the fall still has its end.)
    fn hold_limit(&mut self) -> Result<Option<(f64, Option<SetBy>)>, Failure> {
        let mut hold: (f64, Option<SetBy>) = (0.0, None);
        for i in 0..self.probes.len() {
            self.alive()?;
            let up_to = self.up_to;
            let probe = &mut self.probes[i];
            if !probe.falls_at_rest || (hold.0 > 0.0 && probe.count(hold.0)?.right == 0) {
                continue;
            }
            let Some((low, high)) = probe.end_of_fall(up_to)? else { return Ok(None) };
            if high < hold.0 {
                continue;
            }
            let (a, by) = probe.end_of_fall_between(low, high)?;
            if a > hold.0 {
                hold = (a, Some(by));
            }
        }
        Ok(Some(hold))
    }

    /// The smallest acceleration above its own hold limit at which some mode stirs.
    fn wave_limit(&mut self, hold: Option<f64>) -> Result<Option<(f64, SetBy)>, Failure> {
        let mut reach =
            (1.2 * self.forcing.acceleration.max(hold.unwrap_or(0.0))).clamp(0.1 * self.up_to, self.up_to);
        loop {
            self.cover(reach)?;
            let wave = self.wave_limit_up_to(reach, hold)?;
            if wave.is_some() || reach >= self.up_to {
                return Ok(wave);
            }
            reach = (1.25 * reach).min(self.up_to);
        }
    }

    fn wave_limit_up_to(&mut self, reach: f64, hold: Option<f64>) -> Result<Option<(f64, SetBy)>, Failure> {
        let mut wave: Option<(f64, SetBy)> = None;
        // The most easily stirred first: the others are then mostly screened.
        let mut order: Vec<usize> = (0..self.probes.len()).collect();
        order.sort_by(|&i, &j| self.probes[i].quiet.total_cmp(&self.probes[j].quiet));
        for i in order {
            self.alive()?;
            let end = wave.map_or(reach, |(a, _)| a);
            let probe = &mut self.probes[i];
            if probe.is_screened(end) {
                continue;
            }
            let Some(start) = resting_start(probe, hold, end)? else { continue };
            let mut low = start;
            while low < end {
                let high = (low * WIDE_STEP).min(end);
                if probe.count(high)?.right > 0 {
                    let (a, by) = probe.border(low, high, false)?;
                    wave = Some((a, by));
                    break;
                }
                low = high;
            }
        }
        Ok(wave)
    }

    /// Whether nothing grows at `a`; `last` remembers the culprit, which is asked first.
    fn is_quiet(&mut self, a: f64, last: &mut usize) -> Result<bool, Failure> {
        self.alive()?;
        if self.probes[*last].grows(a)? {
            return Ok(false);
        }
        self.cover(a)?;
        for i in 0..self.probes.len() {
            if self.probes[i].grows(a)? {
                *last = i;
                return Ok(false);
            }
        }
        Ok(true)
    }

    fn windows(&mut self, hold: Option<f64>, wave: Option<f64>) -> Result<Vec<(f64, Option<f64>)>, Failure> {
        let mut windows = Vec::new();
        let mut from = wave.unwrap_or(self.up_to);
        if let Some(hold) = hold {
            if wave.is_none_or(|wave| hold < wave) {
                windows.push((hold, wave));
            } else {
                from = hold;
            }
        }
        // Further windows above: seldom, and only found when wider than the step.
        let mut last = 0;
        let mut low = from * (1.0 + 1e-6);
        let mut quiet = false;
        while low < self.up_to {
            let high = (low * STEP).min(self.up_to);
            let quiet_there = self.is_quiet(high, &mut last)?;
            if quiet_there != quiet {
                let border = self.bisect_quiet(low, high, quiet)?;
                if quiet_there {
                    windows.push((border, None));
                } else if let Some(open) = windows.last_mut() {
                    open.1 = Some(border);
                }
                quiet = quiet_there;
            }
            low = high;
        }
        Ok(windows)
    }

    fn bisect_quiet(&mut self, mut low: f64, mut high: f64, quiet_at_low: bool) -> Result<f64, Failure> {
        let mut last = 0;
        while high - low > 1e-8 * high {
            let middle = 0.5 * (low + high);
            if self.is_quiet(middle, &mut last)? == quiet_at_low { low = middle } else { high = middle }
        }
        Ok(0.5 * (low + high))
    }

    /// What grows just outside a border: below it (`lower` end of a window) or above.
    fn culprit(&mut self, border: f64, lower: bool) -> Result<Option<SetBy>, Failure> {
        let outside = if lower { border * (1.0 - 1e-6) } else { border * (1.0 + 1e-6) };
        for probe in &mut self.probes {
            if probe.grows(outside)? {
                let inside = if lower { border * (1.0 + 1e-6) } else { border * (1.0 - 1e-6) };
                let (low, high) = (outside.min(inside), outside.max(inside));
                return Ok(Some(probe.border(low, high, lower)?.1));
            }
        }
        Ok(None)
    }

    fn worst(&mut self, growing: &[usize], set: f64) -> Result<Worst, Failure> {
        let candidates: Vec<usize> = if growing.is_empty() {
            // The slowest decay sits at the longest waves or where an exponent is estimated close to the axis.
            let mut order: Vec<usize> = (0..self.probes.len()).collect();
            order.sort_by(|&i, &j| self.probes[i].distance.total_cmp(&self.probes[j].distance));
            order.truncate(CLOSEST);
            order.extend(0..self.probes.len().min(3));
            order.sort_unstable();
            order.dedup();
            order
        } else {
            growing.to_vec()
        };
        let mut worst: Option<Worst> = None;
        let mut failure = None;
        for i in candidates {
            self.alive()?;
            let probe = &mut self.probes[i];
            match probe.leading(set, self.cancel) {
                Ok(growth) => {
                    if worst.is_none_or(|known| growth.rate > known.growth.rate) {
                        worst = Some(Worst { wavenumber: probe.wavenumber, mode: probe.mode, growth });
                    }
                }
                // A decaying mode that hides among vorticity modes does not spoil the verdict.
                Err(other) if growing.is_empty() && other != Failure::Cancelled => failure = Some(other),
                Err(other) => return Err(other),
            }
        }
        worst.ok_or(failure.unwrap_or(Failure::Cancelled))
    }

    /// Whether the mode falls at rest and has never come to rest below the set acceleration.
    fn is_falling(&mut self, wavenumber: f64, set: f64) -> Result<bool, Failure> {
        let Some(probe) = self.probes.iter_mut().find(|probe| probe.wavenumber == wavenumber) else {
            return Ok(false);
        };
        if !probe.falls_at_rest {
            return Ok(false);
        }
        let mut a = set;
        while a > 1e-3 * self.up_to {
            if probe.count(a)?.right == 0 {
                return Ok(false);
            }
            a /= STEP;
        }
        Ok(true)
    }
}

/// Where a mode first is at rest: 0-like for one that does not fall, else just above its own hold limit.
fn resting_start<D: Size>(probe: &mut Probe<D>, hold: Option<f64>, end: f64) -> Result<Option<f64>, Failure>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    if !probe.falls_at_rest {
        return Ok(Some(probe.quiet.min(end)));
    }
    // At the slab's hold limit the mode is at rest, unless it already stirs again there.
    let mut low = 1e-3 * end;
    if let Some(hold) = hold
        && hold * (1.0 + 1e-9) < end
        && probe.count(hold * (1.0 + 1e-9))?.right == 0
    {
        return Ok(Some(hold * (1.0 + 1e-9)));
    }
    while low < end {
        if probe.count(low)?.right == 0 {
            return Ok(Some(low));
        }
        low *= STEP;
    }
    Ok(None)
}

/// The window that holds `set`, or the nearest one.
fn nearest(windows: &[(f64, Option<f64>)], set: f64) -> Option<(f64, Option<f64>)> {
    let distance = |&(low, high): &(f64, Option<f64>)| {
        if set < low { low - set } else { high.map_or(0.0, |high| (set - high).max(0.0)) }
    };
    windows.iter().copied().min_by(|a, b| distance(a).total_cmp(&distance(b)))
}
