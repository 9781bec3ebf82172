//! Ordinary differential equations with step control: the pair of orders 5 and 4 of Dormand & Prince, J. Comput. Appl.
//! Math. 6, 19 (1980).

const C: [f64; 7] = [0.0, 0.2, 0.3, 0.8, 8.0 / 9.0, 1.0, 1.0];
const A: [[f64; 6]; 7] = [
    [0.0; 6],
    [0.2, 0.0, 0.0, 0.0, 0.0, 0.0],
    [3.0 / 40.0, 9.0 / 40.0, 0.0, 0.0, 0.0, 0.0],
    [44.0 / 45.0, -56.0 / 15.0, 32.0 / 9.0, 0.0, 0.0, 0.0],
    [19372.0 / 6561.0, -25360.0 / 2187.0, 64448.0 / 6561.0, -212.0 / 729.0, 0.0, 0.0],
    [9017.0 / 3168.0, -355.0 / 33.0, 46732.0 / 5247.0, 49.0 / 176.0, -5103.0 / 18656.0, 0.0],
    [35.0 / 384.0, 0.0, 500.0 / 1113.0, 125.0 / 192.0, -2187.0 / 6784.0, 11.0 / 84.0],
];
/// Fifth-order weights less fourth-order ones.
const ERROR: [f64; 7] =
    [71.0 / 57600.0, 0.0, -71.0 / 16695.0, 71.0 / 1920.0, -17253.0 / 339200.0, 22.0 / 525.0, -1.0 / 40.0];

/// Takes `y` from `from` to `to`; `rate` is dy/dt, `scale` the size of each component; the error of a step stays below
/// `tolerance` of it.
pub fn integrate(
    rate: impl Fn(f64, &[f64], &mut [f64]),
    from: f64,
    to: f64,
    y: &mut [f64],
    scale: &[f64],
    tolerance: f64,
) {
    let n = y.len();
    let mut stages = vec![vec![0.0; n]; 7];
    let mut trial = vec![0.0; n];
    let (mut t, mut step) = (from, (to - from) * 1e-5);
    while t < to {
        let h = step.min(to - t);
        for stage in 0..7 {
            for i in 0..n {
                let sum: f64 = (0..stage).map(|j| A[stage][j] * stages[j][i]).sum();
                trial[i] = y[i] + h * sum;
            }
            rate(t + C[stage] * h, &trial, &mut stages[stage]);
        }
        // The last stage stands at the fifth-order solution.
        let of = |i: usize| (h * (0..7).map(|j| ERROR[j] * stages[j][i]).sum::<f64>() / scale[i]).abs();
        let error = match trial.iter().chain(stages.iter().flatten()).all(|value| value.is_finite()) {
            true => (0..n).map(of).fold(0.0, f64::max),
            false => f64::INFINITY,
        };
        if error <= tolerance || h < 1e-14 * (to - from) {
            y.copy_from_slice(&trial);
            t = if h >= to - t { to } else { t + h };
        }
        step = h * (0.9 * (tolerance / error.max(1e-300)).powf(0.2)).clamp(0.2, 4.0);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn two_body_orbit_closes() {
        // Kepler ellipse of eccentricity 0.5: after one period 2π everything is where it began.
        let rate = |_: f64, y: &[f64], out: &mut [f64]| {
            let r3 = y[0].hypot(y[1]).powi(3);
            out.copy_from_slice(&[y[2], y[3], -y[0] / r3, -y[1] / r3]);
        };
        let start = [0.5, 0.0, 0.0, 3f64.sqrt()];
        let mut y = start;
        integrate(rate, 0.0, std::f64::consts::TAU, &mut y, &[1.0; 4], 1e-12);
        for (end, begin) in y.iter().zip(start) {
            assert!((end - begin).abs() < 1e-8, "{y:?}");
        }
    }
}
