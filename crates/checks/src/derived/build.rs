//! The stack that the physics works on, from the resolved setup.
//!
//! Densities and thicknesses of gas follow the static pressure, and that follows the weight of the layers: both are
//! repeated until the pressures stand still (two or three rounds; the weight of the gas is some 1e-4 of the rest).

use super::LayerState;
use super::figures::{LayerFigures, Reader, made_of, phase};
use super::trouble::Trouble;
use crate::words;
use physics::materials::{self, Material};
use physics::response::{Conflict, Statics, static_pressures};
use physics::stack::{Cell, Gas, Layer, Plan, Stack};
use quantity::vocabulary::{BuiltInFluid, Phase};
use setup::resolved::{self, DefaultInForce, LayerFluid, Setup};

/// The pressures stand still when none changes by more than this share.
const STILL: f64 = 1e-12;
const MOST_ROUNDS: usize = 50;
/// Two statements of one size agree within this share (judgement: three figures are written) and their tolerances.
const ROUNDING: f64 = 0.01;

/// A complete stack with what the layers are.
pub(super) struct Built {
    pub stack: Stack,
    pub states: Vec<LayerState>,
    /// The pressure that was assumed because none is known.
    pub closed_at_ambient: Option<DefaultInForce>,
}

/// `None` when something that it needs is missing; the cause is in `troubles` or among the findings about the text.
pub(super) fn build(setup: &Setup, troubles: &mut Vec<Trouble>) -> Option<Built> {
    if setup.layers.is_empty() || setup.is_unreadable("layer") {
        return None;
    }
    let ambient = Ambient::read(setup, troubles);
    let plan = plan(setup);
    let start = ambient.as_ref().map_or(101_325.0, |ambient| ambient.pressure);
    let layers: Vec<_> = setup
        .layers
        .iter()
        .map(|layer| read(setup, layer, start, ambient.as_ref(), plan, troubles))
        .collect();
    let tensions = tensions(setup, &layers, troubles);
    let (ambient, plan, tensions) = (ambient?, plan?, tensions?);
    let mut layers: Vec<Read> = layers.into_iter().collect::<Option<_>>()?;
    let cell = cell(setup, plan, &layers)?;
    let mut open_face = |is_open: bool, read: Option<&Read>| match read {
        Some(read) if is_open && read.layer.phase() == Phase::Liquid => own_tension(read, troubles),
        _ => Some(0.0),
    };
    let top_tension = open_face(!cell.sealed_top, layers.first())?;
    let bottom_tension = open_face(cell.open_bottom, layers.last())?;
    let mut stack = Stack {
        ambient_pressure: ambient.pressure,
        ambient_density: ambient.density,
        ambient_viscosity: ambient.viscosity,
        gravity: ambient.gravity,
        cell,
        top_tension,
        bottom_tension,
        layers: layers.iter().map(|read| read.layer.clone()).collect(),
        tensions,
        effects_off: setup.effects_off.iter().map(|given| given.value).collect(),
    };
    let mut pressures = vec![start; stack.layers.len()];
    let mut statics = None;
    for _ in 0..MOST_ROUNDS {
        let found = match static_pressures(&stack) {
            Ok(found) => found,
            Err(crushed) => {
                let detail = format!(
                    "\"{}\" would have a pressure of {} kPa absolute",
                    stack.layers[crushed.layer].name,
                    words::number(crushed.pressure * 1e-3, 3)
                );
                let place = setup.layers[crushed.layer].place.clone();
                troubles.push(Trouble::NoResponse { place, detail });
                return None;
            }
        };
        let still =
            found.mean.iter().zip(&pressures).all(|(new, old)| (new - old).abs() <= STILL * old.abs());
        pressures.clone_from(&found.mean);
        statics = Some(found);
        if still {
            break;
        }
        for ((read, layer), &pressure) in layers.iter_mut().zip(&setup.layers).zip(&pressures) {
            *read = self::read(setup, layer, pressure, Some(&ambient), Some(plan), troubles)?;
        }
        stack.layers = layers.iter().map(|read| read.layer.clone()).collect();
        if setup.cell.as_ref().is_some_and(|cell| cell.height.is_none()) {
            stack.cell.height = stack.layers.iter().map(|layer| layer.thickness).sum();
        }
    }
    let Statics { assumed, conflicts, .. } = statics?;
    let mut disagree = sizes(setup, &stack, &layers, &pressures, &ambient);
    disagree.extend(conflicts.iter().map(|conflict| self::conflict(setup, conflict)));
    if !disagree.is_empty() {
        troubles.extend(disagree);
        return None;
    }
    let states = layers.into_iter().zip(&setup.layers).zip(pressures);
    let states = states.map(|((read, layer), pressure)| read.state(layer, pressure)).collect();
    let closed_at_ambient = assumed.and_then(|index| setup.layers.get(index)).map(|layer| DefaultInForce {
        place: format!("{}.pressure", layer.place),
        value: format!("{} kPa abs", words::number(stack.ambient_pressure * 1e-3, 4)),
        source: "no pressure is known: this gas is taken as closed at ambient pressure".to_owned(),
    });
    Some(Built { stack, states, closed_at_ambient })
}

