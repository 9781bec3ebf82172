//! What air and nitrogen have in common: nearly ideal diatomic gases.

/// How far the density of the ideal gas may be off, relative.
///
/// What is left out is the second virial coefficient: 1.6 % at −50 °C and 1 MPa, falling with temperature until it
/// vanishes near 60 °C (judgement over the tables of Lemmon et al., J. Phys. Chem. Ref. Data 29, 331 (2000)).
pub(super) fn ideal_density_uncertainty(temperature: f64, pressure: f64) -> f64 {
    5e-4 + 1.6e-8 * pressure * (223.15 / temperature).powi(4)
}

/// Sutherland's formulas leave out that a denser gas is more viscous: at most 0.6 % in addition at 1 MPa, −50 °C (same
/// judgement), relative.
pub(super) fn dense_gas(pressure: f64) -> f64 {
    6e-9 * pressure
}
