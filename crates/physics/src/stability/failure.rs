//! Why a stability question has no answer.

/// A typed outcome with its numbers; never a value that looks like a result.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Failure {
    /// The work is no longer wanted.
    Cancelled,
    /// The phase of Hill's determinant could not be followed to a whole number of turns.
    CountUnsure {
        /// 1/m
        wavenumber: f64,
        /// Peak acceleration, m/s²
        acceleration: f64,
        /// The number of exponents as found, which should be whole.
        turns: f64,
        /// Evaluations spent.
        evaluations: usize,
    },
    /// An exponent that was counted could not be located.
    ExponentLost {
        /// 1/m
        wavenumber: f64,
        /// Peak acceleration, m/s²
        acceleration: f64,
        /// Largest real part is above this, 1/s.
        above: f64,
        /// … and below this, 1/s.
        below: f64,
    },
    /// The question costs more than any setup of a laboratory should.
    TooMuchWork {
        /// Matrices of the layers' response that were evaluated before it was given up.
        blocks: u64,
    },
    /// A mode is marginal at this very drive, so that it answers the least push without bound.
    Marginal {
        /// 1/m
        wavenumber: f64,
        /// Peak acceleration, m/s²
        acceleration: f64,
        /// Answer over push as far as it could be told.
        gain: f64,
    },
    /// More harmonics kept changing the answer.
    NotSettled {
        /// 1/m
        wavenumber: f64,
        /// Peak acceleration, m/s²
        acceleration: f64,
        /// Relative change at the last doubling.
        change: f64,
    },
    /// A number that the problem needs is not finite or not positive.
    Unusable {
        /// Which.
        quantity: &'static str,
        /// Its value, SI.
        value: f64,
    },
}

impl std::fmt::Display for Failure {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match *self {
            Failure::Cancelled => write!(f, "cancelled"),
            Failure::CountUnsure { wavenumber, acceleration, turns, evaluations } => write!(
                f,
                "at {wavenumber:.4} 1/m and {acceleration:.4} m/s² the number of growing exponents came out as \
                 {turns:.3} after {evaluations} evaluations"
            ),
            Failure::ExponentLost { wavenumber, acceleration, above, below } => write!(
                f,
                "at {wavenumber:.4} 1/m and {acceleration:.4} m/s² an exponent between {above:.4e} and \
                 {below:.4e} 1/s could not be located"
            ),
            Failure::TooMuchWork { blocks } => write!(
                f,
                "given up after {blocks} evaluations of the layers' response: too many modes stir, or the drive is too \
                 strong for this version"
            ),
            Failure::Marginal { wavenumber, acceleration, gain } => write!(
                f,
                "at {wavenumber:.4} 1/m and {acceleration:.4} m/s² a mode is marginal and answers {gain:.3e} times \
                 what pushes it"
            ),
            Failure::NotSettled { wavenumber, acceleration, change } => write!(
                f,
                "at {wavenumber:.4} 1/m and {acceleration:.4} m/s² the answer still changed by {change:.1e} with the \
                 number of harmonics"
            ),
            Failure::Unusable { quantity, value } => write!(f, "{quantity} is {value}"),
        }
    }
}

impl std::error::Error for Failure {}
