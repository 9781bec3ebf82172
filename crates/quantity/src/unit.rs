//! Units: a table of symbols with their size and dimension, and the grammar that combines them.
//!
//! Sizes: SI Brochure, 9th edition (2019), tables 2, 4, 7 and 8; inch, foot, pound, pound-force, psi, dyne, poise,
//! stokes, torr, conventional millimetre and inch of mercury: NIST SP 811 (2008), appendix B.8; standard gravity
//! 9.80665 m/s²: 3rd CGPM (1901).

use std::ops::Range;

/// Exponents of m, kg, s, K, rad, dB and frames.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default)]
pub(crate) struct Dimension(pub [i8; 7]);

/// m kg s K
const fn mks(m: i8, kg: i8, s: i8, k: i8) -> Dimension {
    Dimension([m, kg, s, k, 0, 0, 0])
}

pub(crate) const NONE: Dimension = mks(0, 0, 0, 0);
pub(crate) const LENGTH: Dimension = mks(1, 0, 0, 0);
pub(crate) const AREA: Dimension = mks(2, 0, 0, 0);
pub(crate) const VOLUME: Dimension = mks(3, 0, 0, 0);
pub(crate) const FOURTH: Dimension = mks(4, 0, 0, 0);
pub(crate) const WAVENUMBER: Dimension = mks(-1, 0, 0, 0);
pub(crate) const MASS: Dimension = mks(0, 1, 0, 0);
pub(crate) const INERTIA: Dimension = mks(2, 1, 0, 0);
pub(crate) const TIME: Dimension = mks(0, 0, 1, 0);
pub(crate) const PER_TIME: Dimension = mks(0, 0, -1, 0);
pub(crate) const TEMPERATURE: Dimension = mks(0, 0, 0, 1);
pub(crate) const PRESSURE: Dimension = mks(-1, 1, -2, 0);
pub(crate) const ACCELERATION: Dimension = mks(1, 0, -2, 0);
pub(crate) const SPEED: Dimension = mks(1, 0, -1, 0);
pub(crate) const DENSITY: Dimension = mks(-3, 1, 0, 0);
pub(crate) const DYNAMIC: Dimension = mks(-1, 1, -1, 0);
pub(crate) const KINEMATIC: Dimension = mks(2, 0, -1, 0);
pub(crate) const TENSION: Dimension = mks(0, 1, -2, 0);
pub(crate) const FORCE: Dimension = mks(1, 1, -2, 0);
pub(crate) const MOMENT: Dimension = mks(2, 1, -2, 0);
pub(crate) const DAMPING: Dimension = mks(0, 1, -1, 0);
pub(crate) const TILT_DAMPING: Dimension = mks(2, 1, -1, 0);
pub(crate) const FLOW: Dimension = mks(3, 0, -1, 0);
pub(crate) const ANGLE: Dimension = Dimension([0, 0, 0, 0, 1, 0, 0]);
pub(crate) const LEVEL: Dimension = Dimension([0, 0, 0, 0, 0, 1, 0]);
pub(crate) const FRAMES: Dimension = Dimension([0, 0, -1, 0, 0, 0, 1]);

/// How a symbol may be written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Use {
    /// With SI prefixes, and in products.
    Prefixed,
    /// In products.
    Plain,
    /// By itself only: `80 % mm` is no quantity.
    Alone,
    /// Understood, but not used in a setup: the refusal says what it is in SI units.
    Foreign,
}

struct Symbol {
    symbol: &'static str,
    size: f64,
    dimension: Dimension,
    is: Use,
}

const fn unit(symbol: &'static str, size: f64, dimension: Dimension) -> Symbol {
    Symbol { symbol, size, dimension, is: Use::Prefixed }
}

const fn plain(symbol: &'static str, size: f64, dimension: Dimension) -> Symbol {
    Symbol { symbol, size, dimension, is: Use::Plain }
}

const fn alone(symbol: &'static str, size: f64, dimension: Dimension) -> Symbol {
    Symbol { symbol, size, dimension, is: Use::Alone }
}

