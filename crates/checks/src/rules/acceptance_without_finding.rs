//! acceptance-without-finding
//!
//! A finding is accepted that this setup does not have.
//!
//! Why it matters: An acceptance that stays behind hides the finding when it comes back for another reason.
//!
//! What to do: Take the `[[accept]]` out, or correct its `finding` or `at`.
//!
//! Criterion: no finding of that name at that place, or below it. Silent while the stack is not fully judged: the finding may be there and not be seen.

use super::context::found;
use setup::Places;
use setup::finding::Finding;
use setup::resolved::{Accept, Setup};

/// Whether an acceptance speaks of a finding.
pub(crate) fn accepts(accept: &Accept, finding: &Finding) -> bool {
    let below = || finding.place.strip_prefix(&accept.at).is_some_and(|rest| rest.starts_with('.'));
    accept.finding == finding.rule && (accept.at.is_empty() || finding.place == accept.at || below())
}

/// Marks the findings that are accepted; gives a finding for every acceptance that speaks of none.
pub(crate) fn idle(setup: &Setup, places: &Places, findings: &mut [Finding], judged: bool) -> Vec<Finding> {
    let mut idle = Vec::new();
    for accept in &setup.accepts {
        let mut used = false;
        for finding in findings.iter_mut().filter(|finding| accepts(accept, finding)) {
            finding.accepted = true;
            used = true;
        }
        if !used && judged && !accept.finding.is_empty() {
            let place = if accept.at.is_empty() { String::new() } else { format!(" at `{}`", accept.at) };
            let what = format!("`{}`{place} is accepted, but there is no such finding.", accept.finding);
            let span = places.span(&format!("{}.finding", accept.place));
            idle.push(found("acceptance-without-finding", &accept.place, span, what, String::new()));
        }
    }
    idle
}

#[cfg(test)]
mod tests {
    use super::*;

    fn accept(finding: &str, at: &str) -> Accept {
        Accept {
            finding: finding.to_owned(),
            at: at.to_owned(),
            reason: "held like this before".to_owned(),
            by: "M. Quill".to_owned(),
            until: None,
            place: "accept.0".to_owned(),
        }
    }

    fn run(accept: Accept, judged: bool) -> (bool, usize) {
        let setup = Setup { accepts: vec![accept], ..Setup::default() };
        let mut findings =
            [found("hold-margin-short", "interface.oil|cushion", 0..0, "short".to_owned(), String::new())];
        let idle = idle(&setup, &Places::default(), &mut findings, judged);
        (findings[0].accepted, idle.len())
    }

    #[test]
    fn marks_by_name_and_place() {
        assert_eq!(run(accept("hold-margin-short", ""), true), (true, 0));
        assert_eq!(run(accept("hold-margin-short", "interface.oil|cushion"), true), (true, 0));
        assert_eq!(run(accept("hold-margin-short", "interface.oil"), true), (false, 1), "no place above it");
        assert_eq!(run(accept("wave-margin-short", ""), true), (false, 1));
    }

    #[test]
    fn silent_while_not_judged() {
        assert_eq!(run(accept("wave-margin-short", ""), false), (false, 0));
    }
}
