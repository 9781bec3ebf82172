//! Changes that choose a value, each tried: the whole check is run again with it, and it is offered only when the
//! finding is gone and nothing of equal or higher severity is new. Its title says what it reaches.

use crate::analysis::{Analysis, Verdict, analyse};
use crate::engine::Engine;
use crate::words;
use quantity::Kind;
use setup::finding::{Edit, Finding, Fix, Severity};
use setup::resolved::{DriveKey, LayerFluid};

/// Digits of a proposed value; more are tried when rounding leaves the window.
const DIGITS: [u8; 2] = [3, 4];
/// Viscosities that silicone oils are commonly sold in, m²/s, up to where they are still poured with ease.
const GRADES: [f64; 5] = [1e-4, 2e-4, 3.5e-4, 5e-4, 1e-3];
/// Where one slab on one cushion sits well: natural frequency over that of the drive.
const GOOD_RATIO: f64 = 1.5;

/// Tried changes for one finding of an analysis of this very text. Empty when none helps, or when `cancel` says that
/// they are no longer wanted.
///
/// For a value that can be read in several ways the fixes of the finding come back with the verdict that each leads
/// to: [`offer`] puts them in place of the bare ones.
pub fn changes(
    text: &str,
    analysis: &Analysis,
    engine: &Engine,
    finding: usize,
    cancel: &(dyn Fn() -> bool + Sync),
) -> Vec<Fix> {
    let Some(finding) = analysis.findings.get(finding) else { return Vec::new() };
    let trial = Trial { text, analysis, engine, cancel, finding };
    match finding.rule {
        "interface-falls" | "waves-on-interface" | "hold-margin-short" | "wave-margin-short" => {
            trial.drive_into_window().into_iter().collect()
        }
        "no-holding-drive" => trial.more_viscous().into_iter().collect(),
        "cushion-near-resonance" => trial.thinner_cushion().into_iter().collect(),
        "effect-switched-off" => trial.effect_on().into_iter().collect(),
        "amplitude-kind-unsaid" => trial.meanings(),
        _ => Vec::new(),
    }
}

/// Adds changes to a finding; one that makes the same edits as a fix that is there takes its place.
pub fn offer(finding: &mut Finding, changes: Vec<Fix>) {
    for change in changes {
        match finding.fixes.iter_mut().find(|fix| fix.edits == change.edits) {
            Some(fix) => *fix = change,
            None => finding.fixes.push(change),
        }
    }
}

/// Where a drive should be, m/s² peak.
struct Target {
    /// It must stay in here.
    range: (f64, f64),
    value: f64,
    /// Rounding goes up from it, not down.
    raised: bool,
    /// Whether both of the lab's margins are kept.
    has_margins: bool,
}

/// One finding and what is needed to try something against it.
struct Trial<'a> {
    text: &'a str,
    analysis: &'a Analysis,
    engine: &'a Engine,
    cancel: &'a (dyn Fn() -> bool + Sync),
    finding: &'a Finding,
}

