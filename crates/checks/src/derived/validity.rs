//! How far the equations hold for this setup: each assumption as a number, with the number at which it matters.
//!
//! That a slab moves by more than its own thickness is no limit: a uniformly shaken incompressible layer knows only
//! the effective gravity g + a(t). It is listed so that nobody has to wonder.

use super::{Derived, Slab};
use crate::limits;
use physics::stack::Layer;
use std::f64::consts::{PI, TAU};

/// Speed of sound of a slow liquid, m/s: silicone oils have some 980, water 1480 (from memory); judgement.
const SLOW_SOUND: f64 = 900.0;

/// One assumption at one place.
#[derive(Debug, Clone, PartialEq)]
pub struct Validity {
    /// Its name, kebab-case.
    pub name: &'static str,
    /// What the number is, in words.
    pub number: &'static str,
    /// Where: a place in the setup.
    pub place: String,
    /// The number, 1.
    pub value: f64,
    /// From where on it matters; `None`: never.
    pub matters_at: Option<f64>,
    /// Where that comes from.
    pub source: &'static str,
    /// The rule that speaks when it is reached.
    pub rule: Option<&'static str>,
}

impl Validity {
    /// Whether the number at which it matters is passed.
    pub fn is_reached(&self) -> bool {
        self.matters_at.is_some_and(|at| self.value > at)
    }
}

/// What kind of statement: everything but place and value.
struct Statement {
    name: &'static str,
    number: &'static str,
    matters_at: Option<f64>,
    source: &'static str,
    rule: Option<&'static str>,
}

impl Statement {
    fn at(&self, place: &str, value: f64) -> Validity {
        let Statement { name, number, matters_at, source, rule } = *self;
        Validity { name, number, place: place.to_owned(), value, matters_at, source, rule }
    }
}

const OWN_RULE: Option<&str> = Some("equations-outside-range");
const JUDGEMENT: &str = "judgement";

const GAS_COMPRESSIBILITY: Statement = Statement {
    name: "gas-compressibility",
    number: "(ω/kc)² ρ_gas/(ρ_liquid tanh kH) of the gas beside a slab at the longest mode of the cell",
    matters_at: Some(limits::GAS_COMPRESSIBLE),
    source: JUDGEMENT,
    rule: Some("gas-layer-compressible"),
};
const CUSHION_STROKE: Statement = Statement {
    name: "cushion-stroke",
    number: "amplitude of the relative motion of a cushion's faces over its thickness",
    matters_at: Some(limits::STROKE_LONG),
    source: JUDGEMENT,
    rule: Some("cushion-stroke-long"),
};
const WEDGE: Statement = Statement {
    name: "wedge",
    number: "height of a face from wall to wall over the thickness of the gas that it leans into",
    matters_at: Some(limits::WEDGED),
    source: "practice: at most 10 to 20 % of the cushion's height (derived criterion)",
    rule: Some("face-wedged-by-tilt"),
};
const WAVE_AMPLITUDE: Statement = Statement {
    name: "wave-amplitude",
    number: "largest slope of a face under the stated level error and cross-axis motion, mean and oscillation",
    matters_at: Some(0.2),
    source: "judgement: waves of that steepness have ω² higher by its square (Stokes, in Lamb, Hydrodynamics, art. 250; from memory), here 4 %",
    rule: OWN_RULE,
};
const LIQUID_COMPRESSIBILITY: Statement = Statement {
    name: "liquid-compressibility",
    number: "(ωh/c)²/2 of a slab, by which the acceleration varies over its depth, with c = 900 m/s of a slow liquid",
    matters_at: Some(0.01),
    source: JUDGEMENT,
    rule: OWN_RULE,
};
const GAS_COLUMN: Statement = Statement {
    name: "gas-column",
    number: "(ωH/c)²/3 of a cushion, by which its stiffness differs from that at uniform pressure",
    matters_at: Some(0.01),
    source: JUDGEMENT,
    rule: OWN_RULE,
};
const CONTINUUM: Statement = Statement {
    name: "continuum",
    number: "mean free path of a gas over the thickness of its layer",
    matters_at: Some(0.01),
    source: "slip at walls from there on (common textbook figure, from memory)",
    rule: OWN_RULE,
};
const MOTION: Statement = Statement {
    name: "motion-over-thickness",
    number: "peak displacement of a slab over its thickness",
    matters_at: None,
    source: "no limit: a uniformly shaken incompressible layer knows only the effective gravity g + a(t)",
    rule: None,
};

/// Every statement for what was computed.
pub(super) fn statements(derived: &Derived) -> Vec<Validity> {
    let Some(stack) = derived.stack.as_deref() else { return Vec::new() };
    let omega = derived.drive.map(|drive| TAU * drive.frequency);
    let mut list = Vec::new();
    for slab in &derived.slabs {
        of_slab(derived, slab, omega, &mut list);
    }
    for (state, layer) in derived.layers.iter().zip(&stack.layers) {
        if layer.gas.is_some() {
            let path = layer.viscosity * (PI / (2.0 * state.pressure * layer.density)).sqrt();
            list.push(CONTINUUM.at(&state.place, path / layer.thickness));
        }
    }
    for cushion in &derived.cushions {
        let (Some(state), Some(layer)) = (derived.layers.get(cushion.index), stack.layers.get(cushion.index))
        else {
            continue;
        };
        list.extend(cushion.stroke_ratio.map(|stroke| CUSHION_STROKE.at(&state.place, stroke)));
        if let Some((omega, sound)) = omega.zip(sound_squared(layer, state.pressure)) {
            list.push(GAS_COLUMN.at(&state.place, (omega * layer.thickness).powi(2) / sound / 3.0));
        }
    }
    list
}

fn of_slab(derived: &Derived, slab: &Slab, omega: Option<f64>, list: &mut Vec<Validity>) {
    let Some(first) = derived.layers.get(slab.range.start) else { return };
    let thickness: f64 = derived.layers[slab.range.clone()].iter().map(|layer| layer.thickness).sum();
    if let Some(omega) = omega {
        list.extend(slab.gas_compressibility.map(|share| GAS_COMPRESSIBILITY.at(&first.place, share)));
        let phase = omega * thickness / SLOW_SOUND;
        list.push(LIQUID_COMPRESSIBILITY.at(&first.place, phase * phase / 2.0));
        if let Some(motion) = &slab.motion {
            list.push(MOTION.at(&first.place, motion.acceleration / (omega * omega) / thickness));
        }
    }
    for wedge in &slab.wedges {
        let place = slab.faces[wedge.face].place();
        list.push(WAVE_AMPLITUDE.at(&place, wedge.mean_slope + wedge.oscillating_slope));
        list.extend(wedge.into.as_ref().map(|(_, share)| WEDGE.at(&place, *share)));
    }
}

/// c² = γ p/ρ.
fn sound_squared(layer: &Layer, pressure: f64) -> Option<f64> {
    layer.gas.map(|gas| gas.adiabatic_index * pressure / layer.density)
}
