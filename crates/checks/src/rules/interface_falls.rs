//! interface-falls
//!
//! An interface with the heavier fluid above it falls, because the slab is not shaken strongly enough to hold it.
//!
//! Why it matters: The liquid comes down as fingers within a few e-folding times and the cushion is lost.
//!
//! What to do: Raise the drive above the hold limit, or lower the limit: a narrower cell, or a lower frequency at the same acceleration.
//!
//! Criterion: the fastest growing mode of the cell at the slab's own acceleration, from the linearised Navier–Stokes equations with every Floquet exponent, is one that also grows without drive. As a rule of thumb, for long waves on a slab that is free on both sides, a slab holds when its peak velocity v satisfies v² > (2/k)(g − σk²/ρ) with k the longest mode of the cell (averaged; Wolf, Z. Phys. 227, 291, 1969; the verdict does not use it).
//!
//! Silent when the slab is not judged, and when no drive at all holds it: then no-holding-drive says so.

use super::Context;
use super::context::found;
use crate::derived::{Mechanism, Slab, Stability};
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    growing(context, Mechanism::Falls, |slab, stability| finding(context, slab, stability))
}

/// One finding for every slab that grows by a mechanism, with the drive and a resonance that may be its cause. None
/// where no drive holds the stack.
pub(super) fn growing(
    context: &Context<'_>,
    mechanism: Mechanism,
    finding: impl Fn(&Slab, &Stability) -> Finding,
) -> Vec<Finding> {
    let window = context.derived().window;
    if window.is_some_and(|window| !window.exists) {
        return Vec::new();
    }
    context
        .judged()
        .filter(|(_, stability)| stability.mechanism == mechanism)
        .map(|(slab, stability)| {
            let mut found = finding(slab, stability);
            found.related.extend(context.related_drive());
            found.related.extend(super::cushion_near_resonance::as_cause(context));
            found.fixable = window.is_some();
            found
        })
        .collect()
}

/// `disturbances of 100 mm (62.8 1/m) grow at 8.70 1/s, by a factor e every 115 ms`.
pub(super) fn growth_words(stability: &Stability) -> String {
    format!(
        "disturbances of {} grow at {} 1/s, by a factor e every {} ms",
        words::wave(stability.worst.wavenumber),
        words::number(stability.growth_rate, 3),
        words::number(1e3 / stability.growth_rate, 3),
    )
}

fn finding(context: &Context<'_>, slab: &Slab, stability: &Stability) -> Finding {
    let face = &slab.faces[stability.worst.face];
    let face_words = sentence_case(&face.words());
    let growth = growth_words(stability);
    let limits = stability.limits.as_ref();
    let hold = limits.and_then(|limits| limits.hold);
    let (what, remedy) = match (&slab.motion, hold) {
        (Some(motion), Some(hold)) => (
            format!(
                "{face_words} falls: {growth}. The slab moves with {} and holds from {} on.",
                words::acceleration(motion.acceleration),
                words::acceleration(hold),
            ),
            match context.derived().window.and_then(|window| window.hold) {
                Some(drive) => format!(
                    "Raise the drive above {} at the cell, or use a narrower cell.",
                    words::acceleration(drive)
                ),
                None => String::new(),
            },
        ),
        (Some(motion), None) => (
            format!(
                "{face_words} falls: {growth}. The slab moves with {}.",
                words::acceleration(motion.acceleration)
            ),
            String::new(),
        ),
        (None, _) => (
            format!("{face_words} falls: {growth}. The cell is at rest."),
            "Shake the cell vertically: write a `[drive]`. Or put the heavier layer below.".to_owned(),
        ),
    };
    let mut finding = found("interface-falls", &face.place(), context.face_span(face), what, remedy);
    finding.values.push(("growth_rate_per_s", stability.growth_rate));
    finding.values.push(("wavenumber_per_m", stability.worst.wavenumber));
    if let Some(motion) = &slab.motion {
        finding.values.push(("slab_acceleration_m_per_s2", motion.acceleration));
    }
    finding.values.extend(hold.map(|hold| ("hold_limit_m_per_s2", hold)));
    finding
}

pub(super) fn sentence_case(text: &str) -> String {
    let mut letters = text.chars();
    match letters.next() {
        Some(first) => first.to_uppercase().chain(letters).collect(),
        None => String::new(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn fires_on_a_growing_mode_that_falls() {
        // F1 of the worked designs: 8.7 1/s at 63 1/m, 0.869 of the hold limit 175.8 m/s².
        let mut case = Case::new(9.0).slab("oil", 1.731, &[(175.8, Some(287.4))]);
        case.grow(0, Mechanism::Falls, 8.7);
        let found = case.only("interface-falls");
        assert_eq!(found.place, "interface.oil|cushion");
        assert!(
            found.message.what.contains("8.70 1/s") && found.message.what.contains("175.8 m/s²"),
            "{found:?}"
        );
        assert!(found.message.remedy.contains("101.6 m/s²"), "175.8/1.731: {}", found.message.remedy);
        assert!(found.related.iter().any(|related| related.message.contains("9.00 g0 peak")));
    }

    #[test]
    fn silent_when_nothing_grows_or_waves_do() {
        Case::new(13.0).slab("oil", 1.731, &[(175.8, Some(287.4))]).silent("interface-falls");
        let mut case = Case::new(18.5).slab("oil", 1.731, &[(175.8, Some(287.4))]);
        case.grow(0, Mechanism::Waves, 14.7);
        case.silent("interface-falls");
    }

    #[test]
    fn a_cell_at_rest_is_told_to_move() {
        let mut case = Case::at_rest().slab("oil", 1.0, &[]);
        case.grow(0, Mechanism::Falls, 25.0);
        let found = case.only("interface-falls");
        assert!(found.message.remedy.contains("[drive]"));
    }

    #[test]
    fn each_slab_that_falls_has_its_own_finding() {
        let mut case = Case::new(9.0).slab("oil", 1.7, &[(175.8, None)]).slab("brew", 1.7, &[(170.0, None)]);
        case.grow(1, Mechanism::Falls, 9.7);
        assert_eq!(case.only("interface-falls").place, "interface.brew|cushion");
        case.grow(0, Mechanism::Falls, 8.7);
        let findings = case.findings();
        let places: Vec<_> = findings.iter().map(|finding| finding.place.as_str()).collect();
        assert_eq!(places, ["interface.oil|cushion", "interface.brew|cushion"]);
    }

    #[test]
    fn an_unjudged_slab_is_not_spoken_of() {
        Case::new(9.0).unjudged("oil").silent("interface-falls");
    }
}