const fn foreign(symbol: &'static str, size: f64, dimension: Dimension) -> Symbol {
    Symbol { symbol, size, dimension, is: Use::Foreign }
}

const DEGREE: f64 = std::f64::consts::PI / 180.0;
const INCH: f64 = 0.0254;
const FOOT: f64 = 0.3048;
const POUND: f64 = 0.453_592_37;
/// Standard gravity, m/s².
const STANDARD_GRAVITY: f64 = 9.80665;
/// Kelvins at 0 °C.
const ICE_POINT: f64 = 273.15;
/// Kelvins at 0 °F: 459.67 × 5/9.
const FAHRENHEIT_ZERO: f64 = 459.67 * 5.0 / 9.0;

const SYMBOLS: &[Symbol] = &[
    unit("m", 1.0, LENGTH),
    unit("g", 1e-3, MASS),
    unit("s", 1.0, TIME),
    unit("K", 1.0, TEMPERATURE),
    unit("Hz", 1.0, PER_TIME),
    unit("N", 1.0, FORCE),
    unit("Pa", 1.0, PRESSURE),
    unit("J", 1.0, MOMENT),
    unit("rad", 1.0, ANGLE),
    unit("L", 1e-3, VOLUME),
    unit("l", 1e-3, VOLUME),
    unit("bar", 1e5, PRESSURE),
    unit("P", 0.1, DYNAMIC),
    unit("St", 1e-4, KINEMATIC),
    plain("min", 60.0, TIME),
    plain("h", 3600.0, TIME),
    plain("psi", 6_894.757_293_168_361, PRESSURE),
    alone("deg", DEGREE, ANGLE),
    alone("°", DEGREE, ANGLE),
    alone("g0", STANDARD_GRAVITY, ACCELERATION),
    alone("gn", STANDARD_GRAVITY, ACCELERATION),
    alone("g₀", STANDARD_GRAVITY, ACCELERATION),
    alone("gₙ", STANDARD_GRAVITY, ACCELERATION),
    alone("%", 1e-2, NONE),
    alone("ppm", 1e-6, NONE),
    alone("dB", 1.0, LEVEL),
    alone("fps", 1.0, FRAMES),
    foreign("rpm", 1.0 / 60.0, PER_TIME),
    foreign("RPM", 1.0 / 60.0, PER_TIME),
    foreign("cpm", 1.0 / 60.0, PER_TIME),
    foreign("rev", 1.0, NONE),
    foreign("r", 1.0, NONE),
    foreign("in", INCH, LENGTH),
    foreign("inch", INCH, LENGTH),
    foreign("inches", INCH, LENGTH),
    foreign("mil", 1e-3 * INCH, LENGTH),
    foreign("thou", 1e-3 * INCH, LENGTH),
    foreign("ft", FOOT, LENGTH),
    foreign("feet", FOOT, LENGTH),
    foreign("lb", POUND, MASS),
    foreign("lbs", POUND, MASS),
    foreign("oz", POUND / 16.0, MASS),
    foreign("lbf", POUND * STANDARD_GRAVITY, FORCE),
    foreign("kgf", STANDARD_GRAVITY, FORCE),
    foreign("dyn", 1e-5, FORCE),
    foreign("dyne", 1e-5, FORCE),
    foreign("atm", 101_325.0, PRESSURE),
    foreign("Torr", 101_325.0 / 760.0, PRESSURE),
    foreign("torr", 101_325.0 / 760.0, PRESSURE),
    foreign("mmHg", 133.322_4, PRESSURE),
    foreign("inHg", 3_386.389, PRESSURE),
];

const PREFIXES: &[(&str, f64)] = &[
    ("m", 1e-3),
    ("k", 1e3),
    ("c", 1e-2),
    ("µ", 1e-6),
    ("μ", 1e-6),
    ("u", 1e-6),
    ("M", 1e6),
    ("G", 1e9),
    ("h", 1e2),
    ("d", 1e-1),
    ("n", 1e-9),
    ("p", 1e-12),
    ("T", 1e12),
    ("da", 1e1),
];

