//! From a resolved setup to findings: which physics runs (`derived`), one file a rule (`rules`), tried changes
//! (`changes`), and what an editor shows at a place (`hover`).
//!
//! A rule reads derived results and never calls a solver; only `derived` does, through the caches of [`Engine`].

pub mod derived;

pub use derived::Derived;
