//! face-wedged-by-tilt
//!
//! A level error or a sideways motion of the table lets a face stand askew in its cushion.
//!
//! Why it matters: The cushion is thinner at one wall than at the other; under the wedge the gas gathers at the thick side, the thin side closes first, and the face falls there before the hold limit is reached. The wedge grows without bound towards the hold limit.
//!
//! What to do: Level the loaded rig better, measure and reduce the cross-axis motion, raise the drive away from the hold limit, or use a thicker cushion or a narrower cell.
//!
//! Criterion: height of the face from wall to wall, mean and oscillation together, above 20 % of the thickness of the gas layer that it leans into (practice for thin cushions: at most 10 to 20 %, a derived criterion). Level error and cross-axis motion add up along each axis of the cell. Where no level error is given, 0.1 deg is assumed (practice: 0.05 to 0.2 deg); where no cross-axis motion is given, none.
//!
//! Only of slabs that hold: a face that falls or stirs has a finding of its own.

use super::Context;
use super::context::found;
use crate::limits::WEDGED;
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let Some(sideways) = context.derived().sideways else { return Vec::new() };
    let mut findings = Vec::new();
    for slab in &context.derived().slabs {
        for wedge in &slab.wedges {
            let Some((gas, share)) = wedge.into.as_ref().filter(|(_, share)| *share > WEDGED) else {
                continue;
            };
            let face = &slab.faces[wedge.face];
            let assumed = if sideways.tilt_assumed { " (assumed)" } else { "" };
            let cross = if sideways.cross_axis > 0.0 {
                format!(" and a cross-axis motion of {}", words::percent(sideways.cross_axis))
            } else {
                String::new()
            };
            let what = format!(
                "With a level error of {} deg{assumed}{cross} {} stands {} higher at one wall than at the other along \
                 the {}, {} of the thickness of \"{gas}\"; its mean slope is {} times the level error.",
                words::number(sideways.tilt.to_degrees(), 3),
                face.words(),
                words::millimetres(2.0 * wedge.wall_height),
                wedge.along,
                words::percent(*share),
                words::number(wedge.mean_slope / sideways.tilt.max(f64::MIN_POSITIVE), 3),
            );
            let what = if sideways.tilt > 0.0 {
                what
            } else {
                what.split("; its mean slope").next().map_or_else(String::new, |start| format!("{start}."))
            };
            let mut finding =
                found("face-wedged-by-tilt", &face.place(), context.face_span(face), what, String::new());
            finding.values.extend([
                ("share", *share),
                ("wall_height_m", wedge.wall_height),
                ("mean_slope", wedge.mean_slope),
                ("oscillating_slope", wedge.oscillating_slope),
                ("tilt_gain", wedge.tilt_gain),
            ]);
            finding.related.push(context.related("cell.tilt", "The level error.".to_owned()));
            finding.related.extend(context.related_drive());
            findings.push(finding);
        }
    }
    findings
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    fn case(share: f64, tilt: f64) -> Case {
        let mut case = Case::new(13.0).slab("oil", 1.7, &[(100.0, Some(1000.0))]).cushion("cushion", 0.02);
        case.wedge(share, tilt);
        case
    }

    #[test]
    fn fires_above_a_fifth_of_the_cushion_and_not_below() {
        let found = case(0.2001, 0.0017).only("face-wedged-by-tilt");
        assert_eq!(found.place, "interface.oil|cushion");
        assert!(found.message.what.contains("0.0974 deg (assumed)"), "{}", found.message.what);
        assert!(found.message.what.contains("% of the thickness of \"cushion\""), "{}", found.message.what);
        case(0.2, 0.0017).silent("face-wedged-by-tilt");
    }

    #[test]
    fn a_level_rig_that_sways_has_no_gain_to_tell() {
        let found = case(0.3, 0.0).only("face-wedged-by-tilt");
        assert!(!found.message.what.contains("times the level error"), "{}", found.message.what);
    }

    #[test]
    fn silent_without_wedges_or_while_the_level_error_is_not_known() {
        Case::new(13.0).slab("oil", 1.7, &[(100.0, Some(1000.0))]).silent("face-wedged-by-tilt");
        let mut unknown = case(0.3, 0.0017);
        unknown.outcome.derived.sideways = None;
        unknown.silent("face-wedged-by-tilt");
    }
}
