//! The whole check of one text.

use crate::derived::{Derived, Outcome, derive};
use crate::engine::Engine;
use crate::rules::{self, Context};
use setup::finding::{Finding, Severity};
use setup::resolved::Setup;
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::sync::Arc;

/// What came out.
#[derive(Debug, Clone)]
pub struct Analysis {
    /// Sorted by place in the text, then by severity (errors first).
    pub findings: Vec<Finding>,
    /// In one word.
    pub verdict: Verdict,
    /// What was read.
    pub understanding: setup::Understanding,
    /// What was computed; `None` when the text could not be read at all or the work was cancelled.
    pub derived: Option<Arc<Derived>>,
}

/// The check in one word.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Verdict {
    /// Everything that was looked at holds.
    Holds,
    /// An error exists, accepted or not.
    Fails,
    /// No error, but a check could not run or converge, a value is open, or a switched-off effect matters.
    Incomplete,
    /// Nothing of the text could be read.
    Unreadable,
}

impl Verdict {
    /// The word of the JSON output.
    pub fn word(self) -> &'static str {
        match self {
            Verdict::Holds => "holds",
            Verdict::Fails => "fails",
            Verdict::Incomplete => "incomplete",
            Verdict::Unreadable => "unreadable",
        }
    }
}

impl Analysis {
    /// Of a file that could not be read; `reason` says why.
    pub fn unreadable(reason: &str) -> Analysis {
        let understanding = setup::understand("");
        let findings = vec![setup::file_not_readable(&setup::Cause::System(reason.to_owned()))];
        Analysis { findings, verdict: Verdict::Unreadable, understanding, derived: None }
    }
}

/// Checks a text: reads it, computes what it describes, and asks every rule. When `cancel` says that the result is
/// no longer wanted the work ends early, with what was found so far: nothing, if the text was still being read.
pub fn analyse(text: &str, engine: &Engine, cancel: &(dyn Fn() -> bool + Sync)) -> Analysis {
    match setup::understand_unless(text, &|| cancel()) {
        Some(understanding) => judged(understanding, engine, cancel),
        None => Analysis {
            findings: Vec::new(),
            verdict: Verdict::Incomplete,
            understanding: setup::understand(""),
            derived: None,
        },
    }
}

/// What a text says, and what is wrong with it, without computing anything.
pub fn read(text: &str) -> Analysis {
    judged(setup::understand(text), &Engine::new(), &|| true)
}

fn judged(
    understanding: setup::Understanding,
    engine: &Engine,
    cancel: &(dyn Fn() -> bool + Sync),
) -> Analysis {
    let setup = &understanding.setup;
    let mut findings = understanding.findings.clone();
    let outcome = computed(setup, engine, cancel, &mut findings);
    let complete = (!setup.effects_off.is_empty()).then(|| {
        let every_effect = Setup { effects_off: Vec::new(), ..setup.clone() };
        computed(&every_effect, engine, cancel, &mut findings)
    });
    let cancelled = outcome.cancelled || complete.as_ref().is_some_and(|complete| complete.cancelled);
    if !cancelled {
        let said = &understanding.findings;
        findings.extend(rules::run(&Context::new(
            setup,
            &understanding.places,
            said,
            &outcome,
            complete.as_ref(),
        )));
    }
    let judged = !cancelled && outcome.is_judged();
    let idle = rules::idle(setup, &understanding.places, &mut findings, judged);
    findings.extend(idle);
    findings.sort_by(|a, b| {
        (a.span.start, a.span.end).cmp(&(b.span.start, b.span.end)).then(b.severity.cmp(&a.severity))
    });
    let verdict = verdict(setup, &findings, judged);
    let derived = (verdict != Verdict::Unreadable && !cancelled).then(|| Arc::new(outcome.derived));
    Analysis { findings, verdict, understanding, derived }
}

/// The physics of a setup; a panic in it is one finding.
fn computed(
    setup: &Setup,
    engine: &Engine,
    cancel: &(dyn Fn() -> bool + Sync),
    findings: &mut Vec<Finding>,
) -> Outcome {
    catch_unwind(AssertUnwindSafe(|| derive(setup, engine, cancel))).unwrap_or_else(|_| {
        findings.push(rules::fault("computation of the stack"));
        Outcome::default()
    })
}

/// Errors that say 'could not be judged' and not 'fails'.
const UNJUDGED: [&str; 3] = ["not-converged", "open-value-unsolved", "internal-fault"];

fn verdict(setup: &Setup, findings: &[Finding], judged: bool) -> Verdict {
    let fired = |rule: &str| findings.iter().any(|finding| finding.rule == rule);
    let nothing_read = setup.layers.is_empty() && setup.cell.is_none() && setup.drive.is_none();
    if fired("file-not-readable") || (fired("line-unreadable") && nothing_read) {
        return Verdict::Unreadable;
    }
    let errors = findings.iter().filter(|finding| finding.severity == Severity::Error);
    if errors.clone().any(|finding| !UNJUDGED.contains(&finding.rule)) {
        return Verdict::Fails;
    }
    // A switched-off effect that does not matter is told for information only.
    let matters = |finding: &Finding| {
        UNJUDGED.contains(&finding.rule)
            || finding.rule == "not-looked-at"
            || (finding.rule == "effect-switched-off" && finding.severity >= Severity::Warning)
    };
    match judged && setup.open_values.is_empty() && !findings.iter().any(matters) {
        true => Verdict::Holds,
        false => Verdict::Incomplete,
    }
}
