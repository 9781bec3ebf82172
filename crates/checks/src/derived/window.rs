//! The window of the drive through the chain. Limits are the slabs' own accelerations; while the chain is linear,
//! slab acceleration = |T| × cell acceleration, so each slab's windows divide by its |T|, and what holds everything
//! is their intersection.

use super::{DriveWindow, Slab};

type Interval = (f64, Option<f64>);

/// `None` when a slab is not judged (its limits could be anything) or there is none.
pub(crate) fn drive_window(slabs: &[Slab], set: f64) -> Option<DriveWindow> {
    let mut together: Vec<(Interval, [usize; 2])> = Vec::new();
    let mut first = true;
    let mut lowest: Option<(f64, usize)> = None;
    let mut lost = false;
    let mut highest: Option<(f64, usize)> = None;
    for (index, slab) in slabs.iter().enumerate() {
        if slab.faces.is_empty() {
            continue;
        }
        let limits = slab.stability.as_ref()?.limits.as_ref()?;
        let amplification = Some(slab.motion.as_ref()?.amplification).filter(|t| *t > 0.0)?;
        let scaled: Vec<Interval> = limits
            .windows
            .iter()
            .map(|&(low, high)| (low / amplification, high.map(|high| high / amplification)))
            .collect();
        together = if first {
            scaled.into_iter().map(|interval| (interval, [index; 2])).collect()
        } else {
            intersect(&together, &scaled, index)
        };
        first = false;
        match limits.hold {
            Some(hold) if lowest.is_none_or(|(most, _)| hold / amplification > most) => {
                lowest = Some((hold / amplification, index));
            }
            Some(_) => {}
            None => lost = true,
        }
        if let Some(wave) = limits.wave
            && highest.is_none_or(|(least, _)| wave / amplification < least)
        {
            highest = Some((wave / amplification, index));
        }
    }
    if first {
        return None;
    }
    let nearest = together.iter().min_by(|a, b| distance(a.0, set).total_cmp(&distance(b.0, set)));
    Some(match nearest {
        Some(&((low, high), [low_slab, high_slab])) => DriveWindow {
            exists: true,
            hold: Some(low),
            wave: high,
            hold_slab: Some(low_slab),
            wave_slab: high.map(|_| high_slab),
            set,
        },
        None => DriveWindow {
            exists: false,
            hold: lowest.filter(|_| !lost).map(|(hold, _)| hold),
            wave: highest.map(|(wave, _)| wave),
            hold_slab: lowest.filter(|_| !lost).map(|(_, slab)| slab),
            wave_slab: highest.map(|(_, slab)| slab),
            set,
        },
    })
}

fn intersect(
    together: &[(Interval, [usize; 2])],
    other: &[Interval],
    index: usize,
) -> Vec<(Interval, [usize; 2])> {
    let mut both = Vec::new();
    for &((low, high), [low_slab, high_slab]) in together {
        for &(other_low, other_high) in other {
            let (from, from_slab) = if other_low > low { (other_low, index) } else { (low, low_slab) };
            let (to, to_slab) = match (high, other_high) {
                (Some(a), Some(b)) if b < a => (Some(b), index),
                (None, Some(b)) => (Some(b), index),
                (a, _) => (a, high_slab),
            };
            if to.is_none_or(|to| from < to) {
                both.push(((from, to), [from_slab, to_slab]));
            }
        }
    }
    both
}

fn distance((low, high): Interval, set: f64) -> f64 {
    if set < low { low - set } else { high.map_or(0.0, |high| (set - high).max(0.0)) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::derived::testing::{slab, windows};

    #[test]
    fn two_slabs_share_the_intersection_divided_by_their_amplification() {
        // D5 of the worked designs: hold 157.4 and 157.3, waves 291.2 and 278.1, |T| 1.498 and 1.719 (top slab last
        // in that table, first here).
        let slabs = [
            windows(slab("upper"), 1.719, &[(157.3, Some(278.1))]),
            windows(slab("lower"), 1.498, &[(157.4, Some(291.2))]),
        ];
        let window = drive_window(&slabs, 13.2 * 9.80665).expect("both slabs are judged");
        assert!(window.exists);
        let close = |a: Option<f64>, b: f64| a.is_some_and(|a| (a - b).abs() < 1e-9);
        assert!(close(window.hold, 157.4 / 1.498) && close(window.wave, 278.1 / 1.719));
        assert_eq!((window.hold_slab, window.wave_slab), (Some(1), Some(0)));
    }

    #[test]
    fn slabs_that_ask_for_different_drives_have_no_window() {
        let slabs = [
            windows(slab("upper"), 1.0, &[(50.0, Some(80.0))]),
            windows(slab("lower"), 1.0, &[(90.0, None)]),
        ];
        let window = drive_window(&slabs, 85.0).expect("both slabs are judged");
        assert!(!window.exists);
        assert_eq!((window.hold, window.wave), (Some(90.0), Some(80.0)));
    }

    #[test]
    fn of_several_windows_the_nearest_counts() {
        let slabs = [windows(slab("oil"), 2.0, &[(20.0, Some(40.0)), (100.0, Some(120.0))])];
        let at = |set| drive_window(&slabs, set).and_then(|window| window.hold);
        assert_eq!(at(15.0), Some(10.0));
        assert_eq!(at(48.0), Some(50.0));
    }

    #[test]
    fn an_unjudged_slab_leaves_the_window_open() {
        let slabs = [windows(slab("upper"), 1.0, &[(50.0, Some(80.0))]), slab("lower")];
        assert_eq!(drive_window(&slabs, 60.0), None);
    }
}
