//! A quantity from its text: number, unit, amplitude word or pressure reference, tolerance.
//!
//! ```text
//! quantity  = main [ ± tolerance ] | "(" number ± number ")" unit words
//! main      = number [unit] [words]
//! words     = peak | rms | peak-to-peak | abs | gauge   (and their short forms)
//! tolerance = number [unit] [words]                     a tolerance in % is relative
//! ```

use crate::kind::{Amplitude, Kind, PressureReference, units};
use crate::number::{self, Number};
use crate::print::significant;
use crate::refusal::{Reason, Refusal};
use crate::unit::{self, Unit};
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

/// Half of the width that a `±` gives.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tolerance {
    /// SI, in the same statement (peak, rms …) as the value.
    pub half_width: f64,
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
}

/// A value that is left open for the tool to find.
#[derive(Debug, Clone, PartialEq)]
pub enum OpenValue {
    /// `?`
    Unbounded,
    /// `? 5 mm to 20 mm`
    Between(Box<Quantity>, Box<Quantity>),
}

/// Amplitude words, longest first; lower case.
const AMPLITUDES: &[(&str, Amplitude)] = &[
    ("zero-to-peak", Amplitude::Peak),
    ("peak-to-peak", Amplitude::PeakToPeak),
    ("peak to peak", Amplitude::PeakToPeak),
    ("peak-peak", Amplitude::PeakToPeak),
    ("pk-to-pk", Amplitude::PeakToPeak),
    ("pk-pk", Amplitude::PeakToPeak),
    ("0-peak", Amplitude::Peak),
    ("0-pk", Amplitude::Peak),
    ("0-p", Amplitude::Peak),
    ("peak", Amplitude::Peak),
    ("r.m.s.", Amplitude::Rms),
    ("p-p", Amplitude::PeakToPeak),
    ("rms", Amplitude::Rms),
    ("pp", Amplitude::PeakToPeak),
    ("pk", Amplitude::Peak),
];

const REFERENCES: &[(&str, PressureReference)] = &[
    ("absolute", PressureReference::Absolute),
    ("gauge", PressureReference::Gauge),
    ("gage", PressureReference::Gauge),
    ("abs.", PressureReference::Absolute),
    ("abs", PressureReference::Absolute),
];

/// Reads a quantity of the kind.
///
/// # Errors
/// [`Refusal`], with the offending bytes of `text`.
pub fn parse(text: &str, kind: Kind) -> Result<Quantity, Refusal> {
    if text.trim().is_empty() {
        let message =
            format!("nothing is written; {} is wanted, such as \"{}\".", kind.words(), example(kind));
        return Err(Refusal::new(Reason::Empty, 0..text.len(), message));
    }
    if text.trim_start().starts_with('?') {
        let message = "a value may not be left open here; write a number with its unit.";
        return Err(Refusal::new(Reason::OpenValueOutOfPlace, 0..text.len(), message));
    }
    let parts = Parts::split(text)?;
    parts.quantity(text, kind)
}

/// Reads a range `5 Hz to 4 kHz`.
///
/// # Errors
/// [`Refusal`], also where the second is below the first.
pub fn parse_range(text: &str, kind: Kind) -> Result<(Quantity, Quantity), Refusal> {
    let unreadable = || {
        let message =
            format!("a range is wanted, such as \"{0} to {0}\" with the lower value first.", example(kind));
        Refusal::new(Reason::RangeUnreadable, 0..text.len(), message)
    };
    // `peak to peak` is no range.
    let at = text.match_indices(" to ").map(|(i, _)| i).find(|&i| {
        let (before, after) =
            (text[..i].trim_end().to_lowercase(), text[i + 4..].trim_start().to_lowercase());
        !((before.ends_with("peak") || before.ends_with("pk"))
            && (after.starts_with("peak") || after.starts_with("pk")))
    });
    let at = at.ok_or_else(unreadable)?;
    let low = parse(&text[..at], kind)?;
    let high = parse(&text[at + 4..], kind).map_err(|refusal| refusal.shifted(at + 4))?;
    if high.peak() < low.peak() { Err(unreadable()) } else { Ok((low, high)) }
}

