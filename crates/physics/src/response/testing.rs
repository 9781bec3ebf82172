//! Stacks for the tests of the vertical response.

use crate::stack::{Cell, Gas, Layer, Plan, Stack};

pub(super) const G: f64 = 9.80665;
pub(super) const AMBIENT: f64 = 101_325.0;

pub(super) fn oil(name: &str, mm: f64, density: f64, nu: f64) -> Layer {
    Layer { name: name.into(), thickness: 1e-3 * mm, density, viscosity: density * nu, gas: None }
}

pub(super) fn gas(name: &str, mm: f64) -> Layer {
    let gas = Gas {
        adiabatic_index: 1.4,
        thermal_diffusivity: 2.2e-5,
        polytropic_exponent: None,
        vented: false,
        pressure: None,
    };
    Layer { name: name.into(), thickness: 1e-3 * mm, density: 1.2, viscosity: 1.82e-5, gas: Some(gas) }
}

pub(super) fn square(mm: f64) -> Plan {
    Plan::Rectangle { length: 1e-3 * mm, width: 1e-3 * mm }
}

pub(super) fn stack(plan: Plan, layers: Vec<Layer>) -> Stack {
    Stack {
        ambient_pressure: AMBIENT,
        ambient_density: 1.2,
        ambient_viscosity: 1.82e-5,
        gravity: G,
        cell: Cell { plan, height: 0.2, sealed_top: false, open_bottom: false },
        tensions: vec![0.02; layers.len() - 1],
        layers,
        top_tension: 0.02,
        bottom_tension: 0.02,
        effects_off: Vec::new(),
    }
}

pub(super) fn exponent(mut layer: Layer, n: f64) -> Layer {
    if let Some(gas) = &mut layer.gas {
        gas.polytropic_exponent = Some(n);
    }
    layer
}
