//! wave-margin-short
//!
//! Everything holds, but the drive is closer to the onset of waves than this lab asks for.
//!
//! Why it matters: A drift of the cushion, a cooler liquid or the calibration of the accelerometer can use up a short margin, and then the faces break up.
//!
//! What to do: Lower the drive, or raise the wave limit with a more viscous liquid or a deeper layer; `limits.wave-margin` says what the lab asks for.
//!
//! Criterion: wave margin = wave/set − 1, as drive at the cell, below `limits.wave-margin` (default 10 %, judgement: twice what level and calibration of a common accelerometer chain hold to).
//!
//! Silent when waves grow already, when none were found up to the largest acceleration looked at, and when a slab is not judged.

use super::Context;
use super::context::found;
use super::hold_margin_short::everything_holds;
use super::waves_on_interface::response_words;
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    finding(context).into_iter().collect()
}

fn finding(context: &Context<'_>) -> Option<Finding> {
    let window = context.derived().window.filter(|window| window.exists)?;
    let limit = context.setup.limits.wave_margin.value;
    if context.setup.is_unreadable("limits.wave-margin") || !everything_holds(context) {
        return None;
    }
    let margin = window.wave_margin()?;
    if margin >= limit - 1e-9 {
        return None;
    }
    let slab = context.derived().slabs.get(window.wave_slab?)?;
    let set_by = slab.stability.as_ref()?.limits.as_ref()?.wave_set_by;
    let face = set_by.and_then(|by| slab.faces.get(by.face)).or(slab.faces.first())?;
    let wave = window.wave?;
    let class = set_by.map_or_else(String::new, |by| {
        format!(" of {}, {}", words::wave(by.wavenumber), response_words(by.response))
    });
    let what = format!(
        "Wave margin {} (wave/set − 1), {} asked for: on {} waves{class} rise from {} at the cell on, set is {}.",
        words::percent(margin),
        words::percent(limit),
        face.words(),
        words::acceleration(wave),
        words::short_acceleration(window.set),
    );
    let remedy = format!(
        "Lower the drive to at most {}, which has that margin.",
        words::acceleration(wave / (1.0 + limit))
    );
    let mut finding = found("wave-margin-short", &face.place(), context.face_span(face), what, remedy);
    finding.values = vec![
        ("wave_margin", margin),
        ("wave_margin_asked", limit),
        ("wave_drive_m_per_s2", wave),
        ("set_drive_m_per_s2", window.set),
    ];
    finding.related.extend(context.related_drive());
    finding.related.extend(super::cushion_near_resonance::as_cause(context));
    finding.fixable = true;
    Some(finding)
}

#[cfg(test)]
mod tests {
    use crate::derived::Mechanism;
    use crate::rules::testing::*;
    use crate::words::G0;

    fn with_margin(margin: f64) -> Case {
        Case::new(10.0).slab("oil", 1.0, &[(5.0 * G0, Some(10.0 * G0 * (1.0 + margin)))])
    }

    #[test]
    fn fires_below_the_default_and_is_silent_at_and_above_it() {
        let found = with_margin(0.099).only("wave-margin-short");
        assert_eq!(found.place, "layer.oil", "the open upper face belongs to the layer");
        assert!(found.message.what.contains("9.9 %"), "{}", found.message.what);
        with_margin(0.10).silent("wave-margin-short");
        with_margin(0.101).silent("wave-margin-short");
    }

    #[test]
    fn the_labs_own_limit_counts() {
        let mut case = with_margin(0.2);
        case.setup.limits.wave_margin.value = 0.25;
        case.only("wave-margin-short");
    }

    #[test]
    fn silent_without_waves_or_when_they_grow_already() {
        Case::new(10.0).slab("oil", 1.0, &[(5.0 * G0, None)]).silent("wave-margin-short");
        let mut case = with_margin(-0.05);
        case.grow(0, Mechanism::Waves, 5.0);
        case.silent("wave-margin-short");
        Case::new(10.0).unjudged("oil").silent("wave-margin-short");
    }
}
