//! equations-outside-range
//!
//! The equations behind the results leave something out that matters here.
//!
//! Why it matters: The limits and motions that depend on it may be off by about the number given.
//!
//! What to do: Change the setup so that the number falls below, or treat the results here with that much more margin.
//!
//! Criterion: largest slope of a face under the stated level error and cross-axis motion above 0.2 (judgement: steep waves are faster, ω² by the square of the slope, 4 %); variation of the acceleration over the depth of a slab by the compressibility of the liquid, (ωh/c)²/2 with c = 900 m/s, above 1 % (judgement); change of a cushion's stiffness as a column of gas, (ωH/c)²/3, above 1 % (judgement); mean free path of a gas over the thickness of its layer above 0.01 (common textbook figure for the onset of slip, from memory).
//!
//! Silent on the slope of a face that is wedged in its cushion: that is face-wedged-by-tilt.

use super::Context;
use super::context::found;
use crate::derived::Validity;
use crate::words;
use setup::finding::Finding;

const NAME: &str = "equations-outside-range";

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let reached = context.derived().validity.iter();
    reached
        .filter(|validity| validity.rule == Some(NAME) && validity.is_reached())
        .filter(|validity| !is_said_as_wedge(context, validity))
        .filter_map(|validity| {
            let what = format!(
                "Left out of the equations is the {}: {} is {}, and it matters from {} on.",
                validity.name.replace('-', " "),
                validity.number,
                words::number(validity.value, 2),
                words::number(validity.matters_at?, 2),
            );
            let mut finding =
                found(NAME, &validity.place, context.span(&validity.place), what, String::new());
            finding.values.push(("value", validity.value));
            finding.values.extend(validity.matters_at.map(|at| ("matters_at", at)));
            Some(finding)
        })
        .collect()
}

/// A steep face that is wedged in its cushion has one cause: `face-wedged-by-tilt` says it.
fn is_said_as_wedge(context: &Context<'_>, steep: &Validity) -> bool {
    let mut others = context.derived().validity.iter();
    steep.name == "wave-amplitude"
        && others.any(|other| other.name == "wedge" && other.place == steep.place && other.is_reached())
}

#[cfg(test)]
mod tests {
    use crate::derived::Validity;
    use crate::rules::testing::*;

    fn case(value: f64, matters_at: Option<f64>, rule: Option<&'static str>) -> Case {
        let mut case = Case::new(13.0).slab("oil", 1.7, &[(100.0, Some(1000.0))]);
        case.outcome.derived.validity.push(Validity {
            name: "liquid-compressibility",
            number: "(ωh/c)²/2 of a slab",
            place: "layer.oil".to_owned(),
            value,
            matters_at,
            source: "judgement",
            rule,
        });
        case
    }

    #[test]
    fn fires_above_its_number_and_not_below() {
        let own = Some("equations-outside-range");
        let found = case(0.0101, Some(0.01), own).only("equations-outside-range");
        assert_eq!(found.place, "layer.oil");
        let what = found.message.what;
        assert!(what.contains("the liquid compressibility: (ωh/c)²/2 of a slab is 0.01"), "{what}");
        case(0.01, Some(0.01), own).silent("equations-outside-range");
    }

    #[test]
    fn a_steep_face_that_is_wedged_is_said_once() {
        let steep = |wedge: f64| {
            let mut case = case(0.3, Some(0.2), Some("equations-outside-range"));
            let first = &mut case.outcome.derived.validity[0];
            first.name = "wave-amplitude";
            let wedged =
                Validity { name: "wedge", value: wedge, rule: Some("face-wedged-by-tilt"), ..first.clone() };
            case.outcome.derived.validity.push(wedged);
            case
        };
        steep(0.21).silent("equations-outside-range");
        steep(0.2).only("equations-outside-range");
    }

    #[test]
    fn silent_where_nothing_is_a_limit_or_another_rule_speaks() {
        case(50.0, None, Some("equations-outside-range")).silent("equations-outside-range");
        case(50.0, Some(0.01), Some("cushion-stroke-long")).silent("equations-outside-range");
    }
}
