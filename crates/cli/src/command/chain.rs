//! `topheavy chain`: the vertical response alone.

use crate::arguments::{Chain, Format};
use crate::{Outcome, output};
use explore::chain::{NoChain, response};
use quantity::Kind;

/// Runs the command.
pub fn run(options: &Chain) -> Outcome {
    let frequencies = match &options.sweep {
        None => Vec::new(),
        Some(text) => match quantity::parse_range(text, Kind::Frequency) {
            Ok((low, high)) if low.value > 0.0 && high.value > low.value => {
                spaced(low.value, high.value, options.points as usize)
            }
            Ok(_) => {
                return output::refuse(&format!(
                    "--sweep \"{text}\": the first frequency must be above 0 and below the second"
                ));
            }
            Err(refusal) => return output::refuse(&format!("--sweep \"{text}\": {}", refusal.message)),
        },
    };
    let (text, analysis) = match super::analysed(&options.file) {
        Ok(read) => read,
        Err(outcome) => return outcome,
    };
    let Some(derived) = &analysis.derived else { return super::unresolved(&options.file, &text, &analysis) };
    match response(derived, &frequencies) {
        Ok(answer) => match options.format {
            Format::Json => super::print_json(&report::chain::document(&answer)),
            Format::Text => output::say(&report::chain::table(&answer)),
        },
        Err(NoChain::StackUnresolved) => super::unresolved(&options.file, &text, &analysis),
        Err(NoChain::NoDrive) => {
            output::refuse(&format!("{}: no drive is written, so nothing moves", options.file))
        }
        Err(NoChain::Failure(failure)) => output::refuse(&format!("{}: {failure}", options.file)),
    }
}

/// Evenly spaced on a logarithmic scale, both ends exact.
fn spaced(low: f64, high: f64, points: usize) -> Vec<f64> {
    let ratio = high / low;
    let last = points - 1;
    (0..points).map(|i| if i == last { high } else { low * ratio.powf(i as f64 / last as f64) }).collect()
}