/// Reads a comma-separated list (command line).
///
/// # Errors
/// [`Refusal`] of the first item that is no quantity.
pub fn parse_list(text: &str, kind: Kind) -> Result<Vec<Quantity>, Refusal> {
    let mut start = 0;
    text.split(',')
        .map(|item| {
            let at = start;
            start += item.len() + 1;
            parse(item, kind).map_err(|refusal| refusal.shifted(at))
        })
        .collect()
}

/// Reads an open value; `None` when the text is none.
pub fn parse_open(text: &str, kind: Kind) -> Option<Result<OpenValue, Refusal>> {
    let at = text.find(|c: char| !c.is_whitespace())?;
    let rest = text[at..].strip_prefix('?')?;
    if rest.trim().is_empty() {
        return Some(Ok(OpenValue::Unbounded));
    }
    let range = parse_range(rest, kind).map_err(|refusal| refusal.shifted(at + 1));
    Some(range.map(|(low, high)| OpenValue::Between(Box::new(low), Box::new(high))))
}

/// A text that this kind would accept.
pub(crate) fn example(kind: Kind) -> String {
    let unit = units(kind).first().copied().unwrap_or("");
    let word = match kind {
        kind if kind.oscillates() => " peak",
        Kind::Pressure => " abs",
        _ => "",
    };
    if unit.is_empty() { "0.5".to_owned() } else { format!("10 {unit}{word}") }
}

/// A number with what follows it, by byte ranges of the whole text.
#[derive(Debug, Clone)]
struct Measure {
    number: Number,
    unit: Range<usize>,
    amplitude: Option<(Amplitude, Range<usize>)>,
    reference: Option<(PressureReference, Range<usize>)>,
}

/// The text cut into value and tolerance.
struct Parts {
    value: Measure,
    tolerance: Option<Measure>,
    /// The unit and words behind a parenthesis belong to both.
    shared: bool,
}

impl Parts {
    fn split(text: &str) -> Result<Parts, Refusal> {
        let open = text.len() - text.trim_start().len();
        if text[open..].starts_with('(') {
            return Parts::bracketed(text, open);
        }
        let Some((at, length)) = tolerance_mark(text) else {
            let value = Measure::read(text, 0..text.len())?;
            return Ok(Parts { value, tolerance: None, shared: false });
        };
        let value = Measure::read(text, 0..at)?;
        let tolerance = Measure::read(text, at + length..text.len()).map_err(as_tolerance)?;
        Ok(Parts { value, tolerance: Some(tolerance), shared: false })
    }

    /// `(16.5 ± 0.3) g0 peak`
    fn bracketed(text: &str, open: usize) -> Result<Parts, Refusal> {
        let unreadable = |range| {
            let message = "behind an opening bracket a value, ±, its tolerance and a closing bracket are wanted, such as \"(16.5 ± 0.3) g0 peak\".";
            Refusal::new(Reason::ToleranceUnreadable, range, message)
        };
        let close = text.find(')').ok_or_else(|| unreadable(open..text.len()))?;
        let inside = &text[..close];
        let (at, length) = tolerance_mark(inside).ok_or_else(|| unreadable(open..close + 1))?;
        let number = number::read(&text[..at], open + 1)?;
        let half = number::read(inside, at + length).map_err(as_tolerance)?;
        for (from, to) in [(number.range.end, at), (half.range.end, close)] {
            if !text[from..to].trim().is_empty() {
                return Err(unreadable(from..to));
            }
        }
        let mut value = Measure::words(text, close + 1..text.len(), number);
        value.unit = trimmed(text, value.unit);
        let tolerance = Measure { number: half, ..value.clone() };
        Ok(Parts { value, tolerance: Some(tolerance), shared: true })
    }

