//! The verdict on a slab: every mode of its cell, the worst of them, and the windows of the drive.
//!
//! Of each wavenumber examined (a `Node`) the loci of critical drives (`locus`) give every interval of acceleration in
//! which it grows. What no mode covers are the windows.
//!
//! # Which modes are examined
//! Not all: the marginal accelerations are smooth curves a(k), and smooth on the scale of k itself whatever the damping,
//! in x = a² even at the tip of a tongue (x = x_tip + c (k − k_tip)²). So the search starts with a ladder of modes a fixed
//! ratio apart (`RUNG`) up to where damping and tension keep every locus beyond the largest acceleration asked for, and
//! puts further modes of the cell where a curve between two neighbours, continued by the parabola through three, may reach
//! into a window (`curves`), until between no two neighbours anything can: the cost follows the edges of the unstable band,
//! not the number of modes. [`slab_by_every_mode`] examines each mode instead; the tests compare the two on thousands of
//! random stacks. The modes of a held contact line (`pinned`) lie on no such curve; each of them is examined.

use super::curves::{Gap, Reaches};
use super::exponent::{Care, Growth, TRUNCATION, leading_of, liveliest};
use super::failure::Failure;
use super::hill::{Hill, Meter};
use super::layered::{Forcing, Layered, Response};
use super::locus::{Crossing, Locus, locus};
use super::pinned::{ContactLine, pinned_modes};
use super::spectrum::Spectrum;
use super::stiffness::{Size, Stiffness};
use super::unforced;
use super::windows::{self, Window};
use crate::stack::Plan;
use nalgebra::DefaultAllocator;
use nalgebra::allocator::Allocator;
use num_complex::Complex64;

/// Ratio of neighbouring wavenumbers that the search starts with.
const RUNG: f64 = 1.25;
/// Beyond the last wavenumber every locus keeps this factor (in x = a²) from the largest acceleration.
const QUIET: f64 = 4.0;
/// What a slab may cost, in evaluations of the layers' response; more ends as a typed outcome.
const MOST_BLOCKS: u64 = 20_000_000;
/// The search ends at this multiple of the set acceleration …
const BEYOND_SET: f64 = 3.0;
/// … or of the averaged estimate of the hold limit …
const BEYOND_HOLD: f64 = 3.0;
/// … or at this acceleration, m/s² (50 standard gravities), whichever is largest.
const AT_LEAST: f64 = 490.3325;
/// Where the hunt for the worst mode starts: from so many modes of every band that grows …
const A_BAND: usize = 24;
/// … or, when nothing grows, from so many with an exponent estimated closest to the axis.
const CLOSEST: usize = 4;

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
    /// What sets the two ends of each window; `None` where it begins at no drive or is open.
    pub windows_set_by: Vec<[Option<SetBy>; 2]>,
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
    /// Modes judged (in the continuum by their mean number).
    pub modes: usize,
    /// Wavenumbers whose loci were followed to judge them.
    pub examined: usize,
    /// Evaluations of the layers' response that it took.
    pub evaluations: u64,
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
    slab_with_line(layered, forcing, plan, ContactLine::Free, cancel)
}

/// Judges a slab as [`slab`] does, with its contact line held or not.
///
/// # Errors
/// [`Failure`], as [`super::growth`].
pub fn slab_with_line(
    layered: &Layered,
    forcing: &Forcing,
    plan: Plan,
    line: ContactLine,
    cancel: &dyn Fn() -> bool,
) -> Result<SlabStability, Failure> {
    judged(layered, forcing, (plan, line), Search::WhereItMatters, cancel)
}

/// The same by examining every mode of the cell (and every mesh point of the continuum) up to the last that can
/// stir: slow, and sure without any argument about curves.
///
/// # Errors
/// [`Failure`], as [`super::growth`].
pub fn slab_by_every_mode(
    layered: &Layered,
    forcing: &Forcing,
    plan: Plan,
    cancel: &dyn Fn() -> bool,
) -> Result<SlabStability, Failure> {
    judged(layered, forcing, (plan, ContactLine::Free), Search::EveryMode, cancel)
}

#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Search {
    WhereItMatters,
    EveryMode,
}

fn judged(
    layered: &Layered,
    forcing: &Forcing,
    (plan, line): (Plan, ContactLine),
    search: Search,
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
    super::with_size!(layered, size => Judge::new(layered, forcing, (plan, line), size, cancel).judge(search))
}

