//! Materials against general-purpose property libraries: the stored output of `references/materials.py` always, a
//! fresh one where the libraries are at hand.

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use physics::materials::{self, Material, Property, Unavailable};
use quantity::vocabulary::BuiltInFluid;
use serde_json::Value;
use topheavy_tests::references;

const STORED: &str = include_str!("../references/materials.json");
/// Relative, between two programs of one formulation whose densities of water differ by up to 1e-5.
const SAME: f64 = 3e-5;

fn number(value: &Value, key: &str) -> f64 {
    value[key].as_f64().unwrap_or_else(|| panic!("no {key} in {value}"))
}

fn ours(row: &Value) -> Result<Property, Unavailable> {
    let name = row["fluid"].as_str().unwrap();
    let fluid = BuiltInFluid::ALL.into_iter().find(|fluid| fluid.name() == name).unwrap();
    let material =
        Material { fluid, mass_fraction: row["mass_fraction"].as_f64(), grade: row["grade"].as_f64() };
    let (temperature, pressure) = (number(row, "temperature"), number(row, "pressure"));
    match row["property"].as_str().unwrap() {
        "density" => materials::density(&material, temperature, pressure),
        "viscosity" => materials::viscosity(&material, temperature, pressure),
        "surface tension" => materials::surface_tension(&material, temperature),
        "adiabatic index" => materials::adiabatic_index(&material, temperature),
        "thermal diffusivity" => materials::thermal_diffusivity(&material, temperature, pressure),
        other => panic!("no property {other}"),
    }
}

/// Every row: the two values differ by no more than both sources say they may.
fn compare(output: &Value) {
    let rows = output["rows"].as_array().unwrap();
    assert!(rows.len() > 300, "{} rows", rows.len());
    for row in rows {
        let property = ours(row).unwrap_or_else(|refusal| panic!("{row}: {refusal}"));
        let allowed = match row["uncertainty"].as_f64() {
            Some(of_library) => of_library + property.uncertainty.unwrap(),
            None => SAME,
        };
        let reference = number(row, "value");
        let apart = (property.value / reference - 1.0).abs();
        assert!(apart <= allowed, "{row}: {} is {apart:.2e} off, {allowed:.2e} allowed", property.value);
    }
}

#[test]
fn stored_values_of_the_libraries_are_met() {
    let stored: Value = serde_json::from_str(STORED).unwrap();
    for library in ["CoolProp", "iapws", "chemicals"] {
        assert!(stored["versions"][library].is_string(), "{library}");
    }
    compare(&stored);
    let fluids = |row: &Value| row["fluid"].as_str().unwrap().to_owned();
    let covered: Vec<String> = stored["rows"].as_array().unwrap().iter().map(fluids).collect();
    for fluid in BuiltInFluid::ALL {
        assert!(covered.iter().any(|name| name == fluid.name()), "no row of {}", fluid.name());
    }
}

#[test]
fn fresh_values_of_the_libraries_are_met() {
    let Some(fresh) = references::run("materials.py", &[]) else { return };
    compare(&fresh);
    let stored: Value = serde_json::from_str(STORED).unwrap();
    let count = |output: &Value| output["rows"].as_array().unwrap().len();
    assert_eq!(count(&fresh), count(&stored), "the stored output is of another script");
    for (old, new) in stored["rows"].as_array().unwrap().iter().zip(fresh["rows"].as_array().unwrap()) {
        let (old, new) = (number(old, "value"), number(new, "value"));
        assert!((old - new).abs() <= 1e-6 * old.abs(), "stored {old}, fresh {new}");
    }
}
