//! What a rule tells about itself. The text is the `//!` header of the rule's own file, so that the page shown by
//! `topheavy why` and the file that checks can never drift apart.

use crate::finding::Severity;

/// A rule: its name, its default severity and its page.
///
/// The header of the file has this form, paragraphs apart by an empty line:
///
/// ```text
/// //! name-of-the-rule
/// //!
/// //! The statement: what this setup has.
/// //!
/// //! Why it matters: …
/// //!
/// //! What to do: …
/// //!
/// //! (more paragraphs: source, criterion)
/// ```
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct RuleInfo {
    /// Kebab-case name of the defect.
    pub id: &'static str,
    /// Default severity.
    pub severity: Severity,
    source: &'static str,
}

const WHY: &str = "Why it matters:";
const REMEDY: &str = "What to do:";

impl RuleInfo {
    /// A rule from the text of its own file (`include_str!`).
    pub const fn new(id: &'static str, severity: Severity, source: &'static str) -> RuleInfo {
        RuleInfo { id, severity, source }
    }

    /// The whole page without comment marks: the first line is the name.
    pub fn doc(&self) -> String {
        self.source
            .lines()
            .map_while(|line| line.strip_prefix("//!"))
            .map(|line| line.strip_prefix(' ').unwrap_or(line).trim_end())
            .collect::<Vec<_>>()
            .join("\n")
    }

    /// What this setup has.
    pub fn statement(&self) -> String {
        self.paragraphs().into_iter().nth(1).unwrap_or_default()
    }

    /// Why it matters to the experiment.
    pub fn why(&self) -> String {
        self.marked(WHY)
    }

    /// What to do.
    pub fn remedy(&self) -> String {
        self.marked(REMEDY)
    }

    fn marked(&self, mark: &str) -> String {
        self.paragraphs()
            .iter()
            .find_map(|paragraph| paragraph.strip_prefix(mark))
            .map(|rest| rest.trim().to_owned())
            .unwrap_or_default()
    }

    fn paragraphs(&self) -> Vec<String> {
        self.doc()
            .split("\n\n")
            .map(|paragraph| paragraph.lines().map(str::trim).collect::<Vec<_>>().join(" "))
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const SOURCE: &str = "//! jar-empty\n//!\n//! A jar with nothing\n//! in it.\n//!\n//! Why it matters: Nothing can be held.\n//!\n//! What to do: Fill it.\n\nfn check() {}\n";

    #[test]
    fn header_is_read_by_paragraph() {
        let rule = RuleInfo::new("jar-empty", Severity::Error, SOURCE);
        assert_eq!(rule.statement(), "A jar with nothing in it.");
        assert_eq!(rule.why(), "Nothing can be held.");
        assert_eq!(rule.remedy(), "Fill it.");
        assert!(!rule.doc().contains("fn check"), "code is no part of the page");
    }
}
