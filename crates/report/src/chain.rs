//! `topheavy chain`: the vertical response alone.

use crate::check_json::FORMAT;
use crate::number::{json, put};
use explore::chain::{ChainAnswer, ChainPoint};
use serde_json::{Map, Value, json};

/// The JSON document: the response at the file's drive, and the sweep where one was asked for.
pub fn document(answer: &ChainAnswer) -> Value {
    let mut object = point(&answer.here);
    object.insert("format".to_owned(), json!(FORMAT));
    object.insert(
        "natural_frequencies_hz".to_owned(),
        answer.natural_frequencies.iter().filter_map(|f| json(*f)).collect(),
    );
    if !answer.sweep.is_empty() {
        let sweep = answer.sweep.iter().map(|at| Value::Object(point(at))).collect();
        object.insert("sweep".to_owned(), sweep);
    }
    Value::Object(object)
}

fn point(point: &ChainPoint) -> Map<String, Value> {
    let mut object = Map::new();
    put(&mut object, "frequency_hz", point.frequency);
    put(&mut object, "acceleration_peak_m_per_s2", point.acceleration);
    let slabs = point.slabs.iter().map(|slab| {
        let mut entry = Map::new();
        entry.insert("name".to_owned(), json!(slab.name));
        put(&mut entry, "mass_kg_per_m2", slab.mass_per_area);
        put(&mut entry, "acceleration_peak_m_per_s2", slab.acceleration);
        put(&mut entry, "amplification", slab.amplification);
        put(&mut entry, "phase_rad", slab.phase);
        Value::Object(entry)
    });
    object.insert("slabs".to_owned(), slabs.collect());
    let cushions = point.cushions.iter().map(|cushion| {
        let mut entry = Map::new();
        entry.insert("layer".to_owned(), json!(cushion.name));
        put(&mut entry, "pressure_abs_pa", cushion.pressure);
        put(&mut entry, "polytropic_re", cushion.polytropic.0);
        put(&mut entry, "polytropic_im", cushion.polytropic.1);
        put(&mut entry, "stroke_ratio", cushion.stroke_ratio);
        Value::Object(entry)
    });
    object.insert("cushions".to_owned(), cushions.collect());
    object
}

/// A table for the terminal.
pub fn table(answer: &ChainAnswer) -> String {
    let mut out = String::new();
    let naturals: Vec<_> = answer.natural_frequencies.iter().map(|f| format!("{f:.2} Hz")).collect();
    out += &match naturals.is_empty() {
        true => "natural frequencies: none (nothing floats on a cushion)\n".to_owned(),
        false => format!("natural frequencies: {}\n", naturals.join(", ")),
    };
    for at in std::iter::once(&answer.here).chain(&answer.sweep) {
        out += &format!("\n{:.4} Hz, cell {:.3} m/s² peak\n", at.frequency, at.acceleration);
        for slab in &at.slabs {
            out += &format!(
                "  slab {:<24} {:>10.3} m/s² peak  {:>8.4} times the cell  phase {:>8.2}°\n",
                format!("\"{}\"", crate::line::one_line(&slab.name)),
                slab.acceleration,
                slab.amplification,
                slab.phase.to_degrees(),
            );
        }
        for cushion in &at.cushions {
            out += &format!(
                "  cushion {:<21} {:>10.0} Pa abs  exponent {:.4} {:+.4} i  stroke {:.2} % of its thickness\n",
                format!("\"{}\"", crate::line::one_line(&cushion.name)),
                cushion.pressure,
                cushion.polytropic.0,
                cushion.polytropic.1,
                100.0 * cushion.stroke_ratio,
            );
        }
    }
    out
}
