//! From layers to slabs, cushions and headspaces.

use crate::stack::{Layer, Stack};
use quantity::vocabulary::Phase;
use std::ops::Range;

/// A part of the stack, top first.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Part {
    /// Liquid layers in contact: one mass.
    Slab {
        /// Indices of its layers.
        layers: Range<usize>,
        /// What it rests on or hangs from.
        seat: Seat,
    },
    /// Gas layers in contact that are shut in between a slab and a slab, the floor or a lid: a spring.
    Cushion {
        /// Indices of its layers.
        layers: Range<usize>,
    },
    /// Gas that is no spring: open, vented, or with no slab beside it.
    Headspace {
        /// Indices of its layers.
        layers: Range<usize>,
    },
}

/// Where a slab sits.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Seat {
    /// Moves by itself, between gas and gas.
    Floating,
    /// Touches the floor: moves with the cell.
    OnFloor,
    /// Touches the lid: moves with the cell while the pressure under the lid stays above vapour pressure.
    UnderLid,
    /// Touches both.
    Fill,
}

/// The parts of a stack, top first.
pub fn partition(stack: &Stack) -> Vec<Part> {
    let runs = runs(&stack.layers);
    let last = runs.len().saturating_sub(1);
    runs.iter()
        .enumerate()
        .map(|(i, (phase, layers))| {
            let (top, bottom) = (i == 0, i == last);
            let layers = layers.clone();
            match phase {
                Phase::Liquid => {
                    let lid = top && stack.cell.sealed_top;
                    let floor = bottom && !stack.cell.open_bottom;
                    let seat = match (lid, floor) {
                        (true, true) => Seat::Fill,
                        (true, false) => Seat::UnderLid,
                        (false, true) => Seat::OnFloor,
                        (false, false) => Seat::Floating,
                    };
                    Part::Slab { layers, seat }
                }
                Phase::Gas => {
                    let vented = layers.clone().any(|j| stack.layers[j].gas.is_some_and(|gas| gas.vented));
                    let open = (top && !stack.cell.sealed_top) || (bottom && stack.cell.open_bottom);
                    // A lone gas between floor and lid carries nothing.
                    if vented || open || runs.len() == 1 {
                        Part::Headspace { layers }
                    } else {
                        Part::Cushion { layers }
                    }
                }
            }
        })
        .collect()
}

/// Runs of layers of one phase.
fn runs(layers: &[Layer]) -> Vec<(Phase, Range<usize>)> {
    let mut runs: Vec<(Phase, Range<usize>)> = Vec::new();
    for (i, layer) in layers.iter().enumerate() {
        match runs.last_mut() {
            Some((phase, range)) if *phase == layer.phase() => range.end = i + 1,
            _ => runs.push((layer.phase(), i..i + 1)),
        }
    }
    runs
}
