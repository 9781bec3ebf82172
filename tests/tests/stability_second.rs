//! The second method on its own: converged, and right where others have published.

use physics::stability::layered::{FluidLayer, Layered};
use std::f64::consts::TAU;
use std::time::Instant;
use topheavy_tests::galerkin::{Resolution, Second};

fn layer(density: f64, viscosity: f64, thickness: f64) -> FluidLayer {
    FluidLayer { density, viscosity, thickness }
}

#[test]
fn k1() {
    let stack = Layered {
        gravity: 9.8066,
        layers: vec![layer(949.0, 20e-3, 8.4e-3), layer(1346.0, 7.2e-3, 1.6e-3)],
        tensions: vec![0.035],
    };
    for (degree, steps) in [(7, 16), (9, 16), (11, 16), (11, 32), (13, 64)] {
        let start = Instant::now();
        let r = Resolution { degree, steps, ..Resolution::default() };
        let second = Second::new(&stack, TAU * 12.0, 475.843, &r);
        let t1 = start.elapsed();
        let e = second.at(25.0);
        let t2 = start.elapsed();
        println!("{degree} {steps} size {} {:?} {t1:?} {t2:?} thr {:?}", second.size(), &e[..3],
            second.threshold(20.0, 30.0, 1e-9));
    }
}

#[test]
fn k5() {
    use physics::stability::neutral;
    use topheavy_tests::stacks::*;
    let k5 = stack(9.81, &[air(0.03), topheavy_tests::stacks::layer(960.0, 50e-6, 0.01)], &[0.0208]);
    for l in [3.60, 3.65, 3.70,3.72, 3.731,3.74, 3.76, 3.80, 3.85] {
        let k = TAU / l * 1e3;
        let second = Second::new(&k5, TAU * 50.0, k, &Resolution::default());
        println!("{l} {:?} {:?}", second.threshold(205.0, 225.0, 1e-9), neutral(&k5, TAU * 50.0, k, 230.0, &|| false));
    }
}
