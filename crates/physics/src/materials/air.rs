//! Dry air: U.S. Standard Atmosphere, 1976: ideal gas, Sutherland viscosity (eq. 51), conductivity (eq. 53), specific
//! heat 7/2 R.

use super::gas::{dense_gas, ideal_density_uncertainty};
use super::{Property, Temperatures, Unavailable, property};

const SOURCE: &str = "U.S. Standard Atmosphere, 1976";
/// Gas constant, J/(kg K).
const GAS_CONSTANT: f64 = 287.052_87;

pub(super) const TEMPERATURES: Temperatures = Temperatures { low: 223.15, high: 373.15, source: SOURCE };

pub(super) fn density(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    TEMPERATURES.check(temperature)?;
    let uncertainty = ideal_density_uncertainty(temperature, pressure);
    property(pressure / (GAS_CONSTANT * temperature), SOURCE, uncertainty)
}

pub(super) fn viscosity(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    TEMPERATURES.check(temperature)?;
    let value = 1.458e-6 * temperature.powf(1.5) / (temperature + 110.4);
    property(value, SOURCE, 0.01 + dense_gas(pressure))
}

pub(super) fn adiabatic_index(temperature: f64) -> Result<Property, Unavailable> {
    TEMPERATURES.check(temperature)?;
    property(1.4, SOURCE, 4e-3)
}

pub(super) fn thermal_diffusivity(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    let density = density(temperature, pressure)?.value;
    let conductivity =
        2.646_38e-3 * temperature.powf(1.5) / (temperature + 245.4 * 10f64.powf(-12.0 / temperature));
    property(conductivity / (density * 3.5 * GAS_CONSTANT), SOURCE, 0.02)
}
