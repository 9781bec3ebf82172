//! A slab with the gas on either side of it, as the stability problem sees it.

/// Horizontally uniform, incompressible, viscous layers between rigid no-slip walls, under
/// g(t) = g + a cos ωt.
#[derive(Debug, Clone, PartialEq)]
pub struct Layered {
    /// Gravity, m/s².
    pub gravity: f64,
    /// Layers, **top first**. The outer face of the first and of the last layer is a rigid no-slip wall, or
    /// infinitely far away where the layer's thickness is infinite.
    pub layers: Vec<FluidLayer>,
    /// `tensions[i]` acts between `layers[i]` and `layers[i + 1]`, N/m.
    pub tensions: Vec<f64>,
}

/// One incompressible viscous layer.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FluidLayer {
    /// kg/m³; 0 with viscosity 0 is vacuum.
    pub density: f64,
    /// Dynamic viscosity, Pa s.
    pub viscosity: f64,
    /// m; `f64::INFINITY` for a half space (first and last layer only).
    pub thickness: f64,
}

impl FluidLayer {
    /// Nothing: a free face.
    pub const VACUUM: FluidLayer = FluidLayer { density: 0.0, viscosity: 0.0, thickness: f64::INFINITY };
}

/// The drive as a slab feels it: g(t) = g + a cos ωt.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Forcing {
    /// rad/s, > 0.
    pub omega: f64,
    /// Peak acceleration of the slab, m/s², ≥ 0.
    pub acceleration: f64,
}

/// How a disturbance answers the drive.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Response {
    /// With the drive's period (Floquet multiplier real and positive).
    Harmonic,
    /// With twice the drive's period (multiplier real and negative).
    Subharmonic,
    /// With another frequency (a complex pair: combination resonance).
    Other,
    /// No oscillation to class (the drive is zero).
    None,
}
