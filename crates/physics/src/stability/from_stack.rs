//! From a stack of layers to the stability problem of one slab.

use super::layered::{FluidLayer, Layered};
use crate::stack::{Layer, Stack};
use quantity::vocabulary::{Effect, Phase};
use std::ops::Range;

/// The slab made of `layers` (indices into the stack, top first) with the gas on either side of it.
///
/// The far side of a gas layer is a rigid wall at the mean surface of the next slab, the floor or the lid; open air
/// (an open top or bottom, a first layer of gas under an open top) is a half space. With the effect `gas-layers`
/// switched off the gas is nothing: its faces are free.
pub fn layered(stack: &Stack, layers: Range<usize>) -> Layered {
    let last = stack.layers.len() - 1;
    let with_gas = stack.has(Effect::GasLayers);
    let fluid = |layer: &Layer, thickness: f64| match layer.phase() {
        Phase::Gas if !with_gas => FluidLayer::VACUUM,
        _ => FluidLayer { density: layer.density, viscosity: layer.viscosity, thickness },
    };
    let air = || match with_gas {
        true => FluidLayer {
            density: stack.ambient_density,
            viscosity: stack.ambient_viscosity,
            thickness: f64::INFINITY,
        },
        false => FluidLayer::VACUUM,
    };
    let mut problem = Layered { gravity: stack.gravity, layers: Vec::new(), tensions: Vec::new() };
    // Above.
    match layers.start.checked_sub(1) {
        Some(above) => {
            let gas = &stack.layers[above];
            let open = above == 0 && !stack.cell.sealed_top;
            problem.layers.push(fluid(gas, if open { f64::INFINITY } else { gas.thickness }));
            problem.tensions.push(stack.tensions[above]);
        }
        None if !stack.cell.sealed_top => {
            problem.layers.push(air());
            problem.tensions.push(stack.top_tension);
        }
        None => {}
    }
    // The slab itself.
    for i in layers.clone() {
        let layer = &stack.layers[i];
        problem.layers.push(fluid(layer, layer.thickness));
        if i + 1 < layers.end {
            problem.tensions.push(stack.tensions[i]);
        }
    }
    // Below.
    if layers.end <= last {
        let gas = &stack.layers[layers.end];
        let open = layers.end == last && stack.cell.open_bottom;
        problem.tensions.push(stack.tensions[layers.end - 1]);
        problem.layers.push(fluid(gas, if open { f64::INFINITY } else { gas.thickness }));
    } else if stack.cell.open_bottom {
        problem.tensions.push(stack.bottom_tension);
        problem.layers.push(air());
    }
    problem
}
