//! Values with their unit, tolerance and amplitude kind: parse, print, convert; and the vocabulary that the
//! setup file and the physics share.
//!
//! Nothing here knows of files, spans in a file, or physics: a quantity is read from one piece of text and
//! problems carry byte ranges *inside that text*.

mod comma;
mod explain;
mod kind;
mod measure;
mod near;
mod number;
mod parse;
mod print;
mod refusal;
mod several;
mod tolerance;
mod unit;
pub mod vocabulary;
mod words;

pub use kind::{Amplitude, Kind, PressureReference, si_unit, units};
pub use parse::{Quantity, parse};
pub use print::{print, print_amplitude, significant};
pub use refusal::{Reason, Refusal, TextMend};
pub use several::{OpenValue, parse_list, parse_open, parse_range};
pub use tolerance::Tolerance;