    fn quantity(mut self, text: &str, kind: Kind) -> Result<Quantity, Refusal> {
        // `42 ± 0.5 mm`: the unit (and the words) behind the tolerance belong to both.
        if let Some(tolerance) = &self.tolerance
            && !self.shared
            && self.value.unit.is_empty()
            && self.value.amplitude.is_none()
            && !tolerance.unit.is_empty()
        {
            let relative = &text[tolerance.unit.clone()] == "%" && kind != Kind::Ratio;
            if !relative {
                self.value.unit = tolerance.unit.clone();
                self.shared = true;
            }
        }
        if let Some(tolerance) = &self.tolerance {
            if self.value.amplitude.is_none() {
                self.value.amplitude = tolerance.amplitude.clone();
            }
            if self.value.reference.is_none() {
                self.value.reference = tolerance.reference.clone();
            }
        }
        let unit = read_unit(text, &self.value, kind)?;
        let kind_read =
            kind.accepts(unit.dimension).ok_or_else(|| wrong_kind(text, &self.value, unit, kind))?;
        let value = self.value.number.value * unit.size + unit.offset;
        if !value.is_finite() {
            let range = self.value.number.range.clone();
            return Err(Refusal::new(
                Reason::NotFinite,
                range,
                "the value is beyond every number that can be used.",
            ));
        }
        let tolerance = match &self.tolerance {
            Some(measure) => Some(half_width(text, measure, self.shared, value, unit, kind)?),
            None => None,
        };
        let quantity = Quantity {
            value,
            kind: kind_read,
            amplitude: self.value.amplitude.as_ref().map(|(amplitude, _)| *amplitude),
            reference: self.value.reference.as_ref().map(|(reference, _)| *reference),
            tolerance,
            digits: self.value.number.digits,
            text: text.to_owned(),
            number: self.value.number.range.clone(),
            unit_at: self.value.unit.clone(),
            unit,
        };
        self.judge_words(text, kind, quantity)
    }

    /// Whether the words fit the kind: peak, rms, peak-to-peak; abs, gauge.
    fn judge_words(&self, text: &str, kind: Kind, quantity: Quantity) -> Result<Quantity, Refusal> {
        if let Some((_, range)) = &self.value.amplitude
            && !kind.oscillates()
        {
            let word = &text[range.clone()];
            let message = format!(
                "\"{word}\" says how an oscillation is measured, but {} is wanted here.",
                kind.words()
            );
            let without = without(text, range);
            return Err(Refusal::new(Reason::AmplitudeOutOfPlace, range.clone(), message).mend(
                format!("Leave \"{word}\" out: \"{without}\""),
                without,
                false,
            ));
        }
        if let Some((reference, range)) = &self.value.reference {
            let gauge_of_absolute = kind == Kind::AbsolutePressure && *reference == PressureReference::Gauge;
            if gauge_of_absolute || !matches!(kind, Kind::Pressure | Kind::AbsolutePressure) {
                let word = &text[range.clone()];
                let message = format!("\"{word}\" makes no sense here: {} is wanted.", kind.words());
                let without = without(text, range);
                let refusal = Refusal::new(Reason::ReferenceOutOfPlace, range.clone(), message);
                return Err(refusal.mend(format!("Leave \"{word}\" out: \"{without}\""), without, false));
            }
        }
        if kind.oscillates() && quantity.amplitude.is_none() {
            let message = format!(
                "\"{}\" does not say how it is measured: peak, rms or peak-to-peak differ by up to 2.8 times.",
                text.trim()
            );
            let at = trimmed(text, 0..text.len());
            let refusal = ["peak", "rms", "peak-to-peak"].iter().fold(
                Refusal::new(Reason::AmplitudeUnsaid, at, message),
                |refusal, word| {
                    let said = format!("{} {word}", text.trim_end());
                    refusal.mend(format!("Say {word}: \"{}\"", said.trim_start()), said, false)
                },
            );
            return Err(refusal.with(quantity));
        }
        let psi = text[self.value.unit.clone()].contains("psi");
        let unsaid = kind == Kind::Pressure || (kind == Kind::AbsolutePressure && psi);
        if unsaid && quantity.reference.is_none() {
            let message = format!(
                "\"{}\" does not say whether it counts from vacuum (abs) or from the room (gauge).",
                text.trim()
            );
            let at = trimmed(text, 0..text.len());
            let words: &[&str] = if kind == Kind::Pressure { &["abs", "gauge"] } else { &["abs"] };
            let refusal =
                words.iter().fold(Refusal::new(Reason::ReferenceUnsaid, at, message), |refusal, word| {
                    let said = format!("{} {word}", text.trim_end());
                    refusal.mend(format!("Say {word}: \"{}\"", said.trim_start()), said, false)
                });
            return Err(refusal.with(quantity));
        }
        Ok(quantity)
    }
}

