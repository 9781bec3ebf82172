//! value-missing
//!
//! A value that the computation needs is not there.
//!
//! Why it matters: Everything that depends on it cannot be judged; the rest is.
//!
//! What to do: Write it where the finding stands.

use crate::finding::{Finding, Span};

/// `what`: a full sentence; `remedy`: what to write, with an example.
pub(crate) fn finding(place: &str, header: Span, what: &str, remedy: &str) -> Finding {
    super::found("value-missing", place, header, what.to_owned(), remedy)
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn each_needed_value_is_said_once_at_its_place() {
        for (line, place) in [
            ("thickness = \"20 mm\"\n", "layer.oil.thickness"),
            ("grade = \"1000 mm²/s\"\n", "layer.oil.grade"),
            ("frequency = \"50 Hz\"\n", "drive.frequency"),
            ("acceleration = \"14 g0 peak\"\n", "drive.acceleration"),
            ("width = \"30 mm\"\n", "cell.width"),
            ("reason = \"held like this before\"\n", "accept.0.reason"),
        ] {
            assert!(EXAMPLE.contains(line), "{line}");
            let found = only(&EXAMPLE.replacen(line, "", 1), "value-missing");
            assert_eq!(found.place, place);
        }
    }

    #[test]
    fn an_empty_file_asks_for_cell_and_layers() {
        let places: Vec<String> =
            crate::understand("").findings.into_iter().map(|found| found.place).collect();
        assert_eq!(places, ["cell", "layer"]);
    }
}
