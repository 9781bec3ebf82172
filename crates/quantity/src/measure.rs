//! The text cut into its parts: value and tolerance, each with number, unit and words.

use crate::kind::{Amplitude, Kind, PressureReference};
use crate::number::{self, Number};
use crate::refusal::{Reason, Refusal};
use crate::tolerance;
use crate::words;
use std::ops::Range;

/// A number with what follows it, by byte ranges of the whole text.
#[derive(Debug, Clone)]
pub(crate) struct Measure {
    pub number: Number,
    /// Empty (behind the number) when there is none.
    pub unit: Range<usize>,
    pub amplitude: Option<(Amplitude, Range<usize>)>,
    pub reference: Option<(PressureReference, Range<usize>)>,
}

/// Value and tolerance.
#[derive(Debug)]
pub(crate) struct Parts {
    pub value: Measure,
    pub tolerance: Option<Measure>,
    /// One unit behind the tolerance belongs to both.
    pub shared: bool,
}

impl Parts {
    /// # Errors
    /// No number in one of the parts, or brackets that hold no tolerance.
    pub fn split(text: &str, kind: Kind) -> Result<Parts, Refusal> {
        let open = text.len() - text.trim_start().len();
        if text[open..].starts_with('(') {
            return Parts::bracketed(text, open);
        }
        let Some(mark) = tolerance::mark(text) else {
            return Ok(Parts { value: Measure::read(text, 0..text.len())?, tolerance: None, shared: false });
        };
        let mut value = Measure::read(text, 0..mark.start)?;
        let tolerance = Measure::read(text, mark.end..text.len()).map_err(tolerance::unreadable)?;
        // `42 ± 0.5 mm`: the unit behind the tolerance is that of both. In `42 ± 2 %` the value has none.
        let relative = kind != Kind::Ratio && matches!(&text[tolerance.unit.clone()], "%" | "ppm");
        let bare = value.unit.is_empty() && value.amplitude.is_none();
        let shared = bare && !tolerance.unit.is_empty() && !relative;
        if shared {
            value.unit = tolerance.unit.clone();
        }
        value.take_words(&tolerance);
        Ok(Parts { value, tolerance: Some(tolerance), shared })
    }

    /// `(16.5 ± 0.3) g0 peak`
    fn bracketed(text: &str, open: usize) -> Result<Parts, Refusal> {
        let refuse = |range: Range<usize>| {
            let message = "brackets hold a value, ± and its tolerance, with the unit behind them: \"(16.5 ± 0.3) g0 peak\".";
            Refusal::new(Reason::ToleranceUnreadable, range, message)
        };
        let close = text.find(')').ok_or_else(|| refuse(open..text.len()))?;
        let (inside, behind) = (&text[open + 1..close], text[close + 1..].trim());
        let mark = tolerance::mark(&text[..close]).ok_or_else(|| {
            let refusal = refuse(open..close + 1);
            let plain = format!("{} {behind}", inside.trim());
            refusal.mend(format!("Leave the brackets out: \"{}\"", plain.trim()), plain.trim(), true)
        })?;
        let number = number::read(text, open + 1..mark.start)?;
        let half = number::read(text, mark.end..close).map_err(tolerance::unreadable)?;
        let own_unit = text[half.range.end..close].trim();
        if number.range.end < text[..mark.start].trim_end().len() || !own_unit.is_empty() {
            // `(42 mm ± 0.5 mm)` and `(16.5 ± 2 %) g0 peak`
            let refusal = refuse(open..close + 1);
            let value = text[open + 1..mark.start].trim();
            let half = text[mark.end..close].trim();
            let blank = if behind.is_empty() { "" } else { " " };
            let plain = format!("{value}{blank}{behind} ± {half}");
            return Err(refusal.mend(format!("Leave the brackets out: \"{plain}\""), plain, true));
        }
        let value = Measure::words(text, close + 1..text.len(), number);
        let tolerance = Measure { number: half, ..value.clone() };
        Ok(Parts { value, tolerance: Some(tolerance), shared: true })
    }
}

impl Measure {
    /// A number with unit and words in a part of the text.
    fn read(text: &str, part: Range<usize>) -> Result<Measure, Refusal> {
        let number = number::read(text, part.clone())?;
        let rest = number.range.end..part.end;
        Ok(Measure::words(text, rest, number))
    }

    /// Takes amplitude and reference words off the end; what is left is the unit.
    fn words(text: &str, rest: Range<usize>, number: Number) -> Measure {
        let mut measure = Measure { number, unit: rest, amplitude: None, reference: None };
        loop {
            let unit = trimmed(text, measure.unit.clone());
            measure.unit = unit.clone();
            let tail = &text[unit.clone()];
            if measure.amplitude.is_none()
                && let Some((amplitude, length)) = words::last_amplitude(tail)
            {
                measure.amplitude = Some((amplitude, unit.end - length..unit.end));
                measure.unit.end -= length;
            } else if measure.reference.is_none()
                && let Some((reference, length)) = words::last_reference(tail)
            {
                measure.reference = Some((reference, unit.end - length..unit.end));
                measure.unit.end -= length;
            } else {
                return measure;
            }
        }
    }

    /// Words behind the tolerance are those of the value, unless it has its own.
    fn take_words(&mut self, tolerance: &Measure) {
        if self.amplitude.is_none() {
            self.amplitude.clone_from(&tolerance.amplitude);
        }
        if self.reference.is_none() {
            self.reference.clone_from(&tolerance.reference);
        }
    }

    /// Where a word behind the unit would stand.
    pub fn end(&self) -> usize {
        self.unit.end.max(self.number.range.end)
    }
}

/// The range without the blanks at its ends.
pub(crate) fn trimmed(text: &str, range: Range<usize>) -> Range<usize> {
    let part = &text[range.clone()];
    let start = range.start + (part.len() - part.trim_start().len());
    start..start + part.trim().len()
}
