//! Glycerol–water mixtures by mass fraction of glycerol, 0 to 1.
//!
//! Density: Volk & Kähler, Exp. Fluids 59, 75 (2018), doi 10.1007/s00348-018-2527-y, 15 to 30 °C. Viscosity: Cheng,
//! Ind. Eng. Chem. Res. 47, 3285 (2008), 0 to 100 °C. Surface tension: handbook values at 20 °C, from memory, ±1 mN/m.

use super::table::linear;
use super::{Material, Property, Temperatures, Unavailable, property};

pub(super) const DENSITY: Temperatures =
    Temperatures { low: 288.15, high: 303.15, source: "Volk & Kähler, Exp. Fluids 59, 75 (2018)" };
pub(super) const VISCOSITY: Temperatures =
    Temperatures { low: 273.15, high: 373.15, source: "Cheng, Ind. Eng. Chem. Res. 47, 3285 (2008)" };
pub(super) const TENSION: Temperatures =
    Temperatures { low: 283.15, high: 313.15, source: "handbook values at 20 °C, from memory, ±1 mN/m" };

pub(super) fn density(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(DENSITY.source)?;
    DENSITY.check(temperature)?;
    let t = temperature - 273.15;
    let glycerol = 1273.3 - 0.6121 * t;
    let water = 1000.0 * (1.0 - ((t - 3.98) / 615.0).abs().powf(1.71));
    // Volume fraction in the ideal mixture, times the contraction.
    let ideal = if w == 0.0 {
        water
    } else {
        water + (glycerol - water) / (1.0 + glycerol / water * (1.0 / w - 1.0))
    };
    let a = 1.78e-6 * t * t - 1.82e-4 * t + 1.41e-2;
    let contraction = 1.0 + a * (w.powf(1.31) * std::f64::consts::PI).sin().max(0.0).powf(0.81);
    property(ideal * contraction, DENSITY.source, 7e-4)
}

pub(super) fn viscosity(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let c = material.mass_fraction(VISCOSITY.source)?;
    VISCOSITY.check(temperature)?;
    let t = temperature - 273.15;
    let a = 0.705 - 0.0017 * t;
    let b = (4.9 + 0.036 * t) * a.powf(2.5);
    let alpha = 1.0 - c + a * b * c * (1.0 - c) / (a * c + b * (1.0 - c));
    let water = 1.790 * ((-1230.0 - t) * t / (36_100.0 + 360.0 * t)).exp();
    let glycerol = 12_100.0 * ((-1233.0 + t) * t / (9900.0 + 70.0 * t)).exp();
    property(1e-3 * water.powf(alpha) * glycerol.powf(1.0 - alpha), VISCOSITY.source, 0.05)
}

pub(super) fn surface_tension(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(TENSION.source)?;
    TENSION.check(temperature)?;
    let at_20 = linear(&[(0.0, 72.7), (0.5, 70.0), (0.8, 67.0), (1.0, 63.4)], w);
    // From −0.155 mN/(m K) of water (IAPWS R1-76 near 20 °C) to −0.065 of glycerol (from memory).
    let slope = -0.155 + 0.09 * w;
    property(1e-3 * (at_20 + slope * (temperature - 293.15)), TENSION.source, 0.015)
}
