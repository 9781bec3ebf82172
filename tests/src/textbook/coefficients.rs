//! The flow of one harmonic: four exponentials a layer, their coefficients from one dense system.
//!
//! With W(z) e^{ikx + Λt} the vertical velocity, Λ = iyₙ, z upwards and q² = k² + Λ/ν:
//!
//! ```text
//! in a layer      W = A e^{−k(top − z)} + B e^{−k(z − bottom)} + C e^{−q(top − z)} + D e^{−q(z − bottom)}
//! at a wall       W = DW = 0
//! at interface i  W = Λζᵢ on both sides,  [DW] = 0,  [μ(D² + k²)W] = 0
//! its traction    Tᵢ = [ρΛ DW − μ(D² − k²)DW + 2μk² DW],  [f] = above − below
//! ```
//!
//! The exponentials are scaled to 1 at the face they decay from, so that deep layers do no harm; a half space keeps
//! the two that decay away from its face, vacuum has no flow and no say.

use nalgebra::{DMatrix, DVector};
use num_complex::Complex64;
use physics::stability::layered::{FluidLayer, Layered};

/// Number of interfaces that fall without drive at wavenumber `k`: whose gravity outweighs their tension.
pub fn falling(layered: &Layered, k: f64) -> usize {
    let at_rest = |i: &usize| jump(layered, *i) * layered.gravity + layered.tensions[*i] * k * k;
    (0..layered.tensions.len()).filter(|i| at_rest(i) < 0.0).count()
}

/// ρ_below − ρ_above of an interface, kg/m³.
pub fn jump(layered: &Layered, i: usize) -> f64 {
    layered.layers[i + 1].density - layered.layers[i].density
}

/// One exponential of one layer: value 1 at `from`, and how it goes on.
struct Exponential {
    /// Coefficient of z in the exponent, 1/m: positive for the ones that decay downwards.
    slope: Complex64,
    /// Viscous (q) or potential (k).
    viscous: bool,
    /// Distance over which it decays to the layer's other face; infinite in a half space.
    thickness: f64,
}

impl Exponential {
    /// Value at the upper or at the lower face of its layer.
    fn at(&self, upper: bool) -> Complex64 {
        let starts_here = upper == (self.slope.re > 0.0);
        if starts_here { Complex64::new(1.0, 0.0) } else { (-self.decay() * self.thickness).exp() }
    }

    fn decay(&self) -> Complex64 {
        if self.slope.re > 0.0 { self.slope } else { -self.slope }
    }
}

fn exponentials(layer: &FluidLayer, k: f64, q: Complex64, half: Option<bool>) -> Vec<Exponential> {
    if layer.density == 0.0 {
        return Vec::new();
    }
    let thickness = layer.thickness;
    let mut all = Vec::with_capacity(4);
    for (viscous, rate) in [(false, Complex64::new(k, 0.0)), (true, q)] {
        // Decaying downwards from the upper face; decaying upwards from the lower one.
        if !(thickness.is_infinite() && half == Some(true)) {
            all.push(Exponential { slope: rate, viscous, thickness });
        }
        if !(thickness.is_infinite() && half == Some(false)) {
            all.push(Exponential { slope: -rate, viscous, thickness });
        }
    }
    all
}

