//! Liquids and gases by name: density, viscosity, surface tension, heat, each with its source, its range and how
//! well it is known. Outside its range a correlation gives no value.

mod air;
mod ethanol_water;
mod gas;
mod glycerol_water;
mod nitrogen;
mod silicone_oil;
mod table;
mod water;

use quantity::vocabulary::BuiltInFluid;
use std::fmt;

pub use silicone_oil::NEWTONIAN_UP_TO;

/// A material that the tool has correlations for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Material {
    /// Which.
    pub fluid: BuiltInFluid,
    /// Mass fraction of the named solute of a mixture, 0 to 1.
    pub mass_fraction: Option<f64>,
    /// Maker's kinematic viscosity at 25 °C of a silicone oil, m²/s.
    pub grade: Option<f64>,
}

/// A property with its evidence.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Property {
    /// SI.
    pub value: f64,
    /// Where the correlation comes from.
    pub source: &'static str,
    /// Relative, as the source states it; `None` where it does not.
    pub uncertainty: Option<f64>,
}

/// Why there is no value.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Unavailable {
    /// Outside the temperatures of the correlation, K.
    Temperature {
        /// Asked for.
        value: f64,
        /// Lowest.
        low: f64,
        /// Highest.
        high: f64,
        /// Of the correlation.
        source: &'static str,
    },
    /// Outside its compositions, mass fraction.
    Composition {
        /// Asked for.
        value: f64,
        /// Lowest.
        low: f64,
        /// Highest.
        high: f64,
        /// Of the correlation.
        source: &'static str,
    },
    /// Outside its grades, m²/s.
    Grade {
        /// Asked for.
        value: f64,
        /// Lowest.
        low: f64,
        /// Highest.
        high: f64,
        /// Of the correlation.
        source: &'static str,
    },
    /// Outside its pressures, Pa.
    Pressure {
        /// Asked for.
        value: f64,
        /// Lowest.
        low: f64,
        /// Highest.
        high: f64,
        /// Of the correlation.
        source: &'static str,
    },
    /// A mixture without its composition.
    MissingMassFraction,
    /// A silicone oil without its grade.
    MissingGrade,
    /// The fluid has no such property (a gas has no surface tension).
    NotForThisFluid,
}

impl fmt::Display for Unavailable {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let celsius = |kelvin: f64| format!("{:.2} °C", kelvin - 273.15);
        match *self {
            Unavailable::Temperature { value, low, high, source } => {
                write!(f, "{} lies outside {} to {} ({source})", celsius(value), celsius(low), celsius(high))
            }
            Unavailable::Composition { value, low, high, source } => {
                write!(f, "a mass fraction of {:.4} lies outside {low} to {high} ({source})", value)
            }
            Unavailable::Grade { value, low, high, source } => write!(
                f,
                "a grade of {:.4} mm²/s lies outside {} to {} mm²/s ({source})",
                1e6 * value,
                1e6 * low,
                1e6 * high
            ),
            Unavailable::Pressure { value, low, high, source } => {
                write!(f, "{value:.0} Pa lies outside {low:.0} to {high:.0} Pa ({source})")
            }
            Unavailable::MissingMassFraction => write!(f, "the composition of the mixture is not said"),
            Unavailable::MissingGrade => write!(f, "the grade of the oil is not said"),
            Unavailable::NotForThisFluid => write!(f, "this fluid has no such property"),
        }
    }
}

impl std::error::Error for Unavailable {}

/// Where a correlation holds, for documents and tests.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Range {
    /// The fluid.
    pub fluid: BuiltInFluid,
    /// `density`, `viscosity`, `surface tension`, `adiabatic index`, `thermal diffusivity`.
    pub property: &'static str,
    /// What is bounded.
    pub bounds: Bounds,
    /// Lowest, SI.
    pub low: f64,
    /// Highest, SI.
    pub high: f64,
    /// Of the correlation, or of the bound where it is our own judgement.
    pub source: &'static str,
}

