//! Refusals of units: missing, not known, not used here, of another kind; each with what to write instead.

use crate::kind::{Kind, units};
use crate::measure::{Measure, Parts};
use crate::near::{self, Near};
use crate::print::{print, significant};
use crate::refusal::{Reason, Refusal};
use crate::several;
use crate::tolerance;
use crate::unit::{self, Fault, Unit};
use crate::words;

/// A text that this kind would accept.
pub(crate) fn example(kind: Kind) -> String {
    let unit = units(kind).first().copied().unwrap_or("");
    let word = match kind {
        kind if kind.oscillates() => " peak",
        Kind::Pressure => " abs",
        _ => "",
    };
    format!("10 {unit}{word}")
}

/// The unit of a measure, also one that is not used here.
///
/// # Errors
/// Missing or not known.
pub(crate) fn read_unit(text: &str, measure: &Measure, kind: Kind) -> Result<Unit, Refusal> {
    let written = &text[measure.unit.clone()];
    if written.is_empty() && kind != Kind::Ratio {
        return Err(unit_missing(text, measure, kind));
    }
    unit::read(written, kind.is_acceleration()).map_err(|fault| unit_not_known(text, measure, kind, fault))
}

/// The unit of the value, of the wanted kind, with the kind read.
///
/// # Errors
/// Missing, not known, not used here, of another kind; or a range or a one-sided tolerance where a unit was looked for.
pub(crate) fn value_unit(text: &str, parts: &Parts, kind: Kind) -> Result<(Unit, Kind), Refusal> {
    let measure = &parts.value;
    let read = read_unit(text, measure, kind).and_then(|unit| match kind.accepts(unit.dimension) {
        Some(kind) if unit.foreign => Err(foreign(text, parts, unit, kind)),
        Some(kind) => Ok((unit, kind)),
        None => Err(wrong_kind(text, measure, unit, kind)),
    });
    read.map_err(|refusal| {
        let behind = measure.number.range.end..measure.unit.end;
        if behind.start >= behind.end {
            return refusal;
        }
        if several::range_mark(&text[..behind.end], behind.start).is_some() {
            let message = format!("\"{}\" reads as a range; one value is wanted here.", text.trim());
            return Refusal::new(Reason::RangeOutOfPlace, several::whole(text), message);
        }
        tolerance::one_sided(text, &measure.number, behind, kind).unwrap_or(refusal)
    })
}

fn unit_missing(text: &str, measure: &Measure, kind: Kind) -> Refusal {
    let number = measure.number.range.clone();
    let message = format!(
        "\"{}\" has no unit; {} is wanted, such as \"{}\".",
        &text[number.clone()],
        kind.words(),
        example(kind)
    );
    // Behind the bracket of `(42 ± 0.5)`, else behind the number.
    let at = measure.unit.start;
    let at = number.end + text[number.end..at].trim_end().len();
    // The amplitude word or reference that the kind needs comes with the unit where it is not there yet.
    let word = match kind {
        kind if kind.oscillates() && measure.amplitude.is_none() => " peak",
        Kind::Pressure if measure.reference.is_none() => " abs",
        _ => "",
    };
    units(kind).iter().take(3).fold(Refusal::new(Reason::UnitMissing, number, message), |refusal, unit| {
        let said = format!("{} {unit}{word}{}", &text[..at], &text[at..]);
        refusal.mend(format!("Take it as {unit}{word}: \"{}\"", said.trim()), said, false)
    })
}

fn unit_not_known(text: &str, measure: &Measure, kind: Kind, fault: Fault) -> Refusal {
    let written = &text[measure.unit.clone()];
    let replaced = |unit: &str| format!("{}{unit}{}", &text[..measure.unit.start], &text[measure.unit.end..]);
    let whole =
        |range: std::ops::Range<usize>| measure.unit.start + range.start..measure.unit.start + range.end;
    let at = match fault {
        Fault::Combined(range) => {
            let symbol = &written[range.clone()];
            let message = format!("\"{symbol}\" stands by itself, never together with another unit.");
            let refusal = Refusal::new(Reason::UnitNotKnown, whole(range), message);
            return mend_unit(refusal, near::by_phrase(written, kind), replaced);
        }
        Fault::Unknown(range) => range,
    };
    if let Some((unit, word)) = hanging_word(written, kind) {
        let said = replaced(&format!("{unit} {word}"));
        let message = format!("\"{written}\" is no unit; write \"{word}\" apart.");
        return Refusal::new(Reason::UnitNotKnown, measure.unit.clone(), message).mend(
            format!("Write \"{}\"", said.trim()),
            said,
            true,
        );
    }
    let symbol = &written[at.clone()];
    let message = format!(
        "\"{symbol}\" is no unit that is known; {} is wanted, such as \"{}\".",
        kind.words(),
        example(kind)
    );
    let refusal = Refusal::new(Reason::UnitNotKnown, whole(at.clone()), message);
    mend_unit(refusal, near::near(written, at, kind), replaced)
}

