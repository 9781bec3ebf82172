//! The lowest point of a tongue over the wavenumber.

use physics::stability::layered::{Layered, Response};
use physics::stability::{Failure, neutral};

/// Samples between the two wavenumbers; a tongue must be wider than their distance.
const SAMPLES: usize = 40;

/// Wavenumber (1/m) and acceleration (m/s²) at the minimum of the lowest neutral curve of a class between two
/// wavenumbers: the lowest of forty samples, then golden section around it. Where nothing is neutral up to `up_to`
/// the curve counts as infinite.
///
/// # Errors
/// What the solver refuses.
pub fn onset(
    layered: &Layered,
    omega: f64,
    class: Response,
    (from, to): (f64, f64),
    up_to: f64,
) -> Result<(f64, f64), Failure> {
    let lowest = |k: f64| {
        neutral(layered, omega, k, up_to, &|| false).map(|found| {
            let list = match class {
                Response::Harmonic => found.harmonic,
                Response::Subharmonic => found.subharmonic,
                Response::Other | Response::None => found.other,
            };
            list.first().copied().unwrap_or(f64::INFINITY)
        })
    };
    let step = (to - from) / SAMPLES as f64;
    let mut best = (from, f64::INFINITY);
    for i in 0..=SAMPLES {
        let k = from + step * i as f64;
        let a = lowest(k)?;
        if a < best.1 {
            best = (k, a);
        }
    }
    let (mut low, mut high) = ((best.0 - step).max(from), (best.0 + step).min(to));
    let section = (5f64.sqrt() - 1.0) / 2.0;
    let (mut left, mut right) = (high - section * (high - low), low + section * (high - low));
    let (mut at_left, mut at_right) = (lowest(left)?, lowest(right)?);
    while high - low > 1e-6 * high {
        if at_left <= at_right {
            (high, right, at_right) = (right, left, at_left);
            left = high - section * (high - low);
            at_left = lowest(left)?;
        } else {
            (low, left, at_left) = (left, right, at_right);
            right = low + section * (high - low);
            at_right = lowest(right)?;
        }
    }
    Ok(if at_left <= at_right { (left, at_left) } else { (right, at_right) })
}
