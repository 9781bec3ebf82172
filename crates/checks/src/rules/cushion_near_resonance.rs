//! cushion-near-resonance
//!
//! A natural frequency of the slabs on their cushions lies near the drive.
//!
//! Why it matters: There the motion of a slab changes by several per cent for each per cent of gas that leaks, dissolves or warms up, so that no margin stays what it was.
//!
//! What to do: Move the natural frequency to 1.4 to 1.7 times the drive (not near 2 or 3 times): a thinner cushion, a thinner slab or a lower drive frequency.
//!
//! Criterion: a lossless natural frequency f0 within a factor 1.2 of the drive f (judgement). For one slab on one cushion T = 1/(1 − (f/f0)²) and d ln a/d ln H = T − 1, H the thickness of the cushion: at f0 = 1.2 f the slab moves 3.3 times as much as the cell, and one per cent of gas changes that by 2.3 %.
//!
//! Silent without a drive.

use super::Context;
use super::context::found;
use crate::derived::{Cushion, Slab};
use crate::words;
use setup::finding::{Finding, Related};

/// Factor around the drive's frequency (judgement, see the page).
const NEAR: f64 = 1.2;
/// Where the natural frequency of one slab on one cushion sits well, over the drive's (judgement, from worked
/// designs, which have 1.4 to 1.7).
const GOOD: f64 = 1.5;

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    finding(context).into_iter().collect()
}

/// The natural frequency near the drive, with the slab and the cushion that move most.
fn resonance<'a>(context: &Context<'a>) -> Option<(f64, &'a Slab, &'a Cushion)> {
    let derived = context.derived();
    let drive = derived.drive.filter(|drive| drive.acceleration > 0.0)?;
    let off = |f0: &f64| (f0 / drive.frequency).ln().abs();
    let nearest = derived.natural_frequencies.iter().copied().min_by(|a, b| off(a).total_cmp(&off(b)))?;
    if off(&nearest) >= NEAR.ln() - 1e-12 {
        return None;
    }
    let motion = |slab: &&Slab| slab.motion.as_ref().map_or(0.0, |motion| motion.amplification);
    let slab = derived.slabs.iter().max_by(|a, b| motion(a).total_cmp(&motion(b)))?;
    let stroke = |cushion: &&Cushion| cushion.stroke_ratio.unwrap_or(0.0);
    let cushion = context
        .cushion_of(slab)
        .or_else(|| derived.cushions.iter().max_by(|a, b| stroke(a).total_cmp(&stroke(b))))?;
    Some((nearest, slab, cushion))
}

/// The resonance as a related line of what it causes.
pub(super) fn as_cause(context: &Context<'_>) -> Option<Related> {
    let (f0, slab, cushion) = resonance(context)?;
    let amplification = slab.motion.as_ref()?.amplification;
    let message = format!(
        "The cushion resonates at {}: \"{}\" moves {} times as much as the cell.",
        words::hertz(f0),
        slab.name,
        words::number(amplification, 3)
    );
    Some(Related { span: context.layer_span(&cushion.layer), message })
}

fn finding(context: &Context<'_>) -> Option<Finding> {
    let (f0, slab, cushion) = resonance(context)?;
    let drive = context.derived().drive?;
    let motion = slab.motion.as_ref()?;
    let ratio = f0 / drive.frequency;
    let side = if ratio < 1.0 { "below" } else { "above" };
    let what = format!(
        "Slabs and cushions have a natural frequency at {}, {} {side} the drive at {}: \"{}\" moves {} times as \
         much as the cell.",
        words::hertz(f0),
        words::percent((ratio - 1.0).abs()),
        words::hertz(drive.frequency),
        slab.name,
        words::number(motion.amplification, 3),
    );
    let place = context.layer_place(&cushion.layer);
    let thickness = context.derived().layers.get(cushion.index).map(|layer| layer.thickness);
    let remedy = match (thickness, context.derived().cushions.len()) {
        // One slab on one cushion: f0² ∝ 1/H.
        (Some(thickness), 1) => format!(
            "Make the cushion about {} thick, which puts the natural frequency at {GOOD} times the drive.",
            words::number(1e3 * thickness * (ratio / GOOD).powi(2), 2) + " mm"
        ),
        _ => String::new(),
    };
    let mut finding =
        found("cushion-near-resonance", &place, context.layer_span(&cushion.layer), what, remedy);
    finding.values = vec![
        ("natural_frequency_hz", f0),
        ("drive_frequency_hz", drive.frequency),
        ("amplification", motion.amplification),
    ];
    finding.related.extend(context.related_drive());
    finding.fixable = context.derived().cushions.len() == 1;
    Some(finding)
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    fn case(f0: f64) -> Case {
        let mut case = Case::new(13.0).slab("oil", 3.0, &[(100.0, Some(1000.0))]).cushion("cushion", 0.05);
        case.outcome.derived.natural_frequencies = vec![f0];
        case
    }

    #[test]
    fn fires_on_resonance() {
        // F3 of the worked designs: f0 = 51.0 Hz at a drive of 50 Hz.
        let found = case(51.0).only("cushion-near-resonance");
        assert_eq!(found.place, "layer.cushion");
        assert!(found.message.what.contains("51.0 Hz, 2.0 % above"), "{}", found.message.what);
    }

    #[test]
    fn the_threshold_is_a_factor_on_either_side() {
        case(59.9).only("cushion-near-resonance");
        case(60.0).silent("cushion-near-resonance");
        case(41.7).only("cushion-near-resonance");
        case(50.0 / 1.2).silent("cushion-near-resonance");
        // D1: 78.4 Hz at 50 Hz.
        case(78.4).silent("cushion-near-resonance");
    }

    #[test]
    fn of_several_natural_frequencies_the_nearest_counts() {
        let mut case = case(51.0);
        case.outcome.derived.natural_frequencies = vec![48.0, 55.0, 200.0];
        assert!(case.only("cushion-near-resonance").message.what.contains("48.0 Hz, 4.0 % below"));
    }

    #[test]
    fn silent_at_rest_and_without_cushions() {
        Case::at_rest().slab("oil", 1.0, &[]).silent("cushion-near-resonance");
        let mut case = case(51.0);
        case.outcome.derived.natural_frequencies.clear();
        case.silent("cushion-near-resonance");
    }

    #[test]
    fn the_proposed_thickness_follows_the_spring() {
        // D1's cushion: 40 mm gives 78.4 Hz, so f0 = 75 Hz needs 40·(78.4/75)² = 43.7 mm; asked from 95 mm, 51.0 Hz.
        let mut case = case(51.0);
        let layer = |name: &str, thickness: f64| crate::derived::testing::layer(name, thickness);
        case.outcome.derived.layers = vec![layer("oil", 0.015), layer("cushion", 0.095)];
        assert!(case.only("cushion-near-resonance").message.remedy.contains("44 mm"));
    }
}
