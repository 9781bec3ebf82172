//! The resolved setup: complete where the file is complete, in SI, peak amplitudes, absolute pressures, defaults
//! filled in. Holds no spans: a place (dotted path by names) leads back to the text.

use quantity::vocabulary::{Effect, Phase};
use std::collections::BTreeMap;

/// Where a value comes from.
#[derive(Debug, Clone, PartialEq)]
pub enum Origin {
    /// Written in the setup.
    Written,
    /// A default, with its source ('judgement', a standard …).
    Default(&'static str),
}

/// A value with the place it was (or would be) written at.
#[derive(Debug, Clone, PartialEq)]
pub struct Given<T> {
    /// SI; amplitudes peak; pressures absolute.
    pub value: T,
    /// Dotted path by names: `layer.oil.thickness`.
    pub place: String,
    /// Written or a default.
    pub origin: Origin,
    /// Half width of the tolerance in SI, as written (its meaning is the file's).
    pub tolerance: Option<f64>,
    /// Significant digits as written (17 for a default).
    pub digits: u8,
}

/// The whole setup. A part that is missing or could not be read is `None`; why is among the findings.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Setup {
    /// `title`
    pub title: Option<String>,
    /// `[ambient]`
    pub ambient: Ambient,
    /// `[cell]`: `None` when its plan is not known.
    pub cell: Option<Cell>,
    /// `[drive]`: `None` when the file has no such section: the cell is at rest.
    pub drive: Option<Drive>,
    /// `true` when a drive is written but could not be read: nothing about motion may be concluded.
    pub drive_unreadable: bool,
    /// `[[layer]]`, top first.
    pub layers: Vec<Layer>,
    /// `[[interface]]`
    pub interfaces: Vec<Interface>,
    /// `[fluid.NAME]`
    pub fluids: BTreeMap<String, Fluid>,
    /// `[model]`: effects switched off, with their places.
    pub effects_off: Vec<Given<Effect>>,
    /// `[limits]`
    pub limits: Limits,
    /// `[[accept]]`
    pub accepts: Vec<Accept>,
    /// Sections and keys that this version knows but does not look at.
    pub not_looked_at: Vec<NotLookedAt>,
    /// Every default in force.
    pub defaults: Vec<DefaultInForce>,
    /// Places whose value is written but could not be read, in the order of their names: physics that depends on
    /// one of them is not run, and nobody says that it is missing. `layer` alone: a `[[layer]]` header was lost, so
    /// the stack is not complete; a section such as `cell` alone: nothing about it is known.
    pub unreadable_places: Vec<String>,
    /// What ± means in this file.
    pub tolerance_meaning: ToleranceMeaning,
    /// Places that hold an open value (`"?"`), with its bounds in SI; they are in `unreadable_places` too.
    pub open_values: Vec<OpenPlace>,
}

/// What ± means in a file.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default)]
pub enum ToleranceMeaning {
    /// One standard uncertainty.
    #[default]
    Standard,
    /// Half width of a rectangular distribution.
    Limits,
    /// Expanded uncertainty, coverage factor 2.
    Expanded,
}

/// A value that the tool is asked for.
#[derive(Debug, Clone, PartialEq)]
pub struct OpenPlace {
    /// Where it stands.
    pub place: String,
    /// SI, as stated; `None`: without bounds.
    pub bounds: Option<(f64, f64)>,
}

impl Setup {
    /// Whether the value of a place, or the section it stands in, is written but could not be read.
    pub fn is_unreadable(&self, place: &str) -> bool {
        self.unreadable_places.iter().any(|lost| {
            place == lost || place.strip_prefix(lost.as_str()).is_some_and(|rest| rest.starts_with('.'))
        })
    }
}

/// `[ambient]`
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Ambient {
    /// K
    pub temperature: Option<Given<f64>>,
    /// Pa absolute
    pub pressure: Option<Given<f64>>,
    /// m/s²
    pub gravity: Option<Given<f64>>,
}

/// `[cell]`
#[derive(Debug, Clone, PartialEq)]
pub struct Cell {
    /// Plan with inner sizes.
    pub plan: Plan,
    /// Floor to rim or lid, m; `None`: the sum of the layers.
    pub height: Option<Given<f64>>,
    /// `top = "sealed"`
    pub sealed_top: Given<bool>,
    /// `bottom = "open"`
    pub open_bottom: Given<bool>,
    /// `contact-line = "pinned"`
    pub pinned_line: Given<bool>,
    /// Level error, rad; `None`: written and unreadable.
    pub tilt: Option<Given<f64>>,
}

/// Plan of the cell.
#[derive(Debug, Clone, PartialEq)]
pub enum Plan {
    /// `rectangular`
    Rectangular {
        /// m
        length: Given<f64>,
        /// m
        width: Given<f64>,
    },
    /// `circular`
    Circular {
        /// m
        diameter: Given<f64>,
    },
}

/// `[drive]`
#[derive(Debug, Clone, PartialEq)]
pub struct Drive {
    /// Hz
    pub frequency: Given<f64>,
    /// The set value as peak acceleration of the cell, m/s².
    pub acceleration: Given<f64>,
    /// Which key is the set value.
    pub set_by: DriveKey,
    /// Sideways motion; `None`: written and unreadable.
    pub cross_axis: Option<CrossAxis>,
    /// `distortion`: second, third … harmonic of the cell's acceleration over its fundamental; empty: none stated.
    pub distortion: Vec<Given<f64>>,
}

