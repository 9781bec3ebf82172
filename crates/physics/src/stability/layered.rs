//! A slab with the gas on either side of it, as the stability problem sees it.

use super::failure::Failure;

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

impl Layered {
    /// Number of interfaces.
    pub fn interfaces(&self) -> usize {
        self.tensions.len()
    }

    /// Refuses what the equations cannot be asked.
    pub(super) fn check(&self) -> Result<(), Failure> {
        let refuse = |quantity, value| Err(Failure::Unusable { quantity, value });
        if self.layers.len() < 2 || self.tensions.len() + 1 != self.layers.len() {
            return refuse("number of layers", self.layers.len() as f64);
        }
        if !self.gravity.is_finite() {
            return refuse("gravity", self.gravity);
        }
        let usable = |value: f64| value > 0.0 && value.is_finite();
        let last = self.layers.len() - 1;
        for (i, layer) in self.layers.iter().enumerate() {
            let vacuum = layer.density == 0.0 && layer.viscosity == 0.0;
            let inner = i != 0 && i != last;
            if layer.thickness.is_nan() || layer.thickness <= 0.0 || (layer.thickness.is_infinite() && inner)
            {
                return refuse("thickness", layer.thickness);
            }
            if !(vacuum || usable(layer.density)) {
                return refuse("density", layer.density);
            }
            if !(vacuum || usable(layer.viscosity)) {
                return refuse("viscosity", layer.viscosity);
            }
        }
        match self.tensions.iter().find(|tension| !(**tension >= 0.0 && tension.is_finite())) {
            Some(tension) => refuse("surface tension", *tension),
            None => Ok(()),
        }
    }

    /// The same with every tension multiplied.
    pub(super) fn with_tension(&self, factor: f64) -> Layered {
        let tensions = self.tensions.iter().map(|tension| factor * tension).collect();
        Layered { tensions, ..self.clone() }
    }

    /// 2νk² of the densest layer, 1/s: the scale of bulk damping.
    pub(super) fn viscous_decay(&self, wavenumber: f64) -> f64 {
        let densest = self.layers.iter().max_by(|a, b| a.density.total_cmp(&b.density));
        densest.map_or(0.0, |layer| 2.0 * layer.viscosity / layer.density * wavenumber * wavenumber)
    }
}

impl Forcing {
    pub(super) fn check(&self) -> Result<(), Failure> {
        if !(self.omega > 0.0 && self.omega.is_finite()) {
            return Err(Failure::Unusable { quantity: "frequency", value: self.omega });
        }
        if !(self.acceleration >= 0.0 && self.acceleration.is_finite()) {
            return Err(Failure::Unusable { quantity: "acceleration", value: self.acceleration });
        }
        Ok(())
    }
}
