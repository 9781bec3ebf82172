//! cushion-crushed
//!
//! The two faces of a cushion would meet in each period.
//!
//! Why it matters: The slab strikes the floor or the next slab; the gas is driven out and nothing of the setup survives.
//!
//! What to do: Use a thicker cushion or a smaller drive, or move the natural frequency away from the drive.
//!
//! Criterion: amplitude of the relative motion of its faces, from the linear chain, at least its thickness. The real spring hardens before that; the number says that the linear answer has no meaning here.

use super::Context;
use super::context::found;
use crate::words;
use setup::finding::Finding;

/// Stroke over thickness at which the faces meet (geometry, no judgement).
pub(super) const CRUSHED: f64 = 1.0;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let cushions = context.derived().cushions.iter();
    cushions
        .filter_map(|cushion| {
            let stroke = cushion.stroke_ratio.filter(|stroke| *stroke >= CRUSHED)?;
            let what = format!(
                "The faces of cushion \"{}\" would move against each other by {} of its thickness (amplitude): they \
                 meet.",
                cushion.layer,
                words::percent(stroke)
            );
            let place = context.layer_place(&cushion.layer);
            let span = context.layer_span(&cushion.layer);
            let mut finding = found("cushion-crushed", &place, span, what, String::new());
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
    fn fires_when_the_faces_meet_and_not_before() {
        let found = Case::new(13.0).cushion("cushion", 1.0).only("cushion-crushed");
        assert_eq!(found.place, "layer.cushion");
        Case::new(13.0).cushion("cushion", 0.999).silent("cushion-crushed");
    }

    #[test]
    fn silent_at_rest() {
        let mut case = Case::at_rest().cushion("cushion", 0.0);
        case.outcome.derived.cushions[0].stroke_ratio = None;
        case.silent("cushion-crushed");
    }
}
