//! material-outside-range
//!
//! A figure of a fluid is needed where its source does not hold.
//!
//! Why it matters: Nothing that depends on it is computed: an extrapolated viscosity may be wrong by a factor, and with it every wave limit.
//!
//! What to do: Correct the temperature or composition, or give the layer its own figure from a data sheet or a measurement.
//!
//! Criterion: outside the stated range of the correlation (each with its source), outside a table, or, for a single figure of an own fluid with `at`, further than 2 K from it for a viscosity (about 4 % for a silicone oil, 15 % for glycerol) and 10 K for anything else (judgement).

use super::Context;
use super::context::found;
use crate::derived::Trouble;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let mut findings: Vec<Finding> = Vec::new();
    for trouble in &context.outcome.troubles {
        let Trouble::OutsideRange { place, figure, detail } = trouble else { continue };
        // Density, viscosity and tension of one layer out of range for one reason: one finding.
        if findings.iter().any(|finding| finding.place == *place) {
            continue;
        }
        let what = format!("The {} is not known here: {detail}.", figure.replace('-', " "));
        findings.push(found("material-outside-range", place, context.span(place), what, String::new()));
    }
    findings
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn one_finding_a_place() {
        let mut case = Case::new(13.0);
        case.silent("material-outside-range");
        for figure in ["density", "viscosity"] {
            let (place, detail) =
                ("layer.oil".to_owned(), "the table runs from 20.0 °C to 25.0 °C".to_owned());
            case.outcome.troubles.push(Trouble::OutsideRange { place, figure, detail });
        }
        let found = case.only("material-outside-range");
        assert_eq!(found.place, "layer.oil");
        assert!(found.message.what.contains("density") && found.message.what.contains("25.0 °C"));
    }
}
