//! Helpers that the integration tests share.

pub mod dialogue;
pub mod draw;
pub mod galerkin;
pub mod onset;
pub mod questions;
pub mod references;
pub mod stacks;
pub mod tongues;
