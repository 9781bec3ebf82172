//! `[ambient]`.

use super::{EXACT, Resolver};
use crate::resolved::{Given, Origin};
use crate::rules;
use quantity::Kind;

/// Standard atmosphere at sea level, Pa (ISO 2533).
pub(super) const STANDARD_PRESSURE: f64 = 101_325.0;

/// Pressure of the standard atmosphere at an altitude, Pa (ISO 2533; the US Standard Atmosphere 1976 is the same
/// there): geometric altitude in m, −1000 m to 11 000 m, the layer with a constant temperature gradient.
fn standard_atmosphere(altitude: f64) -> f64 {
    const EARTH_RADIUS: f64 = 6_356_766.0; // m
    const SEA_LEVEL_TEMPERATURE: f64 = 288.15; // K
    const GRADIENT: f64 = -0.0065; // K/m of geopotential altitude
    const GRAVITY: f64 = 9.80665; // m/s²
    const GAS_CONSTANT: f64 = 287.052_87; // J/(kg K), dry air
    let geopotential = EARTH_RADIUS * altitude / (EARTH_RADIUS + altitude);
    let ratio = 1.0 + GRADIENT * geopotential / SEA_LEVEL_TEMPERATURE;
    STANDARD_PRESSURE * ratio.powf(-GRAVITY / (GRADIENT * GAS_CONSTANT))
}

impl Resolver<'_> {
    pub(super) fn ambient(&mut self) {
        let section = self.document.section("ambient");
        self.setup.ambient.temperature = self.or_default(section, "ambient", "ambient", "temperature");
        self.setup.ambient.gravity = self.or_default(section, "ambient", "ambient", "gravity");
        let altitude = section.and_then(|section| self.written(section, "altitude"));
        let written = section.and_then(|section| self.written(section, "pressure"));
        let by_altitude = altitude.as_ref().map(|altitude| standard_atmosphere(altitude.value));
        if let (Some(section), Some(pressure), Some(by_altitude)) = (section, &written, by_altitude) {
            // The weather moves the pressure by a few percent about the standard one.
            const WEATHER: f64 = 0.06;
            if (pressure.value / by_altitude - 1.0).abs() > WEATHER {
                let what = format!(
                    "`pressure` says {}, while the standard atmosphere at this `altitude` has {}; the weather explains {:.0} %.",
                    quantity::print(pressure.value, Kind::AbsolutePressure, 4),
                    quantity::print(by_altitude, Kind::AbsolutePressure, 4),
                    WEATHER * 100.0
                );
                let span = section.span_of("altitude");
                let other = Some(section.span_of("pressure"));
                self.findings.push(rules::values_disagree::finding("ambient.altitude", span, what, other));
            }
        }
        self.setup.ambient.pressure = match (written, by_altitude, altitude) {
            (Some(pressure), _, _) => Some(pressure),
            (None, Some(value), Some(altitude)) => Some(Given {
                value,
                place: altitude.place,
                origin: Origin::Written,
                tolerance: None,
                digits: EXACT,
            }),
            _ if self.lost("ambient.altitude") => None,
            _ => self.or_default(section, "ambient", "ambient", "pressure"),
        };
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// US Standard Atmosphere 1976, table I (geometric altitude, pressure in mbar); from memory, to five digits.
    #[test]
    fn pressure_follows_the_table() {
        for (altitude, mbar) in [
            (0.0, 1013.25),
            (500.0, 954.61),
            (1000.0, 898.76),
            (2000.0, 795.01),
            (5000.0, 540.48),
            (10_000.0, 264.99),
        ] {
            let error = standard_atmosphere(altitude) / (100.0 * mbar) - 1.0;
            assert!(error.abs() < 5e-5, "{altitude} m: {error}");
        }
    }

    #[test]
    fn altitude_instead_of_pressure_and_both() {
        let with = |lines: &str| {
            crate::understand(&format!(
                "[ambient]\n{lines}\n[cell]\ndiameter = \"80 mm\"\n[[layer]]\nfluid = \"water\"\nthickness = \"20 mm\"\n"
            ))
        };
        let read = with("altitude = \"1000 m\"");
        assert!((read.setup.ambient.pressure.unwrap().value / 89_876.0 - 1.0).abs() < 1e-4);
        assert!(read.findings.is_empty(), "{:?}", read.findings);
        assert!(with("altitude = \"1000 m\"\npressure = \"910 mbar\"").findings.is_empty());
        let read = with("altitude = \"1000 m\"\npressure = \"1013 mbar\"");
        assert_eq!(read.findings.len(), 1, "a pressure reduced to sea level is the common slip");
        assert_eq!(read.findings[0].rule, "values-disagree");
    }

    #[test]
    fn defaults_are_listed_with_their_sources() {
        let setup = crate::understand("").setup;
        assert_eq!(setup.ambient.temperature.unwrap().value, 293.15);
        assert_eq!(setup.ambient.pressure.unwrap().value, 101_325.0);
        assert_eq!(setup.ambient.gravity.unwrap().value, 9.80665);
        let places: Vec<&str> = setup.defaults.iter().map(|default| default.place.as_str()).collect();
        for place in ["ambient.temperature", "ambient.pressure", "ambient.gravity"] {
            assert!(places.contains(&place), "{place} in {places:?}");
        }
    }
}
