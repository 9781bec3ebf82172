//! One declaration per key: what it holds, its range, whether it is needed or what its default is and where that
//! comes from, what it means, and the words that people type for it. The reader, the hover text, the JSON Schema
//! and the guide all come from here.

mod hover;
mod key;
mod kinds;
pub(crate) mod nearest;
pub mod ranges;
mod schema;
mod sections;

pub use hover::{Hover, declared, hover_text};
pub(crate) use hover::{holds_said, referred};

pub use key::{Attention, Bounds, Form, Holds, Key, NameOf, Need, Section, Word};
pub use schema::schema;

/// Every section of the setup file with its keys, in the order of the guide.
pub fn declarations() -> &'static [&'static Section] {
    sections::ALL
}

/// The section of a path such as `cell` or `cell.base`; the empty path is the top level.
pub fn section(path: &str) -> Option<&'static Section> {
    declarations().iter().copied().find(|section| section.path == path)
}

/// The range of what a key holds, where it has one.
pub fn bounds(holds: &Holds) -> Option<&Bounds> {
    match holds {
        Holds::Quantity(_, bounds)
        | Holds::Figure(_, bounds)
        | Holds::Range(_, bounds)
        | Holds::Quantities(_, bounds)
        | Holds::QuantityOrWord(_, bounds, _)
        | Holds::QuantityOrTable(_, bounds, _) => Some(bounds),
        _ => None,
    }
}

/// The kind of quantity of what a key holds, where it is one.
pub fn kind(holds: &Holds) -> Option<quantity::Kind> {
    match holds {
        Holds::Quantity(kind, _)
        | Holds::Figure(kind, _)
        | Holds::Range(kind, _)
        | Holds::Quantities(kind, _)
        | Holds::QuantityOrWord(kind, _, _)
        | Holds::QuantityOrTable(kind, _, _) => Some(*kind),
        _ => None,
    }
}
