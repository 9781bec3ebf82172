use super::layered::*;
use super::*;
fn f5() -> Layered {
    Layered { gravity: 9.80665, layers: vec![
        FluidLayer { density: 1.2, viscosity: 1.82e-5, thickness: f64::INFINITY },
        FluidLayer { density: 971.0, viscosity: 0.971, thickness: 0.015 },
        FluidLayer { density: 1.2, viscosity: 1.82e-5, thickness: 0.04 } ],
        tensions: vec![0.0212, 0.0212] }
}
#[test] fn try_it() {
    let l = f5();
    for a in [0.0, 100.0, 9.0*1.731*9.80665, 175.0, 177.0, 220.7, 13.0*1.731*9.80665, 18.5*1.731*9.80665] {
        for k in [62.83, 88.86, 251.0, 200.0] {
            let t = std::time::Instant::now();
            let g = growth(&l, &Forcing { omega: 100.0*std::f64::consts::PI, acceleration: a }, k, &|| false);
            println!("a={a:.3} k={k} {:?} {:?}", t.elapsed(), g);
        }
    }
}
#[test] fn near_hold() {
    let l = f5();
    for a in [175.5, 175.7, 175.8, 175.9, 176.0, 177.0,178.,180.,190.] {
        let g = growth(&l, &Forcing { omega: 100.0*std::f64::consts::PI, acceleration: a }, 62.83, &|| false);
        println!("N a={a:.3} {:?}", g);
    }
}
#[test] fn k1() {
    let l = Layered { gravity: 9.8066, layers: vec![
        FluidLayer { density: 949.0, viscosity: 20e-3, thickness: 8.4e-3 },
        FluidLayer { density: 1346.0, viscosity: 7.2e-3, thickness: 1.6e-3 }], tensions: vec![0.035] };
    for k in [400.0, 475.843, 600.0, 790.0] {
        let t = std::time::Instant::now();
        println!("K {k} {:?} {:?}", neutral(&l, 24.0*std::f64::consts::PI, k, 500.0, &|| false), t.elapsed());
    }
    let l = Layered { gravity: 9.81, layers: vec![
        FluidLayer { density: 1.2, viscosity: 1.8e-5, thickness: 0.02 },
        FluidLayer { density: 970.0, viscosity: 0.485, thickness: 0.02 },
        FluidLayer { density: 1.2, viscosity: 1.8e-5, thickness: 0.01 } ],
        tensions: vec![0.0211, 0.0211] };
    for k in [std::f64::consts::PI/0.05, std::f64::consts::TAU/12.104e-3] {
        let t = std::time::Instant::now();
        println!("K {k} {:?} {:?}", neutral(&l, 200.0*std::f64::consts::PI, k, 1000.0, &|| false), t.elapsed());
    }
    let l = f5();
    for k in [62.83, 251.0] {
        let t = std::time::Instant::now();
        println!("K {k} {:?} {:?}", neutral(&l, 100.0*std::f64::consts::PI, k, 1000.0, &|| false), t.elapsed());
    }
}
