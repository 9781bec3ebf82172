//! What the physics works on: a cell with its layers, complete and in SI.

use quantity::vocabulary::{Effect, Phase};

/// Everything the vertical response and the stability of one setup depend on.
#[derive(Debug, Clone, PartialEq)]
pub struct Stack {
    /// Ambient pressure at the open top (or bottom), Pa absolute.
    pub ambient_pressure: f64,
    /// Density of the ambient gas, kg/m³ (the open air above an open cell).
    pub ambient_density: f64,
    /// Dynamic viscosity of the ambient gas, Pa s.
    pub ambient_viscosity: f64,
    /// Gravity, m/s².
    pub gravity: f64,
    /// The cell.
    pub cell: Cell,
    /// Layers, top first.
    pub layers: Vec<Layer>,
    /// `tensions[i]` acts between `layers[i]` and `layers[i + 1]`, N/m; 0 where gas meets gas.
    pub tensions: Vec<f64>,
    /// Tension of the first layer's upper face against the ambient gas (open top, liquid on top), N/m.
    pub top_tension: f64,
    /// Tension of the last layer's lower face against the ambient gas (open bottom, liquid below), N/m.
    pub bottom_tension: f64,
    /// Effects that are switched off.
    pub effects_off: Vec<Effect>,
}

/// Inner sizes and ends of the cell.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Cell {
    /// Plan of the cell.
    pub plan: Plan,
    /// Floor to rim or lid, m.
    pub height: f64,
    /// `true`: a rigid lid; `false`: the first layer's upper face is at ambient pressure.
    pub sealed_top: bool,
    /// `true`: an upside-down jar; the last layer's lower face is at ambient pressure.
    pub open_bottom: bool,
}

/// Plan of a cell, inner sizes in m.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Plan {
    /// Rectangle, `length` × `width`.
    Rectangle {
        /// m
        length: f64,
        /// m
        width: f64,
    },
    /// Circle.
    Circle {
        /// m
        diameter: f64,
    },
}

impl Plan {
    /// Area, m².
    pub fn area(self) -> f64 {
        match self {
            Plan::Rectangle { length, width } => length * width,
            Plan::Circle { diameter } => std::f64::consts::PI * diameter * diameter / 4.0,
        }
    }
}

/// One layer.
#[derive(Debug, Clone, PartialEq)]
pub struct Layer {
    /// The name in the setup.
    pub name: String,
    /// Thickness at operating pressure, m.
    pub thickness: f64,
    /// Density, kg/m³ (of a gas: at its operating pressure).
    pub density: f64,
    /// Dynamic viscosity, Pa s.
    pub viscosity: f64,
    /// What only a gas has; `None` for a liquid.
    pub gas: Option<Gas>,
}

/// The gas side of a gas layer.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Gas {
    /// Ratio of specific heats, 1.
    pub adiabatic_index: f64,
    /// Thermal diffusivity at operating pressure, m²/s.
    pub thermal_diffusivity: f64,
    /// A polytropic exponent that the setup prescribes instead of the computed one.
    pub polytropic_exponent: Option<f64>,
    /// Vented to ambient: no spring.
    pub vented: bool,
    /// A pressure that the setup states, Pa absolute.
    pub pressure: Option<f64>,
}

impl Layer {
    /// Gas or liquid.
    pub fn phase(&self) -> Phase {
        if self.gas.is_some() { Phase::Gas } else { Phase::Liquid }
    }
}

/// The vibration of the cell.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Drive {
    /// Hz, > 0.
    pub frequency: f64,
    /// Peak acceleration of the cell, m/s², ≥ 0.
    pub acceleration: f64,
}

impl Drive {
    /// Angular frequency ω, rad/s.
    pub fn omega(self) -> f64 {
        std::f64::consts::TAU * self.frequency
    }
}

impl Stack {
    /// Whether an effect is computed.
    pub fn has(&self, effect: Effect) -> bool {
        !self.effects_off.contains(&effect)
    }
}
