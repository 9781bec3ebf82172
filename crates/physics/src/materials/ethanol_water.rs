//! Ethanol–water mixtures by mass fraction of ethanol, 0 to 1, in steps of 0.1 and smooth between.
//!
//! Density at 15, 20, 25 and 30 °C: the table of chemical engineers' handbooks (International Critical Tables), from
//! memory, ±0.05 %. Viscosity at the same temperatures: Bingham's table, as in older handbooks, from memory, ±4 %.
//! Surface tension at 25 °C: Vázquez, Alvarez & Navaza, J. Chem. Eng. Data 40, 611 (1995), from memory; its slope
//! against temperature from memory, so that only 20 to 30 °C are given.

use super::table::{linear, smooth};
use super::{Material, Property, Temperatures, Unavailable, property};

const TEMPERATURES: [f64; 4] = [288.15, 293.15, 298.15, 303.15];

pub(super) const DENSITY: Temperatures = Temperatures {
    low: 288.15,
    high: 303.15,
    source: "handbook table (International Critical Tables), from memory",
};
pub(super) const VISCOSITY: Temperatures =
    Temperatures { low: 288.15, high: 303.15, source: "Bingham's handbook table, from memory" };
pub(super) const TENSION: Temperatures = Temperatures {
    low: 293.15,
    high: 303.15,
    source: "Vázquez, Alvarez & Navaza, J. Chem. Eng. Data 40, 611 (1995), from memory",
};

/// kg/m³ at mass fractions 0, 0.1 … 1.
const DENSITIES: [[f64; 11]; 4] = [
    [999.13, 983.04, 970.68, 956.86, 938.82, 917.76, 895.23, 871.87, 847.72, 822.27, 793.60],
    [998.23, 981.87, 968.64, 953.82, 935.18, 913.84, 891.13, 867.66, 843.44, 817.97, 789.34],
    [997.08, 980.43, 966.39, 950.67, 931.48, 909.85, 886.99, 863.40, 839.11, 813.62, 785.06],
    [995.68, 978.75, 963.95, 947.41, 927.70, 905.80, 882.78, 859.08, 834.73, 809.22, 780.75],
];

/// mPa s at the same.
#[allow(clippy::approx_constant)] // a viscosity of 3.14 mPa s is no π
const VISCOSITIES: [[f64; 11]; 4] = [
    [1.140, 1.792, 2.618, 3.26, 3.53, 3.44, 3.14, 2.770, 2.309, 1.802, 1.332],
    [1.005, 1.538, 2.183, 2.71, 2.91, 2.87, 2.67, 2.370, 2.008, 1.610, 1.200],
    [0.894, 1.323, 1.815, 2.18, 2.35, 2.40, 2.24, 2.037, 1.748, 1.424, 1.096],
    [0.801, 1.160, 1.553, 1.87, 2.02, 2.02, 1.93, 1.767, 1.531, 1.279, 1.003],
];

/// mN/m at 25 °C at the same.
const TENSIONS: [f64; 11] = [72.01, 47.53, 37.97, 32.98, 30.16, 27.96, 26.23, 25.01, 23.82, 22.72, 21.82];

/// Smooth in composition, linear between the temperatures of a table.
fn from(table: &[[f64; 11]; 4], w: f64, temperature: f64) -> f64 {
    let points: [(f64, f64); 4] = std::array::from_fn(|i| (TEMPERATURES[i], smooth(0.0, 0.1, &table[i], w)));
    linear(&points, temperature)
}

pub(super) fn density(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(DENSITY.source)?;
    DENSITY.check(temperature)?;
    property(from(&DENSITIES, w, temperature), DENSITY.source, 5e-4)
}

pub(super) fn viscosity(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(VISCOSITY.source)?;
    VISCOSITY.check(temperature)?;
    property(1e-3 * from(&VISCOSITIES, w, temperature), VISCOSITY.source, 0.04)
}

pub(super) fn surface_tension(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(TENSION.source)?;
    TENSION.check(temperature)?;
    // Steep at small fractions: interpolated in the logarithm.
    let logarithms: [f64; 11] = std::array::from_fn(|i| TENSIONS[i].ln());
    let at_25 = smooth(0.0, 0.1, &logarithms, w).exp();
    // From −0.155 mN/(m K) of water to −0.083 of ethanol, most of it over the first tenths (from memory).
    let slope = -0.155 + 0.072 * (3.0 * w).min(1.0);
    property(1e-3 * (at_25 + slope * (temperature - 298.15)), TENSION.source, 0.02)
}
