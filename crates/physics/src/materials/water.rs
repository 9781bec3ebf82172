//! Water.
//!
//! Density: Tanaka, Girard, Davis, Peuto & Bignell, Metrologia 38, 301 (2001), 0 to 40 °C, air-free; above, Kell, J.
//! Chem. Eng. Data 20, 97 (1975). The two meet at 40 °C to 1e-5 (tested). Both hold at one atmosphere; from there by
//! Kell's compressibility. Viscosity: IAPWS R12-08 (2008) with the critical enhancement μ₂ = 1, at that density.
//! Surface tension: IAPWS R1-76(2014).

use super::{Property, Temperatures, Unavailable, property};

const TANAKA: &str = "Tanaka et al., Metrologia 38, 301 (2001)";
const KELL: &str = "Kell, J. Chem. Eng. Data 20, 97 (1975)";
/// Where one density correlation hands over to the other, K.
const HANDOVER: f64 = 313.15;
/// Of both, Pa.
const ATMOSPHERE: f64 = 101_325.0;

pub(super) const DENSITY: Temperatures = Temperatures { low: 273.15, high: 373.15, source: KELL };
pub(super) const VISCOSITY: Temperatures =
    Temperatures { low: 273.15, high: 373.15, source: "IAPWS R12-08 (2008)" };
pub(super) const TENSION: Temperatures =
    Temperatures { low: 273.15, high: 373.15, source: "IAPWS R1-76 (2014)" };

pub(super) fn density(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    DENSITY.check(temperature)?;
    let t = temperature - 273.15;
    let squeeze = 1.0 + compressibility(t) * (pressure - ATMOSPHERE);
    if temperature <= HANDOVER {
        property(tanaka(t) * squeeze, TANAKA, 2e-6)
    } else {
        property(kell(t) * squeeze, KELL, 1e-5)
    }
}

/// Isothermal, at one atmosphere, 1/Pa; Kell (1975), in °C.
fn compressibility(t: f64) -> f64 {
    let numerator = 50.884_96
        + t * (0.616_381_3
            + t * (1.459_187e-3 + t * (20.084_38e-6 + t * (-58.477_27e-9 + t * 410.411_0e-12))));
    1e-11 * numerator / (1.0 + 19.673_48e-3 * t)
}

fn tanaka(t: f64) -> f64 {
    999.974_950 * (1.0 - (t - 3.983_035).powi(2) * (t + 301.797) / (522_528.9 * (t + 69.348_81)))
}

fn kell(t: f64) -> f64 {
    let numerator = 999.839_52
        + t * (16.945_176
            + t * (-7.987_040_1e-3 + t * (-46.170_461e-6 + t * (105.563_02e-9 - t * 280.542_53e-12))));
    numerator / (1.0 + 16.879_850e-3 * t)
}

pub(super) fn viscosity(temperature: f64, pressure: f64) -> Result<Property, Unavailable> {
    VISCOSITY.check(temperature)?;
    let density = density(temperature, pressure)?.value;
    property(1e-6 * iapws_viscosity(temperature, density), VISCOSITY.source, 0.01)
}

/// IAPWS R12-08, eqs 10 to 12, μPa s, from temperature (K) and density (kg/m³).
pub(super) fn iapws_viscosity(temperature: f64, density: f64) -> f64 {
    let t = temperature / 647.096;
    let r = density / 322.0;
    let h = [1.677_52, 2.204_62, 0.636_656_4, -0.241_605];
    let ideal: f64 = h.iter().enumerate().map(|(i, h)| h / t.powi(i as i32)).sum();
    let mu0 = 100.0 * t.sqrt() / ideal;
    // (power of 1/T − 1, power of ρ − 1, coefficient), table 2.
    const H: &[(i32, i32, f64)] = &[
        (0, 0, 5.200_94e-1),
        (1, 0, 8.508_95e-2),
        (2, 0, -1.083_74),
        (3, 0, -2.895_55e-1),
        (0, 1, 2.225_31e-1),
        (1, 1, 9.991_15e-1),
        (2, 1, 1.887_97),
        (3, 1, 1.266_13),
        (5, 1, 1.205_73e-1),
        (0, 2, -2.813_78e-1),
        (1, 2, -9.068_51e-1),
        (2, 2, -7.724_79e-1),
        (3, 2, -4.898_37e-1),
        (4, 2, -2.570_40e-1),
        (0, 3, 1.619_13e-1),
        (1, 3, 2.573_99e-1),
        (0, 4, -3.253_72e-2),
        (3, 4, 6.984_52e-2),
        (4, 5, 8.721_02e-3),
        (3, 6, -4.356_73e-3),
        (5, 6, -5.932_64e-4),
    ];
    let sum: f64 = H.iter().map(|&(i, j, h)| h * (1.0 / t - 1.0).powi(i) * (r - 1.0).powi(j)).sum();
    mu0 * (r * sum).exp()
}

pub(super) fn surface_tension(temperature: f64) -> Result<Property, Unavailable> {
    TENSION.check(temperature)?;
    let tau = 1.0 - temperature / 647.096;
    property(0.2358 * tau.powf(1.256) * (1.0 - 0.625 * tau), TENSION.source, 0.005)
}
