//! One file per output. Everything here draws what others computed: values in, text out, no files and no physics.

pub mod chain;
pub mod check_json;
pub mod curve;
pub mod line;
pub mod number;
pub mod terminal;

/// One file that was checked, as every output needs it.
#[derive(Debug, Clone)]
pub struct Checked<'a> {
    /// As given by the person, `/` as separator; `-` for standard input.
    pub path: &'a str,
    /// Its text (empty when it could not be read).
    pub text: &'a str,
    /// What came of it.
    pub analysis: &'a checks::Analysis,
}
