//! tolerance-meaning-unsaid
//!
//! A tolerance is written, but the file does not say what ± means.
//!
//! Why it matters: A limit, a standard uncertainty and an expanded one differ by up to a factor 2 in the chance that everything holds.
//!
//! What to do: Say once a file: `[tolerances] meaning = "standard"`, `"limits"` or `"k=2"`. Until then `standard` is assumed.

use crate::finding::{Edit, Finding, Fix, Span};
use crate::written::{Document, quoted};

const MEANINGS: [(&str, &str); 3] = [
    ("standard", "± is one standard uncertainty"),
    ("limits", "the value lies between the limits"),
    ("k=2", "± is an expanded uncertainty, k = 2"),
];

/// `place`, `span`: of the first tolerance.
pub(crate) fn finding(text: &str, document: &Document, place: &str, span: Span) -> Finding {
    let what = format!("`{place}` carries a tolerance, and what ± means is not said.");
    let finding = super::found("tolerance-meaning-unsaid", place, span, what, "");
    let header = document.section("tolerances").map(|section| section.header.clone());
    let at = match &header {
        Some(header) => {
            text.get(header.end..).and_then(|rest| rest.find('\n')).map(|line| header.end + line + 1)
        }
        None => Some(text.len()),
    };
    let inline =
        header.as_ref().is_some_and(|header| !text.get(header.clone()).unwrap_or_default().starts_with('['));
    let Some(at) = at.filter(|_| !inline) else { return finding };
    finding.with_fixes(MEANINGS.map(|(word, said)| {
        let newline = crate::written::newline(text);
        let line = format!("meaning = {}{newline}", quoted(word));
        let new_text = match header {
            Some(_) => line,
            None if text.ends_with('\n') => format!("{newline}[tolerances]{newline}{line}"),
            None => format!("{newline}{newline}[tolerances]{newline}{line}"),
        };
        Fix {
            title: format!("Say '{word}': {said}"),
            keeps_meaning: false,
            edits: vec![Edit { span: at..at, new_text }],
        }
    }))
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_with_one_fix_per_meaning_only_when_a_tolerance_is_written() {
        let text = EXAMPLE.replacen("thickness = \"20 mm\"", "thickness = \"20 ± 0.5 mm\"", 1);
        let text = text.replace("[tolerances]\nmeaning = \"limits\"\n", "");
        let found = first(&text, "tolerance-meaning-unsaid");
        assert_eq!(found.fixes.len(), 3);
        mended(&text, "tolerance-meaning-unsaid");
        let setup = crate::understand(&text).setup;
        assert_eq!(
            setup.not_looked_at.len(),
            1,
            "tolerances are not carried through yet: {:?}",
            setup.not_looked_at
        );
        silent(&EXAMPLE.replace("[tolerances]\nmeaning = \"limits\"\n", ""));
    }
}
