//! value-out-of-range
//!
//! A value outside the range of its key.
//!
//! Why it matters: The ranges are generous, so a value outside is a slip of the unit or of a digit; every result would rest on it.
//!
//! What to do: Check the number and its unit.

use crate::declare::{Bounds, Key, ranges};
use crate::finding::{Finding, Span};
use crate::rules::found;
use quantity::Kind;

/// `value`: SI, peak, absolute; `kind`: as read.
pub(crate) fn finding(
    key: &Key,
    place: &str,
    span: Span,
    value: f64,
    kind: Kind,
    bounds: &Bounds,
) -> Finding {
    let printed = match kind {
        Kind::VibrationAcceleration | Kind::VibrationVelocity | Kind::VibrationDisplacement => {
            quantity::print_amplitude(value, kind, 3)
        }
        Kind::Pressure => quantity::print(value, Kind::AbsolutePressure, 3),
        kind => quantity::print(value, kind, 3),
    };
    let what = format!("`{}` is {printed}, outside its range of {}.", key.name, bounds.said);
    let mut finding = found("value-out-of-range", place, span, what, "");
    if bounds.why != ranges::SLIP {
        finding.message.why = super::sentence(&super::capitalised(bounds.why));
    }
    finding.values.push(("value_si", value));
    finding
}

/// A whole number out of range.
pub(crate) fn integer(key: &Key, place: &str, span: Span, value: i64, least: i64, most: i64) -> Finding {
    let what = if key.name == "format" {
        format!("This file says format {value}; this version reads format {most}.")
    } else {
        format!("`{}` is {value}, outside its range of {least} to {most}.", key.name)
    };
    found("value-out-of-range", place, span, what, "")
}

/// Too many layers.
pub(crate) fn layers(count: usize, span: Span) -> Finding {
    let most = crate::written::MOST_LAYERS;
    let what = format!("The stack has {count} layers; at most {most} are read.");
    found("value-out-of-range", "layer", span, what, "Leave out layers that do not matter.")
}

/// A gauge pressure that leaves nothing.
pub(crate) fn vacuum(place: &str, span: Span, absolute: f64, ambient: f64) -> Finding {
    let what = format!(
        "A gauge pressure that leaves {} absolute below an ambient pressure of {}.",
        quantity::print(absolute, Kind::AbsolutePressure, 3),
        quantity::print(ambient, Kind::AbsolutePressure, 4)
    );
    found("value-out-of-range", place, span, what, "")
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    fn thickness(text: &str) -> String {
        EXAMPLE.replacen("thickness = \"20 mm\"", &format!("thickness = \"{text}\""), 1)
    }

    #[test]
    fn fires_outside_and_is_silent_at_the_ends() {
        for outside in ["0.99 µm", "10.001 m", "0 mm", "-3 mm", "42000 m"] {
            assert_eq!(only(&thickness(outside), "value-out-of-range").place, "layer.oil.thickness");
        }
        for inside in ["1 µm", "10 m"] {
            silent(&thickness(inside));
        }
    }

    #[test]
    fn an_rms_value_is_compared_as_peak() {
        let set = |text: &str| EXAMPLE.replace("\"14 g0 peak\"", &format!("\"{text}\""));
        // 800 km/s² rms is 1131 km/s² peak, above 1e6 m/s².
        only(&set("8e5 m/s² rms"), "value-out-of-range");
        silent(&set("8e5 m/s² peak"));
    }

    #[test]
    fn another_format_is_said() {
        let found = only(&EXAMPLE.replace("format = 1", "format = 2"), "value-out-of-range");
        assert!(found.message.what.contains("format 2"));
    }

    #[test]
    fn too_many_layers() {
        let layer = "[[layer]]\nfluid = \"water\"\nthickness = \"1 mm\"\n";
        let cell = "[cell]\ndiameter = \"100 mm\"\n";
        assert!(!rules(&format!("{cell}{}", layer.repeat(200))).contains(&"value-out-of-range"));
        assert!(rules(&format!("{cell}{}", layer.repeat(201))).contains(&"value-out-of-range"));
    }
}