/// A unit as read: value in SI = number × size + offset.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Unit {
    pub size: f64,
    pub offset: f64,
    pub dimension: Dimension,
    /// One of its symbols is understood, but not used in a setup.
    pub foreign: bool,
}

/// Why a text is no unit, with the bytes that make it so.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Fault {
    /// No symbol that is known, or a sign where none can be.
    Unknown(Range<usize>),
    /// A symbol that stands by itself stands in a product.
    Combined(Range<usize>),
}

impl Unit {
    fn simple(size: f64, offset: f64, dimension: Dimension) -> Unit {
        Unit { size, offset, dimension, foreign: false }
    }
}

/// Reads a unit expression: factors with exponents, joined by a blank, a dot or a solidus; brackets below a solidus.
/// `acceleration`: `g` alone means standard gravity.
///
/// # Errors
/// [`Fault`], with byte ranges of `text`.
pub(crate) fn read(text: &str, acceleration: bool) -> Result<Unit, Fault> {
    match text {
        "" => return Ok(Unit::simple(1.0, 0.0, NONE)),
        "°C" | "ºC" | "℃" | "degC" => return Ok(Unit::simple(1.0, ICE_POINT, TEMPERATURE)),
        "°F" | "ºF" | "℉" | "degF" | "deg F" => {
            let unit = Unit::simple(5.0 / 9.0, FAHRENHEIT_ZERO, TEMPERATURE);
            return Ok(Unit { foreign: true, ..unit });
        }
        "g" if acceleration => return Ok(Unit::simple(STANDARD_GRAVITY, 0.0, ACCELERATION)),
        _ => {}
    }
    Product::default().read(text)
}

/// Signs that multiply, beside the blank. The hyphen of `mPa-s` needs a letter behind it.
fn multiplies(c: char, rest: &str) -> bool {
    match c {
        '·' | '⋅' | '∙' | '•' | '*' | '×' | '.' => true,
        '-' | '‑' => rest[c.len_utf8()..].starts_with(char::is_alphabetic),
        _ => false,
    }
}

/// The factors read so far.
#[derive(Default)]
struct Product {
    dimension: Dimension,
    size: Option<f64>,
    factors: usize,
    alone: Option<Range<usize>>,
    foreign: bool,
}

impl Product {
    fn read(mut self, text: &str) -> Result<Unit, Fault> {
        // A dot that ends an abbreviation.
        let end = text.strip_suffix('.').map_or(text.len(), str::len);
        let (mut at, mut below, mut bracket) = (0, false, false);
        let mut wanted = true;
        while let Some(c) = text[at..end].chars().next() {
            let rest = &text[at..end];
            let first = self.factors == 0;
            match c {
                c if c.is_whitespace() => {}
                c if !wanted && multiplies(c, rest) => wanted = true,
                '/' | '∕' | '⁄' | '÷' if !bracket && (!wanted || (first && !below)) => {
                    (below, wanted) = (true, true);
                }
                '(' if below && wanted && !bracket => bracket = true,
                ')' if bracket && !wanted => (bracket, below) = (false, false),
                // `1/m`, `1/s`
                '1' if at == 0 && rest[1..].trim_start().starts_with(['/', '∕', '⁄']) => wanted = false,
                _ => {
                    at += self.factor(rest, at, below)?;
                    wanted = false;
                    // A solidus reaches to the next factor, or to the end of a bracket; `m/s/s` divides twice.
                    below = below && bracket;
                    continue;
                }
            }
            at += c.len_utf8();
        }
        if wanted || bracket {
            return Err(Fault::Unknown(0..text.len()));
        }
        match self.alone {
            Some(range) if self.factors > 1 => Err(Fault::Combined(range)),
            _ => {
                let unit = Unit::simple(self.size.unwrap_or(1.0), 0.0, self.dimension);
                Ok(Unit { foreign: self.foreign, ..unit })
            }
        }
    }

