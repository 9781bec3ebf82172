//! Why something could not be computed, where that is not already said by a finding about the text.

/// A cause that a rule turns into a finding.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Trouble {
    /// A figure is asked for where its source does not hold.
    OutsideRange {
        /// The layer, `layer.oil`, or the figure, `fluid.mix.viscosity`.
        place: String,
        /// `viscosity`, `density` …
        figure: &'static str,
        /// What is asked and what the source covers, with numbers.
        detail: String,
    },
    /// A figure that is nowhere given.
    FigureMissing {
        /// Where it would be written.
        place: String,
        /// `surface-tension` …
        figure: &'static str,
    },
    /// Two different liquids touch and nobody says with what tension.
    TensionMissing {
        /// Name of the upper layer.
        above: String,
        /// Name of the lower layer.
        below: String,
    },
    /// Two statements of a size or a pressure that cannot both hold.
    SizesDisagree {
        /// The statement that is judged.
        place: String,
        /// The other one.
        other: String,
        /// A full sentence with both numbers.
        what: String,
    },
    /// The stack stands on nothing: no answer of the vertical response.
    NoResponse {
        /// Where.
        place: String,
        /// With numbers.
        detail: String,
    },
    /// A solver gave no answer.
    NotConverged {
        /// The slab's first layer.
        place: String,
        /// With numbers.
        detail: String,
    },
}
