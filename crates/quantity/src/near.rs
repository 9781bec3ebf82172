//! What a text that is no unit may have been meant for: by words, by capitals, by one letter.

use crate::kind::{Kind, units};
use crate::unit;
use std::ops::Range;

/// Words for one symbol, lower case. The first whose symbol makes a unit of the wanted kind is taken.
const WORDS: &[(&str, &str)] = &[
    ("millimeter", "mm"),
    ("millimetre", "mm"),
    ("micrometer", "µm"),
    ("micrometre", "µm"),
    ("micron", "µm"),
    ("centimeter", "cm"),
    ("centimetre", "cm"),
    ("meter", "m"),
    ("metre", "m"),
    ("gramme", "g"),
    ("gram", "g"),
    ("gm", "g"),
    ("kilogram", "kg"),
    ("kilo", "kg"),
    ("second", "s"),
    ("sec", "s"),
    ("millisecond", "ms"),
    ("msec", "ms"),
    ("minute", "min"),
    ("min", "min"),
    ("hour", "h"),
    ("hr", "h"),
    ("hertz", "Hz"),
    ("kilohertz", "kHz"),
    ("cps", "cP"),
    ("cps", "Hz"),
    ("c", "°C"),
    ("celsius", "°C"),
    ("kelvin", "K"),
    ("pascal", "Pa"),
    ("bar", "bar"),
    ("mbar", "mbar"),
    ("newton", "N"),
    ("centistoke", "cSt"),
    ("centistokes", "cSt"),
    ("stokes", "St"),
    ("centipoise", "cP"),
    ("poise", "P"),
    ("g", "g0"),
    ("gee", "g0"),
    ("litre", "L"),
    ("liter", "L"),
    ("millilitre", "mL"),
    ("milliliter", "mL"),
    ("ccm", "cm³"),
    ("cc", "cm³"),
    ("degree", "deg"),
    ("radian", "rad"),
    ("percent", "%"),
    ("pct", "%"),
    ("decibel", "dB"),
    ("frame", "fps"),
];

/// Words for a whole unit, lower case.
const PHRASES: &[(&str, &str)] = &[
    ("deg c", "°C"),
    ("deg. c", "°C"),
    ("degree c", "°C"),
    ("degrees c", "°C"),
    ("degrees celsius", "°C"),
    ("° c", "°C"),
    ("°k", "K"),
    ("deg k", "K"),
    ("per cent", "%"),
    ("frames/s", "fps"),
    ("frame/s", "fps"),
    ("frames per second", "fps"),
    ("gees", "g0"),
];

/// The unit text that was probably meant.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Near {
    pub unit: String,
    /// Nothing else can have been meant.
    pub clear: bool,
}

/// What `text`, with the unknown symbol at `at`, may have been meant for.
pub(crate) fn near(text: &str, at: Range<usize>, kind: Kind) -> Option<Near> {
    by_phrase(text, kind)
        .or_else(|| by_word(text, at, kind))
        .or_else(|| by_capitals(text, kind))
        .or_else(|| by_letter(text, kind))
}

/// `deg C`, also where the text reads as another unit: `°K` would be a product.
pub(crate) fn by_phrase(text: &str, kind: Kind) -> Option<Near> {
    let lower = text.to_lowercase();
    let (_, unit) = PHRASES.iter().find(|(phrase, unit)| *phrase == lower && fits(unit, kind))?;
    Some(Near { unit: (*unit).to_owned(), clear: true })
}

fn fits(unit: &str, kind: Kind) -> bool {
    unit::read(unit, kind.is_acceleration()).is_ok_and(|unit| kind.accepts(unit.dimension).is_some())
}

fn by_word(text: &str, at: Range<usize>, kind: Kind) -> Option<Near> {
    let word = text[at.clone()].to_lowercase();
    let singular = word.strip_suffix('s').unwrap_or(&word);
    WORDS
        .iter()
        .filter(|(known, _)| *known == word || *known == singular)
        .map(|(_, symbol)| format!("{}{symbol}{}", &text[..at.start], &text[at.end..]))
        .find(|unit| fits(unit, kind))
        .map(|unit| Near { unit, clear: true })
}

/// Without capitals, blanks, dots and raised figures.
fn squeezed(text: &str) -> String {
    text.chars()
        .filter(|c| !matches!(c, ' ' | '·' | '^' | '*'))
        .flat_map(char::to_lowercase)
        .map(|c| match c {
            '²' => '2',
            '³' => '3',
            'μ' | 'µ' => 'u',
            c => c,
        })
        .collect()
}

fn by_capitals(text: &str, kind: Kind) -> Option<Near> {
    let meant = squeezed(text);
    let unit = units(kind).iter().find(|unit| !unit.is_empty() && squeezed(unit) == meant)?;
    // Between milli and mega lie nine powers of ten: never taken for granted.
    let doubtful =
        unit.len() > 1 && unit.starts_with(['m', 'M']) && text.chars().next() != unit.chars().next();
    // Behind a lone `^` an exponent is lost.
    Some(Near { unit: (*unit).to_owned(), clear: !doubtful && !text.ends_with('^') })
}

/// One letter too many, too few, wrong, or two swapped; of units with at least three letters.
fn by_letter(text: &str, kind: Kind) -> Option<Near> {
    let meant: Vec<char> = squeezed(text).chars().collect();
    let unit = units(kind).iter().find(|unit| {
        let unit: Vec<char> = squeezed(unit).chars().collect();
        unit.len() >= 2 && unit.len().max(meant.len()) >= 3 && one_slip(&unit, &meant)
    })?;
    Some(Near { unit: (*unit).to_owned(), clear: false })
}

fn one_slip(a: &[char], b: &[char]) -> bool {
    let same = a.iter().zip(b).take_while(|(a, b)| a == b).count();
    let (a, b) = (&a[same..], &b[same..]);
    match (a.len() as isize) - (b.len() as isize) {
        1 => a[1..] == *b,
        -1 => *a == b[1..],
        0 if !a.is_empty() => {
            a[1..] == b[1..] || (a.len() > 1 && a[0] == b[1] && a[1] == b[0] && a[2..] == b[2..])
        }
        _ => false,
    }
}
