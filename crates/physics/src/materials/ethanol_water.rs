//! Ethanol–water mixtures by mass fraction of ethanol, 0 to 1.
//!
//! Density: the formula of the international alcoholometric tables, OIML R 22 (1975), after Wagenbreth & Blanke,
//! PTB-Mitteilungen 81, 412 (1971); here from 0 °C, above which no mixture freezes. Viscosity: Bingham's table, as in
//! older handbooks, from memory, ±4 %. Surface tension: Vázquez, Alvarez & Navaza, J. Chem. Eng. Data 40, 611 (1995),
//! at 20, 25 and 30 °C, from memory; straight on to 40 °C (they measured up to 50 °C).

use super::table::{linear, smooth};
use super::{Material, Property, Temperatures, Unavailable, property};

pub(super) const DENSITY: Temperatures =
    Temperatures { low: 273.15, high: 313.15, source: "OIML R 22 (1975), alcoholometric tables" };
pub(super) const VISCOSITY: Temperatures =
    Temperatures { low: 283.15, high: 313.15, source: "Bingham's handbook table, from memory" };
pub(super) const TENSION: Temperatures = Temperatures {
    low: 293.15,
    high: 313.15,
    source: "Vázquez, Alvarez & Navaza, J. Chem. Eng. Data 40, 611 (1995), from memory",
};

/// OIML R 22, A₁ to A₁₂: kg/m³ at 20 °C by powers of the mass fraction.
const A: [f64; 12] = [
    998.201_23,
    -192.976_949_5,
    389.123_895_8,
    -1_668.103_923,
    13_522.154_41,
    -88_292.783_88,
    306_287.404_2,
    -613_838.123_4,
    747_017.299_8,
    -547_846.135_4,
    223_446.033_4,
    -39_032.854_26,
];
/// B₁ to B₆: water, by powers of t − 20 °C.
const B: [f64; 6] =
    [-0.206_185_13, -5.268_254_2e-3, 3.613_001_3e-5, -3.895_770_2e-7, 7.169_354e-9, -9.973_923_1e-11];
/// C: a row for each power of t − 20 °C from the first, in it a column for each power of the mass fraction from the
/// first.
const C: [&[f64]; 5] = [
    &[
        0.169_344_346_153_008_7,
        -10.469_147_434_551_69,
        71.963_534_695_465_23,
        -704.747_805_427_279_2,
        3_924.090_430_035_045,
        -12_101.646_590_687_47,
        22_486.465_504_007_88,
        -26_055.629_821_881_64,
        18_523.739_220_694_67,
        -7_420.201_433_430_137,
        1_285.617_841_998_974,
    ],
    &[
        -0.011_930_130_050_570_1,
        0.251_739_963_380_346_1,
        -2.170_575_700_536_993,
        13.530_349_888_430_29,
        -50.299_887_585_470_14,
        109.635_566_657_757,
        -142.275_394_642_115_5,
        108.043_594_285_623,
        -44.141_532_368_173_92,
        7.442_971_530_188_783,
    ],
    &[
        -6.802_995_733_503_803e-4,
        1.876_837_790_289_664e-2,
        -0.200_256_181_373_415_6,
        1.022_992_966_719_22,
        -2.895_696_483_903_638,
        4.810_060_584_300_675,
        -4.672_147_440_794_683,
        2.458_043_105_903_461,
        -0.541_122_762_143_681_2,
    ],
    &[4.075_376_675_622_027e-6, -8.763_058_573_471_11e-6, 6.515_031_360_099_368e-6, -1.515_784_836_987_21e-6],
    &[-2.788_074_354_782_409e-8, 1.345_612_883_493_354e-8],
];

/// Σ cᵢ xⁱ, the constant first.
fn polynomial(coefficients: &[f64], x: f64) -> f64 {
    coefficients.iter().rev().fold(0.0, |sum, c| sum * x + c)
}

/// kg/m³ from the mass fraction and °C.
fn oiml(w: f64, t: f64) -> f64 {
    let above = t - 20.0;
    let cross = C.map(|row| w * polynomial(row, w));
    polynomial(&A, w) + above * (polynomial(&B, above) + polynomial(&cross, above))
}