impl Trial<'_> {
    /// The smallest change of the drive that brings it into the window.
    fn drive_into_window(&self) -> Option<Fix> {
        let target = self.target(self.analysis)?;
        self.with_drive(Vec::new(), &target).map(|(fix, _)| fix)
    }

    /// A more viscous liquid in the slab that has no window of its own, and the drive set into the window that opens,
    /// where both of the lab's margins fit into it.
    fn more_viscous(&self) -> Option<Fix> {
        let understanding = &self.analysis.understanding;
        let layer = understanding.setup.layers.iter().find(|layer| layer.place == self.finding.place)?;
        let mut places = vec![format!("{}.grade", layer.place), format!("{}.viscosity", layer.place)];
        if let Some(LayerFluid::Own(name)) = &layer.fluid {
            places.push(format!("fluid.{name}.viscosity"));
        }
        let (place, now) = places.into_iter().find_map(|place| {
            let quantity = understanding.places.quantity(&place)?;
            (quantity.kind == Kind::KinematicViscosity).then_some((place, quantity.value))
        })?;
        GRADES.into_iter().filter(|grade| *grade > 1.05 * now).find_map(|grade| {
            let edit = understanding.places.rewritten(&place, grade, 3, 0.0)?;
            let key = place.rsplit('.').next().unwrap_or(&place);
            let said = format!("Set {key} to {}", edit.new_text);
            let target =
                self.target(&self.after(std::slice::from_ref(&edit))?).filter(|target| target.has_margins)?;
            let (fix, drive) = self.with_drive(vec![edit], &target)?;
            let (_, reaches) = fix.title.split_once(": ")?;
            Some(Fix { title: format!("{said} and {drive}: {reaches}"), ..fix })
        })
    }

    /// Where the drive should be: with both of the lab's margins where they fit, else in the middle of the window.
    fn target(&self, analysis: &Analysis) -> Option<Target> {
        let window = analysis.derived.as_ref()?.window.filter(|window| window.exists)?;
        let limits = &analysis.understanding.setup.limits;
        let hold = window.hold?;
        let lowest = hold / (1.0 - limits.hold_margin.value);
        let highest = window.wave.map_or(f64::INFINITY, |wave| wave / (1.0 + limits.wave_margin.value));
        let target = match window.wave {
            Some(wave) if lowest > highest => {
                Target { range: (hold, wave), value: 0.5 * (hold + wave), raised: true, has_margins: false }
            }
            _ => Target {
                range: (lowest, highest),
                value: window.set.clamp(lowest, highest),
                raised: lowest > window.set,
                has_margins: true,
            },
        };
        target.value.is_finite().then_some(target)
    }

    /// The drive set to a target besides other edits, tried; with `acceleration to "13.2 g0 peak"`.
    fn with_drive(&self, others: Vec<Edit>, target: &Target) -> Option<(Fix, String)> {
        // Rounding may leave the range: a step inwards, or a digit more.
        let inwards = [1.0, if target.raised { 1.005 } else { 0.995 }];
        DIGITS.iter().flat_map(|&digits| inwards.map(|step| (digits, target.value * step))).find_map(
            |(digits, value)| {
                let mut edits = self.set_drive(value, digits)?;
                edits.extend(others.iter().cloned());
                edits.sort_by_key(|edit| edit.span.start);
                let set = setup::understand(&applied(self.text, &edits)).setup.drive?.acceleration.value;
                if set < target.range.0 || set > target.range.1 {
                    return None;
                }
                let after = self.cleared_by(&edits)?;
                let key = match self.analysis.understanding.setup.drive.as_ref()?.set_by {
                    DriveKey::Acceleration => "acceleration",
                    DriveKey::Velocity => "velocity",
                    DriveKey::Displacement => "displacement",
                };
                let place = format!("drive.{key}");
                let text = &edits.iter().find(|edit| self.is_at(edit, &place))?.new_text;
                let said = format!("{key} to {text}");
                let title = format!("Set {said}: {}", reached(&after));
                Some((Fix { title, keeps_meaning: false, edits }, said))
            },
        )
    }

    fn is_at(&self, edit: &Edit, place: &str) -> bool {
        let spot = self.analysis.understanding.places.exact(place);
        spot.and_then(|spot| spot.value.as_ref()).is_some_and(|value| *value == edit.span)
    }

    /// Every written statement of the drive's amplitude, rewritten in its own unit and amplitude word.
    fn set_drive(&self, acceleration: f64, digits: u8) -> Option<Vec<Edit>> {
        let understanding = &self.analysis.understanding;
        let omega = std::f64::consts::TAU * understanding.setup.drive.as_ref()?.frequency.value;
        let statements = [
            ("drive.acceleration", acceleration),
            ("drive.velocity", acceleration / omega),
            ("drive.displacement", acceleration / (omega * omega)),
        ];
        let mut edits: Vec<Edit> = statements
            .into_iter()
            .filter_map(|(place, peak)| understanding.places.rewritten(place, peak, digits, 0.0))
            .collect();
        edits.sort_by_key(|edit| edit.span.start);
        (!edits.is_empty()).then_some(edits)
    }

    /// One slab on one cushion: f0² ∝ 1/H.
    fn thinner_cushion(&self) -> Option<Fix> {
        let derived = self.analysis.derived.as_ref()?;
        let ([f0], [cushion]) = (derived.natural_frequencies.as_slice(), derived.cushions.as_slice()) else {
            return None;
        };
        let layer = derived.layers.get(cushion.index)?;
        let thickness = layer.thickness * (f0 / (GOOD_RATIO * derived.drive?.frequency)).powi(2);
        let place = format!("{}.thickness", layer.place);
        let edit = self.analysis.understanding.places.rewritten(&place, thickness, 2, 0.0)?;
        let title = format!("Set thickness of \"{}\" to {}", layer.name, edit.new_text);
        let edits = vec![edit];
        let after = self.cleared_by(&edits)?;
        Some(Fix { title: format!("{title}: {}", reached(&after)), keeps_meaning: false, edits })
    }

    fn effect_on(&self) -> Option<Fix> {
        let span = self.analysis.understanding.places.exact(&self.finding.place)?.value.clone()?;
        let edits = vec![Edit { span, new_text: "true".to_owned() }];
        let after = self.cleared_by(&edits)?;
        let key = self.finding.place.rsplit('.').next()?;
        Some(Fix { title: format!("Switch `{key}` on: {}", reached(&after)), keeps_meaning: false, edits })
    }

    /// What each meaning of an unsaid value leads to. All of them are offered: the person knows which is meant.
    fn meanings(&self) -> Vec<Fix> {
        let fixes = self.finding.fixes.iter();
        fixes
            .map_while(|fix| {
                let after = self.after(&fix.edits)?;
                Some(Fix { title: format!("{}: {}", fix.title, reached(&after)), ..fix.clone() })
            })
            .collect()
    }

    /// The check of the changed text, when the finding is gone and nothing as grave is new.
    fn cleared_by(&self, edits: &[Edit]) -> Option<Analysis> {
        let after = self.after(edits)?;
        let same = |a: &Finding, b: &Finding| a.rule == b.rule && a.place == b.place;
        let gone = !after.findings.iter().any(|found| same(found, self.finding));
        let graver = after
            .findings
            .iter()
            .filter(|found| found.severity >= self.finding.severity)
            .any(|found| !self.analysis.findings.iter().any(|before| same(before, found)));
        (gone && !graver).then_some(after)
    }

    /// The check of the changed text; `None` when no longer wanted.
    fn after(&self, edits: &[Edit]) -> Option<Analysis> {
        if (self.cancel)() {
            return None;
        }
        let after = analyse(&applied(self.text, edits), self.engine, self.cancel);
        (!(self.cancel)()).then_some(after)
    }
}

