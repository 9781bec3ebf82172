//! hold-margin-short
//!
//! Everything holds, but the drive is closer to the hold limit than this lab asks for.
//!
//! Why it matters: Near the hold limit a level error and sideways motion wedge the lower face, by a gain that diverges at the limit, and a small loss of drive lets the layer fall.
//!
//! What to do: Raise the drive, or lower the hold limit with a narrower cell; `limits.hold-margin` says what the lab asks for.
//!
//! Criterion: hold margin = 1 − hold/set, as drive at the cell, below `limits.hold-margin` (default 15 %, judgement: there V = (set/hold)² is at least 1.38 and the gain of a level error 1/(V − 1) at most 2.6).
//!
//! Silent when the interface falls already, when no drive is needed, and when a slab is not judged.

use super::Context;
use super::context::found;
use crate::derived::Mechanism;
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    finding(context).into_iter().collect()
}

/// Nothing grows: margins mean something.
pub(super) fn everything_holds(context: &Context<'_>) -> bool {
    context.judged().all(|(_, stability)| stability.mechanism == Mechanism::None)
}

fn finding(context: &Context<'_>) -> Option<Finding> {
    let window = context.derived().window.filter(|window| window.exists)?;
    let limit = context.setup.limits.hold_margin.value;
    if context.setup.is_unreadable("limits.hold-margin") || !everything_holds(context) {
        return None;
    }
    let margin = window.hold_margin()?;
    if margin >= limit - 1e-9 {
        return None;
    }
    let slab = context.derived().slabs.get(window.hold_slab?)?;
    let set_by = slab.stability.as_ref()?.limits.as_ref()?.hold_set_by;
    let face = set_by.and_then(|by| slab.faces.get(by.face)).or(slab.faces.last())?;
    let hold = window.hold?;
    let what = format!(
        "Hold margin {} (1 − hold/set), {} asked for: {} holds from {} at the cell on, set is {}.",
        words::percent(margin),
        words::percent(limit),
        face.words(),
        words::acceleration(hold),
        words::short_acceleration(window.set),
    );
    let remedy = format!(
        "Raise the drive to at least {}, which has that margin.",
        words::acceleration(hold / (1.0 - limit))
    );
    let mut finding = found("hold-margin-short", &face.place(), context.face_span(face), what, remedy);
    finding.values = vec![
        ("hold_margin", margin),
        ("hold_margin_asked", limit),
        ("hold_drive_m_per_s2", hold),
        ("set_drive_m_per_s2", window.set),
    ];
    finding.related.extend(context.related_drive());
    finding.related.extend(super::cushion_near_resonance::as_cause(context));
    finding.fixable = true;
    Some(finding)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;
    use crate::words::G0;

    /// Set 10 g0, hold at a share of it.
    fn with_margin(margin: f64) -> Case {
        Case::new(10.0).slab("oil", 1.0, &[(10.0 * G0 * (1.0 - margin), None)])
    }

    #[test]
    fn fires_below_the_default_and_is_silent_at_and_above_it() {
        let found = with_margin(0.149).only("hold-margin-short");
        assert_eq!(found.place, "interface.oil|cushion");
        assert!(found.message.what.contains("14.9 %"), "{}", found.message.what);
        assert!(found.message.remedy.contains("10.0 g0 peak"), "8.51/0.85: {}", found.message.remedy);
        with_margin(0.15).silent("hold-margin-short");
        with_margin(0.151).silent("hold-margin-short");
    }

    #[test]
    fn the_labs_own_limit_counts() {
        let mut case = with_margin(0.18);
        case.setup.limits.hold_margin.value = 0.2;
        case.only("hold-margin-short");
    }

    #[test]
    fn silent_when_it_falls_already() {
        let mut case = with_margin(-0.1);
        case.grow(0, Mechanism::Falls, 5.0);
        case.silent("hold-margin-short");
    }

    #[test]
    fn silent_without_limits_or_with_an_unreadable_wish() {
        Case::new(10.0).unjudged("oil").silent("hold-margin-short");
        let mut case = with_margin(0.1);
        case.setup.unreadable_places = vec!["limits.hold-margin".to_owned()];
        case.silent("hold-margin-short");
    }

    #[test]
    fn of_two_slabs_the_one_that_falls_first_is_named() {
        let case = Case::new(10.0).slab("oil", 1.0, &[(60.0, None)]).slab("brew", 1.0, &[(90.0, None)]);
        assert_eq!(case.only("hold-margin-short").place, "interface.brew|cushion");
    }
}
