//! Hand-made cases for the tests of rules.

use super::{Context, run};
use crate::derived::testing;
use crate::derived::*;
use crate::words::G0;
use quantity::vocabulary::Phase;
use setup::Places;
use setup::finding::Finding;
use setup::resolved::{self, DriveKey, Given, Origin, Setup};

/// A setup with hand-made results.
pub(crate) struct Case {
    pub setup: Setup,
    pub outcome: Outcome,
    pub complete: Option<Outcome>,
}

pub(crate) fn given<T>(value: T, place: &str) -> Given<T> {
    Given { value, place: place.to_owned(), origin: Origin::Written, tolerance: None, digits: 3 }
}

/// A layer without figures.
pub(crate) fn bare(name: &str, phase: Phase) -> resolved::Layer {
    let place = format!("layer.{name}");
    resolved::Layer {
        name: name.to_owned(),
        fluid: Some(resolved::LayerFluid::Bare(phase)),
        thickness: None,
        volume: None,
        filled_volume: None,
        temperature: None,
        figures: resolved::Figures::default(),
        vented: given(false, &format!("{place}.vented")),
        pressure: None,
        polytropic_exponent: None,
        place,
    }
}

impl Case {
    /// A cell of 50 mm × 50 mm driven at 50 Hz with so many g0 peak.
    pub(crate) fn new(g0: f64) -> Case {
        let mut case = Case::at_rest();
        case.setup.drive = Some(resolved::Drive {
            frequency: given(50.0, "drive.frequency"),
            acceleration: given(g0 * G0, "drive.acceleration"),
            set_by: DriveKey::Acceleration,
            cross_axis: None,
            distortion: Vec::new(),
        });
        case.outcome.derived.drive = Some(DriveState::new(50.0, g0 * G0));
        case
    }

    pub(crate) fn at_rest() -> Case {
        let setup = Setup {
            cell: Some(resolved::Cell {
                plan: resolved::Plan::Rectangular {
                    length: given(0.05, "cell.length"),
                    width: given(0.05, "cell.width"),
                },
                height: None,
                sealed_top: given(false, "cell.top"),
                open_bottom: given(false, "cell.bottom"),
                pinned_line: given(false, "cell.contact-line"),
                tilt: None,
            }),
            ..Setup::default()
        };
        Case { setup, outcome: Outcome::default(), complete: None }
    }

    pub(crate) fn slab(mut self, name: &str, amplification: f64, windows: &[(f64, Option<f64>)]) -> Case {
        let mut slab = testing::windows(testing::slab(name), amplification, windows);
        match self.outcome.derived.drive {
            Some(drive) => {
                if let Some(motion) = &mut slab.motion {
                    motion.acceleration = amplification * drive.acceleration;
                    motion.slide = (amplification - 1.0).abs() * drive.displacement;
                }
            }
            None => {
                slab.motion = None;
                if let Some(stability) = &mut slab.stability {
                    stability.limits = None;
                }
            }
        }
        self.outcome.derived.slabs.push(slab);
        self.window();
        self
    }

    pub(crate) fn without_window(self, name: &str, amplification: f64, hold: f64, wave: f64) -> Case {
        let mut case = self.slab(name, amplification, &[]);
        if let Some(limits) = case
            .outcome
            .derived
            .slabs
            .last_mut()
            .and_then(|s| s.stability.as_mut())
            .and_then(|s| s.limits.as_mut())
        {
            (limits.hold, limits.wave) = (Some(hold), Some(wave));
        }
        case.window();
        case
    }

    pub(crate) fn unjudged(mut self, name: &str) -> Case {
        self.outcome.derived.slabs.push(testing::slab(name));
        self.window();
        self
    }

    pub(crate) fn cushion(mut self, name: &str, stroke_ratio: f64) -> Case {
        self.outcome.derived.cushions.push(Cushion {
            index: 1,
            layer: name.to_owned(),
            pressure: 101_468.0,
            polytropic_re: 1.39,
            polytropic_im: 0.01,
            stroke_ratio: Some(stroke_ratio),
            stroke_harmonics: None,
            mean_shift: None,
        });
        self
    }

    /// Lets a slab grow by its lower face (falls) or both (waves).
    pub(crate) fn grow(&mut self, slab: usize, mechanism: Mechanism, rate: f64) {
        let stability = self.outcome.derived.slabs[slab].stability.as_mut().expect("a judged slab");
        stability.growth_rate = rate;
        stability.mechanism = mechanism;
        stability.ring_down = None;
        if mechanism == Mechanism::Waves {
            stability.worst =
                SetBy { face: 0, wavenumber: 251.0, mode: Mode::Continuum, response: Response::Other };
        }
    }

    /// Lets the lower face of the last slab stand askew by so much of its cushion, under so much of an assumed tilt.
    pub(crate) fn wedge(&mut self, share: f64, tilt: f64) {
        self.outcome.derived.sideways =
            Some(Sideways { tilt, tilt_assumed: true, cross_axis: 0.02, cross_phase: None });
        let slab = self.outcome.derived.slabs.last_mut().expect("a slab");
        slab.wedges.push(FaceWedge {
            face: 1,
            along: "length",
            mean_slope: 0.01,
            oscillating_slope: 0.001,
            wall_height: 2.5e-4,
            tilt_gain: -2.6,
            cross_gain: 3.6,
            into: Some(("cushion".to_owned(), share)),
            modes: 32,
            harmonics: 16,
            harmonics_change: 1e-12,
            modes_change: 1e-3,
        });
    }

    fn window(&mut self) {
        let set = self.outcome.derived.drive.map(|drive| drive.acceleration);
        let slabs = &self.outcome.derived.slabs;
        let window = set.and_then(|set| drive_window(slabs, set));
        let intervals = set.and_then(|set| drive_intervals(slabs, set));
        (self.outcome.derived.window, self.outcome.derived.drive_intervals) = (window, intervals);
    }

    pub(crate) fn findings(&self) -> Vec<Finding> {
        let places = Places::default();
        run(&Context::new(&self.setup, &places, &[], &self.outcome, self.complete.as_ref()))
    }

    /// The one finding of a rule.
    pub(crate) fn only(&self, rule: &str) -> Finding {
        let findings = self.findings();
        let mut of_rule = findings.iter().filter(|finding| finding.rule == rule);
        let found = of_rule.next().unwrap_or_else(|| panic!("{rule} does not fire: {findings:#?}")).clone();
        assert_eq!(of_rule.count(), 0, "{rule} fires once: {findings:#?}");
        assert!(!found.message.text().to_lowercase().contains("safe"));
        assert!(
            !found.message.what.is_empty()
                && !found.message.why.is_empty()
                && !found.message.remedy.is_empty()
        );
        found
    }

    /// A rule does not fire.
    pub(crate) fn silent(&self, rule: &str) {
        let findings = self.findings();
        assert!(findings.iter().all(|finding| finding.rule != rule), "{findings:#?}");
    }
}
