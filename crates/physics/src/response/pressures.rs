//! Static pressures: from where they are known, up and down by weight per area.

use crate::stack::Stack;

/// The pressures of a stack at rest.
#[derive(Debug, Clone, PartialEq)]
pub struct Statics {
    /// Mean pressure of each layer, Pa absolute, top first.
    pub mean: Vec<f64>,
    /// Nothing was known: this gas layer was taken as closed at ambient pressure.
    pub assumed: Option<usize>,
    /// Known pressures that the weight above or below does not lead to.
    pub conflicts: Vec<Conflict>,
}

/// A known pressure that does not fit the one carried over from elsewhere.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Conflict {
    /// The layer whose pressure is known (for the open bottom: the number of layers).
    pub layer: usize,
    /// Known, Pa absolute.
    pub stated: f64,
    /// What weight per area carries there, Pa absolute.
    pub carried: f64,
}

/// A layer whose mean pressure is not positive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crushed {
    /// Its index.
    pub layer: usize,
    /// Its mean pressure, Pa absolute.
    pub pressure: f64,
}

/// Pressures are known at an open top and bottom, in vented gas (ambient) and in gas with a stated pressure.
///
/// # Errors
/// [`Crushed`], the first layer with a mean pressure of 0 or less.
pub fn static_pressures(stack: &Stack) -> Result<Statics, Crushed> {
    let n = stack.layers.len();
    let weight = |i: usize| stack.layers[i].density * stack.gravity * stack.layers[i].thickness;
    // A known mean pressure of a gas layer, top first.
    let known = |i: usize| {
        let gas = stack.layers[i].gas?;
        if gas.vented { Some(stack.ambient_pressure) } else { gas.pressure }
    };
    let mut mean = vec![f64::NAN; n];
    let mut conflicts = Vec::new();
    // Pressure at the upper face of the next layer, going down.
    let mut carried = (!stack.cell.sealed_top).then_some(stack.ambient_pressure);
    for (i, mean) in mean.iter_mut().enumerate() {
        let half = weight(i) / 2.0;
        match (known(i), carried) {
            (Some(stated), from_above) => {
                if let Some(above) = from_above
                    && (above + half - stated).abs() > 1e-4 * stated
                {
                    conflicts.push(Conflict { layer: i, stated, carried: above + half });
                }
                *mean = stated;
                carried = Some(stated + half);
            }
            (None, Some(above)) => {
                *mean = above + half;
                carried = Some(above + 2.0 * half);
            }
            (None, None) => {}
        }
    }
    if stack.cell.open_bottom {
        match carried {
            Some(carried) if (carried - stack.ambient_pressure).abs() > 1e-4 * stack.ambient_pressure => {
                conflicts.push(Conflict { layer: n, stated: stack.ambient_pressure, carried });
            }
            _ => {}
        }
    }
    // What lies above the first known pressure, going up.
    let first = mean.iter().position(|p| !p.is_nan());
    let mut assumed = None;
    let mut below = match first {
        Some(first) => Some((first, mean[first] - weight(first) / 2.0)),
        None if stack.cell.open_bottom => Some((n, stack.ambient_pressure)),
        None => {
            // Nothing is known: the topmost gas (the whole fill, if there is none) was closed at ambient pressure.
            let gas = stack.layers.iter().position(|layer| layer.gas.is_some()).unwrap_or(0);
            assumed = Some(gas);
            let mut face = stack.ambient_pressure - weight(gas) / 2.0;
            for (i, mean) in mean.iter_mut().enumerate().skip(gas) {
                *mean = face + weight(i) / 2.0;
                face += weight(i);
            }
            Some((gas, stack.ambient_pressure - weight(gas) / 2.0))
        }
    };
    if let Some((start, face)) = &mut below {
        for i in (0..*start).rev() {
            mean[i] = *face - weight(i) / 2.0;
            *face -= weight(i);
        }
    }
    match mean.iter().position(|pressure| *pressure <= 0.0) {
        Some(layer) => Err(Crushed { layer, pressure: mean[layer] }),
        None => Ok(Statics { mean, assumed, conflicts }),
    }
}
