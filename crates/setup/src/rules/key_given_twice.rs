//! key-given-twice
//!
//! The same key twice in one section, so that it is open which of the two values holds.
//!
//! Why it matters: Two people reading the file would run two experiments; until one is taken away neither is used.
//!
//! What to do: Keep the one that is meant and take the other away.

use crate::finding::{Finding, Related};
use crate::tree::Slip;

/// The finding of a repeated key.
pub(crate) fn finding(slip: &Slip, place: &str) -> Finding {
    let mut finding =
        super::found("key-given-twice", place, slip.span.clone(), super::sentence(&slip.message), "");
    if let Some(first) = &slip.related {
        finding.related.push(Related { span: first.clone(), message: "Given here first.".to_owned() });
    }
    if let Some((title, new_text)) = &slip.mend {
        finding =
            finding.with_fix(super::replace(title.clone(), true, slip.statement.clone(), new_text.clone()));
    }
    finding.with_fix(super::replace("Take the second one away", false, slip.statement.clone(), String::new()))
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_with_both_lines_and_mends() {
        let text = EXAMPLE.replace("length = \"120 mm\"", "length = \"120 mm\"\nlength = \"130 mm\"");
        let found = only(&text, "key-given-twice");
        assert_eq!(found.related.len(), 1, "the first one is shown");
        assert_eq!(found.place, "cell.length");
        assert!(crate::understand(&text).setup.cell.is_none(), "neither is used");
        mended(&text, "key-given-twice");
    }
}
