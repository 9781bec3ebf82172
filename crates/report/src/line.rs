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

/// Control characters would break the line or steer a terminal: they are shown as their code points.
pub fn one_line(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '\n' | '\t' => out.push(' '),
            c if c.is_control() => out += &format!("\\u{{{:x}}}", c as u32),
            c => out.push(c),
        }
    }
    out
}