/// Sizes that can only be compared once the pressures are known: a filled volume against a thickness, and the layers
/// against a cell that is closed by a lid, which they must fill.
fn sizes(
    setup: &Setup,
    stack: &Stack,
    layers: &[Read],
    pressures: &[f64],
    ambient: &Ambient,
) -> Vec<Trouble> {
    let mut troubles = Vec::new();
    for ((written, read), &pressure) in setup.layers.iter().zip(layers).zip(pressures) {
        let (Some(filled), Some(_)) =
            (&written.filled_volume, written.thickness.as_ref().or(written.volume.as_ref()))
        else {
            continue;
        };
        let thickness = read.layer.thickness;
        let by_filled = shrunk(filled.value, pressure, read.temperature, ambient) / stack.cell.plan.area();
        let of =
            |given: &Option<resolved::Given<f64>>| given.as_ref().and_then(|g| Some(g.tolerance? / g.value));
        let tolerance =
            [&written.filled_volume, &written.thickness, &written.volume].into_iter().filter_map(of);
        if (by_filled - thickness).abs() > (ROUNDING + tolerance.sum::<f64>()) * thickness {
            troubles.push(Trouble::SizesDisagree {
                place: filled.place.clone(),
                other: written
                    .thickness
                    .as_ref()
                    .or(written.volume.as_ref())
                    .map_or_else(String::new, |g| g.place.clone()),
                what: format!(
                    "`filled-volume` at {} kPa makes {} of \"{}\", but it is said to be {} thick.",
                    words::number(pressure * 1e-3, 4),
                    words::millimetres(by_filled),
                    written.name,
                    words::millimetres(thickness)
                ),
            });
        }
    }
    let sum: f64 = stack.layers.iter().map(|layer| layer.thickness).sum();
    let gap = stack.cell.height - sum;
    if stack.cell.sealed_top && gap > ROUNDING * stack.cell.height {
        troubles.push(Trouble::SizesDisagree {
            place: "cell.height".to_owned(),
            other: "cell.top".to_owned(),
            what: format!(
                "The cell is closed by a lid at {}, but the layers are {} high together: {} is filled by nothing.",
                words::millimetres(stack.cell.height),
                words::millimetres(sum),
                words::millimetres(gap)
            ),
        });
    }
    troubles
}

/// A pressure that is known at a layer and is not what the weight of the others leads to: nothing carries the stack.
fn conflict(setup: &Setup, conflict: &Conflict) -> Trouble {
    let kilopascal = |pressure: f64| words::number(pressure * 1e-3, 5);
    let (place, other, name) = match setup.layers.get(conflict.layer) {
        Some(layer) if layer.vented.value => (layer.vented.place.clone(), layer.place.clone(), &*layer.name),
        Some(layer) => (format!("{}.pressure", layer.place), layer.place.clone(), &*layer.name),
        None => ("cell.bottom".to_owned(), "cell.top".to_owned(), "the open bottom"),
    };
    Trouble::SizesDisagree {
        place,
        other,
        what: format!(
            "The pressure of {name} is {} kPa abs, but pressure and weight of what lies above lead to {} kPa abs.",
            kilopascal(conflict.stated),
            kilopascal(conflict.carried)
        ),
    }
}

/// What surrounds the cell.
struct Ambient {
    temperature: f64,
    pressure: f64,
    gravity: f64,
    density: f64,
    viscosity: f64,
}

