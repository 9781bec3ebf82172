//! The wavenumbers of a rectangular cell, and where one usually stops.

use physics::stability::layered::Layered;
use std::f64::consts::PI;

/// Wavenumbers π √((m/a)² + (n/b)²) of a rectangle with a free contact line up to `up_to`, ascending, each once.
pub fn wavenumbers(length: f64, width: f64, up_to: f64) -> Vec<f64> {
    let along = |size: f64| (0..=(up_to * size / PI) as usize).map(move |m| m as f64 * PI / size);
    let mut all: Vec<f64> = along(length)
        .flat_map(|kx| along(width).map(move |ky| kx.hypot(ky)))
        .filter(|k| *k > 0.0 && *k <= up_to)
        .collect();
    all.sort_by(f64::total_cmp);
    all.dedup_by(|next, last| *next - *last < 1e-9 * *last);
    all
}

/// The usual cut-off: the largest wavenumber whose wave, deep and without viscosity, swings with the drive's own
/// frequency on one of the interfaces (the tip of the first harmonic tongue). The waves that set in first swing with
/// half of it, at about 0.63 of this wavenumber or below.
pub fn cut_off(layered: &Layered, omega: f64) -> f64 {
    let of = |i: usize| {
        let (above, below) = (layered.layers[i].density, layered.layers[i + 1].density);
        let square = |k: f64| {
            ((below - above).abs() * layered.gravity * k + layered.tensions[i] * k.powi(3)) / (above + below)
        };
        let (mut low, mut high) = (1e-3, 1e7);
        while high - low > 1e-9 * high {
            let middle = f64::sqrt(low * high);
            if square(middle) < omega * omega { low = middle } else { high = middle }
        }
        high
    };
    (0..layered.tensions.len()).map(of).fold(0.0, f64::max)
}
