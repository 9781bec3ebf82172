//! not-looked-at
//!
//! A section or key that is known, but from which this version computes nothing.
//!
//! Why it matters: What it describes is not judged: the verdict is incomplete, and nothing here speaks for or against it.
//!
//! What to do: Nothing in the file: it is kept, and its units are checked. Judge that part by other means.

use crate::finding::{Finding, Span};

/// What the check would need.
pub(crate) const NEEDS: &str = "a version of the tool that computes it";

/// `check`: what is not checked; `what`: the section or key as typed.
pub(crate) fn finding(check: &str, place: &str, span: Span, what: &str) -> Finding {
    let what = format!("{what} is read, but this version does not compute {check}.");
    super::found("not-looked-at", place, span, what, "")
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn a_section_is_said_once_and_its_units_are_checked() {
        let text = format!("{EXAMPLE}\n[[body]]\nname = \"boat\"\nmass = \"12 g\"\non = \"oil\"\n");
        assert_eq!(only(&text, "not-looked-at").place, "body.boat");
        let text = text.replace("12 g", "12 s");
        assert_eq!(rules(&text), ["not-looked-at", "unit-of-wrong-kind"]);
    }

    #[test]
    fn a_key_in_a_section_that_is_looked_at() {
        let text = EXAMPLE.replace("[cell]\n", "[cell]\nmass = \"1.2 kg\"\n");
        assert_eq!(only(&text, "not-looked-at").place, "cell.mass");
        assert_eq!(crate::understand(&text).setup.not_looked_at.len(), 1);
    }

    #[test]
    fn a_record_is_for_people() {
        silent(EXAMPLE);
    }
}