/// One wavenumber under examination.
struct Node<D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    wavenumber: f64,
    mode: Mode,
    hill: Hill<D>,
    locus: Locus,
    /// The leading exponent at the set acceleration, once it was asked for.
    growth: Option<Growth>,
}

impl<D: Size> Node<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// Where it ceases to fall: 0 when it does not fall at rest, `None` when it falls at every acceleration.
    ///
    /// A fall is a real exponent that leaves along the real line. (Where waves set in before, the mode as a whole never
    /// comes to rest, but the fall still has its end.)
    fn end_of_fall(&self) -> Option<(f64, Option<Crossing>)> {
        let falling = self.locus.growing_at_rest;
        if falling == 0 {
            return Some((0.0, None));
        }
        let mut harmonic = self.locus.crossings.iter().filter(|c| c.response == Response::Harmonic);
        harmonic.nth(falling - 1).map(|crossing| (crossing.acceleration, Some(*crossing)))
    }

    /// Where it first stirs after it was at rest.
    fn onset(&self) -> Option<Crossing> {
        let mut number = self.locus.growing_at_rest as i32;
        self.locus.crossings.iter().copied().find(|crossing| {
            let rested = number <= 0;
            number += crossing.change;
            rested && number > 0
        })
    }

    fn set_by(&self, crossing: &Crossing) -> SetBy {
        let exponent = Complex64::new(0.0, crossing.frequency);
        SetBy {
            interface: liveliest(&self.hill, exponent, crossing.acceleration),
            wavenumber: self.wavenumber,
            mode: self.mode,
            response: crossing.response,
        }
    }

    fn leading(&mut self, layered: &Layered, a: f64, cancel: &dyn Fn() -> bool) -> Result<Growth, Failure> {
        if let Some(growth) = self.growth {
            return Ok(growth);
        }
        let growth = self.exponent(layered, a, Care::AsEstimated, cancel)?;
        self.growth = Some(growth);
        Ok(growth)
    }

    fn exponent(
        &self,
        layered: &Layered,
        a: f64,
        care: Care,
        cancel: &dyn Fn() -> bool,
    ) -> Result<Growth, Failure> {
        let hints = unforced::hints(&self.hill.stiffness, layered.viscous_decay(self.wavenumber));
        leading_of(&self.hill, &hints, &self.locus, a, self.wavenumber, (care, cancel))
    }
}

/// All that is examined of one slab.
struct Judge<'a, D: Size>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    layered: &'a Layered,
    forcing: &'a Forcing,
    size: D,
    cancel: &'a dyn Fn() -> bool,
    spectrum: Spectrum,
    up_to: f64,
    meter: Meter,
    /// Ascending in wavenumber.
    nodes: Vec<Node<D>>,
}

