//! An answer against the truth.

use super::intervals::{Inviscid, Tongue, Viscous};
use super::losses::Losses;
use super::potential::Potential;
use super::questions::Question;

/// Relative accuracy that the solver promises for the ends of its intervals.
pub const PROMISED: f64 = 1e-8;
/// What the first order in the loss leaves open of an end, by the width of the tongue (a loss of a tenth of the growth
/// trims by half a per cent).
const FIRST_ORDER: f64 = 0.01;

/// An interval in which something grows: both ends, the upper one unless it lies beyond the range.
pub type Interval = (f64, Option<f64>);

/// What is wrong with an answer.
#[derive(Debug, Clone, Default)]
pub struct Complaints {
    /// Tongues that the answer has not.
    pub missed: Vec<Tongue>,
    /// Ends that lie elsewhere: tongue, answer.
    pub displaced: Vec<(Tongue, Interval)>,
    /// Intervals in which nothing grows.
    pub surplus: Vec<Interval>,
}

impl Complaints {
    /// Whether the answer is right.
    pub fn is_empty(&self) -> bool {
        self.missed.is_empty() && self.displaced.is_empty() && self.surplus.is_empty()
    }
}

/// Compares an answer, ascending, with the truth.
pub fn judge(question: &Question, found: &[Interval]) -> Complaints {
    let mut complaints = Complaints::default();
    for tongue in &question.certain {
        let over: Vec<Interval> =
            found.iter().filter(|interval| overlap(tongue, interval)).copied().collect();
        let [first, .., last] = match over[..] {
            [] => {
                complaints.missed.push(*tongue);
                continue;
            }
            [one] => [one, one],
            [first, .., last] => [first, last],
        };
        // A tongue in two pieces would be wrong too: its ends must be those of one interval.
        let answer = if over.len() == 1 { first } else { (last.0, first.1) };
        if !same_ends(tongue, answer) {
            complaints.displaced.push((*tongue, answer));
        }
    }
    let known = || question.certain.iter().chain(&question.doubtful);
    for interval in found {
        if !known().any(|tongue| overlap(tongue, interval)) {
            complaints.surplus.push(*interval);
        }
    }
    complaints
}

fn overlap(tongue: &Tongue, (low, high): &Interval) -> bool {
    let slack = 1.0 + PROMISED;
    tongue.high.is_none_or(|end| *low <= end * slack) && high.is_none_or(|high| tongue.low <= high * slack)
}

fn same_ends(tongue: &Tongue, (low, high): Interval) -> bool {
    let room =
        |end: f64| PROMISED * end + FIRST_ORDER * (tongue.high.unwrap_or(2.0 * tongue.low) - tongue.low);
    let high = match (tongue.high, high) {
        (Some(true_high), Some(high)) => (high - true_high).abs() <= room(true_high),
        (None, None) => true,
        _ => false,
    };
    high && (low - tongue.low).abs() <= room(tongue.low)
}

/// Whether something grows at an acceleration: by the multipliers without viscosity, whose growth counts however
/// small, and by the first order outside their tongues.
pub fn grows(question: &Question, a: f64) -> bool {
    match question.layered.interfaces() {
        1 => grows_of::<1>(question, a),
        2 => grows_of::<2>(question, a),
        _ => grows_of::<3>(question, a),
    }
}

fn grows_of<const N: usize>(question: &Question, a: f64) -> bool {
    let potential = Potential::<N>::new(&question.layered, question.wavenumber);
    let losses = Losses::new(&question.layered, question.wavenumber, &potential);
    let inviscid = Inviscid { potential, omega: question.omega };
    if inviscid.multipliers(a).growth() > 0.0 {
        return true;
    }
    Viscous { inviscid, losses, factor: 1.0 }.leading(a) > 0.0
}

/// The tongues that a grid of so many points up to the end of the range does not see: no point of it grows between
/// their ends.
pub fn missed_by_grid(question: &Question, points: usize) -> usize {
    let step = question.up_to / points as f64;
    let is_missed = |tongue: &&Tongue| {
        let last = tongue.high.map_or(points, |high| (high / step).ceil() as usize);
        !((tongue.low / step) as usize..=last).any(|i| grows(question, i as f64 * step))
    };
    question.certain.iter().filter(is_missed).count()
}
