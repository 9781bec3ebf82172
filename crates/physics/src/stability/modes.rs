//! The horizontal modes of a cell with a free contact line: where the stack can move sideways in standing waves.
//!
//! Rectangle a × b: k_mn = π √((m/a)² + (n/b)²). Circle of radius R: k_mn = j'_mn/R, with j'_mn the n-th positive
//! zero of J_m′ (the trivial zero at 0 of m = 0 is excluded by conservation of volume). Zeros: NIST Digital Library
//! of Mathematical Functions §10.21; found here by bisection between bracketing points, accurate to 1e-13.

use crate::stack::Plan;

/// A mode of the cell.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CellMode {
    /// 1/m
    pub wavenumber: f64,
    /// Rectangle: half waves along (length, width); circle: (nodal diameters, radial number).
    pub indices: [u32; 2],
}

/// All modes with wavenumber ≤ `up_to`, ascending, at most `most`; modes of equal wavenumber (the same shape
/// turned) once.
pub fn cell_modes(plan: Plan, up_to: f64, most: usize) -> Vec<CellMode> {
    let mut modes = match plan {
        Plan::Rectangle { length, width } => rectangle(length, width, up_to, most),
        Plan::Circle { diameter } => circle(diameter / 2.0, up_to, most),
    };
    modes.sort_by(|a, b| a.wavenumber.total_cmp(&b.wavenumber).then(a.indices.cmp(&b.indices)));
    modes.dedup_by(|b, a| b.wavenumber - a.wavenumber <= 1e-12 * a.wavenumber);
    modes.truncate(most);
    modes
}

/// The wavenumber below which about `most` modes lie (Weyl's law with its perimeter term), so that no more are made.
fn reach(area: f64, perimeter: f64, most: usize) -> f64 {
    // N(k) ≈ area k²/4π + perimeter k/4π for a free line; solved for k, with room to spare.
    let n = 4.0 * std::f64::consts::PI * (most as f64 + 4.0);
    let b = perimeter;
    1.1 * ((b * b + 4.0 * area * n).sqrt() - b) / (2.0 * area) + 10.0 / perimeter
}

fn rectangle(length: f64, width: f64, up_to: f64, most: usize) -> Vec<CellMode> {
    let up_to = up_to.min(reach(length * width, 2.0 * (length + width), most));
    let (kx, ky) = (std::f64::consts::PI / length, std::f64::consts::PI / width);
    let mut modes = Vec::new();
    for m in 0..=(up_to / kx) as u32 {
        for n in 0..=(up_to / ky) as u32 {
            let wavenumber = (m as f64 * kx).hypot(n as f64 * ky);
            if wavenumber > up_to {
                break;
            }
            if m + n > 0 {
                modes.push(CellMode { wavenumber, indices: [m, n] });
            }
        }
    }
    modes
}

fn circle(radius: f64, up_to: f64, most: usize) -> Vec<CellMode> {
    let area = std::f64::consts::PI * radius * radius;
    let largest = up_to.min(reach(area, std::f64::consts::TAU * radius, 2 * most)) * radius;
    let mut modes = Vec::new();
    // j'_{m,1} > m for m ≥ 1, so no mode with m > largest fits.
    for m in 0..=largest as u32 {
        for (n, zero) in derivative_zeros(m, largest).into_iter().enumerate() {
            modes.push(CellMode { wavenumber: zero / radius, indices: [m, n as u32 + 1] });
        }
    }
    modes
}

/// The positive zeros of J_m′ up to `largest`, ascending (without the zero at the origin).
pub(super) fn derivative_zeros(m: u32, largest: f64) -> Vec<f64> {
    let order = m as i32;
    let slope = |x: f64| {
        if m == 0 { -libm::jn(1, x) } else { 0.5 * (libm::jn(order - 1, x) - libm::jn(order + 1, x)) }
    };
    let mut zeros = Vec::new();
    // Zeros are more than 2 apart (they tend to π from above for m ≥ 1), so steps of 1 separate them; the first lies
    // above m.
    let mut low = (m as f64).max(0.5);
    let mut at_low = slope(low);
    while low < largest {
        let high = low + 1.0;
        let at_high = slope(high);
        if at_low * at_high < 0.0 {
            let zero = illinois(slope, (low, at_low), (high, at_high));
            if zero <= largest {
                zeros.push(zero);
            }
        }
        (low, at_low) = (high, at_high);
    }
    zeros
}

/// The zero between two points of opposite sign: regula falsi with the weight of a retained end halved.
fn illinois(f: impl Fn(f64) -> f64, low: (f64, f64), high: (f64, f64)) -> f64 {
    let ((mut a, mut fa), (mut b, mut fb)) = (low, high);
    let mut x = a;
    for _ in 0..60 {
        let last = x;
        x = (a * fb - b * fa) / (fb - fa);
        let fx = f(x);
        if fx == 0.0 || (x - last).abs() <= 1e-15 * x {
            break;
        }
        // `b` is always the newest point.
        if fx * fb < 0.0 {
            (a, fa) = (b, fb);
        } else {
            fa *= 0.5;
        }
        (b, fb) = (x, fx);
    }
    x
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Zeros of J'_m, https://mathworld.wolfram.com/BesselFunctionZeros.html (four decimals), rows n = 1, 2, 3.
    #[test]
    fn zeros_of_bessel_derivatives_match_the_published_table() {
        let table = [
            [3.8317, 1.8412, 3.0542, 4.2012, 5.3175, 6.4156],
            [7.0156, 5.3314, 6.7061, 8.0152, 9.2824, 10.5199],
            [10.1735, 8.5363, 9.9695, 11.3459, 12.6819, 13.9872],
        ];
        for (n, row) in table.iter().enumerate() {
            for (m, expected) in row.iter().enumerate() {
                let zeros = derivative_zeros(m as u32, 15.0);
                assert!(
                    (zeros[n] - expected).abs() < 1e-4,
                    "j'_{m},{}: {} against {expected}",
                    n + 1,
                    zeros[n]
                );
            }
        }
    }

    #[test]
    fn modes_of_a_square_are_listed_once_and_ascend() {
        let modes = cell_modes(Plan::Rectangle { length: 0.05, width: 0.05 }, 200.0, 1000);
        let k1 = std::f64::consts::PI / 0.05;
        let expected = [1.0, 2f64.sqrt(), 2.0, 5f64.sqrt(), 8f64.sqrt(), 3.0, 10f64.sqrt()].map(|x| x * k1);
        assert_eq!(modes.len(), expected.len());
        for (mode, k) in modes.iter().zip(expected) {
            assert!((mode.wavenumber - k).abs() < 1e-9 * k);
        }
    }

    #[test]
    fn a_limit_on_the_number_keeps_the_lowest() {
        for plan in [Plan::Rectangle { length: 0.2, width: 0.05 }, Plan::Circle { diameter: 0.1 }] {
            let all = cell_modes(plan, 1500.0, 100_000);
            let few = cell_modes(plan, 1500.0, 50);
            assert_eq!(few.len(), 50);
            assert_eq!(&all[..50], &few[..]);
            // Weyl's law holds to some per cent for that many modes (a circle lists each turned pair once).
            let weyl = plan.area() * 1500.0f64.powi(2) / (4.0 * std::f64::consts::PI);
            assert!(all.len() as f64 > 0.4 * weyl && (all.len() as f64) < 1.3 * weyl);
        }
    }
}
