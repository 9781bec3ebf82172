//! What every stage reports: one list, one shape, from a slip in the text to a face that falls.

/// A byte range in the text of the file.
pub type Span = std::ops::Range<usize>;

/// How much a finding matters.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Severity {
    /// Worth knowing, nothing to do.
    Hint,
    /// Worth reading.
    Information,
    /// The experiment may disappoint.
    Warning,
    /// The experiment fails, or could not be judged.
    Error,
}

/// One finding.
#[derive(Debug, Clone, PartialEq)]
pub struct Finding {
    /// Rule name, kebab case: the defect.
    pub rule: &'static str,
    /// How much it matters.
    pub severity: Severity,
    /// Dotted path by names, e.g. `layer.oil.thickness`; empty for the file as a whole.
    pub place: String,
    /// Where it shows.
    pub span: Span,
    /// What is wrong, with the number; why it matters to the experiment; what to do. Never says 'safe'.
    pub message: Message,
    /// Numbers of the finding, SI, unit in the name (`growth_rate_per_s`).
    pub values: Vec<(&'static str, f64)>,
    /// Other lines involved.
    pub related: Vec<Related>,
    /// Mends (keep the meaning) and tried changes (choose a value).
    pub fixes: Vec<Fix>,
    /// Whether a fix exists or can be searched for.
    pub fixable: bool,
    /// Accepted by the team with a reason.
    pub accepted: bool,
}

/// The three sentences of a message.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Message {
    /// What is wrong, with its number.
    pub what: String,
    /// Why it matters to the experiment.
    pub why: String,
    /// What to do.
    pub remedy: String,
}

/// Another line that is involved.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Related {
    /// Where.
    pub span: Span,
    /// What stands there.
    pub message: String,
}

/// A fix: an edit with its title.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Fix {
    /// What it does; for a tried change with the margin reached.
    pub title: String,
    /// `true`: a mend, may run on save; `false`: chooses a value, never by itself.
    pub keeps_meaning: bool,
    /// Non-overlapping, ascending.
    pub edits: Vec<Edit>,
}

/// Replace the bytes of `span` by `new_text`.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Edit {
    /// Where.
    pub span: Span,
    /// What stands there afterwards.
    pub new_text: String,
}

impl Message {
    /// The message as one paragraph.
    pub fn text(&self) -> String {
        [&self.what, &self.why, &self.remedy]
            .into_iter()
            .filter(|part| !part.is_empty())
            .map(String::as_str)
            .collect::<Vec<_>>()
            .join(" ")
    }
}
