//! Our types in the words of the protocol. Conversions only.

use crate::ability::Ability;
use crate::documents::Document;
use setup::finding::{Edit, Finding, Severity, Span};
use setup::lines::Encoding;
use tower_lsp::lsp_types::{
    Diagnostic, DiagnosticRelatedInformation, DiagnosticSeverity, DocumentChanges, Location, NumberOrString,
    OneOf, OptionalVersionedTextDocumentIdentifier, Position, Range, TextDocumentEdit, TextEdit,
    WorkspaceEdit,
};

/// The name under which editors show our findings.
const SOURCE: &str = "topheavy";

/// A byte range of the document's text.
pub(crate) fn range(document: &Document, span: &Span, encoding: Encoding) -> Range {
    let position = |offset| {
        let position = document.lines.position(&document.text, offset, encoding);
        Position::new(position.line, position.character)
    };
    Range::new(position(span.start), position(span.end.max(span.start)))
}

/// A finding. What the team accepted stays readable and no longer stands out.
pub(crate) fn diagnostic(document: &Document, finding: &Finding, ability: &Ability) -> Diagnostic {
    let range = |span| range(document, span, ability.encoding);
    let related = finding.related.iter().map(|related| DiagnosticRelatedInformation {
        location: Location::new(document.uri.clone(), range(&related.span)),
        message: related.message.clone(),
    });
    let message = finding.message.text();
    Diagnostic {
        range: range(&finding.span),
        severity: Some(if finding.accepted { DiagnosticSeverity::HINT } else { severity(finding.severity) }),
        code: Some(NumberOrString::String(finding.rule.to_owned())),
        source: Some(SOURCE.to_owned()),
        message: if finding.accepted { format!("Accepted. {message}") } else { message },
        related_information: (ability.related_information && !finding.related.is_empty())
            .then(|| related.collect()),
        ..Diagnostic::default()
    }
}

/// A check that fell over: it says nothing about the stack.
pub(crate) fn fault(reason: &str) -> Diagnostic {
    Diagnostic {
        severity: Some(DiagnosticSeverity::ERROR),
        code: Some(NumberOrString::String("internal-fault".to_owned())),
        source: Some(SOURCE.to_owned()),
        message: format!(
            "The check of this file stopped at a fault of its own ({reason}). Nothing is known about the stack \
             until it runs again. Change the text and it is tried anew; please report the fault with this file."
        ),
        ..Diagnostic::default()
    }
}

fn severity(severity: Severity) -> DiagnosticSeverity {
    match severity {
        Severity::Error => DiagnosticSeverity::ERROR,
        Severity::Warning => DiagnosticSeverity::WARNING,
        Severity::Information => DiagnosticSeverity::INFORMATION,
        Severity::Hint => DiagnosticSeverity::HINT,
    }
}

/// Edits of one document, tied to its version where the editor can check that.
pub(crate) fn workspace_edit(document: &Document, edits: &[Edit], ability: &Ability) -> WorkspaceEdit {
    let edits = edits
        .iter()
        .map(|edit| TextEdit::new(range(document, &edit.span, ability.encoding), edit.new_text.clone()));
    if !ability.versioned_edits {
        return WorkspaceEdit::new([(document.uri.clone(), edits.collect())].into());
    }
    let text_document = OptionalVersionedTextDocumentIdentifier {
        uri: document.uri.clone(),
        version: Some(document.version),
    };
    let edits = edits.map(OneOf::Left).collect();
    WorkspaceEdit {
        document_changes: Some(DocumentChanges::Edits(vec![TextDocumentEdit { text_document, edits }])),
        ..WorkspaceEdit::default()
    }
}
