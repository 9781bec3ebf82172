//! no-holding-drive
//!
//! At this frequency no drive holds the whole stack: what is too weak to hold one face is already too strong for another.
//!
//! Why it matters: Turning the level up or down cannot mend this setup; some part of it always falls or breaks into waves.
//!
//! What to do: Use a more viscous liquid, a narrower cell or another frequency; with several slabs bring their amplifications closer together.
//!
//! Criterion: the windows of all slabs, each divided by the slab's |T|, have no drive in common (limits are the slabs' own; while the chain is linear they scale with |T|).
//!
//! Silent when a slab is not judged or the frequency is not known. Stands in place of interface-falls and waves-on-interface.

use super::Context;
use super::context::found;
use crate::derived::{DriveWindow, Limits, Mechanism, Slab};
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    finding(context).into_iter().collect()
}

fn finding(context: &Context<'_>) -> Option<Finding> {
    let window = context.derived().window.filter(|window| !window.exists)?;
    let frequency = words::hertz(context.derived().drive?.frequency);
    let alone = context
        .judged()
        .filter_map(|(slab, stability)| Some((slab, stability.limits.as_ref()?)))
        .find(|(_, limits)| limits.windows.is_empty());
    let mut finding = match alone {
        Some((slab, limits)) => {
            let what = format!("No drive at {frequency} holds \"{}\": {}.", slab.name, slab_words(limits));
            let place = context.layer_place(&slab.layers[0]);
            found("no-holding-drive", &place, context.layer_span(&slab.layers[0]), what, String::new())
        }
        None => {
            let place = context.drive_place();
            let what =
                format!("No drive at {frequency} holds every slab: {}.", shared_words(context, window));
            found("no-holding-drive", &place, context.span(&place), what, String::new())
        }
    };
    finding.values.extend(window.hold.map(|hold| ("hold_drive_m_per_s2", hold)));
    finding.values.extend(window.wave.map(|wave| ("wave_drive_m_per_s2", wave)));
    for (slab, stability) in context.judged() {
        let does = match stability.mechanism {
            Mechanism::Falls => "falls",
            Mechanism::Waves => "raises waves",
            Mechanism::None => continue,
        };
        let face = &slab.faces[stability.worst.face];
        let message = format!(
            "At the set drive {} {does}, at {} 1/s.",
            face.words(),
            words::number(stability.growth_rate, 3)
        );
        finding.related.push(setup::finding::Related { span: context.face_span(face), message });
    }
    finding.fixable = alone.is_some();
    finding.related.extend(context.related_drive());
    finding.related.extend(super::cushion_near_resonance::as_cause(context));
    Some(finding)
}

fn slab_words(limits: &Limits) -> String {
    let up_to = words::acceleration(limits.searched_up_to);
    match (limits.hold, limits.wave) {
        (Some(hold), Some(wave)) => format!(
            "it falls below {} of its own, and waves rise from {} on",
            words::acceleration(hold),
            words::acceleration(wave)
        ),
        (Some(hold), None) => format!("it falls below {} of its own", words::acceleration(hold)),
        (None, _) => format!("nothing up to {up_to} of its own keeps it from falling"),
    }
}

fn shared_words(context: &Context<'_>, window: DriveWindow) -> String {
    let name = |index: Option<usize>| {
        index
            .and_then(|index| context.derived().slabs.get(index))
            .map_or("a slab", |slab: &Slab| slab.name.as_str())
    };
    match (window.hold, window.wave) {
        (Some(hold), Some(wave)) => format!(
            "\"{}\" falls below {} at the cell, \"{}\" raises waves from {} on",
            name(window.hold_slab),
            words::acceleration(hold),
            name(window.wave_slab),
            words::acceleration(wave)
        ),
        _ => "their windows have no drive in common".to_owned(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn one_slab_without_a_window_takes_the_place_of_what_grows() {
        // F6 of the worked designs: D1 with 100 mm²/s, hold 175.2, waves from 69.7 on.
        let mut case = Case::new(13.0).without_window("oil", 1.73, 175.2, 69.7);
        case.grow(0, Mechanism::Waves, 100.0);
        let found = case.only("no-holding-drive");
        assert_eq!(found.place, "layer.oil");
        assert!(
            found.message.what.contains("69.70 m/s²") && found.message.what.contains("175.2 m/s²"),
            "{found:?}"
        );
        case.silent("waves-on-interface");
    }

    #[test]
    fn slabs_that_ask_for_different_drives() {
        let case = Case::new(10.0).slab("oil", 1.0, &[(50.0, Some(80.0))]).slab("brew", 1.0, &[(90.0, None)]);
        let found = case.only("no-holding-drive");
        assert_eq!(found.place, "drive.acceleration");
        assert!(
            found.message.what.contains("\"brew\" falls below")
                && found.message.what.contains("\"oil\" raises")
        );
    }

    #[test]
    fn silent_when_the_windows_just_overlap_and_without_limits() {
        let case = Case::new(10.0).slab("oil", 1.0, &[(50.0, Some(90.1))]).slab("brew", 1.0, &[(90.0, None)]);
        case.silent("no-holding-drive");
        let case = Case::new(10.0).slab("oil", 1.0, &[(50.0, Some(89.9))]).slab("brew", 1.0, &[(90.0, None)]);
        case.only("no-holding-drive");
        Case::new(10.0).unjudged("oil").silent("no-holding-drive");
    }
}
