//! Numbers as people write and paste them.

use crate::refusal::{Reason, Refusal};
use std::ops::Range;

/// A number with the bytes that it takes.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Number {
    pub value: f64,
    pub range: Range<usize>,
    /// Significant digits as written.
    pub digits: u8,
}

/// Spaces that may group digits by three (SI Brochure 5.4.4).
fn is_group_space(c: char) -> bool {
    matches!(c, ' ' | '\u{a0}' | '\u{2009}' | '\u{202f}')
}

/// Reads the number at the start of `text[from..]`; white space before it is skipped.
///
/// # Errors
/// No number there, a decimal comma, or a value that is not finite.
pub(crate) fn read(text: &str, from: usize) -> Result<Number, Refusal> {
    let start = from + (text[from..].len() - text[from..].trim_start().len());
    let body = &text[start..];
    let mut plain = String::with_capacity(24);
    let (mut end, mut digits, mut seen_point, mut significant) = (0, 0usize, false, 0usize);
    let mut chars = body.char_indices().peekable();
    while let Some(&(i, c)) = chars.peek() {
        match c {
            '+' | '-' | '−' if i == 0 => plain.push(if c == '+' { '+' } else { '-' }),
            '0'..='9' => {
                plain.push(c);
                digits += 1;
                if significant > 0 || c != '0' {
                    significant += 1;
                }
            }
            '.' if !seen_point => {
                seen_point = true;
                plain.push('.');
            }
            c if is_group_space(c) && digits > 0 && groups_of_three(&body[i + c.len_utf8()..]) => {}
            _ => break,
        }
        end = i + c.len_utf8();
        chars.next();
    }
    let here = |range: Range<usize>| start + range.start..start + range.end;
    if digits == 0 {
        let word = body.split_whitespace().next().unwrap_or("");
        let bare = word.trim_start_matches(['+', '-', '−']).to_lowercase();
        let range = here(0..word.len());
        if ["nan", "inf", "infinity", "∞"].contains(&bare.as_str()) {
            return Err(Refusal::new(
                Reason::NotFinite,
                range,
                format!("\"{word}\" is no number that can be used; write a finite one."),
            ));
        }
        let what = if word.is_empty() {
            "there is no number".to_owned()
        } else {
            format!("\"{word}\" is no number")
        };
        return Err(Refusal::new(
            Reason::NumberUnreadable,
            range,
            format!("{what}; write the number first, then its unit."),
        ));
    }
    if body[end..].starts_with(',') && body[end + 1..].starts_with(|c: char| c.is_ascii_digit()) {
        return Err(comma(text, start, end, &body[end + 1..]));
    }
    if body[end..].starts_with('.') {
        let range = here(0..end + 1);
        return Err(Refusal::new(
            Reason::NumberUnreadable,
            range,
            "the number has two decimal points; keep one.",
        ));
    }
    end += exponent(&body[end..], &mut plain);
    let value: f64 = plain.parse().unwrap_or(f64::NAN);
    if !value.is_finite() {
        return Err(Refusal::new(
            Reason::NotFinite,
            here(0..end),
            format!("\"{}\" is beyond every number that can be used.", &body[..end]),
        ));
    }
    Ok(Number { value, range: here(0..end), digits: significant.clamp(1, 17) as u8 })
}

/// Whether exactly three digits follow (and no fourth).
fn groups_of_three(rest: &str) -> bool {
    let digits = rest.bytes().take_while(u8::is_ascii_digit).count();
    digits == 3
}

/// An exponent `e-3`, `E3`, `×10^-3`, `x10⁻³`, `·10^5` at the start: its bytes; appended to `plain` in Rust's form.
fn exponent(rest: &str, plain: &mut String) -> usize {
    let sign = |c: char| matches!(c, '-' | '−' | '+' | '⁻');
    if let Some(body) = rest.strip_prefix(['e', 'E']) {
        let signed = body.strip_prefix(sign).map_or(0, |after| body.len() - after.len());
        let digits = body[signed..].bytes().take_while(u8::is_ascii_digit).count();
        if digits == 0 {
            return 0;
        }
        plain.push('e');
        if body.starts_with(['-', '−']) {
            plain.push('-');
        }
        plain.push_str(&body[signed..signed + digits]);
        return 1 + signed + digits;
    }
    let spaced = rest.trim_start_matches(is_group_space);
    let Some(body) = spaced.strip_prefix(['×', 'x', '·', '*']) else { return 0 };
    let body = body.trim_start_matches(is_group_space);
    let Some(body) = body.strip_prefix("10") else { return 0 };
    let power = body.strip_prefix('^').unwrap_or(body);
    let (mut value, mut used, mut negative, mut digits) = (0i32, 0, false, 0);
    for (i, c) in power.char_indices() {
        let digit = match c {
            c if sign(c) && i == 0 => {
                negative = matches!(c, '-' | '−' | '⁻');
                used = c.len_utf8();
                continue;
            }
            '0'..='9' if body.len() != power.len() => c as i32 - '0' as i32,
            '⁰' => 0,
            '¹' => 1,
            '²' => 2,
            '³' => 3,
            '⁴'..='⁹' => c as i32 - '⁴' as i32 + 4,
            _ => break,
        };
        value = value.saturating_mul(10).saturating_add(digit);
        digits += 1;
        used = i + c.len_utf8();
    }
    if digits == 0 {
        return 0;
    }
    plain.push_str(&format!("e{}{value}", if negative { "-" } else { "" }));
    rest.len() - power.len() + used
}

/// A comma between digits: a decimal comma, unless three digits follow, which may be thousands.
fn comma(text: &str, start: usize, at: usize, after: &str) -> Refusal {
    let digits = after.bytes().take_while(u8::is_ascii_digit).count();
    let position = start + at;
    let range = start..position + 1 + digits;
    let with = |replacement: &str| format!("{}{replacement}{}", &text[..position], &text[position + 1..]);
    let written = &text[range.clone()];
    let message =
        format!("\"{written}\" has a comma; numbers here have a decimal point, and thousands no mark.");
    let refusal = Refusal::new(Reason::DecimalComma, range, message);
    let decimal = with(".");
    if digits == 3 {
        let thousands = with("");
        refusal.mend(format!("Read the comma as a decimal point: \"{decimal}\""), decimal, false).mend(
            format!("Read the comma as a mark of thousands: \"{thousands}\""),
            thousands,
            false,
        )
    } else {
        refusal.mend(format!("Write a decimal point: \"{decimal}\""), decimal, true)
    }
}
