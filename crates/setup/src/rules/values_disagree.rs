//! values-disagree
//!
//! Two values that cannot both hold.
//!
//! Why it matters: Which of the two is meant is open, and they are two different experiments.
//!
//! What to do: Correct the one that is wrong, or take it away.
//!
//! Two ways of giving one thing (thickness and volume, acceleration and displacement) agree when they differ by no more than their tolerances and 1 %, which is judgement: rounding to three figures.

use crate::finding::{Finding, Related, Span};
use crate::rules::found;

/// Relative difference that rounding explains.
pub(crate) const ROUNDING: f64 = 0.01;

/// `what`: a full sentence with both numbers; `other`: where the other value stands.
pub(crate) fn finding(place: &str, span: Span, what: String, other: Option<Span>) -> Finding {
    let mut finding = found("values-disagree", place, span, what, "");
    finding.related.extend(other.map(|span| Related { span, message: "The other value.".to_owned() }));
    finding
}

/// A table whose rows contradict each other.
pub(crate) fn table(place: &str, span: Span, what: String) -> Finding {
    found("values-disagree", place, span, what, "Keep one value for each temperature, all of one kind.")
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn thickness_against_volume() {
        // 120 mm × 30 mm × 20 mm = 72 mL
        let with = |volume: &str| {
            EXAMPLE.replacen(
                "thickness = \"20 mm\"",
                &format!("thickness = \"20 mm\"\nvolume = \"{volume}\""),
                1,
            )
        };
        silent(&with("72.0 mL"));
        silent(&with("72.7 mL"));
        assert_eq!(only(&with("72.8 mL"), "values-disagree").place, "layer.oil.volume");
        silent(&with("75 ± 4 mL"));
    }

    #[test]
    fn a_circular_cell_with_a_length() {
        let text = EXAMPLE.replace("shape = \"rectangular\"", "shape = \"circular\"\ndiameter = \"100 mm\"");
        let text = text.replace("width = \"30 mm\"\n", "");
        assert_eq!(only(&text, "values-disagree").place, "cell.length");
    }

    #[test]
    fn acceleration_against_displacement() {
        // 14 g0 at 50 Hz: 137.2931/(100π)² = 1.39108 mm peak
        let with = |displacement: &str| {
            EXAMPLE.replace("\"14 g0 peak\"", &format!("\"14 g0 peak\"\ndisplacement = \"{displacement}\""))
        };
        silent(&with("1.391 mm peak"));
        silent(&with("2.78 mm peak-to-peak"));
        assert_eq!(only(&with("1.6 mm peak"), "values-disagree").place, "drive.displacement");
    }

    #[test]
    fn gas_keys_in_a_liquid() {
        let text = EXAMPLE.replace("name = \"oil\"\n", "name = \"oil\"\nvented = true\n");
        assert_eq!(only(&text, "values-disagree").place, "layer.oil.vented");
    }
}