impl Measure {
    /// A number with unit and words in a part of the text.
    fn read(text: &str, part: Range<usize>) -> Result<Measure, Refusal> {
        let number = number::read(&text[..part.end], part.start)?;
        let rest = number.range.end..part.end;
        if let Some(refusal) = one_sided(text, &number, rest.clone()) {
            return Err(refusal);
        }
        let mut measure = Measure::words(text, rest, number);
        measure.unit = trimmed(text, measure.unit);
        Ok(measure)
    }

    /// Takes amplitude and reference words off the end; what is left is the unit.
    fn words(text: &str, mut rest: Range<usize>, number: Number) -> Measure {
        let (mut amplitude, mut reference) = (None, None);
        loop {
            rest = trimmed(text, rest);
            let tail = &text[rest.clone()];
            if amplitude.is_none()
                && let Some((value, length)) = last_word(tail, AMPLITUDES)
            {
                amplitude = Some((value, rest.end - length..rest.end));
                rest.end -= length;
            } else if reference.is_none()
                && let Some((value, length)) = last_word(tail, REFERENCES)
            {
                reference = Some((value, rest.end - length..rest.end));
                rest.end -= length;
            } else {
                return Measure { number, unit: rest, amplitude, reference };
            }
        }
    }
}

/// A word of the list at the end of the text, standing alone, with its length in bytes.
fn last_word<T: Copy>(text: &str, list: &[(&str, T)]) -> Option<(T, usize)> {
    list.iter().find_map(|(word, value)| {
        let start = text.len().checked_sub(word.len())?;
        let tail = text.get(start..)?;
        // `Pp`-like endings of a unit are not words: a blank (or nothing) must stand before.
        let apart = start == 0 || text[..start].ends_with(char::is_whitespace);
        (apart && tail.eq_ignore_ascii_case(word)).then_some((*value, word.len()))
    })
}

fn trimmed(text: &str, range: Range<usize>) -> Range<usize> {
    let part = &text[range.clone()];
    let start = range.start + (part.len() - part.trim_start().len());
    start..(start + part.trim().len())
}

/// Position and length of `±`, `+-` or `+/-`.
fn tolerance_mark(text: &str) -> Option<(usize, usize)> {
    ["±", "+/-", "+-", "+/−", "+−"].iter().filter_map(|mark| Some((text.find(mark)?, mark.len()))).min()
}

/// A refusal inside a tolerance is one of the tolerance.
fn as_tolerance(mut refusal: Refusal) -> Refusal {
    if matches!(refusal.reason, Reason::NumberUnreadable | Reason::NotFinite) {
        refusal.reason = Reason::ToleranceUnreadable;
        refusal.message = "behind ± a number is wanted, with a unit or in %.".to_owned();
    }
    refusal
}