/// `cross-axis` of `[drive]`
#[derive(Debug, Clone, PartialEq)]
pub struct CrossAxis {
    /// Sideways over vertical acceleration of the cell, 1.
    pub ratio: Given<f64>,
    /// Phase relative to the vertical motion, rad; `None`: not known.
    pub phase: Option<Given<f64>>,
}

/// Which of the three keys sets the drive.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum DriveKey {
    /// `acceleration`
    Acceleration,
    /// `velocity`
    Velocity,
    /// `displacement`
    Displacement,
}

/// `[[layer]]`
#[derive(Debug, Clone, PartialEq)]
pub struct Layer {
    /// `name`, or a name made from the position when it is missing.
    pub name: String,
    /// Dotted place of the layer: `layer.oil`.
    pub place: String,
    /// What the layer is made of; `None` when it could not be read.
    pub fluid: Option<LayerFluid>,
    /// m, at operating pressure; `None` when missing or unreadable.
    pub thickness: Option<Given<f64>>,
    /// m³ at operating pressure, instead of a thickness.
    pub volume: Option<Given<f64>>,
    /// m³ at ambient pressure (gas only).
    pub filled_volume: Option<Given<f64>>,
    /// K; `None`: ambient.
    pub temperature: Option<Given<f64>>,
    /// Figures that override the fluid's.
    pub figures: Figures,
    /// gas: `vented`
    pub vented: Given<bool>,
    /// gas: Pa absolute
    pub pressure: Option<Given<f64>>,
    /// gas
    pub polytropic_exponent: Option<Given<f64>>,
}

/// What a layer is made of.
#[derive(Debug, Clone, PartialEq)]
pub enum LayerFluid {
    /// One of the tool's own fluids.
    BuiltIn {
        /// Which.
        fluid: quantity::vocabulary::BuiltInFluid,
        /// Mass fraction of the named solute (mixtures).
        mass_fraction: Option<Given<f64>>,
        /// Maker's kinematic viscosity at 25 °C, m²/s (silicone oil).
        grade: Option<Given<f64>>,
    },
    /// `[fluid.NAME]`
    Own(String),
    /// No `fluid`: all figures stand in the layer.
    Bare(Phase),
}

/// Figures of a fluid as written; each may override.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Figures {
    /// kg/m³
    pub density: Option<Figure>,
    /// As written: Pa s or m²/s.
    pub viscosity: Option<WrittenViscosity>,
    /// N/m, against gas
    pub surface_tension: Option<Figure>,
    /// gas: ratio of specific heats
    pub adiabatic_index: Option<Figure>,
    /// gas: m²/s
    pub thermal_diffusivity: Option<Figure>,
}

/// One figure, or a table of it against temperature.
#[derive(Debug, Clone, PartialEq)]
pub enum Figure {
    /// One value.
    Value(Given<f64>),
    /// (temperature K, value), ascending; interpolated linearly, never extrapolated.
    Table {
        /// Where it stands.
        place: String,
        /// (K, SI value)
        points: Vec<(f64, f64)>,
    },
}

/// A viscosity is dynamic or kinematic by its unit.
#[derive(Debug, Clone, PartialEq)]
pub enum WrittenViscosity {
    /// Pa s
    Dynamic(Figure),
    /// m²/s
    Kinematic(Figure),
}

/// `[fluid.NAME]`
#[derive(Debug, Clone, PartialEq)]
pub struct Fluid {
    /// Gas or liquid.
    pub phase: Phase,
    /// Its figures.
    pub figures: Figures,
    /// Temperature that single figures hold for, K.
    pub at: Option<Given<f64>>,
    /// `source`
    pub source: Option<String>,
}

/// `[[interface]]`
#[derive(Debug, Clone, PartialEq)]
pub struct Interface {
    /// Layer names.
    pub between: [String; 2],
    /// N/m
    pub tension: Given<f64>,
}

/// `[limits]`
#[derive(Debug, Clone, PartialEq)]
pub struct Limits {
    /// Ratio: 1 − hold limit/set.
    pub hold_margin: Given<f64>,
    /// Ratio: wave limit/set − 1.
    pub wave_margin: Given<f64>,
}

/// `[[accept]]`
#[derive(Debug, Clone, PartialEq)]
pub struct Accept {
    /// Rule name.
    pub finding: String,
    /// Place; empty: anywhere.
    pub at: String,
    /// Why.
    pub reason: String,
    /// Who.
    pub by: String,
    /// TOML date.
    pub until: Option<String>,
    /// Place of the section itself (`accept.0`).
    pub place: String,
}

/// Something written that this version does not look at.
#[derive(Debug, Clone, PartialEq)]
pub struct NotLookedAt {
    /// What is not checked.
    pub check: String,
    /// What it would need.
    pub needs: String,
    /// Where it stands.
    pub place: String,
}

/// A default in force.
#[derive(Debug, Clone, PartialEq)]
pub struct DefaultInForce {
    /// Where it would be written.
    pub place: String,
    /// As a person would write it.
    pub value: String,
    /// Where the value comes from.
    pub source: String,
}

impl Default for Limits {
    fn default() -> Self {
        let given = |value, place: &str, source| Given {
            value,
            place: place.to_owned(),
            origin: Origin::Default(source),
            tolerance: None,
            digits: 17,
        };
        // The same values and sources as in the declarations; a test holds the two together.
        Limits {
            hold_margin: given(
                0.15,
                "limits.hold-margin",
                "judgement: near the hold limit a level error is amplified by 1/(V − 1)",
            ),
            wave_margin: given(
                0.10,
                "limits.wave-margin",
                "judgement: twice the usual uncertainty of an accelerometer chain",
            ),
        }
    }
}
