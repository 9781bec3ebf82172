//! What the tests of the rules share.

use crate::finding::{Edit, Finding};
use crate::understand;

/// Uses every key that is looked at, and reads without a finding.
pub(crate) const EXAMPLE: &str = include_str!("../../tests/examples/levitated.stack.toml");

/// The rules that fire, in the order of the text.
pub(crate) fn rules(text: &str) -> Vec<&'static str> {
    understand(text).findings.iter().map(|finding| finding.rule).collect()
}

/// The first finding of a rule.
pub(crate) fn first(text: &str, rule: &str) -> Finding {
    let findings = understand(text).findings;
    let found = findings.iter().find(|finding| finding.rule == rule);
    found.cloned().unwrap_or_else(|| panic!("{rule} does not fire; these do: {findings:#?}\n{text}"))
}

/// The finding of a rule, which is the only one.
pub(crate) fn only(text: &str, rule: &str) -> Finding {
    let findings = understand(text).findings;
    assert!(
        findings.len() == 1 && findings[0].rule == rule,
        "{rule} alone should fire: {findings:#?}\n{text}"
    );
    let finding = findings[0].clone();
    assert!(!finding.message.what.is_empty() && !finding.message.why.is_empty(), "{finding:#?}");
    assert!(!finding.message.text().to_lowercase().contains("safe"), "{finding:#?}");
    finding
}

/// Nothing fires.
pub(crate) fn silent(text: &str) {
    let findings: Vec<Finding> =
        understand(text).findings.into_iter().filter(|finding| finding.rule != "not-looked-at").collect();
    assert!(findings.is_empty(), "{findings:#?}\n{text}");
}

/// The text after edits.
pub(crate) fn applied(text: &str, edits: &[Edit]) -> String {
    let mut out = text.to_owned();
    for edit in edits.iter().rev() {
        out.replace_range(edit.span.clone(), &edit.new_text);
    }
    out
}

/// Applies every fix of the first finding of a rule: each must clear it and add none. Gives the text after the
/// first fix.
pub(crate) fn mended(text: &str, rule: &str) -> String {
    let finding = first(text, rule);
    assert!(!finding.fixes.is_empty(), "{rule} has no fix: {finding:#?}");
    let before = rules(text);
    for fix in &finding.fixes {
        let after = applied(text, &fix.edits);
        let mut expected = before.clone();
        expected.remove(expected.iter().position(|fired| *fired == rule).expect("it fires"));
        // A unit that is chosen may be out of range; that is the reader's to see.
        let now: Vec<_> = rules(&after).into_iter().filter(|fired| *fired != "value-out-of-range").collect();
        assert_eq!(now, expected, "{}: {:#?}\n{after}", fix.title, understand(&after).findings);
    }
    applied(text, &finding.fixes[0].edits)
}

/// [`mended`], for findings whose fixes depend on what the quantity reader offers.
pub(crate) fn mended_if_fixable(text: &str, rule: &str) {
    if !first(text, rule).fixes.is_empty() {
        mended(text, rule);
    }
}