impl<'a, D: Size> Judge<'a, D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    fn new(
        layered: &'a Layered,
        forcing: &'a Forcing,
        (plan, line): (Plan, ContactLine),
        size: D,
        cancel: &'a dyn Fn() -> bool,
    ) -> Self {
        let spectrum = match line {
            ContactLine::Free => Spectrum::new(plan),
            ContactLine::Pinned => pinned_modes(layered, plan, f64::INFINITY)
                .map_or_else(|| Spectrum::new(plan), |pinned| Spectrum::pinned(plan, &pinned)),
        };
        let averaged = forcing.omega * (2.0 * layered.gravity.max(0.0) / spectrum.first().0).sqrt();
        let up_to = (BEYOND_SET * forcing.acceleration).max(BEYOND_HOLD * averaged).max(AT_LEAST);
        let meter = Meter::up_to(MOST_BLOCKS);
        Judge { layered, forcing, size, cancel, spectrum, up_to, meter, nodes: Vec::new() }
    }

    fn judge(mut self, search: Search) -> Result<SlabStability, Failure> {
        self.ladder()?;
        match search {
            Search::WhereItMatters => {
                self.fill(self.spectrum.scattered_to())?;
                self.refine()?;
            }
            Search::EveryMode => self.fill(f64::INFINITY)?,
        }
        self.verdict(search)
    }

    fn examine(&self, (wavenumber, mode): (f64, Mode)) -> Result<Node<D>, Failure> {
        self.alive()?;
        let stiffness = match self.spectrum.stiffening(wavenumber) {
            1.0 => Stiffness::new(self.layered, wavenumber, self.size),
            stiffening => Stiffness::new(&self.layered.with_tension(stiffening), wavenumber, self.size),
        };
        let hill = Hill::new(stiffness, self.forcing.omega, self.up_to, TRUNCATION, self.meter.clone());
        let locus = locus(&hill, self.up_to, wavenumber)?;
        Ok(Node { wavenumber, mode, hill, locus, growth: None })
    }

    fn alive(&self) -> Result<(), Failure> {
        self.meter.check()?;
        if (self.cancel)() { Err(Failure::Cancelled) } else { Ok(()) }
    }

    /// Modes a ratio apart up to where two in a row keep all their loci far beyond the largest acceleration.
    fn ladder(&mut self) -> Result<(), Failure> {
        let far = QUIET * self.up_to * self.up_to;
        let mut next = self.spectrum.first();
        let mut quiet = 0;
        while quiet < 2 {
            let node = self.examine(next)?;
            let still = node.locus.growing_at_rest == 0 && node.locus.smallest > far;
            quiet = if still { quiet + 1 } else { 0 };
            self.nodes.push(node);
            if next.0 > 1e9 {
                return Err(Failure::Unusable { quantity: "largest wavenumber", value: next.0 });
            }
            next = self.spectrum.at_least(RUNG * next.0);
        }
        Ok(())
    }

    /// Puts modes where they can matter to the windows, to the limits or to the edges of the unstable band.
    fn refine(&mut self) -> Result<(), Failure> {
        let mut settled = vec![false; self.nodes.len().saturating_sub(1)];
        loop {
            let reaches = self.reaches();
            let mut changed = false;
            let mut i = 0;
            while i + 1 < self.nodes.len() {
                let (low, high) = (self.nodes[i].wavenumber, self.nodes[i + 1].wavenumber);
                if settled[i] || !self.may_matter(i, &reaches) {
                    i += 1;
                    continue;
                }
                match self.spectrum.between(low, high) {
                    Some(next) => {
                        let node = self.examine(next)?;
                        self.nodes.insert(i + 1, node);
                        settled.insert(i, false);
                        changed = true;
                        i += 2;
                    }
                    None => {
                        settled[i] = true;
                        i += 1;
                    }
                }
            }
            if !changed {
                return Ok(());
            }
        }
    }

    /// What a curve must not reach between two neighbours.
    fn reaches(&self) -> Reaches {
        let set = self.forcing.acceleration;
        let windows = self.windows();
        let hold = self.hold().map(|(_, a, _)| a);
        Reaches::new(&windows, set, hold, self.wave().map(|(_, crossing)| crossing.acceleration), self.up_to)
    }

    fn may_matter(&self, i: usize, reaches: &Reaches) -> bool {
        let at = |j: usize| self.nodes.get(j).map(|node| (node.wavenumber, &node.locus));
        let (Some(low), Some(high)) = (at(i), at(i + 1)) else { return false };
        Gap { before: i.checked_sub(1).and_then(at), low, high, after: at(i + 2) }.may_matter(reaches)
    }

    /// Puts every mode up to a wavenumber.
    fn fill(&mut self, up_to: f64) -> Result<(), Failure> {
        let mut i = 0;
        while i + 1 < self.nodes.len() && self.nodes[i].wavenumber < up_to {
            let (low, high) = (self.nodes[i].wavenumber, self.nodes[i + 1].wavenumber);
            match self.spectrum.between(low, high) {
                Some(next) => {
                    let node = self.examine(next)?;
                    self.nodes.insert(i + 1, node);
                }
                None => i += 1,
            }
        }
        Ok(())
    }

    /// Intervals of acceleration in which no examined mode grows.
    fn windows(&self) -> Vec<Window> {
        let unstable = self.nodes.iter().enumerate().flat_map(|(i, node)| {
            node.locus.unstable().into_iter().map(move |interval| (i, interval.low, interval.high))
        });
        windows::between(unstable, self.up_to)
    }

    /// The acceleration at which the last mode ceases to fall, and that mode; `None` when some mode falls at every
    /// acceleration looked at.
    fn hold(&self) -> Option<(usize, f64, Option<Crossing>)> {
        let mut hold = (0, 0.0, None);
        for (i, node) in self.nodes.iter().enumerate() {
            let (a, by) = node.end_of_fall()?;
            if a > hold.1 {
                hold = (i, a, by);
            }
        }
        Some(hold)
    }

    /// The smallest acceleration at which some mode stirs that was at rest.
    fn wave(&self) -> Option<(usize, Crossing)> {
        let onsets = self.nodes.iter().enumerate().filter_map(|(i, node)| Some((i, node.onset()?)));
        onsets.min_by(|x, y| x.1.acceleration.total_cmp(&y.1.acceleration))
    }

    fn verdict(mut self, search: Search) -> Result<SlabStability, Failure> {
        let set = self.forcing.acceleration;
        let windows = self.windows();
        let end = |end: &windows::End| {
            let node = &self.nodes[end.by];
            let crossing = node.locus.crossings.iter().find(|crossing| crossing.acceleration == end.at);
            crossing.map(|crossing| node.set_by(crossing))
        };
        let (hold, wave) = match windows::nearest(&windows, set) {
            Some(window) => (
                Some((window.low.as_ref().map_or(0.0, |low| low.at), window.low.as_ref().and_then(end))),
                window.high.as_ref().map(|high| (high.at, end(high))),
            ),
            None => (
                self.hold().map(|(i, a, by)| (a, by.map(|crossing| self.nodes[i].set_by(&crossing)))),
                self.wave()
                    .map(|(i, crossing)| (crossing.acceleration, Some(self.nodes[i].set_by(&crossing)))),
            ),
        };
        let windows_set_by =
            windows.iter().map(|w| [w.low.as_ref().and_then(end), w.high.as_ref().and_then(end)]).collect();
        let growing: Vec<bool> = self.nodes.iter().map(|node| node.locus.growing(set) > 0).collect();
        let any = growing.contains(&true);
        let band = |f: fn(f64, f64) -> f64| {
            let inside = self.nodes.iter().zip(&growing).filter(|(_, grows)| **grows);
            inside.map(|(node, _)| node.wavenumber).reduce(f)
        };
        let unstable_band = band(f64::min).zip(band(f64::max));
        // Between two neighbours that grow everything does: where that changes the gap has been filled.
        let between = (1..self.nodes.len())
            .filter(|&i| growing[i] && growing[i - 1])
            .map(|i| self.spectrum.count(self.nodes[i - 1].wavenumber, self.nodes[i].wavenumber));
        let unstable_modes = growing.iter().filter(|grows| **grows).count() + between.sum::<usize>();
        let (lowest, highest) = (self.nodes[0].wavenumber, self.nodes[self.nodes.len() - 1].wavenumber);
        let modes = self.spectrum.count(0.5 * lowest, highest) + 1;
        let worst = self.worst(any, search)?;
        let mechanism = match any {
            false => Mechanism::None,
            true if self.is_falling(worst.wavenumber, set) => Mechanism::Falls,
            true => Mechanism::Waves,
        };
        Ok(SlabStability {
            worst,
            mechanism,
            unstable_band,
            unstable_modes,
            windows: windows
                .iter()
                .map(|w| (w.low.as_ref().map_or(0.0, |low| low.at), w.high.as_ref().map(|high| high.at)))
                .collect(),
            windows_set_by,
            hold_limit: hold.map(|(a, _)| a),
            wave_limit: wave.map(|(a, _)| a),
            hold_set_by: hold.and_then(|(_, by)| by),
            wave_set_by: wave.and_then(|(_, by)| by),
            ring_down: (!any).then_some(-worst.growth.rate),
            searched_up_to: self.up_to,
            wavenumbers_up_to: highest,
            modes,
            examined: self.nodes.len(),
            evaluations: self.meter.spent(),
        })
    }

    /// The fastest growing mode, or the least damped when nothing grows: from the nodes with the best estimates uphill
    /// to a mode whose neighbours are no better.
    fn worst(&mut self, any_grows: bool, search: Search) -> Result<Worst, Failure> {
        let set = self.forcing.acceleration;
        let candidates = self.candidates(any_grows, search);
        let mut best: Option<(usize, f64)> = None;
        let mut failure = None;
        for i in candidates {
            self.alive()?;
            match self.nodes[i].leading(self.layered, set, self.cancel) {
                Ok(growth) => {
                    if best.is_none_or(|(_, rate)| growth.rate > rate) {
                        best = Some((i, growth.rate));
                    }
                }
                // A decaying mode that hides among vorticity modes does not spoil the verdict.
                Err(other) if !any_grows && other != Failure::Cancelled => failure = Some(other),
                Err(other) => return Err(other),
            }
        }
        let Some((mut at, mut rate)) = best else { return Err(failure.unwrap_or(Failure::Cancelled)) };
        let mut open = true;
        while open {
            open = false;
            for side in [0, 1] {
                let Some(low) = (at + side).checked_sub(1) else { continue };
                if low + 1 >= self.nodes.len() {
                    continue;
                }
                // First to a neighbour that was not asked yet, then into the gap before it.
                let beside = if side == 0 { low } else { low + 1 };
                let waits = self.nodes[beside].growth.is_none()
                    && (!any_grows || self.nodes[beside].locus.growing(set) > 0);
                if waits && let Ok(growth) = self.nodes[beside].leading(self.layered, set, self.cancel) {
                    open = true;
                    if growth.rate > rate {
                        (at, rate) = (beside, growth.rate);
                        continue;
                    }
                }
                let (k0, k1) = (self.nodes[low].wavenumber, self.nodes[low + 1].wavenumber);
                let Some(next) = self.spectrum.between(k0, k1) else { continue };
                let mut node = self.examine(next)?;
                let found = node.leading(self.layered, set, self.cancel);
                self.nodes.insert(low + 1, node);
                if low < at {
                    at += 1;
                }
                match found {
                    Ok(growth) => {
                        open = true;
                        if growth.rate > rate {
                            (at, rate) = (low + 1, growth.rate);
                        }
                    }
                    Err(other) if !any_grows && other != Failure::Cancelled => {}
                    Err(other) => return Err(other),
                }
            }
        }
        let mut growth = self.nodes[at].leading(self.layered, set, self.cancel)?;
        if !any_grows {
            // The longest wave and the best are looked at with care.
            for i in [0, at] {
                let thorough = self.nodes[i].exponent(self.layered, set, Care::Thorough, self.cancel);
                match thorough {
                    Ok(found) if found.rate > growth.rate => (at, growth) = (i, found),
                    Err(Failure::Cancelled) => return Err(Failure::Cancelled),
                    _ => {}
                }
            }
        }
        Ok(Worst { wavenumber: self.nodes[at].wavenumber, mode: self.nodes[at].mode, growth })
    }

    /// Where the hunt for the worst mode starts: a few in every band that grows, or the closest to growing.
    fn candidates(&self, any_grows: bool, search: Search) -> Vec<usize> {
        let set = self.forcing.acceleration;
        let all = 0..self.nodes.len();
        let grows = |i: &usize| self.nodes[*i].locus.growing(set) > 0;
        if search == Search::EveryMode {
            return all.filter(|i| !any_grows || grows(i)).collect();
        }
        if any_grows {
            let growing: Vec<usize> = all.filter(grows).collect();
            let bands = growing.chunk_by(|i, j| i + 1 == *j);
            let few = |band: &[usize]| {
                band.iter().copied().step_by(band.len().div_ceil(A_BAND)).collect::<Vec<_>>()
            };
            return bands.flat_map(few).collect();
        }
        let mut closest: Vec<(usize, f64)> = all.map(|i| (i, self.nodes[i].distance(set))).collect();
        closest.sort_by(|x, y| x.1.total_cmp(&y.1));
        closest.truncate(CLOSEST);
        closest.push((0, 0.0));
        closest.into_iter().map(|(i, _)| i).collect()
    }

    /// Whether the mode falls at rest and has never come to rest below the set acceleration.
    fn is_falling(&self, wavenumber: f64, set: f64) -> bool {
        let node = self.nodes.iter().find(|node| node.wavenumber == wavenumber);
        node.and_then(|node| node.locus.unstable().first().copied())
            .is_some_and(|first| first.low == 0.0 && first.high.is_none_or(|high| high > set))
    }
}

impl<D: Size> Node<D>
where
    DefaultAllocator: Allocator<D, D> + Allocator<D>,
{
    /// An estimate of how far its closest exponent is from the axis, 1/s.
    fn distance(&self, a: f64) -> f64 {
        self.locus.exponents_near(a).first().map_or(f64::INFINITY, |s| s.re.abs())
    }
}
