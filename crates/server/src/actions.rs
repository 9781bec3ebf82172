//! Code actions: mends that keep the meaning, and changes that choose a value. The two are never mixed: mends may
//! run on save and all at once, changes only by hand and one at a time.

use crate::ability::Ability;
use crate::session::diagnostics::Checked;
use crate::to_lsp;
use checks::Analysis;
use setup::finding::{Edit, Finding, Fix};
use std::time::Duration;
use tower_lsp::lsp_types::{CodeAction, CodeActionKind, CodeActionOrCommand, CodeActionParams, Range};

/// What can be done about the findings on the lines that were asked for; waits for changes that are being tried as
/// long as the patience lasts.
pub(crate) async fn actions(
    checked: &Checked,
    asked: &CodeActionParams,
    ability: &Ability,
    patience: Duration,
) -> Vec<CodeActionOrCommand> {
    let Ok(analysis) = &checked.analysis else { return Vec::new() };
    let mut actions = Vec::new();
    if is_wanted(asked, &CodeActionKind::QUICKFIX) {
        let here = on_lines(checked, analysis, &asked.range, ability);
        for (index, tried) in here.iter().zip(tried(checked, &here, patience).await) {
            let mut finding = analysis.findings[*index].clone();
            checks::offer(&mut finding, tried);
            actions.extend(quick_fixes(checked, &finding, ability));
        }
    }
    if is_wanted(asked, &CodeActionKind::SOURCE_FIX_ALL) {
        actions.extend(every_mend(checked, analysis, ability));
    }
    actions.into_iter().map(CodeActionOrCommand::CodeAction).collect()
}

/// Whether the editor wants actions of a kind: it names kinds or their parents, or nothing.
fn is_wanted(asked: &CodeActionParams, kind: &CodeActionKind) -> bool {
    let falls_under = |wanted: &CodeActionKind| {
        let rest = kind.as_str().strip_prefix(wanted.as_str());
        rest.is_some_and(|rest| rest.is_empty() || rest.starts_with('.') || wanted.as_str().is_empty())
    };
    asked.context.only.as_ref().is_none_or(|only| only.iter().any(falls_under))
}

/// The findings that show on the lines of a range.
fn on_lines(checked: &Checked, analysis: &Analysis, asked: &Range, ability: &Ability) -> Vec<usize> {
    let touches = |finding: &Finding| {
        let range = to_lsp::range(&checked.document, &finding.span, ability.encoding);
        range.start.line <= asked.end.line && asked.start.line <= range.end.line
    };
    let findings = analysis.findings.iter().enumerate();
    findings.filter(|(_, finding)| touches(finding)).map(|(index, _)| index).collect()
}

/// The tried changes of some findings, as far as they are known when the patience ends.
async fn tried(checked: &Checked, findings: &[usize], patience: Duration) -> Vec<Vec<Fix>> {
    let mut tried = checked.tried.subscribe();
    let all_known = tried.wait_for(|tried| findings.iter().all(|&finding| tried[finding].is_some()));
    let _ = tokio::time::timeout(patience, all_known).await;
    let known = checked.tried.borrow();
    findings.iter().map(|&finding| known[finding].clone().unwrap_or_default()).collect()
}

/// One action for each fix of a finding. A lone mend is the one that an editor may make by its shortcut.
fn quick_fixes(checked: &Checked, finding: &Finding, ability: &Ability) -> Vec<CodeAction> {
    let document = &checked.document;
    let diagnostic = to_lsp::diagnostic(document, finding, ability);
    let lone = finding.fixes.iter().filter(|fix| fix.keeps_meaning).count() == 1;
    let action = |fix: &Fix| CodeAction {
        title: fix.title.clone(),
        kind: Some(CodeActionKind::QUICKFIX),
        diagnostics: Some(vec![diagnostic.clone()]),
        edit: Some(to_lsp::workspace_edit(document, &fix.edits, ability)),
        is_preferred: (lone && fix.keeps_meaning).then_some(true),
        ..CodeAction::default()
    };
    finding.fixes.iter().map(action).collect()
}

