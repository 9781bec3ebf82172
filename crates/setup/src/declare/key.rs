//! The types of a declaration.

use quantity::Kind;

/// A section: the top level, `[cell]`, `[fluid.NAME]` or `[[layer]]`, with its keys.
#[derive(Debug, PartialEq)]
pub struct Section {
    /// `cell`, `cell.base`; empty for the top level.
    pub path: &'static str,
    /// How it is written.
    pub form: Form,
    /// What it holds, in a sentence or two.
    pub doc: &'static str,
    /// Words that people type for it.
    pub words: &'static [&'static str],
    /// Whether this version looks at it.
    pub attention: Attention,
    /// Its keys in the order of the guide.
    pub keys: &'static [Key],
    /// `true` when keys of other sections may stand in it unchecked (`[measured]`).
    pub free: bool,
}

/// How a section is written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Form {
    /// The top level.
    Root,
    /// `[cell]`
    Single,
    /// `[fluid.NAME]`
    Named,
    /// `[[layer]]`
    Repeated,
}

/// Whether this version looks at something.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Attention {
    /// It is computed with.
    Looked,
    /// It is for people and shown in the report.
    People,
    /// It is read and its unit is checked, but nothing is computed from it. Holds what is therefore not checked.
    NotLooked(&'static str),
}

/// A key of a section.
#[derive(Debug, PartialEq)]
pub struct Key {
    /// As typed.
    pub name: &'static str,
    /// What it holds.
    pub holds: Holds,
    /// Needed, has a default, or may be left out.
    pub need: Need,
    /// What it means, in a sentence or two.
    pub doc: &'static str,
    /// Words that people type for it.
    pub words: &'static [&'static str],
    /// A value as a person would write it (TOML).
    pub example: &'static str,
    /// Whether this version looks at it.
    pub attention: Attention,
}

/// What a key holds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Holds {
    /// A quantity with its unit.
    Quantity(Kind, Bounds),
    /// A quantity or a table of it against temperature.
    Figure(Kind, Bounds),
    /// `"5 Hz to 4 kHz"`
    Range(Kind, Bounds),
    /// One quantity, or several in an array.
    Quantities(Kind, Bounds),
    /// A quantity or one of a few words.
    QuantityOrWord(Kind, Bounds, &'static [Word]),
    /// A quantity, or an inline table that says more of it.
    QuantityOrTable(Kind, Bounds, &'static [Key]),
    /// One of a few words.
    Word(&'static [Word]),
    /// Free text.
    Text,
    /// An array of texts.
    Texts,
    /// A name: one line, without `.` `[` `]` `|`.
    Name,
    /// The name of something else in the file.
    Reference(NameOf),
    /// Two layer names.
    LayerPair,
    /// A whole number.
    Integer(i64, i64),
    /// `true` or `false`
    Boolean,
    /// A TOML date.
    Date,
    /// An inline table (or a table under its own header) with these keys.
    Table(&'static [Key]),
    /// An array of such tables.
    Tables(&'static [Key]),
    /// Read later: any value.
    Anything,
}

/// What a name leads to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum NameOf {
    /// A layer.
    Layer,
    /// A built-in fluid or a `[fluid.NAME]`.
    Fluid,
    /// A `[[body]]`
    Body,
    /// A `[table.NAME]`
    VibrationTable,
    /// A `[camera.NAME]`
    Camera,
    /// A `[[stage]]`
    Stage,
    /// Something in a library file.
    Library,
}

/// Whether a key has to be written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Need {
    /// Without it the setup cannot be judged.
    Needed,
    /// Needed in some cases, which the doc sentence names.
    Sometimes,
    /// When left out, this value holds.
    Default {
        /// As a person would write it.
        value: &'static str,
        /// Where it comes from.
        source: &'static str,
    },
    /// May be left out.
    Optional,
}

/// One of a few words.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Word {
    /// As typed.
    pub word: &'static str,
    /// What it means.
    pub doc: &'static str,
}

/// The range a value must lie in: SI, amplitudes peak, pressures absolute.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bounds {
    /// Lower end.
    pub least: f64,
    /// Upper end.
    pub most: f64,
    /// `true`: the lower end itself is allowed.
    pub least_allowed: bool,
    /// The range as a person would say it.
    pub said: &'static str,
    /// Why not outside.
    pub why: &'static str,
}

impl Bounds {
    /// Both ends allowed.
    pub const fn from(least: f64, most: f64, said: &'static str, why: &'static str) -> Bounds {
        Bounds { least, most, least_allowed: true, said, why }
    }

    /// The lower end is not allowed.
    pub const fn above(least: f64, most: f64, said: &'static str, why: &'static str) -> Bounds {
        Bounds { least, most, least_allowed: false, said, why }
    }

    /// Whether a value lies in the range; never true for what is not a number.
    pub fn hold(&self, value: f64) -> bool {
        let above = if self.least_allowed { value >= self.least } else { value > self.least };
        above && value <= self.most
    }
}

impl Key {
    /// A key that may be left out and that this version looks at.
    pub const fn new(name: &'static str, holds: Holds, example: &'static str, doc: &'static str) -> Key {
        Key { name, holds, need: Need::Optional, doc, words: &[], example, attention: Attention::Looked }
    }

    /// With the words that people type for it.
    pub const fn words(self, words: &'static [&'static str]) -> Key {
        Key { words, ..self }
    }

    /// It has to be written.
    pub const fn needed(self) -> Key {
        Key { need: Need::Needed, ..self }
    }

    /// It has to be written in some cases.
    pub const fn sometimes(self) -> Key {
        Key { need: Need::Sometimes, ..self }
    }

    /// With the value that holds when it is left out, and its source.
    pub const fn default(self, value: &'static str, source: &'static str) -> Key {
        Key { need: Need::Default { value, source }, ..self }
    }

    /// For people.
    pub const fn people(self) -> Key {
        Key { attention: Attention::People, ..self }
    }

    /// Not looked at by this version; `check` says what is therefore not checked.
    pub const fn later(self, check: &'static str) -> Key {
        Key { attention: Attention::NotLooked(check), ..self }
    }
}

impl Section {
    /// The key of a name.
    pub fn key(&self, name: &str) -> Option<&'static Key> {
        self.keys.iter().find(|key| key.name == name)
    }

    /// The header as typed: `[cell]`, `[[layer]]`, `[fluid.NAME]`.
    pub fn header(&self) -> String {
        match self.form {
            Form::Root => "the top of the file".to_owned(),
            Form::Single => format!("[{}]", self.path),
            Form::Named => format!("[{}.NAME]", self.path),
            Form::Repeated => format!("[[{}]]", self.path),
        }
    }
}