/// `42 +0.5 -0.2 mm`, `42 mm +0.5/-0`: refused, with the wider side as a mend.
fn one_sided(text: &str, value: &Number, rest: Range<usize>) -> Option<Refusal> {
    let body = &text[rest.clone()];
    let sign = |c: char| matches!(c, '+' | '-' | '−');
    // A sign behind a blank (or a solidus) and before a digit starts a side.
    let mut sides = Vec::new();
    let mut before = ' ';
    for (i, c) in body.char_indices() {
        let next = body[i + c.len_utf8()..].trim_start();
        if sign(c)
            && (before.is_whitespace() || before == '/' || i == 0)
            && next.starts_with(|c: char| c.is_ascii_digit() || c == '.')
        {
            sides.push(rest.start + i);
        }
        before = c;
    }
    let first = *sides.first()?;
    let numbers: Vec<Number> = sides
        .iter()
        .filter_map(|&at| {
            let sign = text[at..].chars().next()?.len_utf8();
            number::read(&text[..rest.end], at + sign).ok()
        })
        .collect();
    let widest = numbers.iter().max_by(|a, b| a.value.abs().total_cmp(&b.value.abs()))?;
    let last = numbers.last()?;
    let unit = text[value.range.end..first].trim();
    let tail = text[last.range.end..rest.end].trim();
    let number = &text[value.range.clone()];
    let width = &text[widest.range.clone()];
    let mended = match (unit.is_empty(), tail.is_empty()) {
        (true, true) => format!("{number} ± {width}"),
        (true, false) => format!("{number} ± {width} {tail}"),
        (false, true) => format!("({number} ± {width}) {unit}"),
        (false, false) => format!("{number} {unit} ± {width} {tail}"),
    };
    let message = "a tolerance has the same width on both sides here; write the wider one with ±.";
    Some(Refusal::new(Reason::ToleranceOneSided, first..last.range.end, message).mend(
        format!("Take the wider side: \"{mended}\""),
        mended,
        false,
    ))
}

fn read_unit(text: &str, measure: &Measure, kind: Kind) -> Result<Unit, Refusal> {
    let written = &text[measure.unit.clone()];
    if written.is_empty() && kind != Kind::Ratio {
        return Err(unit_missing(text, measure, kind));
    }
    unit::read(written, kind.is_acceleration()).map_err(|range| {
        let at = measure.unit.start + range.start..measure.unit.start + range.end;
        unit_not_known(text, measure, kind, at)
    })
}

fn unit_missing(text: &str, measure: &Measure, kind: Kind) -> Refusal {
    let end = measure.number.range.end;
    let message = format!(
        "\"{}\" has no unit; {} is wanted, such as \"{}\".",
        &text[measure.number.range.clone()],
        kind.words(),
        example(kind)
    );
    let mut refusal = Refusal::new(Reason::UnitMissing, measure.number.range.clone(), message);
    // The amplitude word or reference that the kind needs comes with the unit where it is not there yet.
    let word = match kind {
        kind if kind.oscillates() && measure.amplitude.is_none() => " peak",
        Kind::Pressure if measure.reference.is_none() => " abs",
        _ => "",
    };
    for unit in units(kind).iter().take(3) {
        let said = format!("{} {unit}{word}{}", &text[..end], &text[end..]);
        refusal = refusal.mend(format!("Take it as {unit}{word}: \"{}\"", said.trim()), said, false);
    }
    refusal
}

