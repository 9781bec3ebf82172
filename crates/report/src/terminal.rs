//! Findings for a person at a terminal: each with the lines it is about.

use crate::Checked;
use crate::line::{harmless, one_line, word};
use miette::{Diagnostic, GraphicalReportHandler, GraphicalTheme, LabeledSpan, NamedSource, SourceCode};
use setup::finding::{Finding, Severity, Span};
use std::fmt;

/// How much the terminal can show.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Style {
    /// Colours.
    pub colour: bool,
    /// Columns.
    pub width: usize,
}

/// All findings of a file.
pub fn findings(checked: &Checked, style: Style) -> String {
    let theme = if style.colour { GraphicalTheme::unicode() } else { GraphicalTheme::unicode_nocolor() };
    let handler = GraphicalReportHandler::new_themed(theme)
        .with_links(false)
        .with_width(style.width.max(40))
        .with_context_lines(1);
    let source = NamedSource::new(one_line(checked.path), harmless(checked.text));
    let mut out = String::new();
    for finding in &checked.analysis.findings {
        let shown = Shown { finding, source: &source, length: checked.text.len() };
        // Drawing into a string fails only where the source cannot be read; the plain line then stands for it.
        if handler.render_report(&mut out, &shown).is_err() {
            out += &format!(
                "{}: {} [{}]\n",
                word(finding.severity),
                one_line(&finding.message.text()),
                finding.rule
            );
        }
        out.push('\n');
    }
    out
}

/// One line on the whole file: its verdict, the margins, how many findings of each severity.
pub fn summary(checked: &Checked) -> String {
    let findings = &checked.analysis.findings;
    let count = |severity: Severity| findings.iter().filter(|finding| finding.severity == severity).count();
    let mut parts: Vec<String> = [
        (Severity::Error, "error", "errors"),
        (Severity::Warning, "warning", "warnings"),
        (Severity::Information, "note", "notes"),
    ]
    .into_iter()
    .filter_map(|(severity, one, many)| match count(severity) {
        0 => None,
        1 => Some(format!("1 {one}")),
        n => Some(format!("{n} {many}")),
    })
    .collect();
    let accepted = findings.iter().filter(|finding| finding.accepted).count();
    if accepted > 0 {
        parts.push(format!("{accepted} of them accepted"));
    }
    let window = checked.analysis.derived.as_ref().and_then(|derived| derived.window);
    // Where something fails the findings say by how much.
    if let Some(window) = window.filter(|_| checked.analysis.verdict != checks::Verdict::Fails) {
        let percent = |ratio: f64| format!("{:.0} %", 100.0 * ratio);
        if let Some(margin) = window.hold_margin().filter(|_| window.exists) {
            parts.push(format!("hold margin {}", percent(margin)));
        }
        match window.wave_margin() {
            Some(margin) if window.exists => parts.push(format!("wave margin {}", percent(margin))),
            _ => {}
        }
    }
    let verdict = checked.analysis.verdict.word();
    let rest = if parts.is_empty() { String::new() } else { format!(": {}", parts.join(", ")) };
    format!("{} {verdict}{rest}\n", one_line(checked.path))
}

/// A finding as the drawing library wants it.
struct Shown<'a> {
    finding: &'a Finding,
    source: &'a NamedSource<String>,
    length: usize,
}

impl Shown<'_> {
    /// The library loses a label that is empty or past the end: such a span is widened or pulled in.
    fn label(&self, text: Option<String>, span: &Span) -> LabeledSpan {
        let start = span.start.min(self.length.saturating_sub(1));
        let end = span.end.clamp(start, self.length).max((start + 1).min(self.length));
        LabeledSpan::new(text, start, end - start)
    }
}

impl fmt::Debug for Shown<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        fmt::Display::fmt(self, f)
    }
}

impl fmt::Display for Shown<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let accepted = if self.finding.accepted { " (accepted)" } else { "" };
        write!(f, "{}{accepted}", one_line(&self.finding.message.what))
    }
}

impl std::error::Error for Shown<'_> {}

impl Diagnostic for Shown<'_> {
    fn code<'a>(&'a self) -> Option<Box<dyn fmt::Display + 'a>> {
        Some(Box::new(format!("{}: {}", word(self.finding.severity), self.finding.rule)))
    }

    fn severity(&self) -> Option<miette::Severity> {
        Some(match self.finding.severity {
            Severity::Error => miette::Severity::Error,
            Severity::Warning => miette::Severity::Warning,
            Severity::Information | Severity::Hint => miette::Severity::Advice,
        })
    }

    fn help<'a>(&'a self) -> Option<Box<dyn fmt::Display + 'a>> {
        let message = &self.finding.message;
        let parts: Vec<_> = [&message.why, &message.remedy]
            .into_iter()
            .filter(|part| !part.is_empty())
            .map(|s| one_line(s))
            .collect();
        let mut text = parts.join(" ");
        for fix in &self.finding.fixes {
            text += &format!("\n- {}", one_line(&fix.title));
        }
        (!text.is_empty()).then(|| Box::new(text) as Box<dyn fmt::Display>)
    }

    fn source_code(&self) -> Option<&dyn SourceCode> {
        (self.length > 0).then_some(self.source as &dyn SourceCode)
    }

    fn labels(&self) -> Option<Box<dyn Iterator<Item = LabeledSpan> + '_>> {
        if self.length == 0 {
            return None;
        }
        let primary = self.label(Some("here".to_owned()), &self.finding.span);
        let related = self
            .finding
            .related
            .iter()
            .map(|related| self.label(Some(one_line(&related.message)), &related.span));
        Some(Box::new(std::iter::once(primary).chain(related)))
    }
}
