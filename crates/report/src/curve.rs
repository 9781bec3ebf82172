//! `topheavy curve`: growth and marginal accelerations of one slab against wavenumber.

use crate::check_json::{FORMAT, response};
use crate::number::{json, put};
use explore::curve::{Curve, CurvePoint};
use serde_json::{Map, Value, json};

/// The JSON document.
pub fn document(curve: &Curve) -> Value {
    let mut object = Map::new();
    object.insert("format".to_owned(), json!(FORMAT));
    object.insert("slab".to_owned(), json!(curve.slab));
    put(&mut object, "acceleration_peak_m_per_s2", curve.acceleration);
    put(&mut object, "frequency_hz", curve.frequency);
    object.insert("points".to_owned(), curve.points.iter().map(point).collect());
    Value::Object(object)
}

fn point(point: &CurvePoint) -> Value {
    let mut object = Map::new();
    put(&mut object, "wavenumber_per_m", point.wavenumber);
    put(&mut object, "growth_rate_per_s", point.growth_rate);
    object.insert("response".to_owned(), json!(response(point.response)));
    for (key, list) in [
        ("neutral_harmonic_m_per_s2", &point.neutral.harmonic),
        ("neutral_subharmonic_m_per_s2", &point.neutral.subharmonic),
        ("neutral_other_m_per_s2", &point.neutral.other),
    ] {
        object.insert(key.to_owned(), list.iter().filter_map(|a| json(*a)).collect());
    }
    Value::Object(object)
}

/// A table for the terminal.
pub fn table(curve: &Curve) -> String {
    let mut out = format!(
        "slab \"{}\" at {} peak of its own and {}\n\n{:>12}  {:>12}  {:>12}  {:<11}  marginal accelerations, m/s² peak\n{:>12}  {:>12}  {:>12}\n",
        crate::line::one_line(&curve.slab),
        quantity::print(curve.acceleration, quantity::Kind::SteadyAcceleration, 4),
        quantity::print(curve.frequency, quantity::Kind::Frequency, 4),
        "wavenumber",
        "wavelength",
        "growth rate",
        "response",
        "1/m",
        "mm",
        "1/s",
    );
    for point in &curve.points {
        let list = |name: &str, list: &[f64]| {
            let numbers: Vec<_> = list.iter().map(|a| format!("{a:.1}")).collect();
            (!numbers.is_empty()).then(|| format!("{name} {}", numbers.join(" ")))
        };
        let neutral: Vec<_> = [
            list("harmonic", &point.neutral.harmonic),
            list("subharmonic", &point.neutral.subharmonic),
            list("other", &point.neutral.other),
        ]
        .into_iter()
        .flatten()
        .collect();
        let neutral =
            if neutral.is_empty() { format!("none up to {:.0}", curve.up_to) } else { neutral.join("; ") };
        out += &format!(
            "{:>12.2}  {:>12.3}  {:>12.4}  {:<11}  {neutral}\n",
            point.wavenumber,
            1e3 * std::f64::consts::TAU / point.wavenumber,
            point.growth_rate,
            response(point.response),
        );
    }
    out
}
