//! The wavenumbers that a cell offers: its modes one by one as far as they can be told apart, a continuum beyond.

use super::modes::cell_modes;
use super::pinned::PinnedModes;
use super::slab::Mode;
use crate::stack::Plan;

/// Cell modes that are told apart; beyond them the spectrum is dense: a smooth minimum over wavenumbers is met by some
/// mode to a relative (1/2N)² in wavenumber, far below the accuracy claimed.
const MOST_CELL_MODES: usize = 800;
/// Neighbours in the continuum differ by at least this factor: a minimum, quadratic in wavenumber, is met to 1e-6.
const DENSE_STEP: f64 = 1.001;

/// The modes of one cell up to some wavenumber.
pub(super) struct Spectrum {
    plan: Plan,
    modes: Vec<(f64, Mode)>,
    /// All modes up to here are listed, 1/m.
    listed: f64,
    /// Whether the list is full, so that the continuum begins where it ends.
    full: bool,
    /// With a held contact line, what multiplies the tension in each mode; empty otherwise.
    stiffening: Vec<f64>,
}

impl Spectrum {
    pub fn new(plan: Plan) -> Spectrum {
        let first = cell_modes(plan, f64::INFINITY, 1)[0];
        let mut spectrum =
            Spectrum { plan, modes: Vec::new(), listed: 0.0, full: false, stiffening: Vec::new() };
        spectrum.list(4.0 * first.wavenumber);
        spectrum
    }

    /// The modes of a held contact line as far as they are known, and a continuum of free waves beyond.
    pub fn pinned(plan: Plan, pinned: &PinnedModes) -> Spectrum {
        let modes: Vec<_> = pinned.modes.iter().map(|m| (m.wavenumber, Mode::Cell(m.indices))).collect();
        let listed = modes.last().map_or(0.0, |last| last.0);
        let stiffening = pinned.modes.iter().map(|mode| mode.stiffening).collect();
        Spectrum { plan, modes, listed, full: true, stiffening }
    }

    /// What multiplies the tension in the mode of this wavenumber: 1, but for a held contact line.
    pub fn stiffening(&self, wavenumber: f64) -> f64 {
        let at = self.modes.partition_point(|mode| mode.0 < wavenumber);
        let listed = self.modes.get(at).is_some_and(|mode| mode.0 == wavenumber);
        self.stiffening.get(at).filter(|_| listed).copied().unwrap_or(1.0)
    }

    /// Up to here neighbouring modes lie on no common curve of the wavenumber, so that each has to be looked at, 1/m.
    pub fn scattered_to(&self) -> f64 {
        if self.stiffening.is_empty() { 0.0 } else { self.listed }
    }

    /// The longest wave.
    pub fn first(&self) -> (f64, Mode) {
        self.modes[0]
    }

    /// The lowest wavenumber at or above `k`.
    pub fn at_least(&mut self, k: f64) -> (f64, Mode) {
        while !self.full {
            if let Some(mode) = self.modes.get(self.modes.partition_point(|mode| mode.0 < k)) {
                return *mode;
            }
            self.list(2.0 * self.listed.max(k));
        }
        let at = self.modes.partition_point(|mode| mode.0 < k);
        self.modes.get(at).copied().unwrap_or((k, Mode::Continuum))
    }

    /// The wavenumber nearest to the middle of those strictly between two others; `None` when there is none.
    pub fn between(&self, low: f64, high: f64) -> Option<(f64, Mode)> {
        let (a, b) = self.inside(low, high);
        let middle = (low * high).sqrt();
        if a < b {
            let at = a + self.modes[a..b].partition_point(|mode| mode.0 < middle);
            let candidates = [at.saturating_sub(1).clamp(a, b - 1), at.clamp(a, b - 1)];
            return candidates
                .into_iter()
                .map(|i| self.modes[i])
                .min_by(|x, y| (x.0 - middle).abs().total_cmp(&(y.0 - middle).abs()));
        }
        let dense = self.full && low >= self.listed * (1.0 - 1e-12) && high > low * DENSE_STEP * DENSE_STEP;
        dense.then_some((middle, Mode::Continuum))
    }

    /// How many modes lie strictly between two wavenumbers (by Weyl's law in the continuum).
    pub fn count(&self, low: f64, high: f64) -> usize {
        let (a, b) = self.inside(low, high);
        let dense = (high - low.max(self.listed)).max(0.0);
        let weyl = self.plan.area() * dense * (high + low.max(self.listed)) / (4.0 * std::f64::consts::PI);
        b - a + if self.full { weyl as usize } else { 0 }
    }

    fn inside(&self, low: f64, high: f64) -> (usize, usize) {
        let above = self.modes.partition_point(|mode| mode.0 <= low * (1.0 + 1e-12));
        let below = self.modes.partition_point(|mode| mode.0 < high * (1.0 - 1e-12));
        (above, below.max(above))
    }

    fn list(&mut self, up_to: f64) {
        // Weyl's law: area k²/4π modes lie below k.
        let dense = (4.0 * std::f64::consts::PI * MOST_CELL_MODES as f64 / self.plan.area()).sqrt();
        let dense = dense.max(1.5 * self.modes.first().map_or(0.0, |first| first.0));
        self.full = up_to >= dense;
        let modes = cell_modes(self.plan, up_to.min(dense), 4 * MOST_CELL_MODES);
        self.modes = modes.iter().map(|m| (m.wavenumber, Mode::Cell(m.indices))).collect();
        // The continuum begins at the last mode.
        self.listed = self.modes.last().map_or(up_to, |last| if self.full { last.0 } else { up_to });
    }
}