/// The tractions on the interfaces (rows) for a unit displacement of each (columns) at the rate `lambda` (1/s, on the
/// imaginary axis), per k².
///
/// # Panics
/// When the system is singular, which would be a defect here.
#[allow(clippy::expect_used)]
pub fn tractions(layered: &Layered, k: f64, lambda: Complex64) -> DMatrix<Complex64> {
    let interfaces = layered.tensions.len();
    if lambda.norm() == 0.0 {
        // A steady displacement moves nothing.
        return DMatrix::zeros(interfaces, interfaces);
    }
    let last = layered.layers.len() - 1;
    let mut first = Vec::with_capacity(last + 2);
    let mut flows = Vec::with_capacity(last + 1);
    let mut size = 0;
    for (j, layer) in layered.layers.iter().enumerate() {
        let nu = layer.viscosity / layer.density;
        let q = (k * k + lambda / nu).sqrt();
        let half = if j == 0 {
            Some(true)
        } else if j == last {
            Some(false)
        } else {
            None
        };
        let flow = exponentials(layer, k, q, half);
        first.push(size);
        size += flow.len();
        flows.push(flow);
    }
    let mut system = DMatrix::<Complex64>::zeros(size, size);
    let mut given = DMatrix::<Complex64>::zeros(size, interfaces);
    let mut row = 0;
    // Writes one condition: a factor for each exponential of the layer at its upper or lower face.
    let put =
        |system: &mut DMatrix<Complex64>, row, j: usize, upper, value: &dyn Fn(&Exponential) -> Complex64| {
            for (i, exponential) in flows[j].iter().enumerate() {
                system[(row, first[j] + i)] += value(exponential) * exponential.at(upper);
            }
        };
    let one = Complex64::new(1.0, 0.0);
    for (j, upper) in [(0, true), (last, false)] {
        let layer = &layered.layers[j];
        if layer.density > 0.0 && layer.thickness.is_finite() {
            put(&mut system, row, j, upper, &|_| one);
            put(&mut system, row + 1, j, upper, &|e| e.slope / k);
            row += 2;
        }
    }
    for i in 0..interfaces {
        // The upper layer ends here with its lower face, the lower one begins with its upper face.
        let sides = [(i, false, 1.0), (i + 1, true, -1.0)];
        let fluid = sides.iter().filter(|(j, ..)| !flows[*j].is_empty());
        for (j, upper, _) in fluid.clone() {
            put(&mut system, row, *j, *upper, &|_| one);
            given[(row, i)] = lambda;
            row += 1;
        }
        if fluid.clone().count() == 2 {
            for (j, upper, sign) in fluid.clone() {
                put(&mut system, row, *j, *upper, &|e| *sign * e.slope / k);
            }
            row += 1;
        }
        let scale = layered.layers[i].viscosity.max(layered.layers[i + 1].viscosity) * k * k;
        for (j, upper, sign) in fluid {
            let mu = layered.layers[*j].viscosity;
            put(&mut system, row, *j, *upper, &|e| *sign * mu * (e.slope * e.slope + k * k) / scale);
        }
        row += 1;
    }
    debug_assert_eq!(row, size, "as many conditions as coefficients");
    equilibrate(&mut system, &mut given);
    let coefficients = system.lu().solve(&given).expect("layers have one flow");
    DMatrix::from_fn(interfaces, interfaces, |i, of| {
        let coefficients: DVector<Complex64> = coefficients.column(of).into();
        let mut sum = Complex64::new(0.0, 0.0);
        for (j, upper, sign) in [(i, false, 1.0), (i + 1, true, -1.0)] {
            let FluidLayer { density, viscosity, .. } = layered.layers[j];
            for (e, exponential) in flows[j].iter().enumerate() {
                let slope = exponential.slope;
                // (D² − k²)DW is Λ/ν DW for a viscous one and nothing for a potential one.
                let pressure = if exponential.viscous { one * 0.0 } else { density * lambda };
                let factor = (pressure + 2.0 * viscosity * k * k) * slope;
                sum += sign * factor * exponential.at(upper) * coefficients[first[j] + e];
            }
        }
        sum / (k * k)
    })
}

/// Rows are scaled to a largest entry of 1, so that pivots are chosen among equals.
fn equilibrate(system: &mut DMatrix<Complex64>, given: &mut DMatrix<Complex64>) {
    for row in 0..system.nrows() {
        let largest = system.row(row).iter().map(|x| x.norm()).fold(0.0, f64::max);
        system.row_mut(row).unscale_mut(largest);
        given.row_mut(row).unscale_mut(largest);
    }
}
