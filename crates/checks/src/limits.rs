//! Thresholds that both a rule and the statements of validity need. Each is on the page of its rule too.

/// Share of a wave's inertia by the compressibility of gas (judgement, see `gas-layer-compressible`).
pub(crate) const GAS_COMPRESSIBLE: f64 = 0.01;
/// Stroke of a cushion over its thickness (judgement, see `cushion-stroke-long`).
pub(crate) const STROKE_LONG: f64 = 0.05;
/// Height of a face from wall to wall over the thickness of the gas that it leans into: the upper end of the 10 to
/// 20 % that practice allows (derived criterion, see `face-wedged-by-tilt`).
pub(crate) const WEDGED: f64 = 0.2;
