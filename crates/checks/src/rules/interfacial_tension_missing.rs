//! interfacial-tension-missing
//!
//! Two different liquids touch, and the file does not say with what interfacial tension.
//!
//! Why it matters: The tension decides which waves the interface carries, and for a pair of liquids it cannot be had from the two surface tensions; it is never invented here, so the stack is not judged.
//!
//! What to do: Measure it or look it up for this very pair, and write an `[[interface]]` with `between` and `tension`.
//!
//! Silent between gas and liquid (the liquid's surface tension holds) and between layers of one liquid.

use super::Context;
use super::context::found;
use crate::derived::{Face, Trouble};
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let troubles = context.outcome.troubles.iter();
    troubles
        .filter_map(|trouble| {
            let Trouble::TensionMissing { above, below } = trouble else { return None };
            let face = Face { above: Some(above.clone()), below: Some(below.clone()), heavier_above: false };
            let what =
                format!("\"{above}\" and \"{below}\" touch, and their interfacial tension is not given.");
            let remedy = format!(
                "Measure it or look it up for this pair, and write `[[interface]]` with \
                 `between = [\"{above}\", \"{below}\"]` and `tension`."
            );
            Some(found("interfacial-tension-missing", &face.place(), context.face_span(&face), what, remedy))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn names_the_pair() {
        let mut case = Case::new(13.0);
        case.silent("interfacial-tension-missing");
        case.outcome
            .troubles
            .push(Trouble::TensionMissing { above: "oil".to_owned(), below: "water".to_owned() });
        let found = case.only("interfacial-tension-missing");
        assert_eq!(found.place, "interface.oil|water");
        assert!(found.message.remedy.contains("between = [\"oil\", \"water\"]"));
    }
}
