//! The program end to end: what is typed, what comes out, and the exit code.

mod exit_codes;
mod hostile;
mod json;
mod json_positions;
mod lines;
mod program;
mod slab_questions;
