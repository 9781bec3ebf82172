//! Sizes and pressures that turn out to disagree when the stack is built, under the name `values-disagree` of the reading
//! rules.

use super::Context;
use super::context::found;
use crate::derived::Trouble;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    // A slab that rests on vented gas: said by its own rule.
    let vented = super::cushion_vented::check(context);
    let troubles = context.outcome.troubles.iter();
    troubles
        .filter_map(|trouble| {
            let Trouble::SizesDisagree { place, other, what } = trouble else { return None };
            if vented.iter().any(|finding| finding.place == *place) {
                return None;
            }
            let mut finding =
                found("values-disagree", place, context.span(place), what.clone(), String::new());
            finding.related.push(context.related(other, "The other value.".to_owned()));
            Some(finding)
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn says_both_numbers() {
        let mut case = Case::new(13.0);
        case.silent("values-disagree");
        case.outcome.troubles.push(Trouble::SizesDisagree {
            place: "layer.cushion.filled-volume".to_owned(),
            other: "layer.cushion.thickness".to_owned(),
            what: "23.9 mm against 40.0 mm.".to_owned(),
        });
        let found = case.only("values-disagree");
        assert_eq!(found.place, "layer.cushion.filled-volume");
        assert_eq!(found.related.len(), 1);
    }
}
