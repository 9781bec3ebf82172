//! What a set of unstable intervals leaves free.

/// An end of a window and whose interval it is the end of.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct End {
    /// m/s²
    pub at: f64,
    /// Index of the mode that sets it.
    pub by: usize,
}

/// An interval of acceleration that nothing covers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Window {
    /// `None` when it begins at no drive.
    pub low: Option<End>,
    /// `None` when it is open at the end of the search.
    pub high: Option<End>,
}

impl Window {
    /// Whether an acceleration lies in it; else how far from it.
    fn distance(&self, a: f64) -> f64 {
        let below = self.low.map_or(0.0, |low| (low.at - a).max(0.0));
        below.max(self.high.map_or(0.0, |high| (a - high.at).max(0.0)))
    }
}

/// The windows between unstable intervals (mode, low, high; `None`: beyond the search), ascending.
pub(super) fn between(unstable: impl Iterator<Item = (usize, f64, Option<f64>)>, up_to: f64) -> Vec<Window> {
    let mut intervals: Vec<_> = unstable.collect();
    intervals.sort_by(|x, y| x.1.total_cmp(&y.1));
    let mut windows = Vec::new();
    // How far everything is covered, and by whom.
    let mut covered: Option<End> = None;
    for (by, low, high) in intervals {
        let reached = covered.map_or(0.0, |end| end.at);
        if low > reached {
            windows.push(Window { low: covered, high: Some(End { at: low, by }) });
        }
        let end = high.unwrap_or(f64::INFINITY);
        if end > reached || covered.is_none() {
            covered = Some(End { at: end.max(reached), by });
        }
    }
    if covered.is_none_or(|end| end.at < up_to) {
        windows.push(Window { low: covered, high: None });
    }
    windows
}

/// The window that holds `a`, or the nearest one.
pub(super) fn nearest(windows: &[Window], a: f64) -> Option<&Window> {
    windows.iter().min_by(|x, y| x.distance(a).total_cmp(&y.distance(a)))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn ends(unstable: &[(f64, Option<f64>)]) -> Vec<(f64, Option<f64>)> {
        let found = between(unstable.iter().enumerate().map(|(i, &(low, high))| (i, low, high)), 100.0);
        found.iter().map(|w| (w.low.map_or(0.0, |low| low.at), w.high.map(|high| high.at))).collect()
    }

    #[test]
    fn what_is_left_free_is_found() {
        assert_eq!(ends(&[]), [(0.0, None)]);
        assert_eq!(ends(&[(0.0, None)]), []);
        assert_eq!(ends(&[(0.0, Some(10.0)), (20.0, None)]), [(10.0, Some(20.0))]);
        assert_eq!(ends(&[(20.0, None), (0.0, Some(10.0)), (0.0, Some(12.0))]), [(12.0, Some(20.0))]);
        let narrow = [(0.0, Some(10.0)), (15.0, Some(15.0 + 1e-7)), (30.0, None)];
        assert_eq!(ends(&narrow), [(10.0, Some(15.0)), (15.0 + 1e-7, Some(30.0))]);
        assert_eq!(ends(&[(0.0, Some(25.0)), (20.0, None)]), []);
        assert_eq!(ends(&[(5.0, Some(120.0))]), [(0.0, Some(5.0))]);
    }

    #[test]
    fn the_nearest_is_the_one_that_holds_it() {
        let windows = between([(0, 10.0, Some(20.0)), (1, 40.0, Some(50.0))].into_iter(), 100.0);
        for (a, low) in
            [(5.0, None), (14.0, None), (16.0, Some(20.0)), (30.0, Some(20.0)), (99.0, Some(50.0))]
        {
            assert_eq!(nearest(&windows, a).unwrap().low.map(|low| low.at), low, "{a}");
        }
    }
}
