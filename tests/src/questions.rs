//! Random stacks for the comparison of the stability solver with the second method.

use crate::draw::Draw;
use crate::galerkin::Exponent;
use physics::stability::layered::{FluidLayer, Layered, Response};
use physics::stability::{Failure, Growth, neutral};
use std::f64::consts::TAU;

const G: f64 = 9.80665;

/// One random question.
#[derive(Debug, Clone)]
pub struct Question {
    /// The stack.
    pub layered: Layered,
    /// rad/s
    pub omega: f64,
    /// 1/m
    pub wavenumber: f64,
    /// Drive over threshold.
    pub drive: f64,
}

/// The wavenumber at which an interface on its own (deep, inviscid) swings with `half_omega`.
fn resonant(above: f64, below: f64, tension: f64, half_omega: f64) -> f64 {
    let excess = |k: f64| {
        ((below - above).abs() * G * k + tension * k.powi(3)) / (below + above) - half_omega * half_omega
    };
    let (mut low, mut high) = (1.0, 1e5);
    for _ in 0..100 {
        let middle = f64::sqrt(low * high);
        if excess(middle) < 0.0 { low = middle } else { high = middle }
    }
    low
}

/// One to three interfaces; depths 0.05 to 5 wavelengths, 1 to 5000 mm²/s, neighbours' densities 0.001 to 0.999 of
/// each other either way up, 0 to 70 mN/m, 10 to 300 Hz.
pub fn wide(number: usize, draw: &mut Draw) -> Question {
    let interfaces = 1 + number % 3;
    let omega = TAU * draw.scaled(10.0, 300.0);
    let mut density = draw.scaled(1.0, 2000.0);
    let mut densities = vec![density];
    for _ in 0..interfaces {
        let ratio = if draw.chance(0.5) { draw.scaled(0.001, 0.999) } else { draw.between(0.1, 0.999) };
        // Kept near what fluids have, else a coin.
        let heavier = if density < 10.0 { true } else { density < 500.0 && draw.chance(0.5) };
        density *= if heavier { 1.0 / ratio } else { ratio };
        densities.push(density);
    }
    let tensions: Vec<f64> =
        (0..interfaces).map(|_| if draw.chance(0.1) { 0.0 } else { draw.between(0.0, 0.070) }).collect();
    let i = draw.one_of(interfaces);
    let near = resonant(densities[i], densities[i + 1], tensions[i], 0.5 * omega);
    // Wavelengths between 1 mm and 0.5 m, most of them near the resonance of one of the interfaces.
    let wavenumber = (near * draw.scaled(0.5, 2.0)).clamp(TAU / 0.5, TAU / 1e-3);
    let layers = densities
        .iter()
        .map(|density| FluidLayer {
            density: *density,
            viscosity: density * draw.scaled(1e-6, 5e-3),
            thickness: TAU / wavenumber * draw.scaled(0.05, 5.0),
        })
        .collect();
    let drive = if draw.chance(0.04) { 0.0 } else { draw.between(0.0, 1.5) };
    Question { layered: Layered { gravity: G, layers, tensions }, omega, wavenumber, drive }
}

/// A viscous slab thinner than half a wavelength between gases.
pub fn thin(draw: &mut Draw) -> Question {
    let density = draw.between(900.0, 1300.0);
    let tensions = vec![draw.between(0.015, 0.070), draw.between(0.015, 0.070)];
    let omega = TAU * draw.scaled(30.0, 120.0);
    let nu = draw.scaled(3e-4, 2e-3);
    let near = resonant(density, 0.0, tensions[0], 0.5 * omega);
    let wavenumber = near * draw.scaled(0.7, 1.4);
    let mut gas = || {
        let density = draw.between(1.0, 2.0);
        FluidLayer { density, viscosity: 1.8e-5, thickness: TAU / wavenumber * draw.scaled(0.2, 3.0) }
    };
    let (above, below) = (gas(), gas());
    let thickness = TAU / wavenumber * draw.between(0.1, 0.5);
    let slab = FluidLayer { density, viscosity: density * nu, thickness };
    let drive = draw.between(1.0, 1.5);
    let layered = Layered { gravity: G, layers: vec![above, slab, below], tensions };
    Question { layered, omega, wavenumber, drive }
}

/// Neutral accelerations, ascending, of the first range in which there are any, and the end of the search.
///
/// # Errors
/// What the solver refuses.
pub fn marginal(layered: &Layered, omega: f64, k: f64) -> Result<(Vec<(f64, Response)>, f64), Failure> {
    // Where an inviscid deep interface answers strongly, and where gravity is overcome.
    let mut up_to = (0.5 * omega * omega / k).max(2.0 * omega * (2.0 * G / k).sqrt());
    let mut all = Vec::new();
    for _ in 0..4 {
        let found = neutral(layered, omega, k, up_to, &|| false)?;
        for (list, class) in [
            (found.harmonic, Response::Harmonic),
            (found.subharmonic, Response::Subharmonic),
            (found.other, Response::Other),
        ] {
            all.extend(list.into_iter().map(|a| (a, class)));
        }
        if !all.is_empty() {
            break;
        }
        up_to *= 4.0;
    }
    all.sort_by(|x, y| x.0.total_cmp(&y.0));
    Ok((all, up_to))
}

/// Distance of a decaying exponent to the nearest one of the second method, relative to its size.
pub fn nearest(exponents: &[Exponent], found: &Growth, omega: f64) -> f64 {
    let turns = found.frequency / omega;
    let folded = (turns - turns.round()).abs() * omega;
    let size = found.rate.hypot(found.frequency);
    exponents
        .iter()
        .map(|exponent| (exponent.rate - found.rate).hypot(exponent.frequency - folded) / size)
        .fold(f64::INFINITY, f64::min)
}
