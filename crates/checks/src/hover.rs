//! What an editor shows at a place: the declaration of a key, and what was computed for it.

use setup::finding::Span;

/// Text for a place.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct HoverText {
    /// Markdown.
    pub markdown: String,
    /// The bytes that it belongs to.
    pub span: Span,
}
