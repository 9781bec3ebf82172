//! Figures that turn out to be missing when the stack is built, under the name `value-missing` of the reading
//! rules, unless those have said so already.

use super::Context;
use super::context::found;
use crate::derived::Trouble;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let troubles = context.outcome.troubles.iter();
    troubles
        .filter_map(|trouble| {
            let Trouble::FigureMissing { place, figure } = trouble else { return None };
            if context.said.iter().any(|finding| finding.rule == "value-missing" && finding.place == *place) {
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
    }
}
