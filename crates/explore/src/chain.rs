//! The vertical response at the file's drive and over a range of frequencies.

use checks::derived::Derived;
use physics::response::{Chain, ResponseError, chain};
use physics::stack::{Drive, Stack};

/// The answer.
#[derive(Debug, Clone, PartialEq)]
pub struct ChainAnswer {
    /// At the file's own drive.
    pub here: ChainPoint,
    /// Lossless natural frequencies, ascending, Hz.
    pub natural_frequencies: Vec<f64>,
    /// Over the range asked for, ascending.
    pub sweep: Vec<ChainPoint>,
}

/// The response at one frequency.
#[derive(Debug, Clone, PartialEq)]
pub struct ChainPoint {
    /// Hz
    pub frequency: f64,
    /// Of the cell, peak, m/s².
    pub acceleration: f64,
    /// Top first.
    pub slabs: Vec<SlabPoint>,
    /// Top first.
    pub cushions: Vec<CushionPoint>,
}

/// A slab's motion.
#[derive(Debug, Clone, PartialEq)]
pub struct SlabPoint {
    /// Name.
    pub name: String,
    /// kg/m²
    pub mass_per_area: f64,
    /// Peak, m/s².
    pub acceleration: f64,
    /// |T|
    pub amplification: f64,
    /// rad, relative to the cell.
    pub phase: f64,
}

/// A cushion's state.
#[derive(Debug, Clone, PartialEq)]
pub struct CushionPoint {
    /// Name of its layer.
    pub name: String,
    /// Pa absolute.
    pub pressure: f64,
    /// Real and imaginary part.
    pub polytropic: (f64, f64),
    /// Relative motion of its faces over its thickness.
    pub stroke_ratio: f64,
}

/// Why there is no answer.
#[derive(Debug, Clone, PartialEq)]
pub enum NoChain {
    /// The stack could not be resolved: the findings say why.
    StackUnresolved,
    /// No drive is written.
    NoDrive,
    /// The physics has no answer.
    Failure(ResponseError),
}

/// The response of the stack; `frequencies` (Hz) for the sweep at the same cell acceleration.
///
/// # Errors
/// [`NoChain`].
pub fn response(derived: &Derived, frequencies: &[f64]) -> Result<ChainAnswer, NoChain> {
    let stack = derived.stack.as_ref().ok_or(NoChain::StackUnresolved)?;
    let set = derived.drive.ok_or(NoChain::NoDrive)?;
    let at = |frequency: f64| {
        let drive = Drive { frequency, acceleration: set.acceleration };
        chain(stack, &drive).map(|chain| (drive, chain)).map_err(NoChain::Failure)
    };
    let (drive, here) = at(set.frequency)?;
    let sweep = frequencies
        .iter()
        .map(|f| at(*f).map(|(drive, chain)| point(stack, derived, drive, &chain)))
        .collect::<Result<_, _>>()?;
    Ok(ChainAnswer {
        here: point(stack, derived, drive, &here),
        natural_frequencies: here.natural_frequencies.clone(),
        sweep,
    })
}

fn point(stack: &Stack, derived: &Derived, drive: Drive, chain: &Chain) -> ChainPoint {
    let name = |layers: &std::ops::Range<usize>| {
        derived
            .slabs
            .iter()
            .find(|slab| slab.range == *layers)
            .map(|slab| slab.name.clone())
            .unwrap_or_default()
    };
    ChainPoint {
        frequency: drive.frequency,
        acceleration: drive.acceleration,
        slabs: chain
            .slabs
            .iter()
            .map(|slab| SlabPoint {
                name: name(&slab.layers),
                mass_per_area: slab.mass_per_area,
                acceleration: slab.acceleration.norm(),
                amplification: slab.amplification.norm(),
                phase: slab.amplification.arg(),
            })
            .collect(),
        cushions: chain
            .cushions
            .iter()
            .map(|cushion| CushionPoint {
                name: stack.layers[cushion.layer].name.clone(),
                pressure: cushion.pressure,
                polytropic: (cushion.polytropic.re, cushion.polytropic.im),
                stroke_ratio: cushion.stroke_ratio,
            })
            .collect(),
    }
}
