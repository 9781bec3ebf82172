//! Helpers that the integration tests share.

pub mod galerkin;
