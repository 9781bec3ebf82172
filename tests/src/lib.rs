//! Helpers that the integration tests share.

pub mod dialogue;
pub mod draw;
pub mod galerkin;
pub mod onset;
pub mod pistons;
pub mod questions;
pub mod references;
pub mod runge_kutta;
pub mod sample;
pub mod stacks;
pub mod textbook;
pub mod tongues;
