//! The text at a place, in the format that the editor shows best.

use crate::ability::Ability;
use crate::documents::Document;
use crate::to_lsp;
use checks::Analysis;
use tower_lsp::lsp_types::{Hover, HoverContents, MarkupContent, MarkupKind, Position};

/// What stands at a position.
pub(crate) fn hover(
    document: &Document,
    analysis: &Analysis,
    position: Position,
    ability: &Ability,
) -> Option<Hover> {
    let text = checks::hover(analysis, document.offset(position, ability.encoding))?;
    let contents = match ability.markdown {
        true => MarkupContent { kind: MarkupKind::Markdown, value: text.markdown },
        false => MarkupContent { kind: MarkupKind::PlainText, value: plain(&text.markdown) },
    };
    let range = Some(to_lsp::range(document, &text.span, ability.encoding));
    Some(Hover { contents: HoverContents::Markup(contents), range })
}

/// Our Markdown without its marks: emphasis and code lose their signs, tables and rules their lines.
fn plain(markdown: &str) -> String {
    let is_drawn = |line: &str| line.len() >= 3 && line.chars().all(|c| matches!(c, '-' | '|' | ':' | ' '));
    let mut lines: Vec<String> = Vec::new();
    for line in markdown.lines().filter(|line| !is_drawn(line)) {
        let line = match line.strip_prefix('|') {
            Some(row) => row.trim_end_matches('|').split('|').map(str::trim).collect::<Vec<_>>().join("  "),
            None => line.trim_start_matches('#').to_owned(),
        };
        let line = line.replace("**", "").replace('`', "").trim().to_owned();
        if !line.is_empty() || lines.last().is_some_and(|last| !last.is_empty()) {
            lines.push(line);
        }
    }
    lines.join("\n")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn marks_are_taken_off_and_words_stay() {
        let markdown = "**Drive** of `cell`\n\n---\n\n| | peak |\n|---|---|\n| g0 | 9 |\n\na - b";
        assert_eq!(plain(markdown), "Drive of cell\n\npeak\ng0  9\n\na - b");
    }
}
