//! Every interval of the cell's drive, at this frequency, in which all slabs hold, with what sets each end.
//!
//! Limits are the slabs' own accelerations; while the chain is linear, slab acceleration = |T| × cell acceleration.
//! So each slab's windows divide by its |T|, and the intervals are the intersection: exact numbers, no search. A slab
//! may have several windows (a narrow tongue of waves cuts one in two), and then so has the stack.

use super::{DriveEnd, DriveInterval, DriveIntervals, Mechanism, Response, SetBy, Slab};

/// `None` when a slab is not judged: its limits could be anything.
pub(crate) fn drive_intervals(slabs: &[Slab], set: f64) -> Option<DriveIntervals> {
    let mut together: Option<Vec<DriveInterval>> = None;
    for (index, slab) in slabs.iter().enumerate().filter(|(_, slab)| !slab.faces.is_empty()) {
        let own = at_cell(index, slab)?;
        together = Some(match together {
            Some(so_far) => intersect(&so_far, &own),
            None => own,
        });
    }
    let list = together?;
    let off = |interval: &DriveInterval| interval.distance(set);
    let nearest = (0..list.len()).min_by(|&a, &b| off(&list[a]).total_cmp(&off(&list[b])));
    Some(DriveIntervals { list, nearest })
}

/// The windows of one slab as accelerations of the cell.
fn at_cell(index: usize, slab: &Slab) -> Option<Vec<DriveInterval>> {
    let limits = slab.stability.as_ref()?.limits.as_ref()?;
    let amplification = slab.motion.as_ref()?.amplification;
    if amplification <= 0.0 {
        return None;
    }
    let ends = |(rank, &(low, high)): (usize, &(f64, Option<f64>))| {
        let [low_by, high_by] = limits.windows_set_by.get(rank).copied().unwrap_or_default();
        let end = |value: f64, mechanism, set_by| DriveEnd {
            acceleration: value / amplification,
            slab: index,
            mechanism,
            set_by,
        };
        DriveInterval {
            low: end(low, below(slab, rank, low, low_by), low_by),
            high: high.map(|high| end(high, Mechanism::Waves, high_by)),
        }
    };
    Some(limits.windows.iter().enumerate().map(ends).collect())
}

/// What happens below a window: under a later one waves of the tongue that parts it from the one before; under the
/// first something falls, where what sets its end is a heavy face above a light fluid that answers at the drive's own
/// frequency or does not oscillate.
fn below(slab: &Slab, rank: usize, low: f64, by: Option<SetBy>) -> Mechanism {
    if low == 0.0 {
        return Mechanism::None;
    }
    let falls = by.is_none_or(|by| {
        let heavy = slab.faces.get(by.face).is_some_and(|face| face.heavier_above);
        heavy && matches!(by.response, Response::Harmonic | Response::None)
    });
    if rank == 0 && falls { Mechanism::Falls } else { Mechanism::Waves }
}

fn intersect(some: &[DriveInterval], others: &[DriveInterval]) -> Vec<DriveInterval> {
    let both = some.iter().flat_map(|one| others.iter().map(move |other| (one, other)));
    let mut found: Vec<DriveInterval> = both
        .filter_map(|(one, other)| {
            let low = if other.low.acceleration > one.low.acceleration { other.low } else { one.low };
            let high = match (one.high, other.high) {
                (Some(a), Some(b)) if b.acceleration < a.acceleration => Some(b),
                (Some(a), _) => Some(a),
                (None, b) => b,
            };
            let opens = high.is_none_or(|high| low.acceleration < high.acceleration);
            opens.then_some(DriveInterval { low, high })
        })
        .collect();
    found.sort_by(|a, b| a.low.acceleration.total_cmp(&b.low.acceleration));
    found
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::derived::testing::{slab, windows};

    fn ends(found: &DriveIntervals) -> Vec<(f64, Option<f64>)> {
        let one = |i: &DriveInterval| (i.low.acceleration, i.high.map(|high| high.acceleration));
        found.list.iter().map(one).collect()
    }

    #[test]
    fn two_slabs_share_the_intersection_divided_by_their_amplification() {
        // D5 of the worked designs: hold 157.4 and 157.3, waves 291.2 and 278.1, |T| 1.498 and 1.719.
        let slabs = [
            windows(slab("upper"), 1.719, &[(157.3, Some(278.1))]),
            windows(slab("lower"), 1.498, &[(157.4, Some(291.2))]),
        ];
        let found = drive_intervals(&slabs, 129.4).expect("both slabs are judged");
        assert_eq!(ends(&found), [(157.4 / 1.498, Some(278.1 / 1.719))]);
        let one = found.list[0];
        assert_eq!((one.low.slab, one.low.mechanism), (1, Mechanism::Falls));
        assert_eq!(one.high.map(|high| (high.slab, high.mechanism)), Some((0, Mechanism::Waves)));
        assert!(one.low.set_by.is_some_and(|by| by.face == 1), "the lower face falls");
        assert_eq!(found.nearest, Some(0));
    }

    #[test]
    fn disjoint_windows_stay_apart_and_each_end_has_its_slab() {
        // By hand: [20, 40] and [100, 120] against [15, 110] after halving: [10, 20] and [50, 55].
        let slabs = [
            windows(slab("upper"), 2.0, &[(20.0, Some(40.0)), (100.0, Some(120.0))]),
            windows(slab("lower"), 2.0, &[(15.0, Some(110.0))]),
        ];
        let found = drive_intervals(&slabs, 48.0).expect("both slabs are judged");
        assert_eq!(ends(&found), [(10.0, Some(20.0)), (50.0, Some(55.0))]);
        let slabs: Vec<_> = found.list.iter().map(|i| (i.low.slab, i.high.map(|high| high.slab))).collect();
        assert_eq!(slabs, [(0, Some(0)), (0, Some(1))]);
        assert_eq!(found.list[1].low.mechanism, Mechanism::Waves, "a tongue parts the two");
        assert_eq!(found.nearest, Some(1), "2 m/s² off, the first 28 m/s²");
        assert!(!found.list[1].holds(48.0) && found.list[1].holds(50.0) && !found.list[1].holds(55.1));
    }

    #[test]
    fn a_window_without_an_end_is_cut_by_the_other_slab_or_stays_open() {
        let open = |name| windows(slab(name), 1.0, &[(50.0, None)]);
        let found = drive_intervals(&[open("a"), open("b")], 60.0).expect("judged");
        assert_eq!(ends(&found), [(50.0, None)]);
        let cut = windows(slab("b"), 1.0, &[(10.0, Some(70.0))]);
        let found = drive_intervals(&[open("a"), cut], 60.0).expect("judged");
        assert_eq!(ends(&found), [(50.0, Some(70.0))]);
    }

    #[test]
    fn slabs_that_just_overlap_and_just_do_not() {
        let upper = |to| windows(slab("upper"), 1.0, &[(50.0, Some(to))]);
        let lower = || windows(slab("lower"), 1.0, &[(90.0, None)]);
        let none = drive_intervals(&[upper(89.9), lower()], 85.0).expect("judged");
        assert!(none.list.is_empty() && none.nearest.is_none());
        assert_eq!(drive_intervals(&[upper(90.1), lower()], 85.0).map(|found| found.list.len()), Some(1));
    }

    #[test]
    fn an_unjudged_slab_leaves_them_open() {
        let judged = windows(slab("upper"), 1.0, &[(50.0, Some(80.0))]);
        assert_eq!(drive_intervals(&[judged, slab("lower")], 60.0), None);
        assert_eq!(drive_intervals(&[], 60.0), None);
    }
}
