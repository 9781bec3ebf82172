//! Whether a marginal curve may reach into a window between two neighbouring wavenumbers.
//!
//! Each marginal acceleration is a smooth curve x(k), x = a². Between two examined wavenumbers it is continued by the
//! parabolas through three neighbours; where their distance from the straight line, doubled for safety, lets the curve
//! touch a window, or where a curve that is near a window has no partner on the other side, the gap has to be filled.

use super::layered::Response;
use super::locus::{Crossing, Locus};
use super::windows::Window;

/// Relative distance in x within which a curve may enter a window unnoticed: half of it in acceleration.
const TOLERANCE: f64 = 1e-6;
/// How much further than the parabola says a curve is taken to bend.
const SAFETY: f64 = 2.0;
/// A curve without a partner matters within this factor (in x) of a window.
const NEAR: f64 = 4.0;

/// What must not be reached, in x = a².
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Reaches {
    windows: Vec<(f64, f64)>,
    /// Where the number of growing exponents has to be known: the set acceleration.
    set: f64,
    /// Without a window: where the last fall ends and where the first wave sets in.
    hold: Option<f64>,
    wave: Option<f64>,
    has_window: bool,
}

impl Reaches {
    pub fn new(windows: &[Window], set: f64, hold: Option<f64>, wave: Option<f64>, up_to: f64) -> Reaches {
        let square = |a: f64| a * a;
        Reaches {
            windows: windows
                .iter()
                .map(|w| {
                    (w.low.map_or(0.0, |low| square(low.at)), square(w.high.map_or(up_to, |high| high.at)))
                })
                .collect(),
            set,
            hold: hold.map(square),
            wave: wave.map(square),
            has_window: !windows.is_empty(),
        }
    }

    /// Whether a curve that takes the values from `low` to `high` may enter a window.
    fn enters(&self, low: f64, high: f64) -> bool {
        self.windows.iter().any(|&(from, to)| high > from * (1.0 + TOLERANCE) && low < to * (1.0 - TOLERANCE))
    }

    fn is_near(&self, x: f64) -> bool {
        if self.has_window {
            return self.windows.iter().any(|&(from, to)| x * NEAR > from && x < to * NEAR);
        }
        // The two limits: where the first wave sets in nothing matters above, where the last fall ends nothing below.
        self.wave.is_none_or(|wave| x < wave * NEAR)
            || self.hold.is_none_or(|hold| x * NEAR > hold && x < hold * NEAR)
    }
}

/// Two neighbouring wavenumbers and their neighbours.
pub(super) struct Gap<'a> {
    pub before: Option<(f64, &'a Locus)>,
    pub low: (f64, &'a Locus),
    pub high: (f64, &'a Locus),
    pub after: Option<(f64, &'a Locus)>,
}

impl Gap<'_> {
    pub fn may_matter(&self, reaches: &Reaches) -> bool {
        let (low, high) = (self.low.1, self.high.1);
        if (low.growing(reaches.set) > 0) != (high.growing(reaches.set) > 0) {
            return true;
        }
        let both_rest = low.growing(reaches.set) == 0 && high.growing(reaches.set) == 0;
        if low.growing_at_rest != high.growing_at_rest {
            // A curve ends at no drive in between.
            if reaches.windows.iter().any(|window| window.0 == 0.0) {
                return true;
            }
        }
        let mut partnered = vec![false; high.crossings.len()];
        for crossing in &low.crossings {
            let x = square(crossing);
            match partner(crossing, high) {
                Some(at) => {
                    partnered[at] = true;
                    let (from, to) = self.span(crossing, &high.crossings[at]);
                    let stirs =
                        both_rest && from < reaches.set * reaches.set && to > reaches.set * reaches.set;
                    if stirs || reaches.enters(from, to) || self.moves_a_limit(crossing, from, to, reaches) {
                        return true;
                    }
                }
                None if reaches.is_near(x) => return true,
                None => {}
            }
        }
        high.crossings
            .iter()
            .zip(&partnered)
            .any(|(crossing, partnered)| !partnered && reaches.is_near(square(crossing)))
    }

    /// The range of x that a curve may take in the gap.
    fn span(&self, low: &Crossing, high: &Crossing) -> (f64, f64) {
        let (k0, k1) = (self.low.0.ln(), self.high.0.ln());
        let (x0, x1) = (square(low), square(high));
        let beyond = |side: Option<(f64, &Locus)>, of: &Crossing| {
            let (k, locus) = side?;
            let at = partner(of, locus)?;
            Some((k.ln(), square(&locus.crossings[at])))
        };
        // Second divided difference with the neighbour on either side.
        let curvature = |(k, x): (f64, f64)| {
            let slope = (x1 - x0) / (k1 - k0);
            let other = if k < k0 { (x0 - x) / (k0 - k) } else { (x - x1) / (k - k1) };
            (other - slope).abs() / (k.max(k1) - k.min(k0))
        };
        let known: Vec<f64> = [beyond(self.before, low), beyond(self.after, high)]
            .into_iter()
            .flatten()
            .map(curvature)
            .collect();
        let bend = match known.iter().copied().reduce(f64::max) {
            Some(curvature) => SAFETY * curvature * (k1 - k0) * (k1 - k0) / 4.0,
            None => 0.5 * (x1 - x0).abs() + 0.1 * x0.min(x1),
        };
        (x0.min(x1) - bend, x0.max(x1) + bend)
    }

    /// Without a window the two limits are still looked for: the last fall to end, the first wave to set in.
    fn moves_a_limit(&self, crossing: &Crossing, from: f64, to: f64, reaches: &Reaches) -> bool {
        if reaches.has_window {
            return false;
        }
        let falls = crossing.response == Response::Harmonic && crossing.change < 0;
        let later = reaches.hold.is_some_and(|hold| to > hold * (1.0 + TOLERANCE) && from < hold * 1.5);
        let earlier = reaches.wave.is_some_and(|wave| from < wave * (1.0 - TOLERANCE) && to > wave / 1.5);
        (falls && later) || (crossing.change > 0 && earlier)
    }
}

fn square(crossing: &Crossing) -> f64 {
    crossing.acceleration * crossing.acceleration
}

/// The crossing of another wavenumber that continues this one: of the same class and direction, and closest in x.
fn partner(crossing: &Crossing, other: &Locus) -> Option<usize> {
    let same = |other: &Crossing| other.response == crossing.response && other.change == crossing.change;
    let distance = |other: &Crossing| (other.acceleration / crossing.acceleration).ln().abs();
    let candidates = other.crossings.iter().enumerate().filter(|(_, c)| same(c));
    candidates.min_by(|x, y| distance(x.1).total_cmp(&distance(y.1))).map(|(i, _)| i)
}
