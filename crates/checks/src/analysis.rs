//! The whole check of one text.

use crate::derived::Derived;
use setup::finding::Finding;
use std::sync::Arc;

/// What came out.
#[derive(Debug, Clone)]
pub struct Analysis {
    /// Sorted by place in the text, then by severity (errors first).
    pub findings: Vec<Finding>,
    /// In one word.
    pub verdict: Verdict,
    /// What was read.
    pub understanding: setup::Understanding,
    /// What was computed; `None` when the text could not be read at all or the work was cancelled.
    pub derived: Option<Arc<Derived>>,
}

/// The check in one word.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Verdict {
    /// Everything that was looked at holds.
    Holds,
    /// An error exists, accepted or not.
    Fails,
    /// No error, but a check could not run or converge, a value is open, or a switched-off effect matters.
    Incomplete,
    /// Nothing of the text could be read.
    Unreadable,
}

impl Verdict {
    /// The word of the JSON output.
    pub fn word(self) -> &'static str {
        match self {
            Verdict::Holds => "holds",
            Verdict::Fails => "fails",
            Verdict::Incomplete => "incomplete",
            Verdict::Unreadable => "unreadable",
        }
    }
}
