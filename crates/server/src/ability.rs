//! What the editor can do, as it said in `initialize`.

use setup::lines::Encoding;
use tower_lsp::lsp_types::{ClientCapabilities, MarkupKind, PositionEncodingKind};

/// What decides the shape of our answers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Ability {
    /// How characters of a line are counted.
    pub(crate) encoding: Encoding,
    /// Diagnostics may point at other lines.
    pub(crate) related_information: bool,
    /// Hover texts may be Markdown.
    pub(crate) markdown: bool,
    /// Edits may name the version that they belong to.
    pub(crate) versioned_edits: bool,
    /// Code actions may carry edits; without it only commands, and we have none.
    pub(crate) actions_with_edits: bool,
}

impl Default for Ability {
    /// What every editor can do.
    fn default() -> Self {
        Ability::of(&ClientCapabilities::default())
    }
}

impl Ability {
    /// Reads what the editor said.
    pub(crate) fn of(said: &ClientCapabilities) -> Ability {
        let document = said.text_document.as_ref();
        let hover = document.and_then(|document| document.hover.as_ref());
        let actions = document.and_then(|document| document.code_action.as_ref());
        let published = document.and_then(|document| document.publish_diagnostics.as_ref());
        let edits = said.workspace.as_ref().and_then(|workspace| workspace.workspace_edit.as_ref());
        let units = said.general.as_ref().and_then(|general| general.position_encodings.as_ref());
        Ability {
            encoding: units.map_or(Encoding::Utf16, |units| preferred(units)),
            related_information: published.and_then(|said| said.related_information).unwrap_or(false),
            // The first format is the one that the editor likes best; one that says nothing gets plain text.
            markdown: hover
                .and_then(|hover| hover.content_format.as_ref())
                .is_some_and(|formats| formats.first() == Some(&MarkupKind::Markdown)),
            versioned_edits: edits.and_then(|edits| edits.document_changes).unwrap_or(false),
            actions_with_edits: actions.is_some_and(|said| said.code_action_literal_support.is_some()),
        }
    }

    /// The name of the encoding in the protocol.
    pub(crate) fn encoding_kind(&self) -> PositionEncodingKind {
        match self.encoding {
            Encoding::Utf8 => PositionEncodingKind::UTF8,
            Encoding::Utf16 => PositionEncodingKind::UTF16,
            Encoding::Utf32 => PositionEncodingKind::UTF32,
        }
    }
}

/// Bytes are what our own spans count; code points come next; UTF-16 is what every editor knows.
fn preferred(offered: &[PositionEncodingKind]) -> Encoding {
    [(PositionEncodingKind::UTF8, Encoding::Utf8), (PositionEncodingKind::UTF32, Encoding::Utf32)]
        .into_iter()
        .find(|(kind, _)| offered.contains(kind))
        .map_or(Encoding::Utf16, |(_, encoding)| encoding)
}

#[cfg(test)]
mod tests {
    use super::*;
    use serde_json::json;

    fn ability(said: serde_json::Value) -> Ability {
        Ability::of(&serde_json::from_value(said).unwrap())
    }

    #[test]
    fn bytes_are_preferred_then_code_points_and_nothing_said_is_utf_16() {
        let encoding =
            |offered: &[&str]| ability(json!({"general": {"positionEncodings": offered}})).encoding;
        assert_eq!(encoding(&["utf-16", "utf-32", "utf-8"]), Encoding::Utf8);
        assert_eq!(encoding(&["utf-16", "utf-32"]), Encoding::Utf32);
        assert_eq!(encoding(&["utf-16"]), Encoding::Utf16);
        assert_eq!(encoding(&[]), Encoding::Utf16);
        assert_eq!(Ability::default().encoding, Encoding::Utf16);
    }

    #[test]
    fn nothing_said_is_nothing_able() {
        let ability = Ability::default();
        assert!(!ability.related_information && !ability.markdown);
        assert!(!ability.versioned_edits && !ability.actions_with_edits);
    }

    #[test]
    fn the_first_format_of_hover_counts() {
        let markdown = |formats: &[&str]| {
            ability(json!({"textDocument": {"hover": {"contentFormat": formats}}})).markdown
        };
        assert!(markdown(&["markdown", "plaintext"]));
        assert!(!markdown(&["plaintext", "markdown"]));
    }
}