impl Ambient {
    fn read(setup: &Setup, troubles: &mut Vec<Trouble>) -> Option<Ambient> {
        let temperature = setup.ambient.temperature.as_ref()?.value;
        let pressure = setup.ambient.pressure.as_ref()?.value;
        let gravity = setup.ambient.gravity.as_ref()?.value;
        let air = Material { fluid: BuiltInFluid::Air, mass_fraction: None, grade: None };
        let figures = materials::density(&air, temperature, pressure).and_then(|density| {
            Ok((density.value, materials::viscosity(&air, temperature, pressure)?.value))
        });
        match figures {
            Ok((density, viscosity)) => Some(Ambient { temperature, pressure, gravity, density, viscosity }),
            Err(unavailable) => {
                troubles.push(Trouble::OutsideRange {
                    place: "ambient".to_owned(),
                    figure: "air",
                    detail: unavailable.to_string(),
                });
                None
            }
        }
    }
}

/// One layer, read.
struct Read {
    layer: Layer,
    figures: LayerFigures,
    temperature: f64,
    shear_dependent: Option<String>,
}

impl Read {
    fn state(self, written: &resolved::Layer, pressure: f64) -> LayerState {
        let mut sources = vec![
            format!("density: {}", self.figures.density.source),
            format!("viscosity: {}", self.figures.viscosity.source),
        ];
        if let Some(tension) = &self.figures.tension {
            sources.push(format!("surface tension: {}", tension.source));
        }
        if let Some((index, diffusivity)) = &self.figures.heat {
            sources.push(format!("adiabatic index: {}", index.source));
            sources.push(format!("thermal diffusivity: {}", diffusivity.source));
        }
        LayerState {
            name: written.name.clone(),
            place: written.place.clone(),
            phase: self.layer.phase(),
            made_of: made_of(written),
            thickness: self.layer.thickness,
            temperature: self.temperature,
            pressure,
            density: self.layer.density,
            viscosity: self.layer.viscosity,
            surface_tension: self.figures.tension.map(|tension| tension.value),
            shear_dependent: self.shear_dependent,
            sources,
        }
    }
}

fn read(
    setup: &Setup,
    layer: &resolved::Layer,
    pressure: f64,
    ambient: Option<&Ambient>,
    plan: Option<Plan>,
    troubles: &mut Vec<Trouble>,
) -> Option<Read> {
    let lost = |key: &str| setup.is_unreadable(&format!("{}.{key}", layer.place));
    if lost("temperature") {
        return None;
    }
    let temperature =
        layer.temperature.as_ref().map(|given| given.value).or(ambient.map(|a| a.temperature))?;
    let mut reader = Reader { setup, layer, temperature, pressure, troubles };
    let shear_dependent = reader.shear_dependent();
    let figures = reader.read()?;
    let (ambient, plan) = (ambient?, plan?);
    let thickness = thickness(layer, pressure, temperature, ambient, plan);
    if ["thickness", "volume", "filled-volume", "vented", "pressure", "polytropic-exponent"]
        .into_iter()
        .any(lost)
    {
        return None;
    }
    let gas = figures.heat.as_ref().map(|(index, diffusivity)| Gas {
        adiabatic_index: index.value,
        thermal_diffusivity: diffusivity.value,
        polytropic_exponent: layer.polytropic_exponent.as_ref().map(|given| given.value),
        vented: layer.vented.value,
        pressure: layer.pressure.as_ref().map(|given| given.value),
    });
    let layer = Layer {
        name: layer.name.clone(),
        thickness: thickness?,
        density: figures.density.value,
        viscosity: figures.viscosity.value,
        gas,
    };
    Some(Read { layer, figures, temperature, shear_dependent })
}

fn thickness(
    layer: &resolved::Layer,
    pressure: f64,
    temperature: f64,
    ambient: &Ambient,
    plan: Plan,
) -> Option<f64> {
    if let Some(thickness) = &layer.thickness {
        return Some(thickness.value);
    }
    if let Some(volume) = &layer.volume {
        return Some(volume.value / plan.area());
    }
    let filled = layer.filled_volume.as_ref()?;
    Some(shrunk(filled.value, pressure, temperature, ambient) / plan.area())
}

/// A filled volume was drawn at ambient temperature and pressure; under the weight of the layers above it shrinks
/// as an ideal gas.
fn shrunk(filled: f64, pressure: f64, temperature: f64, ambient: &Ambient) -> f64 {
    filled * (ambient.pressure / pressure) * (temperature / ambient.temperature)
}