/// The text after edits, which ascend and do not overlap.
fn applied(text: &str, edits: &[Edit]) -> String {
    let mut out = text.to_owned();
    for edit in edits.iter().rev() {
        out.replace_range(edit.span.clone(), &edit.new_text);
    }
    out
}

/// What a changed setup reaches: `holds, hold margin 21 %, wave margin 25 %`.
fn reached(after: &Analysis) -> String {
    let error = after.findings.iter().filter(|found| found.severity == Severity::Error).min_by_key(|found| {
        let order = ["no-holding-drive", "interface-falls", "waves-on-interface"];
        order.iter().position(|rule| *rule == found.rule).unwrap_or(order.len())
    });
    if let Some(error) = error {
        return match error.rule {
            "no-holding-drive" => "no drive holds it".to_owned(),
            "interface-falls" => "an interface falls".to_owned(),
            "waves-on-interface" => "waves rise".to_owned(),
            rule => format!("not judged yet, `{rule}` stands in the way"),
        };
    }
    let mut text = match after.verdict {
        Verdict::Holds => "holds".to_owned(),
        _ => "holds as far as it is judged".to_owned(),
    };
    if let Some(window) = after.derived.as_ref().and_then(|derived| derived.window) {
        if let Some(margin) = window.hold_margin() {
            text += &format!(", hold margin {}", words::percent(margin));
        }
        text += &match window.wave_margin() {
            Some(margin) => format!(", wave margin {}", words::percent(margin)),
            None => ", no waves found".to_owned(),
        };
    }
    text
}
