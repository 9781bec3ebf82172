//! All intervals of acceleration in which a wavenumber grows.
//!
//! On the grid only the sequence of signatures is compared ([`super::multipliers`]); wherever it differs between two
//! neighbours the range is halved until every change is known to rounding. A tongue is missed when the sequence is the
//! same at both ends of a step although it changed between: when two tongues of the same two modes lie in one
//! step, which the phases of the modes are too slow for.
//!
//! With viscosity a tongue of one mode shrinks as √(1 − (γ/ε)²). In a combination of two modes that decay with γ₁ ≠ γ₂
//! the viscous exponents grow *outside* the inviscid tongue too, up to where the first-order shift of the faster of
//! the two changes sign; close to the tongue that is a factor (γ₁ + γ₂)/2√(γ₁γ₂), however small both are.

use super::losses::{Losses, Shift};
use super::multipliers::{Kind, Multipliers, Root};
use super::period::{half, steps};
use super::potential::Potential;
use std::f64::consts::TAU;

/// Steps of the grid.
const STEPS: usize = 60;
/// Relative accuracy of an end without viscosity.
const ACCURACY: f64 = 1e-13;
/// Relative width below which a tongue, or the gap between two, is rounding.
const ROUNDING: f64 = 3e-12;
/// Relative width up to which a tongue is a hyperbola.
const NARROW: f64 = 0.02;

/// A stack without viscosity at one wavenumber and one frequency.
#[derive(Debug, Clone)]
pub struct Inviscid<const N: usize> {
    /// Its potential flow.
    pub potential: Potential<N>,
    /// rad/s
    pub omega: f64,
}

/// One interval in which something grows.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tongue {
    /// m/s²
    pub low: f64,
    /// m/s²; `None`: still growing where the search ends.
    pub high: Option<f64>,
    /// Largest growth rate without viscosity, 1/s.
    pub growth: f64,
    /// What viscosity takes from it, 1/s: √(γ₁γ₂) of the two modes that meet; 0 before it is known.
    pub decay: f64,
    /// Classes at the lower and at the upper end.
    pub kinds: [Kind; 2],
}

impl Tongue {
    /// Relative width; infinite where it does not end or begin.
    pub fn width(&self) -> f64 {
        match self.high {
            Some(high) if self.low > 0.0 => (high - self.low) / (0.5 * (high + self.low)),
            _ => f64::INFINITY,
        }
    }

    /// The middle, or the lower end where there is no upper one.
    pub fn middle(&self) -> f64 {
        self.high.map_or(self.low, |high| 0.5 * (self.low + high))
    }
}

/// The multipliers at one acceleration.
struct State<const N: usize> {
    a: f64,
    word: Vec<Kind>,
}

impl<const N: usize> State<N> {
    fn grows(&self) -> Option<Kind> {
        self.word.iter().copied().find(|kind| kind.grows())
    }
}

impl<const N: usize> Inviscid<N> {
    /// The multipliers at an acceleration.
    pub fn multipliers(&self, a: f64) -> Multipliers<N> {
        let moments = half(&self.potential, self.omega, a, steps(&self.potential, self.omega, a));
        Multipliers::new(&moments[moments.len() - 1])
    }

    fn state(&self, a: f64) -> State<N> {
        State { a, word: self.multipliers(a).word() }
    }

    /// Every interval up to `up_to`, ascending.
    pub fn tongues(&self, up_to: f64) -> Vec<Tongue> {
        self.tongues_on(up_to, STEPS)
    }

    /// The same with another grid.
    pub fn tongues_on(&self, up_to: f64, grid: usize) -> Vec<Tongue> {
        let states: Vec<State<N>> =
            (0..=grid).map(|i| self.state(up_to * (i as f64 / grid as f64).max(1e-6))).collect();
        let mut changes: Vec<(f64, Option<Kind>)> = vec![(0.0, states[0].grows())];
        for pair in states.windows(2) {
            self.split(&pair[0], &pair[1], &mut changes);
        }
        changes.dedup_by(|later, earlier| later.1.is_some() == earlier.1.is_some());
        // (low, high, what grows)
        let mut ranges: Vec<(f64, Option<f64>, Kind)> = Vec::new();
        for (i, (low, kind)) in changes.iter().enumerate() {
            let Some(kind) = *kind else { continue };
            let high = changes.get(i + 1).map(|change| change.0);
            match ranges.last_mut() {
                Some(last) if last.1.is_some_and(|end| low - end <= ROUNDING * low) => last.1 = high,
                _ => ranges.push((*low, high, kind)),
            }
        }
        ranges.retain(|(low, high, _)| high.is_none_or(|high| high - low > ROUNDING * high));
        let mut tongues = Vec::new();
        for (low, high, kind) in ranges {
            let end = high.unwrap_or(up_to);
            // The largest growth: a narrow tongue has it in the middle, a wide one is sampled.
            let samples = if end - low < 0.01 * end { 1 } else { 15 };
            let growth = (0..samples).map(|j| {
                self.multipliers(low + (end - low) * (2 * j + 1) as f64 / (2 * samples) as f64).growth()
            });
            let growth = growth.fold(0.0, f64::max) * self.omega / TAU;
            let at_high =
                high.map_or(kind, |high| self.state(high - 1e-3 * (high - low)).grows().unwrap_or(kind));
            tongues.push(Tongue { low, high, growth, decay: 0.0, kinds: [kind, at_high] });
        }
        tongues
    }

