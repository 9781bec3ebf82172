//! Stacks that several tests speak of.

use physics::stability::layered::{FluidLayer, Layered};

/// A layer by density (kg/m³), kinematic viscosity (m²/s) and thickness (m).
pub fn layer(density: f64, kinematic: f64, thickness: f64) -> FluidLayer {
    FluidLayer { density, viscosity: density * kinematic, thickness }
}

/// Air as the published sets have it: 1.2 kg/m³, 1.8e-5 Pa s.
pub fn air(thickness: f64) -> FluidLayer {
    FluidLayer { density: 1.2, viscosity: 1.8e-5, thickness }
}

/// Layers top first with their tensions.
pub fn stack(gravity: f64, layers: &[FluidLayer], tensions: &[f64]) -> Layered {
    Layered { gravity, layers: layers.to_vec(), tensions: tensions.to_vec() }
}

/// Data set K1: 1346 kg/m³, 7.2 mPa s, 1.6 mm under 949 kg/m³, 20 mPa s, 8.4 mm, 35 mN/m. Inputs as published:
/// J. Fluid Mech. 635, 1 (2009), doi 10.1017/S0022112009007551.
pub fn k1() -> Layered {
    let upper = FluidLayer { density: 949.0, viscosity: 20e-3, thickness: 8.4e-3 };
    let lower = FluidLayer { density: 1346.0, viscosity: 7.2e-3, thickness: 1.6e-3 };
    stack(9.8066, &[upper, lower], &[0.035])
}

/// A liquid of the given depth between air of 20 mm above and 10 mm below, between rigid walls, g = 9.81 m/s².
pub fn levitated(density: f64, kinematic: f64, tension: f64, depth: f64) -> Layered {
    stack(9.81, &[air(0.02), layer(density, kinematic, depth), air(0.01)], &[tension, tension])
}
