//! The rules about the physics: one file each, whose header is its page. A rule reads what was derived and compares;
//! it never calls a solver. What is not known stays silent here: its cause has a finding of its own.

mod acceptance_without_finding;
mod context;
mod cushion_bounces_at_half;
mod cushion_crushed;
mod cushion_harmonics_large;
mod cushion_near_resonance;
mod cushion_stroke_long;
mod cushion_vented;
mod effect_switched_off;
mod equations_outside_range;
mod face_wedged_by_tilt;
mod gas_layer_compressible;
mod hold_margin_short;
mod interface_falls;
mod interfacial_tension_missing;
mod internal_fault;
mod liquid_shear_dependent;
mod material_outside_range;
mod no_holding_drive;
mod not_converged;
mod not_looked_at;
mod pinned_line_slides;
mod stack_overfills_cell;
#[cfg(test)]
mod testing;
mod value_missing;
mod values_disagree;
mod wave_margin_short;
mod waves_on_interface;

pub(crate) use acceptance_without_finding::idle;
pub(crate) use context::Context;
pub(crate) use waves_on_interface::response_words;

use setup::finding::{Finding, Severity};
use setup::rule::RuleInfo;
use std::panic::{AssertUnwindSafe, catch_unwind};

/// A rule: what it says of itself, and how it checks.
#[derive(Debug, Clone, Copy)]
pub struct Rule {
    /// Name, severity, page.
    pub info: RuleInfo,
    check: fn(&Context<'_>) -> Vec<Finding>,
}

const fn rule(
    id: &'static str,
    severity: Severity,
    page: &'static str,
    check: fn(&Context<'_>) -> Vec<Finding>,
) -> Rule {
    Rule { info: RuleInfo::new(id, severity, page), check }
}

use Severity::{Error, Warning};

/// Every rule of this crate, in the order of the guide.
pub static RULES: &[Rule] = &[
    rule(
        "material-outside-range",
        Error,
        include_str!("material_outside_range.rs"),
        material_outside_range::check,
    ),
    rule(
        "interfacial-tension-missing",
        Error,
        include_str!("interfacial_tension_missing.rs"),
        interfacial_tension_missing::check,
    ),
    rule(
        "liquid-shear-dependent",
        Warning,
        include_str!("liquid_shear_dependent.rs"),
        liquid_shear_dependent::check,
    ),
    rule("interface-falls", Error, include_str!("interface_falls.rs"), interface_falls::check),
    rule("waves-on-interface", Error, include_str!("waves_on_interface.rs"), waves_on_interface::check),
    rule("hold-margin-short", Warning, include_str!("hold_margin_short.rs"), hold_margin_short::check),
    rule("wave-margin-short", Warning, include_str!("wave_margin_short.rs"), wave_margin_short::check),
    rule("no-holding-drive", Error, include_str!("no_holding_drive.rs"), no_holding_drive::check),
    rule(
        "cushion-near-resonance",
        Warning,
        include_str!("cushion_near_resonance.rs"),
        cushion_near_resonance::check,
    ),
    rule(
        "cushion-harmonics-large",
        Warning,
        include_str!("cushion_harmonics_large.rs"),
        cushion_harmonics_large::check,
    ),
    rule(
        "cushion-bounces-at-half",
        Warning,
        include_str!("cushion_bounces_at_half.rs"),
        cushion_bounces_at_half::check,
    ),
    rule("cushion-stroke-long", Warning, include_str!("cushion_stroke_long.rs"), cushion_stroke_long::check),
    rule("cushion-vented", Error, include_str!("cushion_vented.rs"), cushion_vented::check),
    rule("cushion-crushed", Error, include_str!("cushion_crushed.rs"), cushion_crushed::check),
    rule("face-wedged-by-tilt", Warning, include_str!("face_wedged_by_tilt.rs"), face_wedged_by_tilt::check),
    rule("stack-overfills-cell", Error, include_str!("stack_overfills_cell.rs"), stack_overfills_cell::check),
    rule(
        "gas-layer-compressible",
        Warning,
        include_str!("gas_layer_compressible.rs"),
        gas_layer_compressible::check,
    ),
    rule(
        "equations-outside-range",
        Warning,
        include_str!("equations_outside_range.rs"),
        equations_outside_range::check,
    ),
    rule("pinned-line-slides", Warning, include_str!("pinned_line_slides.rs"), pinned_line_slides::check),
    rule("effect-switched-off", Warning, include_str!("effect_switched_off.rs"), effect_switched_off::check),
    rule("not-converged", Error, include_str!("not_converged.rs"), not_converged::check),
    rule("internal-fault", Error, include_str!("internal_fault.rs"), |_| Vec::new()),
    rule(
        "acceptance-without-finding",
        Warning,
        include_str!("acceptance_without_finding.rs"),
        // Runs after all others: `idle`.
        |_| Vec::new(),
    ),
];

/// Checks of this crate that report under a name of the setup crate.
const BORROWED: &[fn(&Context<'_>) -> Vec<Finding>] =
    &[value_missing::check, values_disagree::check, not_looked_at::check];

/// Every rule there is: reading rules first.
pub fn all_rules() -> Vec<RuleInfo> {
    setup::RULES.iter().copied().chain(RULES.iter().map(|rule| rule.info)).collect()
}

/// The page of a rule; `None` for a name that no rule has.
pub fn why(name: &str) -> Option<String> {
    all_rules().into_iter().find(|rule| rule.id == name).map(|rule| rule.doc())
}

/// Runs every rule. A rule that panics becomes one finding; the others are not disturbed.
pub(crate) fn run(context: &Context<'_>) -> Vec<Finding> {
    let own = RULES.iter().map(|rule| (rule.info.id, rule.check));
    let borrowed = BORROWED.iter().map(|&check| ("on sizes and figures", check));
    own.chain(borrowed).flat_map(|(name, check)| guarded(name, check, context)).collect()
}

fn guarded(
    name: &'static str,
    check: fn(&Context<'_>) -> Vec<Finding>,
    context: &Context<'_>,
) -> Vec<Finding> {
    match catch_unwind(AssertUnwindSafe(|| check(context))) {
        Ok(findings) => findings,
        Err(_) => vec![internal_fault::finding(&format!("rule `{name}`"))],
    }
}

/// The finding of a panic outside of the rules.
pub(crate) fn fault(what: &str) -> Finding {
    internal_fault::finding(what)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::derived::Outcome;

    #[test]
    fn every_rule_tells_what_why_and_what_to_do() {
        for rule in RULES {
            assert_eq!(rule.info.doc().lines().next(), Some(rule.info.id));
            for part in [rule.info.statement(), rule.info.why(), rule.info.remedy()] {
                assert!(part.len() > 20, "{}: {part:?}", rule.info.id);
            }
            assert!(!rule.info.doc().to_lowercase().contains("safe"), "{}", rule.info.id);
        }
    }

    #[test]
    fn the_list_and_the_folder_agree() {
        let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/src/rules");
        let other = ["mod", "context", "testing", "not_looked_at", "value_missing", "values_disagree"];
        let mut files: Vec<String> = std::fs::read_dir(folder)
            .expect("the folder of the rules")
            .map(|entry| {
                entry.expect("an entry").path().file_stem().expect("a name").to_string_lossy().into_owned()
            })
            .filter(|name| !other.contains(&name.as_str()))
            .map(|name| name.replace('_', "-"))
            .collect();
        let mut names: Vec<String> = RULES.iter().map(|rule| rule.info.id.to_owned()).collect();
        files.sort();
        names.sort();
        assert_eq!(files, names);
    }

    #[test]
    fn names_are_unique_and_have_pages() {
        let mut names: Vec<_> = all_rules().iter().map(|rule| rule.id).collect();
        let count = names.len();
        names.sort_unstable();
        names.dedup();
        assert_eq!(names.len(), count);
        assert!(
            why("interface-falls").is_some() && why("unit-missing").is_some() && why("no-such").is_none()
        );
    }

    #[test]
    fn a_panic_in_one_rule_is_one_finding() {
        let (setup, places, outcome) = Default::default();
        let context = Context::new(&setup, &places, &[], &outcome, None::<&Outcome>);
        let findings = guarded(
            "broken",
            |context| {
                vec![context.setup.layers[7].name.clone()].into_iter().map(|_| unreachable!()).collect()
            },
            &context,
        );
        assert_eq!(findings.len(), 1);
        assert_eq!((findings[0].rule, findings[0].severity), ("internal-fault", Error));
        assert!(findings[0].message.what.contains("broken"));
    }
}