    /// Adds where the sequence changes between two states, with what grows above.
    fn split(&self, low: &State<N>, high: &State<N>, changes: &mut Vec<(f64, Option<Kind>)>) {
        if low.word == high.word {
            return;
        }
        let middle = 0.5 * (low.a + high.a);
        if high.a - low.a <= ACCURACY * high.a || middle <= low.a || middle >= high.a {
            changes.push((middle, high.grows()));
            return;
        }
        let middle = self.state(middle);
        self.split(low, &middle, changes);
        self.split(&middle, high, changes);
    }
}

/// The same stack with its losses.
#[derive(Debug, Clone)]
pub struct Viscous<const N: usize> {
    /// Without them.
    pub inviscid: Inviscid<N>,
    /// With the stack's viscosities.
    pub losses: Losses<N>,
    /// By which all viscosities are multiplied.
    pub factor: f64,
}

/// Two modes that meet, or one that meets its mirror image.
#[derive(Debug, Clone, Copy)]
pub struct Meeting {
    /// Of their exponents.
    pub shifts: [Shift; 2],
    /// Acceleration by the angle between them, m/s²; for one mode by its own angle.
    per_angle: f64,
}

impl Meeting {
    /// √(γ₁γ₂), 1/s, with all viscosities multiplied.
    pub fn decay(&self, factor: f64) -> f64 {
        self.shifts.iter().map(|shift| -shift.at(factor).re).product::<f64>().abs().sqrt()
    }

    /// How far the place where they meet moves, m/s² by a radian in a second.
    fn moved(&self, factor: f64) -> f64 {
        let [one, two] = self.shifts.map(|shift| shift.at(factor).im);
        let turned = if self.shifts[0] == self.shifts[1] { one } else { one - two };
        -turned * self.per_angle
    }
}

impl<const N: usize> Viscous<N> {
    /// Shifts of the stable modes at an acceleration, ascending in x.
    fn shifts(&self, a: f64) -> Vec<(Root<N>, Shift)> {
        self.losses.shifts(&self.inviscid.potential, self.inviscid.omega, a)
    }

    /// Largest first-order growth rate of the modes that are stable without viscosity, 1/s.
    pub fn leading(&self, a: f64) -> f64 {
        self.shifts(a).iter().map(|(_, shift)| shift.at(self.factor).re).fold(f64::NEG_INFINITY, f64::max)
    }

    /// What meets in a tongue, seen just outside it: the sum of the two decays is the same on its two sides and all
    /// through it, their difference is taken far enough away.
    pub fn meeting(&self, tongue: &Tongue, up_to: f64) -> Option<Meeting> {
        let end = tongue.high.unwrap_or(up_to);
        let away = (6.0 * (end - tongue.low)).min(0.02 * end);
        let (at, kind) = if tongue.low > away {
            (tongue.low - away, tongue.kinds[0])
        } else {
            (end + away, tongue.kinds[1])
        };
        let modes = self.shifts(at);
        let from_middle = at - 0.5 * (tongue.low + end);
        let alone = |mode: &(Root<N>, Shift), sign: f64| Meeting {
            shifts: [mode.1, mode.1],
            per_angle: sign * from_middle / mode.0.to_end,
        };
        match kind {
            Kind::Subharmonic => modes.first().map(|mode| alone(mode, -1.0)),
            Kind::Combination => modes
                .windows(2)
                .filter(|pair| pair[0].0.kind != pair[1].0.kind)
                .min_by(|p, q| (p[1].0.x - p[0].0.x).total_cmp(&(q[1].0.x - q[0].0.x)))
                .map(|pair| Meeting {
                    shifts: [pair[0].1, pair[1].1],
                    per_angle: from_middle / (pair[0].0.angle() - pair[1].0.angle()),
                }),
            _ => modes.last().map(|mode| alone(mode, 1.0)),
        }
    }

    /// A tongue with its viscous ends; `None` where viscosity takes all of it.
    pub fn trimmed(&self, tongue: &Tongue, up_to: f64) -> Option<Tongue> {
        let meeting = self.meeting(tongue, up_to);
        let decay = meeting.map_or(0.0, |meeting| meeting.decay(self.factor));
        let trimmed = Tongue { decay, ..*tongue };
        if decay >= tongue.growth {
            return None;
        }
        let end = tongue.high.unwrap_or(up_to);
        let low = if tongue.low > 0.0 { self.beyond(tongue.low, -1.0, end - tongue.low) } else { 0.0 };
        let high = tongue.high.map(|high| self.beyond(high, 1.0, high - tongue.low));
        // Narrow ones are hyperbolas that Stokes layers move; of wide ones the ends hardly move.
        let Some(high) = high.filter(|high| low > 0.0 && high - low < NARROW * high) else {
            return Some(Tongue { low, high, ..trimmed });
        };
        let moved = meeting.map_or(0.0, |meeting| meeting.moved(self.factor) * TAU / self.inviscid.omega);
        let (middle, half) = (0.5 * (low + high) + moved, 0.5 * (high - low));
        let half = half * (1.0 - (decay / tongue.growth).powi(2)).sqrt();
        Some(Tongue { low: middle - half, high: Some(middle + half), ..trimmed })
    }

    /// How far outside an inviscid tongue the viscous exponents still grow.
    fn beyond(&self, end: f64, side: f64, width: f64) -> f64 {
        let (mut inside, mut outside) = (0.0, 1e-4 * width);
        while self.leading(end + side * outside) > 0.0 {
            inside = outside;
            outside *= 2.0;
            if outside > 0.3 * end {
                return end + side * outside;
            }
        }
        if inside == 0.0 {
            return end;
        }
        for _ in 0..12 {
            let middle = 0.5 * (inside + outside);
            if self.leading(end + side * middle) > 0.0 { inside = middle } else { outside = middle }
        }
        end + side * 0.5 * (inside + outside)
    }
}
