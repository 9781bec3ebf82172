//! One line a finding, for pipes and editors that read compilers: `file:line:column: severity: message [rule]`.
//! Lines and columns count from 1, columns in code points.

use crate::Checked;
use setup::finding::Severity;
use setup::lines::{Encoding, LineIndex};

/// The severity as a word.
pub fn word(severity: Severity) -> &'static str {
    match severity {
        Severity::Error => "error",
        Severity::Warning => "warning",
        Severity::Information => "information",
        Severity::Hint => "hint",
    }
}

/// All findings of a file, each line ended.
pub fn findings(checked: &Checked) -> String {
    let index = LineIndex::new(checked.text);
    let mut out = String::new();
    for finding in &checked.analysis.findings {
        let at = index.position(checked.text, finding.span.start, Encoding::Utf32);
        let accepted = if finding.accepted { "accepted " } else { "" };
        out += &format!(
            "{}:{}:{}: {accepted}{}: {} [{}]\n",
            one_line(checked.path),
            at.line + 1,
            at.character + 1,
            word(finding.severity),
            one_line(&finding.message.text()),
            finding.rule,
        );
    }
    out
}

/// Characters that would break the line or steer a terminal are shown as their code points.
pub fn one_line(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '\n' | '\t' => out.push(' '),
            c if steers(c) => out += &format!("\\u{{{:x}}}", c as u32),
            c => out.push(c),
        }
    }
    out
}

/// A text of several lines without characters that steer a terminal, each byte where it was: places still fit.
pub fn harmless(text: &str) -> String {
    let stand_in = |c: char| match c.len_utf8() {
        1 => '?',
        2 => '¿',
        _ => '\u{fffd}',
    };
    text.chars()
        .map(|c| if steers(c) && !matches!(c, '\n' | '\r' | '\t') { stand_in(c) } else { c })
        .collect()
}

/// Control characters, and those that turn the direction of writing, so that a line reads as another one than it is.
fn steers(c: char) -> bool {
    let turns = matches!(c, '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}');
    c.is_control() || turns || matches!(c, '\u{2028}' | '\u{2029}')
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_steers_the_terminal() {
        assert_eq!(one_line("a\u{1b}[31m\nb\u{9b}\u{202e}"), "a\\u{1b}[31m b\\u{9b}\\u{202e}");
    }

    #[test]
    fn what_stands_in_is_as_long() {
        let text = "é\u{1b}[2J\r\n\u{85}x\u{202e}y\u{7f}";
        let shown = harmless(text);
        assert_eq!(shown, "é?[2J\r\n¿x\u{fffd}y?");
        assert_eq!(shown.len(), text.len());
    }
}
