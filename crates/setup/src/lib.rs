//! From the text of a setup file to resolved values: text → tree with spans → as written → resolved (SI).
//!
//! Reading never fails: each stage returns its value together with problems. Spans live here and in the findings
//! only; [`resolved::Setup`] holds none, so that two setups that mean the same are equal.

pub mod declare;
pub mod finding;
pub mod resolved;
pub mod rule;
pub mod tree;

pub use declare::{declarations, hover_text, schema};
