//! A quantity from its text: number, unit, amplitude word or pressure reference, tolerance.
//!
//! ```text
//! quantity  = measure [ ± measure ] | "(" number ± number ")" unit words
//! measure   = number [unit] [words]                     a tolerance in % is relative
//! words     = peak | rms | peak-to-peak | abs | gauge   (and their short forms)
//! ```

use crate::comma;
use crate::explain::{example, value_unit};
use crate::kind::{Amplitude, Kind, PressureReference};
use crate::measure::Parts;
use crate::print::significant;
use crate::refusal::{Reason, Refusal};
use crate::several;
use crate::tolerance::Tolerance;
use crate::unit::Unit;
use std::ops::Range;

/// A value with its unit, as it was read.
#[derive(Debug, Clone, PartialEq)]
pub struct Quantity {
    /// SI, as stated: not converted to peak, a gauge pressure not to absolute.
    pub value: f64,
    /// The kind read: for [`Kind::Viscosity`] the dynamic or the kinematic one, by its unit.
    pub kind: Kind,
    /// As written.
    pub amplitude: Option<Amplitude>,
    /// As written.
    pub reference: Option<PressureReference>,
    /// As written.
    pub tolerance: Option<Tolerance>,
    /// Significant digits of the number as written.
    pub digits: u8,
    text: String,
    number: Range<usize>,
    unit_at: Range<usize>,
    unit: Unit,
}

impl Quantity {
    /// The value as a peak value (for quantities that do not oscillate: the value).
    pub fn peak(&self) -> f64 {
        self.value * self.amplitude.map_or(1.0, Amplitude::to_peak)
    }

    /// The same text with another value (SI, in the same statement as `value`) of `digits` significant digits:
    /// unit, words, spacing and tolerance stay as they are.
    pub fn rewritten(&self, value: f64, digits: u8) -> String {
        let number = significant((value - self.unit.offset) / self.unit.size, digits);
        format!("{}{number}{}", &self.text[..self.number.start], &self.text[self.number.end..])
    }

    /// The unit as written; empty for a bare ratio.
    pub fn unit_text(&self) -> &str {
        &self.text[self.unit_at.clone()]
    }

    /// What stands behind the number.
    pub(crate) fn tail(&self) -> &str {
        self.text[self.number.end..].trim()
    }

    /// What stands behind the unit.
    pub(crate) fn words(&self) -> &str {
        self.text[self.unit_at.end..].trim()
    }
}

/// Reads a quantity of the kind.
///
/// # Errors
/// [`Refusal`], with the offending bytes of `text`.
pub fn parse(text: &str, kind: Kind) -> Result<Quantity, Refusal> {
    let body = text.trim_start();
    if body.is_empty() {
        let message =
            format!("nothing is written; {} is wanted, such as \"{}\".", kind.words(), example(kind));
        return Err(Refusal::new(Reason::Empty, 0..text.len(), message));
    }
    if body.starts_with('?') {
        let message = "a value may not be left open here; write a number with its unit.";
        return Err(Refusal::new(Reason::OpenValueOutOfPlace, several::whole(text), message));
    }
    if let Some(refusal) = comma::refuse(text) {
        return Err(refusal);
    }
    let parts = Parts::split(text, kind)?;
    let (unit, kind_read) = value_unit(text, &parts, kind)?;
    let number = &parts.value.number;
    let value = number.value * unit.size + unit.offset;
    if !value.is_finite() {
        let message = "the value is beyond every number that can be used.";
        return Err(Refusal::new(Reason::NotFinite, number.range.clone(), message));
    }
    let quantity = Quantity {
        value,
        kind: kind_read,
        amplitude: parts.value.amplitude.as_ref().map(|(amplitude, _)| *amplitude),
        reference: parts.value.reference.as_ref().map(|(reference, _)| *reference),
        tolerance: Tolerance::read(text, &parts, value, unit, kind)?,
        digits: number.digits,
        text: text.to_owned(),
        number: number.range.clone(),
        unit_at: parts.value.unit.clone(),
        unit,
    };
    match out_of_place(text, &parts, kind).or_else(|| unsaid(text, &parts, &quantity, kind)) {
        None => Ok(quantity),
        Some(refusal) => Err(refusal),
    }
}

/// A word about an oscillation where nothing oscillates; a reference where there is no choice.
fn out_of_place(text: &str, parts: &Parts, kind: Kind) -> Option<Refusal> {
    let (reason, range, message) = match (&parts.value.amplitude, &parts.value.reference) {
        (Some((_, range)), _) if !kind.oscillates() => {
            let word = &text[range.clone()];
            let message =
                format!("\"{word}\" says how an oscillation is measured; {} is wanted here.", kind.words());
            (Reason::AmplitudeOutOfPlace, range, message)
        }
        (_, Some((PressureReference::Gauge, range))) if kind == Kind::AbsolutePressure => {
            let word = &text[range.clone()];
            let message = format!("\"{word}\" counts from the room; here the pressure counts from vacuum.");
            return Some(Refusal::new(Reason::ReferenceOutOfPlace, range.clone(), message));
        }
        (_, Some((_, range))) if !matches!(kind, Kind::Pressure | Kind::AbsolutePressure) => {
            let word = &text[range.clone()];
            let message =
                format!("\"{word}\" says what a pressure counts from; {} is wanted here.", kind.words());
            (Reason::ReferenceOutOfPlace, range, message)
        }
        _ => return None,
    };
    let word = &text[range.clone()];
    let without = format!("{}{}", text[..range.start].trim_end(), &text[range.end..]);
    let title = format!("Leave \"{word}\" out: \"{}\"", without.trim());
    Some(Refusal::new(reason, range.clone(), message).mend(title, without, false))
}

/// An oscillation without peak, rms or peak-to-peak; a pressure without abs or gauge.
fn unsaid(text: &str, parts: &Parts, quantity: &Quantity, kind: Kind) -> Option<Refusal> {
    let psi = quantity.unit_text() == "psi";
    let (reason, words, message): (_, &[&str], _) = if kind.oscillates() && quantity.amplitude.is_none() {
        let message = format!(
            "\"{}\" does not say how it is measured: peak, rms or peak-to-peak differ by up to 2.8 times.",
            text.trim()
        );
        (Reason::AmplitudeUnsaid, &["peak", "rms", "peak-to-peak"], message)
    } else if quantity.reference.is_none()
        && (kind == Kind::Pressure || (kind == Kind::AbsolutePressure && psi))
    {
        let message = format!(
            "\"{}\" does not say whether it counts from vacuum (abs) or from the room (gauge).",
            text.trim()
        );
        let words: &[&str] = if kind == Kind::Pressure { &["abs", "gauge"] } else { &["abs"] };
        (Reason::ReferenceUnsaid, words, message)
    } else {
        return None;
    };
    let at = parts.value.end();
    let refusal = words.iter().fold(Refusal::new(reason, several::whole(text), message), |refusal, word| {
        let said = format!("{} {word}{}", &text[..at], &text[at..]);
        refusal.mend(format!("Say {word}: \"{}\"", said.trim()), said, false)
    });
    Some(refusal.with(quantity.clone()))
}
