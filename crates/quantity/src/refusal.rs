//! Why a piece of text is no quantity, and how it could become one.

use crate::Quantity;
use std::ops::Range;

/// A refusal with the offending bytes and, where it is clear, what to write instead.
#[derive(Debug, Clone, PartialEq)]
pub struct Refusal {
    /// What kind of slip.
    pub reason: Reason,
    /// The offending bytes of the text.
    pub range: Range<usize>,
    /// What is wrong and what to do, one or two sentences.
    pub message: String,
    /// Replacements of the whole text.
    pub mends: Vec<TextMend>,
    /// What could be read all the same (for an amplitude or a reference that is not said: the bare value).
    pub partial: Option<Box<Quantity>>,
}

/// A replacement of the whole text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct TextMend {
    /// What it does.
    pub title: String,
    /// The whole new text.
    pub text: String,
    /// Whether it says what the old text meant; else it chooses.
    pub keeps_meaning: bool,
}

/// Kinds of slip.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Reason {
    /// Nothing is written.
    Empty,
    /// No number, or one that cannot be read.
    NumberUnreadable,
    /// `1,5`
    DecimalComma,
    /// inf, nan, or beyond what a double can hold.
    NotFinite,
    /// A number without its unit.
    UnitMissing,
    /// A unit that is not known.
    UnitNotKnown,
    /// A unit of another kind of quantity.
    UnitOfWrongKind,
    /// peak, rms or peak-to-peak is not said.
    AmplitudeUnsaid,
    /// peak, rms or peak-to-peak where nothing oscillates.
    AmplitudeOutOfPlace,
    /// abs or gauge is not said.
    ReferenceUnsaid,
    /// abs or gauge where it makes no sense.
    ReferenceOutOfPlace,
    /// `+0.5/-0`
    ToleranceOneSided,
    /// Something behind ± that is no tolerance.
    ToleranceUnreadable,
    /// `?` where no value may be left open.
    OpenValueOutOfPlace,
    /// A range is wanted, and this is none.
    RangeUnreadable,
    /// A range where one value is wanted.
    RangeOutOfPlace,
}

impl Reason {
    /// The rule that reports it.
    pub fn rule(self) -> &'static str {
        match self {
            Reason::UnitMissing => "unit-missing",
            Reason::UnitNotKnown => "unit-not-known",
            Reason::UnitOfWrongKind => "unit-of-wrong-kind",
            Reason::AmplitudeUnsaid => "amplitude-kind-unsaid",
            Reason::ReferenceUnsaid => "pressure-reference-unsaid",
            Reason::Empty
            | Reason::NumberUnreadable
            | Reason::DecimalComma
            | Reason::NotFinite
            | Reason::AmplitudeOutOfPlace
            | Reason::ReferenceOutOfPlace
            | Reason::ToleranceOneSided
            | Reason::ToleranceUnreadable
            | Reason::OpenValueOutOfPlace
            | Reason::RangeUnreadable
            | Reason::RangeOutOfPlace => "value-of-wrong-type",
        }
    }
}

impl Refusal {
    pub(crate) fn new(reason: Reason, range: Range<usize>, message: impl Into<String>) -> Refusal {
        Refusal { reason, range, message: message.into(), mends: Vec::new(), partial: None }
    }

    pub(crate) fn mend(
        mut self,
        title: impl Into<String>,
        text: impl Into<String>,
        keeps_meaning: bool,
    ) -> Refusal {
        self.mends.push(TextMend { title: title.into(), text: text.into(), keeps_meaning });
        self
    }

    pub(crate) fn with(mut self, partial: Quantity) -> Refusal {
        self.partial = Some(Box::new(partial));
        self
    }

    /// The same refusal of a text of which the refused one is a part: what stands before and behind it stays.
    pub(crate) fn embedded(mut self, before: &str, behind: &str) -> Refusal {
        self.range = self.range.start + before.len()..self.range.end + before.len();
        for mend in &mut self.mends {
            mend.text = format!("{before}{}{behind}", mend.text);
        }
        self
    }
}
