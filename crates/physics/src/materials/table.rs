//! Interpolation in the small tables of handbooks.

/// Linear interpolation in ascending x; x is pulled into the table (its range is checked before).
pub(super) fn linear(points: &[(f64, f64)], x: f64) -> f64 {
    let at = points.partition_point(|point| point.0 <= x).clamp(1, points.len() - 1);
    let ((x0, y0), (x1, y1)) = (points[at - 1], points[at]);
    y0 + (y1 - y0) * ((x - x0) / (x1 - x0)).clamp(0.0, 1.0)
}

/// Through each point of a table with equal steps in x a cubic with the slopes of its neighbours (Catmull & Rom);
/// smooth, and exact at the points.
pub(super) fn smooth(first: f64, step: f64, values: &[f64], x: f64) -> f64 {
    let last = values.len() - 1;
    let position = ((x - first) / step).clamp(0.0, last as f64);
    let i = (position as usize).min(last - 1);
    let t = position - i as f64;
    let slope = |j: usize| match j {
        0 => values[1] - values[0],
        j if j == last => values[last] - values[last - 1],
        j => (values[j + 1] - values[j - 1]) / 2.0,
    };
    let (a, b) = (values[i], values[i + 1]);
    let (p, q) = (slope(i), slope(i + 1));
    let (t2, t3) = (t * t, t * t * t);
    (2.0 * t3 - 3.0 * t2 + 1.0) * a + (t3 - 2.0 * t2 + t) * p + (3.0 * t2 - 2.0 * t3) * b + (t3 - t2) * q
}
