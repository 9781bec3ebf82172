//! not-converged
//!
//! A computation gave no answer.
//!
//! Why it matters: What it would have told is not known; the verdict is incomplete and nothing here speaks for or against that part.
//!
//! What to do: Look for an extreme value in the layers named; if every value is as it should be, please report the setup.
//!
//! The numbers of the failure stand in the message. A value that did not converge is never shown as a result.

use super::Context;
use super::context::found;
use crate::derived::Trouble;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let troubles = context.outcome.troubles.iter();
    troubles
        .filter_map(|trouble| match trouble {
            Trouble::NotConverged { place, detail } => Some((place, "The stability of the slab", detail)),
            Trouble::NoResponse { place, detail } => {
                Some((place, "The vertical response of the stack", detail))
            }
            _ => None,
        })
        .map(|(place, subject, detail)| {
            let what = format!("{subject} could not be computed: {detail}.");
            found("not-converged", place, context.span(place), what, String::new())
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn fires_with_the_numbers_of_the_failure() {
        let mut case = Case::new(13.0).unjudged("oil");
        case.silent("not-converged");
        let failure = physics::stability::Failure::CountUnsure {
            wavenumber: 62.83,
            acceleration: 220.0,
            turns: 1.49,
            evaluations: 4096,
        };
        case.outcome
            .troubles
            .push(Trouble::NotConverged { place: "layer.oil".to_owned(), detail: failure.to_string() });
        let found = case.only("not-converged");
        assert_eq!(found.place, "layer.oil");
        assert!(found.message.what.contains("1.490 after 4096"));
    }
}
