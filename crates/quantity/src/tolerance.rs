//! Tolerances: the mark, the half width in SI, and the one-sided ones that are refused.

use crate::explain;
use crate::kind::Kind;
use crate::measure::Parts;
use crate::number::{self, Number};
use crate::refusal::{Reason, Refusal};
use crate::unit::{self, Unit};
use std::ops::Range;

/// Half of the width that a `±` gives.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tolerance {
    /// SI, in the same statement (peak, rms …) as the value; of a temperature a difference in K.
    pub half_width: f64,
}

/// Where `±`, `+-` or `+/-` stands first.
pub(crate) fn mark(text: &str) -> Option<Range<usize>> {
    // The first byte of `±` in UTF-8 is also that of other signs, so this only rules out quickly.
    if !text.bytes().any(|byte| byte == b'+' || byte == 0xc2) {
        return None;
    }
    text.char_indices().find_map(|(i, c)| {
        let rest = &text[i..];
        let length = match c {
            '±' => c.len_utf8(),
            '+' => ["+/-", "+-", "+/−", "+−"].iter().find(|mark| rest.starts_with(**mark))?.len(),
            _ => return None,
        };
        Some(i..i + length)
    })
}

/// A refusal of the number behind the mark is one of the tolerance.
pub(crate) fn unreadable(mut refusal: Refusal) -> Refusal {
    refusal.reason = Reason::ToleranceUnreadable;
    refusal.message = "behind ± a finite number is wanted, with a unit or in %.".to_owned();
    refusal
}

impl Tolerance {
    /// The tolerance of a value (SI) in `unit`: in %, or in a unit of the same kind (a temperature without offset).
    ///
    /// # Errors
    /// A unit that is not known or of another kind, a negative width, words that differ from the value's.
    pub(crate) fn read(
        text: &str,
        parts: &Parts,
        value: f64,
        unit: Unit,
        kind: Kind,
    ) -> Result<Option<Tolerance>, Refusal> {
        let Some(measure) = &parts.tolerance else { return Ok(None) };
        let refuse = |range, message: &str| Err(Refusal::new(Reason::ToleranceUnreadable, range, message));
        if let (Some((own, range)), Some((amplitude, _))) = (&measure.amplitude, &parts.value.amplitude)
            && own != amplitude
        {
            return refuse(range.clone(), "value and tolerance are measured in different ways; use one.");
        }
        if let (Some((own, range)), Some((reference, _))) = (&measure.reference, &parts.value.reference)
            && own != reference
        {
            return refuse(range.clone(), "value and tolerance count from different pressures; use one.");
        }
        let number = measure.number.value;
        let half_width = if parts.shared || measure.unit.is_empty() {
            number * unit.size
        } else {
            let own = explain::read_unit(text, measure, kind)?;
            if own.foreign && own.dimension == unit.dimension {
                return Err(explain::not_used(text, measure, kind));
            }
            if own.dimension == unit.dimension {
                number * own.size
            } else if own.dimension == unit::NONE {
                if unit.offset != 0.0 {
                    let message = "a share of a temperature in °C means nothing; give the tolerance in K.";
                    return refuse(measure.unit.clone(), message);
                }
                number * own.size * value.abs()
            } else {
                return Err(explain::wrong_kind(text, measure, own, kind));
            }
        };
        if half_width < 0.0 || !half_width.is_finite() {
            return refuse(measure.number.range.clone(), "the width behind ± is finite and not negative.");
        }
        Ok(Some(Tolerance { half_width }))
    }
}

/// One side of a one-sided tolerance.
struct Side<'a> {
    at: usize,
    number: Number,
    unit: &'a str,
}

impl Side<'_> {
    /// In SI where the unit is known, for comparison with the other side.
    fn width(&self, fallback: &str, acceleration: bool) -> f64 {
        let unit = if self.unit.is_empty() { fallback } else { self.unit };
        let size = unit::read(unit, acceleration).map_or(1.0, |unit| unit.size);
        (self.number.value * size).abs()
    }
}

/// `42 +0.5 -0.2 mm`, `42 mm +0.5/-0`: refused, with the wider side as a mend. `part`: what follows the value's number.
pub(crate) fn one_sided(text: &str, value: &Number, part: Range<usize>, kind: Kind) -> Option<Refusal> {
    let sides = sides(text, part.clone());
    let (first, last) = (sides.first()?, sides.last()?);
    let filler = |c: char| c.is_whitespace() || matches!(c, '(' | ')' | '/' | ',');
    let main = text[part.start..first.at].trim_matches(filler);
    // `+0.5/-0.2 mm`: the unit behind the last side is that of both; without one, that of the value.
    let fallback = if last.unit.is_empty() { main } else { last.unit };
    let width = |side: &&Side| side.width(fallback, kind.is_acceleration());
    let widest = sides.iter().max_by(|a, b| width(a).total_cmp(&width(b)))?;
    let number = &text[value.range.clone()];
    let half = &text[widest.number.range.clone()];
    let own = if widest.unit.is_empty() { last.unit } else { widest.unit };
    let mended = match (main.is_empty(), own.is_empty()) {
        (true, _) => format!("{number} ± {half} {own}").trim_end().to_owned(),
        (false, true) => format!("({number} ± {half}) {main}"),
        (false, false) => format!("{number} {main} ± {half} {own}"),
    };
    let message = "a tolerance has the same width on both sides here; write the wider one with ±.";
    let refusal =
        Refusal::new(Reason::ToleranceOneSided, first.at..last.number.range.end.max(first.at), message);
    Some(refusal.mend(format!("Take the wider side: \"{mended}\""), mended, false))
}

/// Signs before a digit that start a side. A minus alone must stand behind a blank and at its number: `5-10 Hz` is a
/// range.
fn sides(text: &str, part: Range<usize>) -> Vec<Side<'_>> {
    let body = &text[part.clone()];
    let figure = |c: char| c.is_ascii_digit() || c == '.';
    let mut at = Vec::new();
    let mut before = None;
    for (i, c) in body.char_indices() {
        let apart = before.is_none_or(|c: char| c.is_whitespace() || matches!(c, '/' | '(' | ','));
        let behind = &body[i + c.len_utf8()..];
        let starts = match c {
            '+' => apart && behind.trim_start().starts_with(figure),
            '-' | '−' if at.is_empty() => {
                before.is_some_and(char::is_whitespace)
                    && behind.starts_with(figure)
                    && !body[..i].contains('+')
            }
            '-' | '−' => apart && behind.trim_start().starts_with(figure),
            _ => false,
        };
        if starts {
            at.push(part.start + i);
        }
        before = Some(c);
    }
    let ends = at.iter().copied().skip(1).chain([part.end]).collect::<Vec<_>>();
    let filler = |c: char| c.is_whitespace() || matches!(c, ')' | '/' | ',');
    at.iter()
        .zip(ends)
        .filter_map(|(&at, end)| {
            let sign = text[at..].chars().next()?.len_utf8();
            let number = number::read(text, at + sign..end).ok()?;
            let unit = text[number.range.end..end].trim_matches(filler);
            Some(Side { at, number, unit })
        })
        .collect()
}
