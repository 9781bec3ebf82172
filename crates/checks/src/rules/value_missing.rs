//! Figures that turn out to be missing when the stack is built, under the name `value-missing` of the reading
//! rules, unless those have said so already or have refused what stands there: one cause, one finding.

use super::Context;
use super::context::found;
use crate::derived::Trouble;
use setup::finding::{Finding, Severity};
use std::collections::HashSet;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let troubles = context.outcome.troubles.iter();
    // Each figure that needs the missing one tells of it.
    let mut told = HashSet::new();
    troubles
        .filter_map(|trouble| {
            let Trouble::FigureMissing { place, figure } = trouble else { return None };
            let is_said = |finding: &Finding| finding.severity == Severity::Error && finding.place == *place;
            if context.said.iter().any(is_said) || !told.insert(place) {
                return None;
            }
            let what = format!("`{figure}` is not given, and the computation needs it.");
            Some(found("value-missing", place, context.span(place), what, String::new()))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn fires_at_the_place_where_it_would_stand() {
        let mut case = Case::new(13.0);
        case.silent("value-missing");
        let place = "fluid.brew.density".to_owned();
        case.outcome.troubles.push(Trouble::FigureMissing { place: place.clone(), figure: "density" });
        assert_eq!(case.only("value-missing").place, place);
        case.outcome.troubles.push(Trouble::FigureMissing { place: place.clone(), figure: "density" });
        assert_eq!(case.only("value-missing").place, place, "once, however many figures need it");
    }
}
