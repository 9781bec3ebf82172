//! Units: a table of symbols with their size and dimension, and the grammar that combines them.
//!
//! Sizes: SI Brochure, 9th edition (2019), tables 2, 4, 7 and 8; pound-force per square inch: NIST SP 811 (2008),
//! appendix B.8; standard gravity 9.80665 m/s²: 3rd CGPM (1901).

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

struct Symbol {
    symbol: &'static str,
    size: f64,
    dimension: Dimension,
    prefixes: bool,
}

const fn unit(symbol: &'static str, size: f64, dimension: Dimension) -> Symbol {
    Symbol { symbol, size, dimension, prefixes: true }
}

const fn alone(symbol: &'static str, size: f64, dimension: Dimension) -> Symbol {
    Symbol { symbol, size, dimension, prefixes: false }
}

const DEGREE: f64 = std::f64::consts::PI / 180.0;
/// Standard gravity, m/s².
pub(crate) const STANDARD_GRAVITY: f64 = 9.80665;

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
    alone("min", 60.0, TIME),
    alone("h", 3600.0, TIME),
    alone("deg", DEGREE, ANGLE),
    alone("°", DEGREE, ANGLE),
    alone("psi", 6_894.757_293_168_361, PRESSURE),
    alone("g0", STANDARD_GRAVITY, ACCELERATION),
    alone("gn", STANDARD_GRAVITY, ACCELERATION),
    alone("%", 1e-2, NONE),
    alone("ppm", 1e-6, NONE),
    alone("dB", 1.0, LEVEL),
    alone("fps", 1.0, FRAMES),
];

const PREFIXES: &[(&str, f64)] = &[
    ("da", 1e1),
    ("T", 1e12),
    ("G", 1e9),
    ("M", 1e6),
    ("k", 1e3),
    ("h", 1e2),
    ("d", 1e-1),
    ("c", 1e-2),
    ("m", 1e-3),
    ("µ", 1e-6),
    ("μ", 1e-6),
    ("u", 1e-6),
    ("n", 1e-9),
    ("p", 1e-12),
];

/// A unit as read: value in SI = number × size + offset.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Unit {
    pub size: f64,
    pub offset: f64,
    pub dimension: Dimension,
}

/// Reads a unit expression. `acceleration`: `g` alone means standard gravity.
///
/// # Errors
/// The byte range of the symbol that is not known.
pub(crate) fn read(text: &str, acceleration: bool) -> Result<Unit, std::ops::Range<usize>> {
    let plain = |size, dimension| Ok(Unit { size, offset: 0.0, dimension });
    match text {
        "" => return plain(1.0, NONE),
        "°C" | "ºC" | "℃" | "degC" => {
            return Ok(Unit { size: 1.0, offset: 273.15, dimension: TEMPERATURE });
        }
        "g" if acceleration => return plain(STANDARD_GRAVITY, ACCELERATION),
        _ => {}
    }
    let mut unit = Unit { size: 1.0, offset: 0.0, dimension: NONE };
    let (mut at, mut below) = (0, false);
    let mut expects = true;
    while at < text.len() {
        let rest = &text[at..];
        let Some(c) = rest.chars().next() else { break };
        match c {
            ' ' | '\u{a0}' | '\u{2009}' | '\u{202f}' | '·' | '⋅' | '*' | '×' | '.'
                if !rest.starts_with(". ") =>
            {
                at += c.len_utf8();
                continue;
            }
            '/' | '∕' | '÷' => {
                if below && expects {
                    return Err(at..at + c.len_utf8());
                }
                (below, expects) = (true, true);
                at += c.len_utf8();
                continue;
            }
            // `1/m`, `1/s`
            '1' if at == 0 && rest[1..].trim_start().starts_with('/') => {
                at += 1;
                expects = false;
                continue;
            }
            _ => {}
        }
        let length = symbol_length(rest);
        let (size, dimension) = symbol(&rest[..length]).ok_or(at..at + length.max(c.len_utf8()))?;
        let (power, used) = exponent(&rest[length..]).ok_or(at..at + length)?;
        let power = if below { -power } else { power };
        for (sum, part) in unit.dimension.0.iter_mut().zip(dimension.0) {
            *sum = sum.checked_add(part.checked_mul(power).ok_or(at..at + length)?).ok_or(at..at + length)?;
        }
        unit.size *= size.powi(i32::from(power));
        at += length + used;
        // A solidus reaches to the next factor only; `m/s/s` divides twice.
        (below, expects) = (false, false);
    }
    if expects { Err(0..text.len()) } else { Ok(unit) }
}

