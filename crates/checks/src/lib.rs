//! From a resolved setup to findings: which physics runs (`derived`), one file a rule (`rules`), tried changes
//! (`changes`), and what an editor shows at a place (`hover`).
//!
//! A rule reads derived results and never calls a solver; only `derived` does, through the caches of [`Engine`].

mod analysis;
mod cache;
mod changes;
pub mod derived;
mod engine;
mod hover;
mod limits;
mod rules;
mod words;

pub use analysis::{Analysis, Verdict, analyse, read};
pub use cache::{Bounds, Usage};
pub use changes::{changes, offer};
pub use derived::Derived;
pub use engine::{Engine, SLABS};
pub use hover::{HoverText, hover};
pub use rules::{RULES, Rule, all_rules, why};
