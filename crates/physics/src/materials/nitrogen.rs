//! Nitrogen: ideal gas; Sutherland formulas of viscosity and conductivity with the constants of White, Viscous Fluid
//! Flow (tables 1-2 and 1-3), from memory, ±2 %. Compared with Lemmon & Jacobsen, Int. J. Thermophys. 25, 21 (2004),
//! in the tests against reference libraries.

use super::gas::{dense_gas, ideal_density_uncertainty};
use super::{Property, Temperatures, Unavailable, property};

const SOURCE: &str = "Sutherland constants of White, Viscous Fluid Flow, from memory";
/// Gas constant, J/(kg K): 8.314 462 618 / 0.028 013 4.
const GAS_CONSTANT: f64 = 296.803;

pub(super) const TEMPERATURES: Temperatures = Temperatures { low: 223.15, high: 373.15, source: SOURCE };

fn sutherland(at_273: f64, constant: f64, temperature: f64) -> f64 {
    at_273 * (temperature / 273.0).powf(1.5) * (273.0 + constant) / (temperature + constant)
}

pub(super) fn density(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    TEMPERATURES.check(temperature)?;
    let uncertainty = ideal_density_uncertainty(temperature, pressure);
    property(pressure / (GAS_CONSTANT * temperature), "ideal gas", uncertainty)
}

pub(super) fn viscosity(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    TEMPERATURES.check(temperature)?;
    property(sutherland(1.663e-5, 107.0, temperature), SOURCE, 0.02 + dense_gas(pressure))
}

pub(super) fn adiabatic_index(temperature: f64) -> Result<Property, Unavailable> {
    TEMPERATURES.check(temperature)?;
    property(1.4, "diatomic ideal gas", 4e-3)
}

pub(super) fn thermal_diffusivity(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    let density = density(temperature, pressure)?.value;
    let value = sutherland(0.0242, 150.0, temperature) / (density * 3.5 * GAS_CONSTANT);
    property(value, SOURCE, 0.03 + dense_gas(pressure))
}
