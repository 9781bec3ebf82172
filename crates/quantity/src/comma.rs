//! Commas in numbers: refused, since a comma is a decimal sign to one reader and a mark of thousands to the next.

use crate::refusal::{Reason, Refusal};
use std::ops::Range;

/// The refusal of the first number with a comma, with mends of the whole text; `None` when there is none.
pub(crate) fn refuse(text: &str) -> Option<Refusal> {
    let first = next_token(text, 0)?;
    let written = &text[first.clone()];
    let message =
        format!("\"{written}\" has a comma; numbers here have a decimal point, and thousands no mark.");
    let refusal = Refusal::new(Reason::DecimalComma, first, message);
    let decimal = rewritten(text, |token| as_decimal(token).or_else(|| as_thousands(token)));
    let thousands = rewritten(text, |token| as_thousands(token).or_else(|| as_decimal(token)));
    Some(match (decimal, thousands) {
        (Some(decimal), Some(thousands)) if decimal != thousands => refusal
            .mend(format!("Read the comma as a decimal point: \"{decimal}\""), decimal, false)
            .mend(format!("Read the comma as a mark of thousands: \"{thousands}\""), thousands, false),
        (Some(plain), _) => refusal.mend(format!("Write \"{plain}\""), plain, true),
        _ => refusal,
    })
}

/// The next run of digits, points and commas that has a comma before a digit.
fn next_token(text: &str, from: usize) -> Option<Range<usize>> {
    let bytes = text.as_bytes();
    let is_part = |b: u8| b.is_ascii_digit() || b == b',' || b == b'.';
    let comma =
        (from..bytes.len().saturating_sub(1)).find(|&i| bytes[i] == b',' && bytes[i + 1].is_ascii_digit())?;
    let start = (from..comma).rev().take_while(|&i| is_part(bytes[i])).last().unwrap_or(comma);
    let end = (comma..bytes.len()).find(|&i| !is_part(bytes[i])).unwrap_or(bytes.len());
    Some(start..end)
}

/// The text with every such number read by `read`; `None` when one cannot be.
fn rewritten(text: &str, read: impl Fn(&str) -> Option<String>) -> Option<String> {
    let (mut out, mut at) = (String::with_capacity(text.len()), 0);
    while let Some(token) = next_token(text, at) {
        out.push_str(&text[at..token.start]);
        out.push_str(&read(&text[token.clone()])?);
        at = token.end;
    }
    out.push_str(&text[at..]);
    Some(out)
}

/// `1,5` as 1.5, `1.234,5` as 1234.5.
fn as_decimal(token: &str) -> Option<String> {
    let (whole, fraction) = token.split_once(',')?;
    let plain = !fraction.contains([',', '.']) && (!whole.contains('.') || in_threes(whole, '.'));
    plain.then(|| format!("{}.{fraction}", whole.replace('.', "")))
}

/// `1,234` and `1,234.5` as 1234 and 1234.5.
fn as_thousands(token: &str) -> Option<String> {
    let whole = token.split('.').next().unwrap_or(token);
    let plain = token.matches('.').count() <= 1 && in_threes(whole, ',');
    let led_by_zero = token.starts_with('0');
    (plain && !led_by_zero && !token[whole.len()..].contains(',')).then(|| token.replace(',', ""))
}

/// Whether a mark cuts the digits into groups of three.
fn in_threes(whole: &str, mark: char) -> bool {
    let mut groups = whole.split(mark);
    groups.next().is_some_and(|first| (1..=3).contains(&first.len())) && groups.all(|group| group.len() == 3)
}