/// All mends at once; `None` when there is none.
fn every_mend(checked: &Checked, analysis: &Analysis, ability: &Ability) -> Option<CodeAction> {
    let (edits, mends) = together(&analysis.findings);
    let title = match mends {
        0 => return None,
        1 => "Make the one mend that keeps the meaning".to_owned(),
        mends => format!("Make all {mends} mends that keep the meaning"),
    };
    Some(CodeAction {
        title,
        kind: Some(CodeActionKind::SOURCE_FIX_ALL),
        edit: Some(to_lsp::workspace_edit(&checked.document, &edits, ability)),
        ..CodeAction::default()
    })
}

/// The edits of the mends that need no choice, and how many mends they are. One that touches the bytes of an earlier
/// one is left for the next time.
fn together(findings: &[Finding]) -> (Vec<Edit>, usize) {
    let mut edits: Vec<Edit> = Vec::new();
    let mut mends = 0;
    for finding in findings.iter().filter(|finding| !finding.accepted) {
        let [mend] = finding.fixes.as_slice() else { continue };
        let meets = |edit: &Edit| {
            edits.iter().any(|other| edit.span.start <= other.span.end && other.span.start <= edit.span.end)
        };
        if mend.keeps_meaning && !mend.edits.iter().any(meets) {
            edits.extend(mend.edits.iter().cloned());
            mends += 1;
        }
    }
    edits.sort_by_key(|edit| (edit.span.start, edit.span.end));
    (edits, mends)
}

#[cfg(test)]
mod tests {
    use super::*;
    use setup::finding::{Message, Severity};
    use tower_lsp::lsp_types::{CodeActionContext, TextDocumentIdentifier, Url};

    fn finding(fixes: &[(bool, std::ops::Range<usize>)]) -> Finding {
        let fix = |(keeps_meaning, span): &(bool, std::ops::Range<usize>)| Fix {
            title: String::new(),
            keeps_meaning: *keeps_meaning,
            edits: vec![Edit { span: span.clone(), new_text: String::new() }],
        };
        Finding {
            rule: "line-unreadable",
            severity: Severity::Error,
            place: String::new(),
            span: 0..0,
            message: Message::default(),
            values: Vec::new(),
            related: Vec::new(),
            fixes: fixes.iter().map(fix).collect(),
            fixable: true,
            accepted: false,
        }
    }

    #[test]
    fn all_mends_leave_out_choices_and_what_meets() {
        let findings = [
            finding(&[(true, 10..12)]),
            finding(&[(false, 20..22)]),
            finding(&[(true, 30..32), (true, 30..33)]),
            finding(&[(true, 11..14)]),
            finding(&[(true, 2..4)]),
        ];
        let (edits, mends) = together(&findings);
        assert_eq!(edits.iter().map(|edit| edit.span.clone()).collect::<Vec<_>>(), [2..4, 10..12]);
        assert_eq!(mends, 2);
    }

    /// A wanted kind stands for every kind below it (Language Server Protocol 3.17, CodeActionKind).
    #[test]
    fn kinds_stand_for_those_below() {
        let wants = |only: Option<&[&str]>| {
            let only =
                only.map(|kinds| kinds.iter().map(|kind| CodeActionKind::from((*kind).to_owned())).collect());
            let asked = CodeActionParams {
                text_document: TextDocumentIdentifier::new(Url::parse("file:///a.stack.toml").unwrap()),
                range: Range::default(),
                context: CodeActionContext { only, ..CodeActionContext::default() },
                work_done_progress_params: Default::default(),
                partial_result_params: Default::default(),
            };
            is_wanted(&asked, &CodeActionKind::SOURCE_FIX_ALL)
        };
        assert!(wants(None));
        assert!(wants(Some(&["source"])));
        assert!(wants(Some(&["quickfix", "source.fixAll"])));
        assert!(wants(Some(&[""])));
        assert!(!wants(Some(&["source.fix"])));
        assert!(!wants(Some(&["source.fixAll.topheavy"])));
        assert!(!wants(Some(&["quickfix"])));
    }
}
