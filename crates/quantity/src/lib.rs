//! Values with their unit, tolerance and amplitude kind: parse, print, convert; and the vocabulary that the
//! setup file and the physics share.
//!
//! Nothing here knows of files, spans in a file, or physics: a quantity is read from one piece of text and
//! problems carry byte ranges *inside that text*.

mod kind;
mod number;
mod parse;
mod print;
mod refusal;
mod unit;
pub mod vocabulary;

pub use kind::{Amplitude, Kind, PressureReference, si_unit, units};
pub use parse::{OpenValue, Quantity, Tolerance, parse, parse_list, parse_open, parse_range};
pub use print::{print, print_amplitude, significant};
pub use refusal::{Reason, Refusal, TextMend};
