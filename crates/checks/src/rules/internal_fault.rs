//! internal-fault
//!
//! A part of this tool stopped with a fault of its own.
//!
//! Why it matters: What that part would have checked is not judged; everything else is.
//!
//! What to do: Please report the setup file: it is not your mistake.

use super::context::found;
use setup::finding::Finding;

/// `part`: what stopped.
pub(super) fn finding(part: &str) -> Finding {
    found("internal-fault", "", 0..0, format!("The {part} stopped with an internal fault."), String::new())
}