fn plan(setup: &Setup) -> Option<Plan> {
    match &setup.cell.as_ref()?.plan {
        resolved::Plan::Rectangular { length, width } => {
            Some(Plan::Rectangle { length: length.value, width: width.value })
        }
        resolved::Plan::Circular { diameter } => Some(Plan::Circle { diameter: diameter.value }),
    }
}

fn cell(setup: &Setup, plan: Plan, layers: &[Read]) -> Option<Cell> {
    let cell = setup.cell.as_ref()?;
    if ["cell.height", "cell.top", "cell.bottom"].into_iter().any(|place| setup.is_unreadable(place)) {
        return None;
    }
    let sum = layers.iter().map(|read| read.layer.thickness).sum();
    Some(Cell {
        plan,
        height: cell.height.as_ref().map_or(sum, |height| height.value),
        sealed_top: cell.sealed_top.value,
        open_bottom: cell.open_bottom.value,
    })
}

/// One tension for every pair of neighbours: what `[[interface]]` says; else against gas the liquid's own, none
/// between gases or between layers of one liquid. Between two liquids it is never invented.
fn tensions(setup: &Setup, layers: &[Option<Read>], troubles: &mut Vec<Trouble>) -> Option<Vec<f64>> {
    let pairs: Vec<_> = setup
        .layers
        .windows(2)
        .zip(layers.windows(2))
        .map(|(written, read)| match (written, read) {
            ([above, below], [first, second]) => {
                tension(setup, (above, first.as_ref()), (below, second.as_ref()), troubles)
            }
            _ => None,
        })
        .collect();
    pairs.into_iter().collect()
}

fn tension(
    setup: &Setup,
    (above, first): (&resolved::Layer, Option<&Read>),
    (below, second): (&resolved::Layer, Option<&Read>),
    troubles: &mut Vec<Trouble>,
) -> Option<f64> {
    let joins = |between: &[String; 2]| {
        (between[0] == above.name && between[1] == below.name)
            || (between[0] == below.name && between[1] == above.name)
    };
    if let Some(interface) = setup.interfaces.iter().find(|interface| joins(&interface.between)) {
        return Some(interface.tension.value);
    }
    let lost = [(&above.name, &below.name), (&below.name, &above.name)]
        .iter()
        .any(|(one, other)| setup.is_unreadable(&format!("interface.{one}|{other}.tension")));
    if lost || setup.is_unreadable("interface") {
        return None;
    }
    match (phase(setup, above)?, phase(setup, below)?) {
        (Phase::Gas, Phase::Gas) => Some(0.0),
        (Phase::Liquid, Phase::Gas) => own_tension(first?, troubles),
        (Phase::Gas, Phase::Liquid) => own_tension(second?, troubles),
        (Phase::Liquid, Phase::Liquid) if same_liquid(above, below) => Some(0.0),
        (Phase::Liquid, Phase::Liquid) => {
            troubles.push(Trouble::TensionMissing { above: above.name.clone(), below: below.name.clone() });
            None
        }
    }
}

/// The surface tension of a liquid that meets gas; where it is not known the reason is noted once.
fn own_tension(read: &Read, troubles: &mut Vec<Trouble>) -> Option<f64> {
    if read.figures.tension.is_none() {
        let new = read.figures.why_no_tension.iter().filter(|why| !troubles.contains(why)).cloned();
        let new: Vec<Trouble> = new.collect();
        troubles.extend(new);
    }
    read.figures.tension.as_ref().map(|tension| tension.value)
}

fn same_liquid(one: &resolved::Layer, other: &resolved::Layer) -> bool {
    let value = |given: &Option<resolved::Given<f64>>| given.as_ref().map(|given| given.value);
    match (&one.fluid, &other.fluid) {
        (Some(LayerFluid::Own(a)), Some(LayerFluid::Own(b))) => a == b,
        (
            Some(LayerFluid::BuiltIn { fluid: a, mass_fraction: fraction_a, grade: grade_a }),
            Some(LayerFluid::BuiltIn { fluid: b, mass_fraction: fraction_b, grade: grade_b }),
        ) => a == b && value(fraction_a) == value(fraction_b) && value(grade_a) == value(grade_b),
        _ => false,
    }
}
