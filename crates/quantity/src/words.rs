//! The words behind a unit: how an oscillation is measured, what a pressure is counted from.

use crate::kind::{Amplitude, PressureReference};

/// Lower case, with plain hyphens.
const AMPLITUDES: &[(&str, Amplitude)] = &[
    ("zero-to-peak", Amplitude::Peak),
    ("zero to peak", Amplitude::Peak),
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

/// The amplitude word at the end of the text, standing apart, with its bytes.
pub(crate) fn last_amplitude(text: &str) -> Option<(Amplitude, usize)> {
    last(text, AMPLITUDES)
}

/// The pressure reference at the end of the text, standing apart, with its bytes.
pub(crate) fn last_reference(text: &str) -> Option<(PressureReference, usize)> {
    last(text, REFERENCES)
}

/// An amplitude word that hangs on the unit, as in `grms` or `mmpp`: bytes of the unit before it, and the word.
pub(crate) fn hanging_amplitudes(text: &str) -> impl Iterator<Item = (usize, &str)> {
    AMPLITUDES.iter().filter_map(|(word, _)| {
        let length = ending(text, word)?;
        let before = text.len() - length;
        let unit = text[..before].trim_end_matches(['-', '_', ' ', '(']);
        (!unit.is_empty()).then_some((unit.len(), &text[before..]))
    })
}

fn last<T: Copy>(text: &str, list: &[(&str, T)]) -> Option<(T, usize)> {
    // Most texts end with no word at all.
    if !text.ends_with(|c: char| c.is_ascii_alphabetic() || matches!(c, '.' | ')')) {
        return None;
    }
    let (inner, brackets) = match text.strip_suffix(')') {
        Some(inner) => (inner, 1),
        None => (text, 0),
    };
    list.iter().find_map(|(word, value)| {
        let start = inner.len() - ending(inner, word)?;
        let before = &inner[..start];
        let before = if brackets == 1 { before.strip_suffix('(')? } else { before };
        // `Pp`-like endings of a unit are no words: a blank (or nothing) stands before.
        let apart = before.is_empty() || before.ends_with(char::is_whitespace);
        apart.then_some((*value, text.len() - before.len()))
    })
}

/// Bytes of the word at the end of the text, whatever its capitals and hyphens.
fn ending(text: &str, word: &str) -> Option<usize> {
    let mut rest = text.chars().rev();
    let mut bytes = 0;
    for wanted in word.chars().rev() {
        let c = rest.next()?;
        let same = match c {
            '‐' | '‑' | '–' | '−' => wanted == '-',
            c => c.eq_ignore_ascii_case(&wanted),
        };
        if !same {
            return None;
        }
        bytes += c.len_utf8();
    }
    Some(bytes)
}