/// What a range bounds.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Bounds {
    /// K
    Temperature,
    /// mass fraction
    Composition,
    /// m²/s
    Grade,
    /// Pa
    Pressure,
}

/// A span of temperatures in K with the source of the correlation.
#[derive(Debug, Clone, Copy)]
struct Temperatures {
    low: f64,
    high: f64,
    source: &'static str,
}

impl Temperatures {
    fn check(&self, value: f64) -> Result<(), Unavailable> {
        let Temperatures { low, high, source } = *self;
        if within(value, low, high) {
            Ok(())
        } else {
            Err(Unavailable::Temperature { value, low, high, source })
        }
    }
}

/// Whether a value lies in a range; a bound as a person writes it (`"5 mm²/s"`) may differ from it by rounding.
fn within(value: f64, low: f64, high: f64) -> bool {
    const ROUNDING: f64 = 1e-12;
    (low - ROUNDING * low.abs()..=high + ROUNDING * high.abs()).contains(&value)
}

/// Pressures at which mixtures and oils count as incompressible and gases as ideal, Pa.
const PRESSURES: (f64, f64) = (1e3, 1e6);
const PRESSURES_SOURCE: &str = "judgement: mixtures and oils as incompressible, gases as ideal";

fn check_pressure(value: f64) -> Result<(), Unavailable> {
    let (low, high) = PRESSURES;
    if within(value, low, high) {
        Ok(())
    } else {
        Err(Unavailable::Pressure { value, low, high, source: PRESSURES_SOURCE })
    }
}

fn property(value: f64, source: &'static str, uncertainty: f64) -> Result<Property, Unavailable> {
    Ok(Property { value, source, uncertainty: Some(uncertainty) })
}

impl Material {
    fn mass_fraction(&self, source: &'static str) -> Result<f64, Unavailable> {
        let value = self.mass_fraction.ok_or(Unavailable::MissingMassFraction)?;
        if within(value, 0.0, 1.0) {
            Ok(value)
        } else {
            Err(Unavailable::Composition { value, low: 0.0, high: 1.0, source })
        }
    }
}

/// Density, kg/m³, at a temperature (K) and a pressure (Pa absolute).
///
/// # Errors
/// [`Unavailable`].
pub fn density(material: &Material, temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    check_pressure(pressure)?;
    match material.fluid {
        BuiltInFluid::Water => water::density(temperature, pressure),
        BuiltInFluid::GlycerolWater => glycerol_water::density(material, temperature),
        BuiltInFluid::EthanolWater => ethanol_water::density(material, temperature),
        BuiltInFluid::SiliconeOil => silicone_oil::density(material, temperature),
        BuiltInFluid::Air => air::density(temperature, pressure),
        BuiltInFluid::Nitrogen => nitrogen::density(temperature, pressure),
    }
}

/// Dynamic viscosity, Pa s.
///
/// # Errors
/// [`Unavailable`].
pub fn viscosity(material: &Material, temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    check_pressure(pressure)?;
    match material.fluid {
        BuiltInFluid::Water => water::viscosity(temperature, pressure),
        BuiltInFluid::GlycerolWater => glycerol_water::viscosity(material, temperature),
        BuiltInFluid::EthanolWater => ethanol_water::viscosity(material, temperature),
        BuiltInFluid::SiliconeOil => silicone_oil::viscosity(material, temperature),
        BuiltInFluid::Air => air::viscosity(temperature, pressure),
        BuiltInFluid::Nitrogen => nitrogen::viscosity(temperature, pressure),
    }
}

/// Surface tension of a liquid against air, N/m.
///
/// # Errors
/// [`Unavailable`].
pub fn surface_tension(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    match material.fluid {
        BuiltInFluid::Water => water::surface_tension(temperature),
        BuiltInFluid::GlycerolWater => glycerol_water::surface_tension(material, temperature),
        BuiltInFluid::EthanolWater => ethanol_water::surface_tension(material, temperature),
        BuiltInFluid::SiliconeOil => silicone_oil::surface_tension(material, temperature),
        BuiltInFluid::Air | BuiltInFluid::Nitrogen => Err(Unavailable::NotForThisFluid),
    }
}

