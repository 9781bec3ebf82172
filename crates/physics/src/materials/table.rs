//! Interpolation in the small tables of handbooks.

/// Linear interpolation in ascending x; x is pulled into the table (its range is checked before).
pub(super) fn linear(points: &[(f64, f64)], x: f64) -> f64 {
    let at = points.partition_point(|point| point.0 <= x).clamp(1, points.len() - 1);
    let ((x0, y0), (x1, y1)) = (points[at - 1], points[at]);
    y0 + (y1 - y0) * ((x - x0) / (x1 - x0)).clamp(0.0, 1.0)
}

/// Through each point of an ascending table of three points or more a cubic whose slope there is that of the parabola
/// through the point and its neighbours: smooth, and exact at the points. x is pulled into the table.
pub(super) fn smooth(points: &[(f64, f64)], x: f64) -> f64 {
    let last = points.len() - 1;
    let at = points.partition_point(|point| point.0 <= x).clamp(1, last);
    let (left, right) = (points[at - 1], points[at]);
    let step = right.0 - left.0;
    let t = ((x - left.0) / step).clamp(0.0, 1.0);
    let (p, q) = (step * slope(points, at - 1), step * slope(points, at));
    let (t2, t3) = (t * t, t * t * t);
    (2.0 * t3 - 3.0 * t2 + 1.0) * left.1
        + (t3 - 2.0 * t2 + t) * p
        + (3.0 * t2 - 2.0 * t3) * right.1
        + (t3 - t2) * q
}

/// Slope at a point of the parabola through it and its two neighbours; at an end through the next two.
fn slope(points: &[(f64, f64)], at: usize) -> f64 {
    let middle = at.clamp(1, points.len() - 2);
    let chord = |i: usize| (points[i + 1].1 - points[i].1) / (points[i + 1].0 - points[i].0);
    let (before, after) = (chord(middle - 1), chord(middle));
    let curvature = (after - before) / (points[middle + 1].0 - points[middle - 1].0);
    before + curvature * (2.0 * points[at].0 - points[middle - 1].0 - points[middle].0)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A parabola is met exactly everywhere, also with uneven steps.
    #[test]
    fn smooth_meets_a_parabola() {
        let parabola = |x: f64| 1.0 + x * (2.0 - 3.0 * x);
        let points = [0.0, 0.1, 0.15, 0.5, 1.0].map(|x| (x, parabola(x)));
        for x in [0.0, 0.03, 0.1, 0.12, 0.3, 0.77, 1.0] {
            assert!((smooth(&points, x) - parabola(x)).abs() < 1e-12, "{x}");
        }
    }
}