    /// Takes the factor at the start of the text in; its bytes.
    fn factor(&mut self, text: &str, at: usize, below: bool) -> Result<usize, Fault> {
        let length = symbol_length(text);
        let word = at..at + length.max(word_length(text));
        let named = if length > 0 { at..at + length } else { word.clone() };
        let (factor, is, dimension) = symbol(&text[..length]).ok_or(Fault::Unknown(named))?;
        let unknown = || Fault::Unknown(word.clone());
        let (power, used) = exponent(&text[length..]).ok_or_else(unknown)?;
        let power = if below { -power } else { power };
        for (sum, part) in self.dimension.0.iter_mut().zip(dimension.0) {
            *sum = part.checked_mul(power).and_then(|part| sum.checked_add(part)).ok_or_else(unknown)?;
        }
        self.size = Some(self.size.unwrap_or(1.0) * factor.powi(i32::from(power)));
        self.factors += 1;
        self.foreign |= is == Use::Foreign;
        if is == Use::Alone {
            if power != 1 {
                return Err(Fault::Combined(at..at + length));
            }
            self.alone = Some(at..at + length);
        }
        Ok(length + used)
    }
}

/// Bytes of the symbol at the start: letters, `°`, `%` and the figure of `g0`.
fn symbol_length(text: &str) -> usize {
    if let Some(rest) = text.strip_prefix('g').and_then(|rest| rest.strip_prefix(['0', '₀'])) {
        return text.len() - rest.len();
    }
    text.find(|c: char| !(c.is_alphabetic() || matches!(c, '°' | '%'))).unwrap_or(text.len())
}

/// Bytes up to the next blank, at least one character: what a reader takes for one word.
fn word_length(text: &str) -> usize {
    let first = text.chars().next().map_or(0, char::len_utf8);
    text.find(char::is_whitespace).unwrap_or(text.len()).max(first)
}

fn symbol(text: &str) -> Option<(f64, Use, Dimension)> {
    if let Some(exact) = SYMBOLS.iter().find(|s| s.symbol == text) {
        return Some((exact.size, exact.is, exact.dimension));
    }
    PREFIXES.iter().find_map(|(prefix, factor)| {
        let rest = text.strip_prefix(prefix)?;
        SYMBOLS
            .iter()
            .find(|s| s.is == Use::Prefixed && s.symbol == rest)
            .map(|s| (factor * s.size, s.is, s.dimension))
    })
}

/// An exponent at the start of the text with the bytes it takes: `^2`, `^-2`, `**2`, `²`, `⁻²`, `-2`, `2`, ` -2` (a
/// superscript that pasting has flattened); none: 1. `None`: a sign of one without its figure, or zero.
fn exponent(text: &str) -> Option<(i8, usize)> {
    let minus = |c: char| matches!(c, '-' | '−' | '–' | '⁻');
    let spaced = text.trim_start_matches(' ');
    let flattened = spaced.len() < text.len()
        && spaced.strip_prefix(minus).is_some_and(|figure| figure.starts_with(|c: char| c.is_ascii_digit()));
    let (body, marked) = match text.strip_prefix('^').or_else(|| text.strip_prefix("**")) {
        Some(rest) => (rest, true),
        None if flattened => (spaced, false),
        None => (text, false),
    };
    let skipped = text.len() - body.len();
    let (mut value, mut used, mut figures, mut negative): (i8, usize, usize, bool) = (0, 0, 0, false);
    for (i, c) in body.char_indices() {
        let figure = match c {
            c if i == 0 && minus(c) => {
                negative = true;
                continue;
            }
            '0'..='9' => c as u32 - '0' as u32,
            '¹' => 1,
            '²' => 2,
            '³' => 3,
            '⁰' => 0,
            '⁴'..='⁹' => c as u32 - '⁴' as u32 + 4,
            _ => break,
        };
        value = value.checked_mul(10)?.checked_add(i8::try_from(figure).ok()?)?;
        figures += 1;
        used = i + c.len_utf8();
    }
    match figures {
        // A hyphen without a figure may join factors.
        0 if !marked => Some((1, 0)),
        0 => None,
        _ if value == 0 => None,
        _ => Some((if negative { -value } else { value }, skipped + used)),
    }
}