/// Temperatures of the viscosities, K.
const TEMPERATURES: [f64; 7] = [283.15, 288.15, 293.15, 298.15, 303.15, 308.15, 313.15];
/// mPa s at mass fractions 0, 0.1 … 1.
#[allow(clippy::approx_constant)] // a viscosity of 3.14 mPa s is no π
const VISCOSITIES: [[f64; 11]; 7] = [
    [1.308, 2.179, 3.165, 4.05, 4.39, 4.18, 3.77, 3.268, 2.710, 2.101, 1.466],
    [1.140, 1.792, 2.618, 3.26, 3.53, 3.44, 3.14, 2.770, 2.309, 1.802, 1.332],
    [1.005, 1.538, 2.183, 2.71, 2.91, 2.87, 2.67, 2.370, 2.008, 1.610, 1.200],
    [0.894, 1.323, 1.815, 2.18, 2.35, 2.40, 2.24, 2.037, 1.748, 1.424, 1.096],
    [0.801, 1.160, 1.553, 1.87, 2.02, 2.02, 1.93, 1.767, 1.531, 1.279, 1.003],
    [0.722, 1.006, 1.332, 1.58, 1.72, 1.72, 1.66, 1.529, 1.355, 1.147, 0.914],
    [0.656, 0.907, 1.160, 1.368, 1.482, 1.499, 1.447, 1.344, 1.203, 1.035, 0.834],
];

/// (mass fraction, mN/m at 20, 25 and 30 °C).
const TENSIONS: [(f64, [f64; 3]); 14] = [
    (0.00, [72.75, 72.01, 71.21]),
    (0.05, [56.41, 55.73, 55.04]),
    (0.10, [48.14, 47.53, 46.88]),
    (0.15, [42.72, 42.08, 41.49]),
    (0.20, [38.56, 37.97, 37.38]),
    (0.25, [36.09, 35.51, 34.96]),
    (0.30, [33.53, 32.98, 32.43]),
    (0.40, [30.69, 30.16, 29.68]),
    (0.50, [28.51, 27.96, 27.53]),
    (0.60, [26.72, 26.23, 25.81]),
    (0.70, [25.48, 25.01, 24.60]),
    (0.80, [24.32, 23.82, 23.39]),
    (0.90, [23.23, 22.72, 22.32]),
    (1.00, [22.31, 21.82, 21.41]),
];

pub(super) fn density(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(DENSITY.source)?;
    DENSITY.check(temperature)?;
    property(oiml(w, temperature - 273.15), DENSITY.source, 1e-4)
}

pub(super) fn viscosity(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(VISCOSITY.source)?;
    VISCOSITY.check(temperature)?;
    let at = |row: &[f64; 11]| {
        let points: [(f64, f64); 11] = std::array::from_fn(|i| (0.1 * i as f64, row[i].ln()));
        smooth(&points, w)
    };
    // Log against 1/T, as liquids go.
    let points: [(f64, f64); 7] = std::array::from_fn(|i| (-1.0 / TEMPERATURES[i], at(&VISCOSITIES[i])));
    property(1e-3 * linear(&points, -1.0 / temperature).exp(), VISCOSITY.source, 0.04)
}

pub(super) fn surface_tension(material: &Material, temperature: f64) -> Result<Property, Unavailable> {
    let w = material.mass_fraction(TENSION.source)?;
    TENSION.check(temperature)?;
    // Steep at small fractions: interpolated in the logarithm.
    let column = |i: usize| smooth(&TENSIONS.map(|(w, row)| (w, row[i].ln())), w).exp();
    let (at_20, at_25, at_30) = (column(0), column(1), column(2));
    let t = temperature - 273.15;
    let value = if t <= 25.0 {
        at_20 + (at_25 - at_20) * (t - 20.0) / 5.0
    } else {
        at_25 + (at_30 - at_20) * (t - 25.0) / 10.0
    };
    property(1e-3 * value, TENSION.source, 0.02)
}
