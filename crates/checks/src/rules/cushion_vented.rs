//! cushion-vented
//!
//! A slab rests on a gas layer that is open to the room.
//!
//! Why it matters: A vented gas cannot be compressed, so nothing carries the slab; it comes down as the gas leaves.
//!
//! What to do: Close the gas layer (`vented = false`), or vent the one above the slab instead.
//!
//! Criterion: `vented = true` on the gas right below a slab, and no closed gas or lid right above that slab that it could hang from.

use super::Context;
use super::context::found;
use quantity::vocabulary::Phase;
use setup::finding::Finding;
use setup::resolved::{Layer, LayerFluid, Setup};

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    unsupported(context.setup)
        .map(|(slab, gas)| {
            let what = format!("\"{}\" rests on \"{}\", which is vented.", slab.name, gas.name);
            let place = &gas.vented.place;
            found("cushion-vented", place, context.span(place), what, String::new())
        })
        .collect()
}

/// The lowest layer of each slab that rests on a vented gas and hangs from nothing, with that gas.
fn unsupported(setup: &Setup) -> impl Iterator<Item = (&Layer, &Layer)> {
    setup.layers.windows(2).enumerate().filter_map(move |(index, pair)| {
        let [slab, gas] = pair else { return None };
        let rests = is(setup, slab, Phase::Liquid) && is(setup, gas, Phase::Gas) && gas.vented.value;
        (rests && !hangs(setup, index)).then_some((slab, gas))
    })
}

/// Whether the slab whose lowest layer is `index` has a closed gas or a lid above it.
fn hangs(setup: &Setup, index: usize) -> bool {
    let above = setup.layers[..index].iter().rposition(|layer| !is(setup, layer, Phase::Liquid));
    let sealed = setup.cell.as_ref().is_none_or(|cell| cell.sealed_top.value);
    match above {
        // The first layer of gas is closed only under a lid.
        Some(gas) => !setup.layers[gas].vented.value && (gas > 0 || sealed),
        None => sealed,
    }
}

fn is(setup: &Setup, layer: &Layer, phase: Phase) -> bool {
    let own = match &layer.fluid {
        Some(LayerFluid::BuiltIn { fluid, .. }) => Some(fluid.phase()),
        Some(LayerFluid::Own(name)) => setup.fluids.get(name).map(|fluid| fluid.phase),
        Some(LayerFluid::Bare(phase)) => Some(*phase),
        None => None,
    };
    own == Some(phase)
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;
    use quantity::vocabulary::Phase;

    fn case(vented: bool, sealed: bool) -> Case {
        let mut case = Case::new(13.0);
        case.setup.layers = vec![bare("oil", Phase::Liquid), bare("cushion", Phase::Gas)];
        case.setup.layers[1].vented.value = vented;
        case.setup.cell.as_mut().expect("a cell").sealed_top.value = sealed;
        case
    }

    #[test]
    fn fires_under_a_slab_with_nothing_above_it() {
        let found = case(true, false).only("cushion-vented");
        assert_eq!(found.place, "layer.cushion.vented");
    }

    #[test]
    fn silent_when_closed_or_when_the_slab_hangs_from_the_lid() {
        case(false, false).silent("cushion-vented");
        case(true, true).silent("cushion-vented");
    }

    #[test]
    fn a_vented_gas_above_holds_nothing() {
        let mut case = case(true, true);
        case.setup.layers.insert(0, bare("headspace", Phase::Gas));
        case.silent("cushion-vented");
        case.setup.layers[0].vented.value = true;
        case.only("cushion-vented");
    }

    #[test]
    fn silent_when_the_fluid_is_not_known() {
        let mut case = case(true, false);
        case.setup.layers[0].fluid = None;
        case.silent("cushion-vented");
    }
}
