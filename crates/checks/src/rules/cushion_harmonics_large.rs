//! cushion-harmonics-large
//!
//! A slab on a cushion moves with strong overtones of the drive.
//!
//! Why it matters: What the slab feels is then no cosine: its peak differs between up and down, waves are driven at two and three times the frequency as well, and a small change of gas or drive changes all of it.
//!
//! What to do: Keep the natural frequencies of the cushions away from two and three times the drive, use thicker cushions or a smaller drive.
//!
//! Criterion: second or third harmonic of a slab's acceleration above 10 % of its first (judgement: the default margin towards waves), from the harmonic balance of the polytropic cushions with the stated distortion of the table. An error where the motion that starts from rest ends below the set drive: then no acceleration of this setup is what the slabs will do.
//!
//! Silent where the harmonics are not known (`cushion-harmonics = false`, no drive).

use super::Context;
use super::context::found;
use crate::derived::{LostMotion, Seat, Slab};
use crate::words;
use setup::finding::{Finding, Severity};

/// Over the fundamental (judgement, see the page).
const LARGE: f64 = 0.10;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    match &context.derived().lost_motion {
        Some(lost) => vec![no_motion(context, lost)],
        None => overtones(context).into_iter().collect(),
    }
}

/// One finding for the slab with the largest overtone: the cushions move all of them.
fn overtones(context: &Context<'_>) -> Option<Finding> {
    let derived = context.derived();
    let drive = derived.drive?;
    let floating = derived.slabs.iter().filter(|slab| slab.seat == Seat::Floating);
    let largest = |slab: &&Slab| largest(slab).map_or(0.0, |(_, share)| share);
    let slab = floating.max_by(|a, b| largest(a).total_cmp(&largest(b)))?;
    let (order, share) = self::largest(slab).filter(|(_, share)| *share > LARGE)?;
    let name = if order == 2 { "second" } else { "third" };
    let at = order as f64 * drive.frequency;
    let off = |f: &f64| (f / at).ln().abs();
    let nearest = derived.natural_frequencies.iter().copied().min_by(|a, b| off(a).total_cmp(&off(b)));
    let near = nearest.map_or_else(String::new, |f| {
        format!("; the nearest natural frequency of slabs on cushions is {}", words::hertz(f))
    });
    let what = format!(
        "\"{}\" moves with a {name} harmonic of {} of its acceleration, at {}{near}.",
        slab.name,
        words::percent(share),
        words::hertz(at)
    );
    let cushion = context.cushion_of(slab).map_or(&slab.layers[0], |cushion| &cushion.layer);
    let place = context.layer_place(cushion);
    let mut finding =
        found("cushion-harmonics-large", &place, context.layer_span(cushion), what, String::new());
    finding.values = vec![
        ("second_harmonic_ratio", slab.share(2).unwrap_or(0.0)),
        ("third_harmonic_ratio", slab.share(3).unwrap_or(0.0)),
    ];
    finding.values.extend(nearest.map(|f| ("natural_frequency_hz", f)));
    finding.related.extend(context.related_drive());
    Some(finding)
}

/// The larger of second and third harmonic.
fn largest(slab: &Slab) -> Option<(usize, f64)> {
    [2, 3]
        .into_iter()
        .filter_map(|order| Some((order, slab.share(order)?)))
        .max_by(|a, b| a.1.total_cmp(&b.1))
}

fn no_motion(context: &Context<'_>, lost: &LostMotion) -> Finding {
    let what = format!(
        "When the drive is raised from rest the motion on the cushions can be followed to {} of the set drive only, \
         with a stroke of {} of the thickness: there the slabs jump to a larger motion, or a cushion closes.",
        words::percent(lost.reached),
        words::percent(lost.stroke_ratio)
    );
    let stroke = |c: &&crate::derived::Cushion| c.stroke_ratio.unwrap_or(0.0);
    let cushions = &context.derived().cushions;
    let cushion = cushions.iter().max_by(|a, b| stroke(a).total_cmp(&stroke(b)));
    let name = cushion.map(|cushion| cushion.layer.as_str()).unwrap_or_default();
    let place = context.layer_place(name);
    let mut finding = found("cushion-harmonics-large", &place, context.layer_span(name), what, String::new());
    finding.severity = Severity::Error;
    finding.values = vec![("reached_drive_ratio", lost.reached), ("stroke_ratio", lost.stroke_ratio)];
    finding.related.extend(context.related_drive());
    finding
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::derived::Overtone;
    use crate::rules::testing::*;

    fn case(second: f64, third: f64) -> Case {
        let mut case = Case::new(13.0).slab("oil", 1.3, &[(100.0, Some(1000.0))]).cushion("cushion", 0.027);
        let overtone = |order, ratio| Overtone { order, ratio, phase: 0.0 };
        case.outcome.derived.slabs[0].overtones = Some(vec![overtone(2, second), overtone(3, third)]);
        case.outcome.derived.natural_frequencies = vec![95.9];
        case
    }

    #[test]
    fn fires_on_the_stated_example() {
        // 20 mm of oil on 20 mm of gas near half the natural frequency: a second harmonic of 54 %.
        let found = case(0.54, 0.02).only("cushion-harmonics-large");
        assert_eq!((found.place.as_str(), found.severity), ("layer.cushion", Severity::Warning));
        let what = &found.message.what;
        assert!(what.contains("second harmonic of 54.0 %") && what.contains("at 100 Hz"), "{what}");
        assert!(what.contains("95.9 Hz"), "{what}");
    }

    #[test]
    fn the_threshold_is_a_tenth_of_either_harmonic() {
        case(0.1001, 0.0).only("cushion-harmonics-large");
        case(0.0999, 0.0999).silent("cushion-harmonics-large");
        let found = case(0.02, 0.1001).only("cushion-harmonics-large");
        assert!(
            found.message.what.contains("third harmonic of 10.0 %, at 150 Hz")
                || found.message.what.contains("third")
        );
    }

    #[test]
    fn a_motion_that_ends_below_the_drive_is_an_error() {
        let mut case = case(0.0, 0.0);
        case.outcome.derived.slabs[0].overtones = None;
        case.outcome.derived.lost_motion = Some(LostMotion { reached: 0.652, stroke_ratio: 0.224 });
        let found = case.only("cushion-harmonics-large");
        assert_eq!(found.severity, Severity::Error);
        assert!(found.message.what.contains("65.2 % of the set drive"), "{}", found.message.what);
    }

    #[test]
    fn silent_where_harmonics_are_not_known_and_on_the_floor() {
        let mut unknown = case(0.54, 0.0);
        unknown.outcome.derived.slabs[0].overtones = None;
        unknown.silent("cushion-harmonics-large");
        let mut floor = case(0.54, 0.0);
        floor.outcome.derived.slabs[0].seat = Seat::OnFloor;
        floor.silent("cushion-harmonics-large");
        Case::at_rest().slab("oil", 1.0, &[]).silent("cushion-harmonics-large");
    }
}
