//! cushion-stroke-long
//!
//! A cushion is compressed so far in each period that its spring is no longer linear.
//!
//! Why it matters: Thickness and pressure then differ much between the two ends of a stroke: the gas layer beside the slab is no longer the one that its limits were computed for, and a small error of gas or drive shows.
//!
//! What to do: Use a thicker cushion, a smaller drive, or stay further from resonance.
//!
//! Criterion: amplitude of the relative motion of its two faces over its thickness above 5 % (judgement): the gas spring p ∝ V⁻ⁿ then makes a second harmonic of the force of (n+1)/4 · 5 % = 3 % of the first. What the slab does with it is computed: cushion-harmonics-large, cushion-bounces-at-half.
//!
//! Silent where the faces would meet: that is cushion-crushed.

use super::Context;
use super::context::found;
use super::cushion_crushed::CRUSHED;
use crate::limits::STROKE_LONG;
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let cushions = context.derived().cushions.iter();
    cushions
        .filter_map(|cushion| {
            let stroke = cushion.stroke_ratio.filter(|stroke| *stroke > STROKE_LONG && *stroke < CRUSHED)?;
            let what = format!(
                "The faces of cushion \"{}\" move against each other by {} of its thickness (amplitude).",
                cushion.layer,
                words::percent(stroke)
            );
            let place = context.layer_place(&cushion.layer);
            let span = context.layer_span(&cushion.layer);
            let mut finding = found("cushion-stroke-long", &place, span, what, String::new());
            finding.values.push(("stroke_ratio", stroke));
            finding.related.extend(context.related_drive());
            Some(finding)
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_above_a_twentieth_and_not_below() {
        let found = Case::new(13.0).cushion("cushion", 0.0505).only("cushion-stroke-long");
        assert_eq!(found.place, "layer.cushion");
        assert!(found.message.what.contains("5.1 %"));
        Case::new(13.0).cushion("cushion", 0.05).silent("cushion-stroke-long");
        // D1 of the worked designs: (1.731 − 1)·1.29 mm over 40 mm.
        Case::new(13.0).cushion("cushion", 0.0236).silent("cushion-stroke-long");
    }

    #[test]
    fn silent_when_crushed_or_at_rest() {
        Case::new(13.0).cushion("cushion", 1.0).silent("cushion-stroke-long");
        let mut case = Case::at_rest().cushion("cushion", 0.0);
        case.outcome.derived.cushions[0].stroke_ratio = None;
        case.silent("cushion-stroke-long");
    }
}
