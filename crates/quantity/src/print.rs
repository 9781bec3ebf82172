//! Numbers and quantities as text.

use crate::kind::{Kind, si_unit, units};
use crate::unit;

/// A number with `digits` significant digits: plain between 1e-4 and 1e6, else with an exponent.
pub fn significant(value: f64, digits: u8) -> String {
    let digits = usize::from(digits.clamp(1, 17));
    if value == 0.0 || !value.is_finite() {
        return format!("{value}");
    }
    // Rounding first decides the magnitude: 9.996 with three digits is 10.0.
    let scientific = format!("{value:.*e}", digits - 1);
    let Some((_, exponent)) = scientific.split_once('e') else { return scientific };
    let exponent: i32 = exponent.parse().unwrap_or(0);
    if (-4..6).contains(&exponent) {
        let decimals = (digits as i32 - 1 - exponent).max(0) as usize;
        // More digits before the point than asked for: round to them.
        if digits as i32 - 1 < exponent {
            let rounded: f64 = scientific.parse().unwrap_or(value);
            return format!("{rounded:.0}");
        }
        return format!("{value:.decimals$}");
    }
    scientific
}

/// A quantity in the unit of its kind that suits its size: `print(0.042, Kind::Length, 3)` is `42.0 mm`.
pub fn print(value: f64, kind: Kind, digits: u8) -> String {
    let (size, offset, symbol) = suited(value, kind);
    let number = significant((value - offset) / size, digits);
    if symbol.is_empty() { number } else { format!("{number} {symbol}") }
}

/// The same for an oscillating quantity given as its peak: `14.0 g0 peak`.
pub fn print_amplitude(peak: f64, kind: Kind, digits: u8) -> String {
    format!("{} peak", print(peak, kind, digits))
}

/// Size, offset and symbol of the natural unit of the kind where the value has one to four digits before the point in
/// it, else of the first in which it has one to three; the natural one where none has.
fn suited(value: f64, kind: Kind) -> (f64, f64, &'static str) {
    let read = |symbol: &'static str| {
        unit::read(symbol, kind.is_acceleration()).ok().map(|unit| (unit.size, unit.offset, symbol))
    };
    // A bare number cannot tell which viscosity it is; its SI unit is that of the dynamic one.
    let kind = if kind == Kind::Viscosity { Kind::DynamicViscosity } else { kind };
    let list = units(kind);
    let natural = list.first().and_then(|symbol| read(symbol)).unwrap_or((1.0, 0.0, si_unit(kind)));
    // Kinds whose readers expect one unit whatever the size.
    let fixed = matches!(
        kind,
        Kind::Temperature
            | Kind::SteadyAcceleration
            | Kind::VibrationAcceleration
            | Kind::Density
            | Kind::Ratio
            | Kind::Level
    );
    if fixed || value == 0.0 {
        return natural;
    }
    let number = |&(size, offset, _): &(f64, f64, &str)| ((value - offset) / size).abs();
    if (1.0..10_000.0).contains(&number(&natural)) {
        return natural;
    }
    list.iter()
        .filter(|symbol| **symbol != "psi")
        .filter_map(|symbol| read(symbol))
        .find(|unit| (1.0..1000.0).contains(&number(unit)))
        .unwrap_or(natural)
}
