//! effect-switched-off
//!
//! The file switches an effect off that nature does not.
//!
//! Why it matters: What is shown is a thought experiment: the limits with the effect are other ones, and they are what the lab will meet.
//!
//! What to do: Take the line out of `[model]` once you have seen what the effect does.
//!
//! Criterion: the setup is computed a second time with every effect on; the verdict is incomplete where a limit of the drive, an amplification, the second harmonic or the mechanism of a slab changes by more than 1 % (judgement), or where that cannot be compared. Where it changes by less, and for an effect that this version does not compute in any case, the finding is for information only.

use super::Context;
use super::context::found;
use crate::derived::{Derived, Slab, Stability};
use crate::words;
use quantity::vocabulary::Effect;
use setup::finding::{Finding, Severity};

/// Relative change (judgement, see the page).
const MATTERS: f64 = 0.01;

/// Effects that this version computes.
const COMPUTED: [Effect; 4] =
    [Effect::WallDrag, Effect::GasHeatLoss, Effect::GasLayers, Effect::CushionHarmonics];

pub(super) fn check(context: &Context<'_>) -> Vec<Finding> {
    let difference = context.complete.map(|complete| difference(context.derived(), &complete.derived));
    context
        .setup
        .effects_off
        .iter()
        .map(|off| {
            let key = off.place.rsplit('.').next().unwrap_or(&off.place);
            let (matters, words) = match &difference {
                _ if !COMPUTED.contains(&off.value) => {
                    (false, "this version does not compute it in any case")
                }
                Some(Some((change, words))) => (*change > MATTERS, words.as_str()),
                _ => (true, "what it changes cannot be compared, because this setup is not judged"),
            };
            let what = format!("`{key}` is switched off; {words}.");
            let mut finding =
                found("effect-switched-off", &off.place, context.span(&off.place), what, String::new());
            finding.fixable = true;
            if !matters {
                finding.severity = Severity::Information;
            }
            finding
        })
        .collect()
}

/// The largest relative change that the effects make, and what it is; `None` where it cannot be compared.
fn difference(without: &Derived, with: &Derived) -> Option<(f64, String)> {
    if without.slabs.is_empty() || without.slabs.len() != with.slabs.len() {
        return None;
    }
    let mut largest = (0.0, "with it no limit changes by more than 1 %".to_owned());
    let mut note = |name: String, before: Option<f64>, after: Option<f64>, text: fn(f64) -> String| {
        let change = match (before, after) {
            (Some(a), Some(b)) => (a - b).abs() / a.abs().max(b.abs()).max(f64::MIN_POSITIVE),
            (None, None) => 0.0,
            _ => 1.0,
        };
        if change > MATTERS && change > largest.0 {
            let say = |value: Option<f64>| value.map_or_else(|| "none".to_owned(), text);
            largest =
                (change, format!("with every effect on {name} is {} instead of {}", say(after), say(before)));
        }
    };
    for (before, after) in without.slabs.iter().zip(&with.slabs) {
        let amplification = |slab: &Slab| slab.motion.as_ref().map(|motion| motion.amplification);
        let limit = |slab: &Slab, pick: fn(&Stability) -> Option<f64>| slab.stability.as_ref().and_then(pick);
        note(
            format!("the amplification of \"{}\"", before.name),
            amplification(before),
            amplification(after),
            |value| words::number(value, 3),
        );
        for (which, pick) in [
            ("hold", (|s| s.limits.as_ref()?.hold) as fn(&Stability) -> Option<f64>),
            ("wave", |s| s.limits.as_ref()?.wave),
        ] {
            let name = format!("the {which} limit of \"{}\"", before.name);
            note(name, limit(before, pick), limit(after, pick), words::acceleration);
        }
        // Shares of the fundamental: what counts is how far they are apart.
        let share = |slab: &Slab| slab.share(2).map(|share| 1.0 + share);
        note(format!("the second harmonic in \"{}\"", before.name), share(before), share(after), |value| {
            words::percent(value - 1.0)
        });
        let mechanism = |slab: &Slab| slab.stability.as_ref().map(|stability| stability.mechanism);
        if mechanism(before) != mechanism(after) {
            return Some((
                1.0,
                format!("with every effect on the verdict on \"{}\" is another one", before.name),
            ));
        }
    }
    Some(largest)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::derived::Outcome;
    use crate::rules::testing::*;

    fn case(with_wave: f64) -> Case {
        let mut case = Case::new(13.0).slab("oil", 1.7, &[(100.0, Some(300.0))]);
        case.setup.effects_off = vec![given(Effect::GasLayers, "model.gas-layers")];
        let other = Case::new(13.0).slab("oil", 1.7, &[(100.0, Some(with_wave))]);
        case.complete = Some(other.outcome);
        case
    }

    #[test]
    fn warns_where_a_limit_moves_and_informs_where_it_does_not() {
        let found = case(290.0).only("effect-switched-off");
        assert_eq!(found.severity, Severity::Warning);
        assert!(found.message.what.contains("290.0 m/s²"), "{}", found.message.what);
        assert_eq!(case(298.0).only("effect-switched-off").severity, Severity::Information);
        assert_eq!(case(296.9).only("effect-switched-off").severity, Severity::Warning);
    }

    #[test]
    fn warns_where_it_cannot_be_compared() {
        let mut case = case(300.0);
        case.complete = Some(Outcome::default());
        assert_eq!(case.only("effect-switched-off").severity, Severity::Warning);
        case.complete = None;
        assert_eq!(case.only("effect-switched-off").severity, Severity::Warning);
    }

    #[test]
    fn an_effect_that_is_not_computed_changes_nothing() {
        let mut case = case(290.0);
        case.setup.effects_off = vec![given(Effect::BodyDamping, "model.body-damping")];
        let found = case.only("effect-switched-off");
        assert_eq!(found.severity, Severity::Information);
        assert!(found.message.what.contains("does not compute it"));
    }

    #[test]
    fn silent_when_everything_is_on() {
        let mut case = case(290.0);
        case.setup.effects_off.clear();
        case.silent("effect-switched-off");
    }
}