/// Bytes of the symbol at the start: letters, `°`, `%` and the digit of `g0`.
fn symbol_length(text: &str) -> usize {
    if text.starts_with("g0") {
        return 2;
    }
    text.char_indices()
        .find(|(_, c)| !(c.is_alphabetic() || matches!(c, '°' | '%' | 'µ' | 'Ω')))
        .map_or(text.len(), |(i, _)| i)
}

fn symbol(text: &str) -> Option<(f64, Dimension)> {
    if let Some(exact) = SYMBOLS.iter().find(|s| s.symbol == text) {
        return Some((exact.size, exact.dimension));
    }
    PREFIXES.iter().find_map(|(prefix, factor)| {
        let rest = text.strip_prefix(prefix)?;
        SYMBOLS.iter().find(|s| s.prefixes && s.symbol == rest).map(|s| (factor * s.size, s.dimension))
    })
}

/// An exponent at the start of the text with the bytes it takes: `^2`, `^-2`, `**2`, `²`, `⁻²`, `-2`, `2`; none: 1.
fn exponent(text: &str) -> Option<(i8, usize)> {
    let (body, skipped) = match text.strip_prefix('^').or_else(|| text.strip_prefix("**")) {
        Some(rest) => (rest, text.len() - rest.len()),
        None => (text, 0),
    };
    let mut value: i8 = 0;
    let (mut used, mut digits, mut negative) = (0, 0, false);
    for (i, c) in body.char_indices() {
        let digit = match c {
            '-' | '−' | '⁻' if i == 0 => {
                negative = true;
                used = c.len_utf8();
                continue;
            }
            '0'..='9' => c as i8 - b'0' as i8,
            '¹' => 1,
            '²' => 2,
            '³' => 3,
            '⁰' => 0,
            '⁴'..='⁹' => (c as u32 - '⁴' as u32) as i8 + 4,
            _ => break,
        };
        value = value.checked_mul(10)?.checked_add(digit)?;
        digits += 1;
        used = i + c.len_utf8();
    }
    match digits {
        0 if skipped == 0 && !negative => Some((1, 0)),
        0 => None,
        _ if value == 0 => None,
        _ => Some((if negative { -value } else { value }, skipped + used)),
    }
}

/// Known unit texts that resemble an unknown one: by case, by common words, by one letter.
pub(crate) fn near(text: &str, candidates: &[&'static str]) -> Option<&'static str> {
    const WORDS: &[(&str, &str)] = &[
        ("hertz", "Hz"),
        ("millimeter", "mm"),
        ("millimeters", "mm"),
        ("millimetre", "mm"),
        ("centimeter", "cm"),
        ("meter", "m"),
        ("metre", "m"),
        ("c", "°C"),
        ("celsius", "°C"),
        ("deg c", "°C"),
        ("° c", "°C"),
        ("kelvin", "K"),
        ("centistokes", "cSt"),
        ("centipoise", "cP"),
        ("cps", "cP"),
        ("gs", "g0"),
        ("gee", "g0"),
        ("percent", "%"),
        ("pct", "%"),
        ("sec", "s"),
        ("seconds", "s"),
        ("second", "s"),
        ("minutes", "min"),
        ("mins", "min"),
        ("hours", "h"),
        ("hr", "h"),
        ("hrs", "h"),
        ("degrees", "deg"),
        ("litre", "L"),
        ("liter", "L"),
        ("cc", "mL"),
        ("ccm", "mL"),
        ("dyn/cm", "mN/m"),
        ("dyne/cm", "mN/m"),
        ("gram", "g"),
        ("grams", "g"),
        ("kilogram", "kg"),
        ("micron", "µm"),
        ("microns", "µm"),
    ];
    let lower = text.to_lowercase();
    let squeezed =
        |s: &str| s.to_lowercase().replace([' ', '·', '^'], "").replace('²', "2").replace('³', "3");
    candidates.iter().copied().find(|candidate| squeezed(candidate) == squeezed(text)).or_else(|| {
        let word = WORDS.iter().find(|(word, _)| *word == lower)?.1;
        candidates.iter().copied().find(|candidate| *candidate == word)
    })
}
