//! What the physics does not look at although the file asks for it, under the name `not-looked-at` of the reading
//! rules. Sections and keys that this version only reads are said by those rules themselves.

use super::Context;
use super::context::found;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let entries = context.derived().not_looked_at.iter();
    entries
        .filter(|entry| !context.setup.not_looked_at.contains(entry))
        .map(|entry| {
            let what = format!("Not judged: {} (it would need {}).", entry.check, entry.needs);
            found("not-looked-at", &entry.place, context.span(&entry.place), what, String::new())
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;
    use setup::resolved::NotLookedAt;

    #[test]
    fn says_only_what_reading_has_not_said() {
        let mut case = Case::new(13.0);
        let entry = NotLookedAt {
            check: "waves with a pinned contact line".to_owned(),
            needs: "modes of a held line".to_owned(),
            place: "cell.contact-line".to_owned(),
        };
        case.outcome.derived.not_looked_at = vec![entry.clone()];
        assert_eq!(case.only("not-looked-at").place, "cell.contact-line");
        case.setup.not_looked_at = vec![entry];
        case.silent("not-looked-at");
    }
}
