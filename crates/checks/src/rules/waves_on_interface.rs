//! waves-on-interface
//!
//! Parametric waves grow on an interface, because the slab is shaken too strongly for its viscosity.
//!
//! Why it matters: Waves that grow break, throw drops into the gas and end in the loss of the layer or at least of a flat face.
//!
//! What to do: Lower the drive below the wave limit, or raise the limit: a more viscous liquid, a deeper layer, a cushion further from resonance.
//!
//! Criterion: at the slab's own acceleration some mode of the cell grows that is at rest without drive. Every Floquet exponent counts: the two faces of a thin slab resonate together at other frequencies than the drive or its half, which sets the limit of slabs thinner than about half a wavelength (Kumar and Tuckerman, J. Fluid Mech. 279, 49, 1994, for the two usual classes; the combination class from the same equations).
//!
//! Silent when the slab is not judged, and when no drive at all holds it: then no-holding-drive says so.

use super::Context;
use super::context::found;
use super::interface_falls::{growing, growth_words};
use crate::derived::{Mechanism, Response, Slab, Stability};
use crate::words;
use setup::finding::Finding;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    growing(context, Mechanism::Waves, |slab, stability| finding(context, slab, stability))
}

fn finding(context: &Context<'_>, slab: &Slab, stability: &Stability) -> Finding {
    let face = &slab.faces[stability.worst.face];
    let class = response_words(stability.worst.response);
    let motion = slab.motion.as_ref().map_or_else(String::new, |motion| {
        format!(" The slab moves with {}", words::acceleration(motion.acceleration))
    });
    let wave = stability.limits.as_ref().and_then(|limits| limits.wave);
    let limit = wave.map_or_else(
        || ".".to_owned(),
        |wave| format!("; waves rise from {} on.", words::acceleration(wave)),
    );
    let what =
        format!("Waves rise on {}, {class}: {}.{motion}{limit}", face.words(), growth_words(stability));
    let remedy = match context.derived().window.and_then(|window| window.wave) {
        Some(drive) => format!(
            "Lower the drive below {} at the cell, or use a more viscous liquid.",
            words::acceleration(drive)
        ),
        None => String::new(),
    };
    let mut finding = found("waves-on-interface", &face.place(), context.face_span(face), what, remedy);
    finding.values.push(("growth_rate_per_s", stability.growth_rate));
    finding.values.push(("wavenumber_per_m", stability.worst.wavenumber));
    if let Some(motion) = &slab.motion {
        finding.values.push(("slab_acceleration_m_per_s2", motion.acceleration));
    }
    finding.values.extend(wave.map(|wave| ("wave_limit_m_per_s2", wave)));
    finding
}

/// How a wave answers the drive.
pub(crate) fn response_words(response: Response) -> &'static str {
    match response {
        Response::Harmonic => "with the drive's own frequency",
        Response::Subharmonic => "at half the drive's frequency",
        Response::Other => "at another frequency, both faces together",
        Response::None => "without drive",
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::*;

    #[test]
    fn fires_on_waves_with_their_class() {
        // F2 of the worked designs: 14.7 1/s at 251 1/m, combination.
        let mut case = Case::new(18.5).slab("oil", 1.731, &[(175.8, Some(287.4))]);
        case.grow(0, Mechanism::Waves, 14.7);
        let found = case.only("waves-on-interface");
        assert!(
            found.message.what.contains("14.7 1/s") && found.message.what.contains("another frequency"),
            "{found:?}"
        );
        assert!(found.message.remedy.contains("166.0 m/s²"), "287.4/1.731: {}", found.message.remedy);
    }

    #[test]
    fn silent_when_it_holds_and_when_unjudged() {
        Case::new(13.0).slab("oil", 1.731, &[(175.8, Some(287.4))]).silent("waves-on-interface");
        Case::new(13.0).unjudged("oil").silent("waves-on-interface");
    }

    #[test]
    fn on_resonance_the_cushion_is_named_as_the_cause() {
        // F3: D1 with a cushion of 95 mm resonates at 51.0 Hz.
        let mut case = Case::new(13.0).slab("oil", 7.9, &[(175.8, Some(287.4))]).cushion("cushion", 0.07);
        case.outcome.derived.natural_frequencies = vec![51.0];
        case.grow(0, Mechanism::Waves, 147.0);
        let found = case.only("waves-on-interface");
        assert!(
            found.related.iter().any(|related| related.message.contains("51.0 Hz")),
            "{:?}",
            found.related
        );
    }
}
