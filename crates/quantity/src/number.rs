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

/// Reads the number at the start of a part of the text; white space before it is skipped.
///
/// # Errors
/// No number there, or a value that is not finite.
pub(crate) fn read(text: &str, part: Range<usize>) -> Result<Number, Refusal> {
    let whole = &text[part.clone()];
    let start = part.end - whole.trim_start().len();
    let body = &text[start..part.end];
    let mut plain = String::with_capacity(24);
    let (mut end, mut significant, mut seen_point) = (0, 0usize, false);
    // Digits in all, and since the start, the point or the last space between groups.
    let (mut digits, mut run, mut grouped) = (0usize, 0usize, false);
    for (i, c) in body.char_indices() {
        match c {
            '+' | '-' | '−' if i == 0 => plain.push(if c == '+' { '+' } else { '-' }),
            '0'..='9' => {
                plain.push(c);
                digits += 1;
                run += 1;
                if significant > 0 || c != '0' {
                    significant += 1;
                }
            }
            '.' if !seen_point => {
                (seen_point, run, grouped) = (true, 0, false);
                plain.push('.');
            }
            c if is_group_space(c) && digits > 0 => {
                let whole_group = run == 3 || (!grouped && !seen_point && (1..=3).contains(&run));
                if !whole_group || !three_digits(&body[i + c.len_utf8()..]) {
                    break;
                }
                (run, grouped) = (0, true);
            }
            _ => break,
        }
        end = i + c.len_utf8();
    }
    if digits == 0 {
        return Err(no_number(body, start));
    }
    if seen_point && body[end..].starts_with('.') {
        let message = "the number has two decimal points; keep one.";
        return Err(Refusal::new(Reason::NumberUnreadable, start..start + end + 1, message));
    }
    end += exponent(&body[end..], &mut plain);
    let value: f64 = plain.parse().unwrap_or(f64::NAN);
    if !value.is_finite() {
        let message = format!("\"{}\" is beyond every number that can be used.", &body[..end]);
        return Err(Refusal::new(Reason::NotFinite, start..start + end, message));
    }
    Ok(Number { value, range: start..start + end, digits: significant.clamp(1, 17) as u8 })
}

/// Whether exactly three digits follow (and no fourth).
fn three_digits(rest: &str) -> bool {
    rest.bytes().take_while(u8::is_ascii_digit).count() == 3
}

fn no_number(body: &str, start: usize) -> Refusal {
    let word = body.split_whitespace().next().unwrap_or("");
    let range = start..start + word.len();
    let bare = word.trim_start_matches(['+', '-', '−']).to_lowercase();
    if ["nan", "inf", "infinity", "∞"].contains(&bare.as_str()) {
        let message = format!("\"{word}\" is no number that can be used; write a finite one.");
        return Refusal::new(Reason::NotFinite, range, message);
    }
    let what =
        if word.is_empty() { "there is no number".to_owned() } else { format!("\"{word}\" is no number") };
    let message = format!("{what}; write the number first, then its unit.");
    Refusal::new(Reason::NumberUnreadable, range, message)
}

/// An exponent `e-3`, `E3`, `×10^-3`, `x10⁻³`, `·10^5` at the start: its bytes; appended to `plain` in Rust's form.
fn exponent(rest: &str, plain: &mut String) -> usize {
    let sign = |c: char| matches!(c, '-' | '−' | '+' | '⁻' | '⁺');
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