/// Ratio of the specific heats of a gas near atmospheric pressure.
///
/// # Errors
/// [`Unavailable`].
pub fn adiabatic_index(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    match material.fluid {
        BuiltInFluid::Air => air::adiabatic_index(temperature),
        BuiltInFluid::Nitrogen => nitrogen::adiabatic_index(temperature),
        _ => Err(Unavailable::NotForThisFluid),
    }
}

/// Thermal diffusivity of a gas, m²/s.
///
/// # Errors
/// [`Unavailable`].
pub fn thermal_diffusivity(
    material: &Material,
    temperature: f64,
    pressure: f64,
) -> Result<Property, Unavailable> {
    check_pressure(pressure)?;
    match material.fluid {
        BuiltInFluid::Air => air::thermal_diffusivity(temperature, pressure),
        BuiltInFluid::Nitrogen => nitrogen::thermal_diffusivity(temperature, pressure),
        _ => Err(Unavailable::NotForThisFluid),
    }
}

/// The range of every correlation.
pub fn ranges() -> Vec<Range> {
    let mut ranges = Vec::new();
    let mut span = |fluid, property, temperatures: Temperatures| {
        let Temperatures { low, high, source } = temperatures;
        ranges.push(Range { fluid, property, bounds: Bounds::Temperature, low, high, source });
    };
    use BuiltInFluid::{Air, EthanolWater, GlycerolWater, Nitrogen, SiliconeOil, Water};
    span(Water, "density", water::DENSITY);
    span(Water, "viscosity", water::VISCOSITY);
    span(Water, "surface tension", water::TENSION);
    span(GlycerolWater, "density", glycerol_water::DENSITY);
    span(GlycerolWater, "viscosity", glycerol_water::VISCOSITY);
    span(GlycerolWater, "surface tension", glycerol_water::TENSION);
    span(EthanolWater, "density", ethanol_water::DENSITY);
    span(EthanolWater, "viscosity", ethanol_water::VISCOSITY);
    span(EthanolWater, "surface tension", ethanol_water::TENSION);
    for property in ["density", "viscosity", "surface tension"] {
        span(SiliconeOil, property, silicone_oil::TEMPERATURES);
    }
    for property in ["density", "viscosity", "adiabatic index", "thermal diffusivity"] {
        span(Air, property, air::TEMPERATURES);
        span(Nitrogen, property, nitrogen::TEMPERATURES);
    }
    let mut bound = |fluid, property, bounds, (low, high), source| {
        ranges.push(Range { fluid, property, bounds, low, high, source });
    };
    for (fluid, property, Temperatures { source, .. }) in [
        (GlycerolWater, "density", glycerol_water::DENSITY),
        (GlycerolWater, "viscosity", glycerol_water::VISCOSITY),
        (GlycerolWater, "surface tension", glycerol_water::TENSION),
        (EthanolWater, "density", ethanol_water::DENSITY),
        (EthanolWater, "viscosity", ethanol_water::VISCOSITY),
        (EthanolWater, "surface tension", ethanol_water::TENSION),
    ] {
        bound(fluid, property, Bounds::Composition, (0.0, 1.0), source);
    }
    for property in ["density", "viscosity", "surface tension"] {
        let source = silicone_oil::TEMPERATURES.source;
        bound(SiliconeOil, property, Bounds::Grade, silicone_oil::GRADES, source);
    }
    for fluid in BuiltInFluid::ALL {
        for property in ["density", "viscosity"] {
            bound(fluid, property, Bounds::Pressure, PRESSURES, PRESSURES_SOURCE);
        }
    }
    for fluid in [Air, Nitrogen] {
        bound(fluid, "thermal diffusivity", Bounds::Pressure, PRESSURES, PRESSURES_SOURCE);
    }
    ranges
}

#[cfg(test)]
mod tests;