fn unit_not_known(text: &str, measure: &Measure, kind: Kind, at: Range<usize>) -> Refusal {
    let written = &text[measure.unit.clone()];
    let replaced = |unit: &str| format!("{}{unit}{}", &text[..measure.unit.start], &text[measure.unit.end..]);
    let revolutions =
        ["rpm", "r/min", "rev/min", "cpm"].iter().any(|word| written.eq_ignore_ascii_case(word));
    if revolutions && kind == Kind::Frequency {
        let hertz = significant(measure.number.value / 60.0, measure.number.digits.max(4));
        let hertz = hertz.trim_end_matches('0').trim_end_matches('.');
        let said = format!("{}{hertz} Hz{}", &text[..measure.number.range.start], &text[measure.unit.end..]);
        let message = format!("\"{written}\" counts turns a minute; a frequency is in Hz.");
        return Refusal::new(Reason::UnitNotKnown, measure.unit.clone(), message).mend(
            format!("Write \"{}\"", said.trim()),
            said,
            true,
        );
    }
    // `barg`, `psia`: the reference is a word of its own.
    let suffixed =
        ["bar", "psi", "mbar", "kPa"].iter().find_map(|unit| match written.strip_prefix(unit)? {
            "g" | "(g)" => Some((unit, "gauge")),
            "a" | "(a)" => Some((unit, "abs")),
            _ => None,
        });
    if let Some((unit, word)) = suffixed {
        let said = replaced(&format!("{unit} {word}"));
        let message = format!("\"{written}\" is no unit; say {word} behind it.");
        return Refusal::new(Reason::UnitNotKnown, measure.unit.clone(), message).mend(
            format!("Write \"{}\"", said.trim()),
            said,
            true,
        );
    }
    let symbol = &text[at.clone()];
    let message = format!(
        "\"{symbol}\" is no unit that is known; {} is wanted, such as \"{}\".",
        kind.words(),
        example(kind)
    );
    let refusal = Refusal::new(Reason::UnitNotKnown, at, message);
    match unit::near(written, units(kind)) {
        Some(unit) => {
            let said = replaced(unit);
            refusal.mend(format!("Write {unit}: \"{}\"", said.trim()), said, true)
        }
        None => refusal,
    }
}

fn wrong_kind(text: &str, measure: &Measure, unit: Unit, kind: Kind) -> Refusal {
    let written = &text[measure.unit.clone()];
    let range = if measure.unit.is_empty() { measure.number.range.clone() } else { measure.unit.clone() };
    let is = Kind::of(unit.dimension).map_or_else(|| "another kind of quantity".to_owned(), str::to_owned);
    let message = format!(
        "\"{written}\" measures {is}; {} is wanted here, such as \"{}\".",
        kind.words(),
        example(kind)
    );
    Refusal::new(Reason::UnitOfWrongKind, range, message)
}

/// The half width in SI: relative in %, else in a unit of the same kind (a temperature difference without offset).
fn half_width(
    text: &str,
    measure: &Measure,
    shared: bool,
    value: f64,
    unit: Unit,
    kind: Kind,
) -> Result<Tolerance, Refusal> {
    let written = &text[measure.unit.clone()];
    let number = measure.number.value;
    let half_width = if shared {
        number * unit.size
    } else if written == "%" && unit.dimension != unit::NONE {
        number / 100.0 * (value - unit.offset)
    } else if written.is_empty() {
        number * unit.size
    } else {
        let own = unit::read(written, kind.is_acceleration()).map_err(|range| {
            let at = measure.unit.start + range.start..measure.unit.start + range.end;
            Refusal::new(
                Reason::ToleranceUnreadable,
                at,
                format!("\"{written}\" behind ± is no unit that is known."),
            )
        })?;
        if own.dimension != unit.dimension {
            let message =
                format!("the tolerance is in \"{written}\", which is not of the kind of the value.");
            return Err(Refusal::new(Reason::ToleranceUnreadable, measure.unit.clone(), message));
        }
        number * own.size
    };
    let half_width = if written == "%" && !shared { half_width.abs() } else { half_width };
    if half_width < 0.0 || !half_width.is_finite() {
        let message = "a tolerance behind ± is not negative.";
        return Err(Refusal::new(Reason::ToleranceUnreadable, measure.number.range.clone(), message));
    }
    Ok(Tolerance { half_width })
}

/// The text without a word and the blank before it.
fn without(text: &str, range: &Range<usize>) -> String {
    format!("{}{}", text[..range.start].trim_end(), &text[range.end..])
}
