//! The reading rules: one file each, whose header is its page. Each gives a finding from what a stage met; none
//! reads the text again.

pub(crate) mod amplitude_kind_unsaid;
pub mod file_not_readable;
pub(crate) mod key_given_twice;
pub(crate) mod key_not_known;
pub(crate) mod key_under_wrong_heading;
pub(crate) mod line_unreadable;
pub(crate) mod name_given_twice;
pub(crate) mod name_not_found;
pub(crate) mod not_looked_at;
pub(crate) mod open_value_unsolved;
pub(crate) mod path_leaves_root;
pub(crate) mod peak_rms_slip;
pub(crate) mod pressure_reference_unsaid;
pub(crate) mod tolerance_meaning_unsaid;
pub(crate) mod unit_missing;
pub(crate) mod unit_not_known;
pub(crate) mod unit_of_wrong_kind;
pub(crate) mod value_missing;
pub(crate) mod value_of_wrong_type;
pub(crate) mod value_out_of_range;
pub(crate) mod values_disagree;

#[cfg(test)]
pub(crate) mod testing;

use crate::declare::Key;
use crate::finding::{Edit, Finding, Fix, Message, Severity, Span};
use crate::rule::RuleInfo;
use crate::tree::{Slip, SlipKind};
use crate::written::quoted;
use quantity::Refusal;

/// Every reading rule, in the order of the guide.
pub const RULES: &[RuleInfo] = &[
    RuleInfo::new("line-unreadable", Severity::Error, include_str!("line_unreadable.rs")),
    RuleInfo::new("key-not-known", Severity::Error, include_str!("key_not_known.rs")),
    RuleInfo::new("key-under-wrong-heading", Severity::Error, include_str!("key_under_wrong_heading.rs")),
    RuleInfo::new("key-given-twice", Severity::Error, include_str!("key_given_twice.rs")),
    RuleInfo::new("name-given-twice", Severity::Error, include_str!("name_given_twice.rs")),
    RuleInfo::new("name-not-found", Severity::Error, include_str!("name_not_found.rs")),
    RuleInfo::new("value-missing", Severity::Error, include_str!("value_missing.rs")),
    RuleInfo::new("value-of-wrong-type", Severity::Error, include_str!("value_of_wrong_type.rs")),
    RuleInfo::new("unit-missing", Severity::Error, include_str!("unit_missing.rs")),
    RuleInfo::new("unit-not-known", Severity::Error, include_str!("unit_not_known.rs")),
    RuleInfo::new("unit-of-wrong-kind", Severity::Error, include_str!("unit_of_wrong_kind.rs")),
    RuleInfo::new("amplitude-kind-unsaid", Severity::Error, include_str!("amplitude_kind_unsaid.rs")),
    RuleInfo::new("pressure-reference-unsaid", Severity::Error, include_str!("pressure_reference_unsaid.rs")),
    RuleInfo::new("value-out-of-range", Severity::Error, include_str!("value_out_of_range.rs")),
    RuleInfo::new("values-disagree", Severity::Error, include_str!("values_disagree.rs")),
    RuleInfo::new("peak-rms-slip", Severity::Error, include_str!("peak_rms_slip.rs")),
    RuleInfo::new(
        "tolerance-meaning-unsaid",
        Severity::Information,
        include_str!("tolerance_meaning_unsaid.rs"),
    ),
    RuleInfo::new("file-not-readable", Severity::Error, include_str!("file_not_readable.rs")),
    RuleInfo::new("path-leaves-root", Severity::Error, include_str!("path_leaves_root.rs")),
    RuleInfo::new("open-value-unsolved", Severity::Error, include_str!("open_value_unsolved.rs")),
    RuleInfo::new("not-looked-at", Severity::Information, include_str!("not_looked_at.rs")),
];

/// A finding of a rule of this list, with the rule's own severity and, where the message says no other, its own
/// reason and remedy.
pub(crate) fn found(rule: &'static str, place: &str, span: Span, what: String, remedy: &str) -> Finding {
    let info = RULES.iter().find(|info| info.id == rule);
    let why = info.map(RuleInfo::why).unwrap_or_default();
    let remedy =
        if remedy.is_empty() { info.map(RuleInfo::remedy).unwrap_or_default() } else { remedy.to_owned() };
    Finding {
        rule,
        severity: info.map_or(Severity::Error, |info| info.severity),
        place: place.to_owned(),
        span,
        message: Message { what, why, remedy },
        values: Vec::new(),
        related: Vec::new(),
        fixes: Vec::new(),
        fixable: false,
        accepted: false,
    }
}

impl Finding {
    pub(crate) fn with_fix(mut self, fix: Fix) -> Finding {
        self.fixes.push(fix);
        self.fixable = true;
        self
    }

    pub(crate) fn with_fixes(self, fixes: impl IntoIterator<Item = Fix>) -> Finding {
        fixes.into_iter().fold(self, Finding::with_fix)
    }
}

/// A fix that replaces one stretch of text.
pub(crate) fn replace(title: impl Into<String>, keeps_meaning: bool, span: Span, new_text: String) -> Fix {
    Fix { title: title.into(), keeps_meaning, edits: vec![Edit { span, new_text }] }
}

/// The finding of a broken statement; `place`: of the value that it took away, as far as it can be told.
pub(crate) fn slip(text: &str, slip: &Slip, place: &str) -> Finding {
    match slip.kind {
        SlipKind::GivenTwice => key_given_twice::finding(slip, place),
        SlipKind::Unreadable | SlipKind::TableUnknown => line_unreadable::finding(text, slip, place),
    }
}

/// The finding of a quantity that was refused. `at`: what is wrong; `value`: the whole value, which mends replace.
pub(crate) fn refused(key: &Key, place: &str, at: Span, value: Span, refusal: &Refusal) -> Finding {
    let name = refusal.reason.rule();
    let rule = RULES.iter().map(|info| info.id).find(|id| *id == name).unwrap_or("value-of-wrong-type");
    let what = format!("`{}`: {}", key.name, sentence(&refusal.message));
    let fixes = refusal
        .mends
        .iter()
        .map(|mend| replace(mend.title.clone(), mend.keeps_meaning, value.clone(), quoted(&mend.text)));
    let remedy = if refusal.mends.is_empty() {
        format!("Write for example `{} = {}`.", key.name, key.example)
    } else {
        String::new()
    };
    found(rule, place, at, what, &remedy).with_fixes(fixes)
}

fn sentence(text: &str) -> String {
    let text = text.trim();
    if text.ends_with(['.', '!', '?']) { text.to_owned() } else { format!("{text}.") }
}

/// With a capital letter at the start.
pub(crate) fn capitalised(text: &str) -> String {
    let mut characters = text.chars();
    match characters.next() {
        Some(first) => first.to_uppercase().chain(characters).collect(),
        None => String::new(),
    }
}

/// 'a', 'a or b', 'a, b or c', each as code.
pub(crate) fn listed(names: &[&str]) -> String {
    match names {
        [] => String::new(),
        [only] => format!("`{only}`"),
        [first @ .., last] => {
            let first: Vec<String> = first.iter().map(|name| format!("`{name}`")).collect();
            format!("{} or `{last}`", first.join(", "))
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_rule_tells_what_why_and_what_to_do() {
        for rule in RULES {
            assert_eq!(rule.doc().lines().next(), Some(rule.id));
            for part in [rule.statement(), rule.why(), rule.remedy()] {
                assert!(part.len() > 20, "{}: {part:?}", rule.id);
                assert!(!part.to_lowercase().contains("safe"), "{}", rule.id);
            }
        }
    }
}
