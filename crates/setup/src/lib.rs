//! From the text of a setup file to resolved values: text → tree with spans → as written → resolved (SI).
//!
//! Reading never fails: each stage returns its value together with problems. Spans live here and in the findings
//! only; [`resolved::Setup`] holds none, so that two setups that mean the same are equal.

pub mod declare;
pub mod edit;
pub mod finding;
mod interrupt;
pub mod lines;
mod places;
mod reader;
mod resolve;
pub mod resolved;
pub mod rule;
mod rules;
pub mod tree;
mod written;

pub use declare::{declarations, hover_text, schema};
pub use places::{Places, Spot};
pub use reader::read;
pub use rules::RULES;
pub use rules::file_not_readable::{Cause, LARGEST_FILE, file_not_readable, text_of};

use finding::Finding;
use interrupt::Interrupt;

/// What came of reading one setup file.
#[derive(Debug, Clone, PartialEq)]
pub struct Understanding {
    /// The resolved setup.
    pub setup: resolved::Setup,
    /// What is wrong with the text, in the order of the text.
    pub findings: Vec<Finding>,
    /// Where each place stands.
    pub places: Places,
    /// The tree with its slips.
    pub reading: tree::Reading,
}

/// Reads a setup file, whatever it holds: text → tree → as written → resolved. Never fails; what is wrong is among
/// the findings.
pub fn understand(text: &str) -> Understanding {
    let wanted = Interrupt::never();
    let reading = reader::read_unless(text, &wanted);
    let document = written::walk(text, &reading, &wanted);
    resolved(text, reading, document)
}

/// The same, given up (`None`) soon after `cancel` says that it is no longer wanted: a statement is the most that is
/// read in between.
pub fn understand_unless(text: &str, cancel: &dyn Fn() -> bool) -> Option<Understanding> {
    let interrupt = Interrupt::by(cancel);
    let reading = reader::read_unless(text, &interrupt);
    let document = (!interrupt.is_due()).then(|| written::walk(text, &reading, &interrupt))?;
    (!interrupt.is_due()).then(|| resolved(text, reading, document))
}

fn resolved(text: &str, reading: tree::Reading, mut document: written::Document) -> Understanding {
    let (setup, found) = resolve::resolve(text, &document);
    let mut findings = std::mem::take(&mut document.findings);
    findings.extend(found);
    findings.sort_by_key(|finding| (finding.span.start, finding.span.end));
    Understanding { setup, findings, places: document.places, reading }
}
