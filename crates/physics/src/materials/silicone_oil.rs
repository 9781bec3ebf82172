//! Linear polydimethylsiloxane fluids by grade: the maker's kinematic viscosity at 25 °C.
//!
//! Density and tension at 25 °C by grade, their slopes, and the viscosity–temperature coefficient
//! VTC = 1 − ν(99 °C)/ν(38 °C) are those of makers' data sheets, generic, from memory: ±0.5 % in density at 25 °C,
//! ±0.5 mN/m. ln ν is linear in 1/T, as in the rule of makers log ν = log ν(25 °C) + 763/T − 2.559. The viscosity at
//! 25 °C is as good as the label (±5 % is usual, from memory); away from there 0.1 % per kelvin is added.

use super::table::linear;
use super::{Material, Property, Temperatures, Unavailable, property, within};

const SOURCE: &str = "makers' data sheets of polydimethylsiloxane, generic, from memory";

pub(super) const TEMPERATURES: Temperatures = Temperatures { low: 273.15, high: 373.15, source: SOURCE };
/// Grades that the tables cover, m²/s.
pub(super) const GRADES: (f64, f64) = (5e-6, 1e-2);
/// Above this grade the long chains thin under shear and answer elastically, m²/s (from memory).
pub const NEWTONIAN_UP_TO: f64 = 1e-2;

/// (mm²/s, kg/m³, mN/m, VTC) at 25 °C.
const DATA: [(f64, f64, f64, f64); 9] = [
    (5.0, 915.5, 19.7, 0.55),
    (10.0, 935.0, 20.1, 0.56),
    (20.0, 950.0, 20.6, 0.59),
    (50.0, 960.0, 20.8, 0.59),
    (100.0, 965.0, 20.9, 0.60),
    (350.0, 970.0, 21.1, 0.60),
    (500.0, 971.0, 21.1, 0.60),
    (1000.0, 971.0, 21.2, 0.61),
    (10_000.0, 974.5, 21.5, 0.61),
];

/// Grade in m²/s, checked.
fn grade(material: &Material) -> Result<f64, Unavailable> {
    let value = material.grade.ok_or(Unavailable::MissingGrade)?;
    let (low, high) = GRADES;
    if within(value, low, high) {
        Ok(value)
    } else {
        Err(Unavailable::Grade { value, low, high, source: SOURCE })
    }
}

/// A column of the data at a grade, linear in the logarithm of the grade.
fn column(grade: f64, pick: fn(&(f64, f64, f64, f64)) -> f64) -> f64 {
    let points = DATA.map(|row| (row.0.ln(), pick(&row)));
    linear(&points, (1e6 * grade).ln())
}

pub(super) fn density(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let grade = grade(material)?;
    TEMPERATURES.check(temperature)?;
    let uncertainty = 5e-3 + 1e-4 * (temperature - 298.15).abs();
    property(column(grade, |row| row.1) - 0.9 * (temperature - 298.15), SOURCE, uncertainty)
}

pub(super) fn viscosity(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let density = density(material, temperature)?.value;
    let grade = grade(material)?;
    // ln ν = … + B/T with B from the coefficient's two temperatures, 100 °F and 210 °F.
    let b = -(1.0 - column(grade, |row| row.3)).ln() / (1.0 / 310.93 - 1.0 / 372.04);
    let nu = grade * (b * (1.0 / temperature - 1.0 / 298.15)).exp();
    property(nu * density, SOURCE, 0.05 + 1e-3 * (temperature - 298.15).abs())
}

pub(super) fn surface_tension(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let grade = grade(material)?;
    TEMPERATURES.check(temperature)?;
    property(1e-3 * (column(grade, |row| row.2) - 0.06 * (temperature - 298.15)), SOURCE, 0.025)
}
