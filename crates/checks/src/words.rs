//! Numbers in messages: trade form, never more digits than sensible.

use std::fmt::Write;

/// Standard gravity, m/s² (CGPM 1901).
pub(crate) const G0: f64 = 9.80665;

/// A number with `digits` significant digits, plain where it reads well, else with a power of ten.
pub(crate) fn number(value: f64, digits: usize) -> String {
    if value == 0.0 || !value.is_finite() {
        return format!("{value}");
    }
    let exponent = value.abs().log10().floor() as i32;
    if !(-4..7).contains(&exponent) {
        return format!("{value:.*e}", digits.saturating_sub(1));
    }
    let scale = 10f64.powi(exponent + 1 - digits as i32);
    let rounded = (value / scale).round() * scale;
    // Rounding may carry into the next decade: 9.996 is 10.0 and not 10.00.
    let exponent = rounded.abs().log10().floor() as i32;
    let decimals = (digits as i32 - 1 - exponent).max(0) as usize;
    format!("{rounded:.decimals$}")
}

/// `13.0 g0 peak (127.5 m/s²)`.
pub(crate) fn acceleration(value: f64) -> String {
    format!("{} g0 peak ({} m/s²)", number(value / G0, 3), number(value, 4))
}

/// `13.0 g0 peak`.
pub(crate) fn short_acceleration(value: f64) -> String {
    format!("{} g0 peak", number(value / G0, 3))
}

/// `21.5 %`.
pub(crate) fn percent(ratio: f64) -> String {
    format!("{} %", number(ratio * 100.0, if ratio.abs() < 0.1 { 2 } else { 3 }))
}

/// Millimetres: `2.58 mm`.
pub(crate) fn millimetres(value: f64) -> String {
    format!("{} mm", number(value * 1e3, 3))
}

/// `50.0 Hz`.
pub(crate) fn hertz(value: f64) -> String {
    format!("{} Hz", number(value, 3))
}

/// `21.5 °C` of a temperature in K.
pub(crate) fn celsius(kelvin: f64) -> String {
    format!("{} °C", number(kelvin - 273.15, 3))
}

/// Wavelength and wavenumber: `100 mm (62.8 1/m)`.
pub(crate) fn wave(wavenumber: f64) -> String {
    format!("{} ({} 1/m)", millimetres(std::f64::consts::TAU / wavenumber), number(wavenumber, 3))
}

/// Several words joined: `a`, `a and b`, `a, b and c`.
pub(crate) fn list(items: &[String]) -> String {
    let mut text = String::new();
    for (i, item) in items.iter().enumerate() {
        let joint = match i {
            0 => "",
            i if i + 1 == items.len() => " and ",
            _ => ", ",
        };
        let _ = write!(text, "{joint}{item}");
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_keep_their_digits() {
        assert_eq!(number(13.0, 3), "13.0");
        assert_eq!(number(127.486, 4), "127.5");
        assert_eq!(number(9.996, 3), "10.0");
        assert_eq!(number(0.012345, 2), "0.012");
        assert_eq!(number(123456.0, 3), "123000");
        assert_eq!(number(1.8e-5, 2), "1.8e-5");
        assert_eq!(number(-2.5, 2), "-2.5");
        assert_eq!(number(0.0, 3), "0");
    }

    #[test]
    fn lists_read_like_sentences() {
        let names = ["a", "b", "c"].map(str::to_owned);
        assert_eq!(list(&names[..1]), "a");
        assert_eq!(list(&names[..2]), "a and b");
        assert_eq!(list(&names), "a, b and c");
    }
}
