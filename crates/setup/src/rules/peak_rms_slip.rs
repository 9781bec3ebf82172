//! peak-rms-slip
//!
//! Two statements of the drive that differ by just the factor between peak, rms and peak-to-peak.
//!
//! Why it matters: One of the two amplitude words is wrong, and with it the set drive by the same factor.
//!
//! What to do: Correct the amplitude word of the one that is wrong: the accelerometer chain's display says what it shows.
//!
//! The factors are 2 (peak, peak-to-peak), √2 (rms, peak) and 2√2 (rms, peak-to-peak), each within 1 %.

use crate::finding::{Edit, Finding, Fix, Related, Span};
use crate::written::quoted;
use quantity::Amplitude;

/// Relative difference up to which a ratio is taken as one of the factors.
const WITHIN: f64 = 0.01;

/// The two amplitude words that a ratio mixes up, if it is one of the factors.
fn mixed_up(ratio: f64) -> Option<(&'static str, [Amplitude; 2])> {
    let ratio = if ratio < 1.0 { 1.0 / ratio } else { ratio };
    let near = |factor: f64| (ratio / factor - 1.0).abs() <= WITHIN;
    let root = std::f64::consts::SQRT_2;
    if near(2.0) {
        Some(("2: peak and peak-to-peak", [Amplitude::Peak, Amplitude::PeakToPeak]))
    } else if near(root) {
        Some(("√2: rms and peak", [Amplitude::Rms, Amplitude::Peak]))
    } else if near(2.0 * root) {
        Some(("2√2: rms and peak-to-peak", [Amplitude::Rms, Amplitude::PeakToPeak]))
    } else {
        None
    }
}

/// A cross-check against the set value; `None` when their ratio is no slip.
pub(crate) fn finding(slip: &Check) -> Option<Finding> {
    let (factor, words) = mixed_up(slip.ratio)?;
    let what = format!(
        "`{}` and `{}` differ by a factor {:.3}, just {factor} mixed up.",
        slip.set_key, slip.key, slip.ratio
    );
    let mut finding = super::found("peak-rms-slip", &slip.place, slip.span.clone(), what, "");
    finding.values.push(("ratio", slip.ratio));
    finding.related.push(Related { span: slip.set_span.clone(), message: "The set value.".to_owned() });
    // Reading the check in the other word of the pair: a fix only when that brings the two together.
    let meant = words.into_iter().find(|word| {
        let reread = slip.ratio * word.to_peak() / slip.amplitude.to_peak();
        *word != slip.amplitude && (reread - 1.0).abs() <= 2.0 * WITHIN
    });
    if let Some(word) = meant {
        finding = finding.with_fix(Fix {
            title: format!("Read `{}` as {}", slip.key, said(word)),
            keeps_meaning: false,
            edits: vec![Edit { span: slip.span.clone(), new_text: quoted(&with_word(&slip.text, word)) }],
        });
    }
    Some(finding)
}

/// A cross-check of the drive that disagrees.
pub(crate) struct Check {
    pub set_key: &'static str,
    pub set_span: Span,
    pub key: &'static str,
    pub place: String,
    pub span: Span,
    pub ratio: f64,
    pub amplitude: Amplitude,
    /// The number with its unit, without the amplitude word.
    pub text: String,
}

fn said(word: Amplitude) -> &'static str {
    match word {
        Amplitude::Peak => "peak",
        Amplitude::Rms => "rms",
        Amplitude::PeakToPeak => "peak-to-peak",
    }
}

fn with_word(text: &str, word: Amplitude) -> String {
    format!("{text} {}", said(word))
}

#[cfg(test)]
mod tests {
    use super::mixed_up;
    use crate::rules::testing::*;

    fn with(displacement: &str) -> String {
        EXAMPLE.replace("\"14 g0 peak\"", &format!("\"14 g0 peak\"\ndisplacement = \"{displacement}\""))
    }

    #[test]
    fn names_each_factor() {
        // 14 g0 peak at 50 Hz is 1.391 mm peak, 0.984 mm rms, 2.782 mm peak-to-peak.
        for slip in [
            "2.782 mm peak",
            "0.9836 mm peak",
            "1.391 mm rms",
            "1.391 mm peak-to-peak",
            "0.9836 mm peak-to-peak",
        ] {
            let text = with(slip);
            let found = only(&text, "peak-rms-slip");
            assert_eq!(found.place, "drive.displacement", "{slip}");
            assert!(found.fixes.iter().all(|fix| !fix.keeps_meaning), "{slip}");
            mended(&text, "peak-rms-slip");
        }
    }

    #[test]
    fn the_threshold_is_one_percent_on_either_side() {
        for (ratio, slip) in [
            (2.0, true),
            (2.019, true),
            (2.021, false),
            (1.981, true),
            (1.979, false),
            (0.5, true),
            (1.7, false),
        ] {
            assert_eq!(mixed_up(ratio).is_some(), slip, "{ratio}");
        }
    }

    #[test]
    fn silent_when_they_agree() {
        silent(&with("1.391 mm peak"));
    }
}
