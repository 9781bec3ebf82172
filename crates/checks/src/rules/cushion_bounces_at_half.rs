//! cushion-bounces-at-half
//!
//! The swing of a cushion's stiffness sets a slab bouncing at half the drive's frequency, or nearly does.
//!
//! Why it matters: The slab then heaves at a frequency that nobody set, by millimetres, and every limit that was computed for its motion at the drive is void; on film at the drive's frequency it is half hidden.
//!
//! What to do: Move the natural frequencies of slabs on cushions away from half the drive (and their sums away from the drive), use a smaller drive, or more loss.
//!
//! Criterion: a disturbance of the periodic motion grows (exact Floquet exponents of the chain with its polytropic cushions), or does so from less than 1.25 times the set drive on (judgement: as the default margins, a level error and the gas that a run loses). The estimate 4ζ/(n + 1) of the stroke that starts it on f = 2 f0 stands beside it and decides nothing.
//!
//! Silent where that is not known: without a drive, and with `cushion-harmonics = false`.

use super::Context;
use super::context::found;
use crate::derived::{Bounce, BounceResponse, Cushion};
use crate::words;
use setup::finding::Finding;

/// Threshold over the set drive (judgement, see the page).
const NEAR: f64 = 1.25;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let Some(bounce) = &context.derived().bounce else { return Vec::new() };
    let grows = bounce.growth_rate > 0.0;
    let near = bounce.threshold_ratio.is_some_and(|ratio| ratio < NEAR);
    if grows || near { finding(context, bounce, grows).into_iter().collect() } else { Vec::new() }
}

fn finding(context: &Context<'_>, bounce: &Bounce, grows: bool) -> Option<Finding> {
    let drive = context.derived().drive?;
    let stroke = |cushion: &&Cushion| cushion.stroke_ratio.unwrap_or(0.0);
    let cushions = &context.derived().cushions;
    let (index, cushion) =
        cushions.iter().enumerate().max_by(|(_, a), (_, b)| stroke(a).total_cmp(&stroke(b)))?;
    let beginning = bounce.threshold_response.zip(bounce.threshold_frequencies.as_ref());
    let (response, frequencies) = match beginning.filter(|_| !grows) {
        Some(beginning) => beginning,
        None => (bounce.response, &bounce.frequencies),
    };
    let hertz: Vec<String> = frequencies.iter().map(|f| words::hertz(*f)).collect();
    let at = match response {
        BounceResponse::Half => format!("at {}, half the drive's frequency", words::list(&hertz)),
        BounceResponse::Pair => format!("at {} together, which add up to the drive's", words::list(&hertz)),
        BounceResponse::Same => format!("away from their motion, at the drive's {}", words::list(&hertz)),
    };
    let what = match (grows, bounce.threshold_ratio) {
        (true, Some(ratio)) => format!(
            "Slabs on cushions bounce {at}, growing at {} 1/s; that begins at {} of the set drive.",
            words::number(bounce.growth_rate, 3),
            words::percent(ratio)
        ),
        (true, None) => {
            format!("Slabs on cushions bounce {at}, growing at {} 1/s.", words::number(bounce.growth_rate, 3))
        }
        (false, ratio) => format!(
            "Slabs on cushions begin to bounce {at}, at {} of the set drive of {}.",
            words::percent(ratio?),
            words::short_acceleration(drive.acceleration)
        ),
    };
    let place = context.layer_place(&cushion.layer);
    let span = context.layer_span(&cushion.layer);
    let mut finding = found("cushion-bounces-at-half", &place, span, what, String::new());
    finding.values.push(("growth_rate_per_s", bounce.growth_rate));
    finding.values.extend(frequencies.first().map(|f| ("bounce_frequency_hz", *f)));
    finding.values.extend(bounce.threshold_ratio.map(|ratio| ("threshold_drive_ratio", ratio)));
    let strokes = bounce.threshold_strokes.as_ref();
    finding.values.extend(strokes.and_then(|s| s.get(index)).map(|s| ("threshold_stroke_ratio", *s)));
    finding.values.extend(cushion.stroke_ratio.map(|stroke| ("stroke_ratio", stroke)));
    finding.values.extend(bounce.estimated_stroke.map(|stroke| ("estimated_threshold_stroke_ratio", stroke)));
    finding.related.extend(context.related_drive());
    Some(finding)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    fn case(growth_rate: f64, threshold_ratio: Option<f64>) -> Case {
        let mut case = Case::new(13.0).slab("oil", 0.3, &[(10.0, Some(1000.0))]).cushion("cushion", 0.027);
        case.outcome.derived.bounce = Some(Bounce {
            growth_rate,
            frequencies: vec![25.0],
            response: BounceResponse::Half,
            threshold_ratio,
            threshold_strokes: threshold_ratio.map(|ratio| vec![0.027 * ratio]),
            threshold_frequencies: threshold_ratio.map(|_| vec![25.0]),
            threshold_response: threshold_ratio.map(|_| BounceResponse::Half),
            searched_to: 2.0,
            estimated_stroke: Some(0.0278),
            damping_ratio: Some(0.0166),
        });
        case
    }

    #[test]
    fn fires_when_it_grows() {
        let found = case(2.5, Some(0.91)).only("cushion-bounces-at-half");
        assert_eq!(found.place, "layer.cushion");
        let what = &found.message.what;
        assert!(what.contains("25.0 Hz, half the drive's frequency") && what.contains("91.0 %"), "{what}");
        assert!(found.values.contains(&("estimated_threshold_stroke_ratio", 0.0278)));
        case(1e-9, None).only("cushion-bounces-at-half");
    }

    #[test]
    fn the_threshold_is_a_quarter_above_the_drive() {
        let found = case(-0.3, Some(1.2499)).only("cushion-bounces-at-half");
        assert!(found.message.what.contains("begin to bounce"), "{}", found.message.what);
        case(-0.3, Some(1.25)).silent("cushion-bounces-at-half");
        case(-0.3, None).silent("cushion-bounces-at-half");
        case(0.0, None).silent("cushion-bounces-at-half");
    }

    #[test]
    fn a_pair_is_told_as_a_pair() {
        let mut case = case(2.5, Some(0.91));
        if let Some(bounce) = &mut case.outcome.derived.bounce {
            (bounce.response, bounce.frequencies) = (BounceResponse::Pair, vec![19.0, 31.0]);
        }
        let found = case.only("cushion-bounces-at-half");
        assert!(found.message.what.contains("19.0 Hz and 31.0 Hz together"), "{}", found.message.what);
    }

    #[test]
    fn silent_where_it_is_not_known() {
        let mut case = case(2.5, Some(0.91));
        case.outcome.derived.bounce = None;
        case.silent("cushion-bounces-at-half");
        Case::at_rest().slab("oil", 1.0, &[]).silent("cushion-bounces-at-half");
    }
}
