//! The stability solver against SciPy (Mathieu's equation) and mpmath (secular determinants in 40 digits).

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use physics::stability::layered::{FluidLayer, Forcing, Layered};
use physics::stability::{growth, neutral};
use serde_json::Value;
use topheavy_tests::references;
use topheavy_tests::stacks::{air, k1, layer, stack};

const DEEP: f64 = f64::INFINITY;
const STORED: &str = include_str!("../references/stability.json");

/// The stored output of the script.
fn stored() -> Value {
    serde_json::from_str(STORED).unwrap()
}

fn number(value: &Value, key: &str) -> f64 {
    value[key].as_f64().unwrap_or_else(|| panic!("no {key} in {value}"))
}

#[test]
fn the_stored_output_is_what_the_libraries_give() {
    assert!(stored()["versions"]["scipy"].is_string());
    if let Some(fresh) = references::run("stability.py", &[]) {
        same(&stored(), &fresh, "");
    }
}

/// Equal to 1e-11 wherever numbers stand (versions may differ).
fn same(stored: &Value, fresh: &Value, at: &str) {
    match (stored, fresh) {
        (Value::Object(stored), Value::Object(fresh)) => {
            assert_eq!(stored.len(), fresh.len(), "{at}");
            for (key, value) in stored.iter().filter(|(key, _)| *key != "versions") {
                same(value, &fresh[key], &format!("{at}/{key}"));
            }
        }
        (Value::Array(stored), Value::Array(fresh)) => {
            assert_eq!(stored.len(), fresh.len(), "{at}");
            stored.iter().zip(fresh).for_each(|(stored, fresh)| same(stored, fresh, at));
        }
        _ => {
            let (stored, fresh) = (stored.as_f64().unwrap(), fresh.as_f64().unwrap());
            assert!((stored - fresh).abs() <= 1e-11 * stored.abs(), "{at}: {stored} stored, {fresh} now");
        }
    }
}

#[test]
fn neutral_curves_tend_to_mathieu() {
    // Deep, nearly inviscid liquid: y″ + (a − 2q cos 2t) y = 0 with a = ±4gk/ω², q = 2kA/ω².
    let (k, omega) = (80.0, 150.0);
    let scale = omega * omega / (2.0 * k);
    for row in stored()["mathieu"].as_array().unwrap() {
        let q = number(row, "q");
        for (name, subharmonic) in [("a0", false), ("b1", true), ("a1", true), ("b2", false), ("a2", false)] {
            let a = number(row, name);
            let gravity = a.abs() * omega * omega / (4.0 * k);
            let liquid = layer(1000.0, 1e-11, DEEP);
            let layers = if a < 0.0 { [liquid, FluidLayer::VACUUM] } else { [FluidLayer::VACUUM, liquid] };
            let found =
                neutral(&stack(gravity, &layers, &[0.0]), omega, k, 1.3 * q * scale, &|| false).unwrap();
            let list = if subharmonic { found.subharmonic } else { found.harmonic };
            let off = list.iter().map(|found| (found / scale - q).abs()).fold(f64::INFINITY, f64::min);
            assert!(off <= 1e-6 * q, "{name}({q}) = {a}: {list:?} in units of {scale}");
        }
    }
}

#[test]
fn stacks_at_rest_have_the_roots_of_their_secular_determinant() {
    let slab = stack(
        9.80665,
        &[
            FluidLayer { density: 1.2, viscosity: 1.82e-5, thickness: DEEP },
            FluidLayer { density: 971.0, viscosity: 0.971, thickness: 15e-3 },
            FluidLayer { density: 1.2, viscosity: 1.82e-5, thickness: 40e-3 },
        ],
        &[0.0212, 0.0212],
    );
    let mut upside_down = k1();
    upside_down.layers.reverse();
    upside_down.tensions = vec![0.005];
    let three = stack(
        9.81,
        &[
            air(20e-3),
            FluidLayer { density: 960.0, viscosity: 0.048, thickness: 5e-3 },
            FluidLayer { density: 998.0, viscosity: 1.0e-3, thickness: 10e-3 },
        ],
        &[0.0208, 0.040],
    );
    let over_air = stack(
        9.81,
        &[FluidLayer { density: 970.0, viscosity: 0.485, thickness: DEEP }, air(DEEP)],
        &[0.0211],
    );
    let cases: [(&str, Layered, f64); 5] = [
        ("falling liquid over air", over_air, 144.749),
        ("K1 at rest", k1(), 475.843),
        ("K1 upside down", upside_down, 150.0),
        ("water, oil, air", three, 536.518),
        ("levitated slab falling", slab, 62.8),
    ];
    for (name, layered, k) in &cases {
        let expected = &stored()["at rest"][name];
        let found = growth(layered, &Forcing { omega: 300.0, acceleration: 0.0 }, *k, &|| false).unwrap();
        let (rate, frequency) = (number(expected, "rate"), number(expected, "frequency"));
        let size = rate.hypot(frequency);
        let off = (found.rate - rate).hypot(found.frequency - frequency) / size;
        assert!(off < 1e-9, "{name}: {found:?}, expected {expected}");
    }
}

#[test]
fn fall_of_equal_kinematic_viscosity() {
    for row in stored()["fall of equal kinematic viscosity"].as_array().unwrap() {
        let (atwood, k) = (number(row, "atwood"), number(row, "k"));
        let light = layer((1.0 - atwood) / (1.0 + atwood), 1.0, DEEP);
        let layered = stack(1.0, &[layer(1.0, 1.0, DEEP), light], &[0.0]);
        let found = growth(&layered, &Forcing { omega: 1.0, acceleration: 0.0 }, k, &|| false).unwrap();
        let rate = number(row, "rate");
        assert!((found.rate - rate).abs() < 1e-9 * rate, "A {atwood}, k {k}: {found:?}, expected {rate}");
    }
}
