//! Where the elements lie: geometrically finer towards every face, where the Stokes layers are.

use physics::stability::layered::{FluidLayer, Layered};

/// How finely the problem is resolved.
#[derive(Debug, Clone, Copy)]
pub struct Resolution {
    /// Polynomial degree of every element.
    pub degree: usize,
    /// Thickness of the element at a face, in Stokes-layer thicknesses.
    pub first: f64,
    /// Ratio of the thicknesses of neighbours.
    pub growth: f64,
    /// Time steps per period of the drive.
    pub steps: usize,
}

impl Default for Resolution {
    fn default() -> Self {
        Resolution { degree: 11, first: 2.5, growth: 3.5, steps: 32 }
    }
}

/// One element.
#[derive(Debug, Clone, Copy)]
pub(super) struct Element {
    pub thickness: f64,
    pub fluid: FluidLayer,
}

/// Elements, top first, and the node (counted from the top) at which each interface lies.
#[derive(Debug)]
pub(super) struct Mesh {
    pub elements: Vec<Element>,
    pub interfaces: Vec<usize>,
    /// A face towards vacuum at the top or at the bottom moves freely; anything else is a wall.
    pub free: [bool; 2],
}

/// A half space is cut where nothing of the motion is left: e^{−2·18} = 2e−16.
const HALF_SPACE: f64 = 18.0;

impl Mesh {
    /// The mesh for motions of wavenumber `k` that vary in time like `omega`.
    pub fn new(layered: &Layered, k: f64, omega: f64, resolution: &Resolution) -> Mesh {
        let mut mesh = Mesh { elements: Vec::new(), interfaces: Vec::new(), free: [false; 2] };
        let last = layered.layers.len() - 1;
        for (i, layer) in layered.layers.iter().enumerate() {
            if i > 0 {
                mesh.interfaces.push(mesh.elements.len());
            }
            if layer.density == 0.0 {
                mesh.free[usize::from(i == last)] = true;
                continue;
            }
            let thickness = if layer.thickness.is_finite() { layer.thickness } else { HALF_SPACE / k };
            let stokes = (2.0 * layer.viscosity / layer.density / omega).sqrt();
            let first = (resolution.first * stokes).min(2.0 / k);
            for thickness in graded(thickness, first, resolution.growth) {
                mesh.elements.push(Element { thickness, fluid: *layer });
            }
        }
        mesh
    }
}

/// Thicknesses that add up to `whole`, growing by at most `growth` from about `first` at both ends to the middle.
fn graded(whole: f64, first: f64, growth: f64) -> Vec<f64> {
    let mut half = Vec::new();
    let (mut size, mut sum) = (first, 0.0);
    while sum + size < 0.5 * whole {
        half.push(size);
        sum += size;
        size *= growth;
    }
    let middle = whole - 2.0 * sum;
    let mut all = half.clone();
    // A middle wider than its neighbours' growth allows is halved.
    if half.last().is_some_and(|last| middle > growth * last) {
        all.extend([0.5 * middle, 0.5 * middle]);
    } else {
        all.push(middle);
    }
    all.extend(half.iter().rev());
    all
}

#[cfg(test)]
mod tests {
    use super::graded;

    #[test]
    fn elements_fill_the_layer() {
        for whole in [0.01, 0.5, 3.0, 70.0] {
            let parts = graded(whole, 0.1, 3.0);
            assert!((parts.iter().sum::<f64>() - whole).abs() < 1e-12 * whole);
            assert!(parts.iter().all(|part| *part > 0.0));
        }
    }
}