fn mend_unit(refusal: Refusal, near: Option<Near>, replaced: impl Fn(&str) -> String) -> Refusal {
    match near {
        Some(Near { unit, clear }) => {
            let said = replaced(&unit);
            refusal.mend(format!("Write {unit}: \"{}\"", said.trim()), said, clear)
        }
        None => refusal,
    }
}

/// `grms`, `mmpp`, `barg`, `psia`: a unit of the wanted kind with a word that hangs on it.
fn hanging_word(written: &str, kind: Kind) -> Option<(&str, &str)> {
    let fits = |unit: &str| {
        unit::read(unit, kind.is_acceleration()).is_ok_and(|unit| kind.accepts(unit.dimension).is_some())
    };
    if kind.oscillates() {
        return words::hanging_amplitudes(written)
            // `Grms` is common in the trade.
            .map(|(unit, word)| (if &written[..unit] == "G" { "g0" } else { &written[..unit] }, word))
            .find(|(unit, _)| fits(unit));
    }
    if !matches!(kind, Kind::Pressure | Kind::AbsolutePressure) {
        return None;
    }
    [("(g)", "gauge"), ("(a)", "abs"), ("g", "gauge"), ("a", "abs")]
        .iter()
        .filter_map(|(ending, word)| Some((written.strip_suffix(ending)?.trim_end(), *word)))
        .find(|(unit, _)| !unit.is_empty() && fits(unit))
}

/// A unit that is understood, but not used here.
pub(crate) fn not_used(text: &str, measure: &Measure, kind: Kind) -> Refusal {
    let written = &text[measure.unit.clone()];
    let message = match kind {
        Kind::Frequency => format!("\"{written}\" counts by the minute; a frequency is in Hz."),
        _ => format!("\"{written}\" is not used here; write {} in SI units.", kind.words()),
    };
    Refusal::new(Reason::UnitNotKnown, measure.unit.clone(), message)
}

/// `3 in`, `1200 rpm`: understood, not used; the mend says the same in SI units.
fn foreign(text: &str, parts: &Parts, unit: Unit, kind: Kind) -> Refusal {
    let measure = &parts.value;
    let refusal = not_used(text, measure, kind);
    let value = measure.number.value * unit.size + unit.offset;
    let digits = measure.number.digits.saturating_add(2).max(6);
    // With a tolerance two numbers would have to change; the person does that better.
    if parts.tolerance.is_some() || !value.is_finite() {
        return refusal;
    }
    let printed = print(value, kind, digits);
    let (number, symbol) = printed.split_once(' ').unwrap_or((&printed, ""));
    let said = format!(
        "{}{} {symbol}{}",
        &text[..measure.number.range.start],
        without_idle_zeros(number),
        &text[measure.unit.end..]
    );
    refusal.mend(format!("Write \"{}\"", said.trim()), said, true)
}

fn without_idle_zeros(number: &str) -> String {
    let (mantissa, exponent) = number.split_at(number.find('e').unwrap_or(number.len()));
    let short =
        if mantissa.contains('.') { mantissa.trim_end_matches('0').trim_end_matches('.') } else { mantissa };
    format!("{short}{exponent}")
}

/// A known unit of another kind of quantity.
pub(crate) fn wrong_kind(text: &str, measure: &Measure, unit: Unit, kind: Kind) -> Refusal {
    let written = &text[measure.unit.clone()];
    let range = if measure.unit.is_empty() { measure.number.range.clone() } else { measure.unit.clone() };
    let is = Kind::of(unit.dimension).unwrap_or("another kind of quantity");
    let message = format!(
        "\"{written}\" measures {is}; {} is wanted here, such as \"{}\".",
        kind.words(),
        example(kind)
    );
    let refusal = Refusal::new(Reason::UnitOfWrongKind, range, message);
    let (start, end) = (measure.unit.start, measure.unit.end);
    if kind == Kind::Frequency && written == "rad/s" {
        let hertz = significant(measure.number.value / std::f64::consts::TAU, 6);
        let number = measure.number.range.start;
        let said = format!("{}{} Hz{}", &text[..number], without_idle_zeros(&hertz), &text[end..]);
        return refusal.mend(format!("Write \"{}\"", said.trim()), said, true);
    }
    mend_unit(refusal, near::by_phrase(written, kind), |unit| {
        format!("{}{unit}{}", &text[..start], &text[end..])
    })
}
