//! `[drive]`: one set value, and cross-checks.

use super::{Resolver, given};
use crate::finding::Finding;
use crate::resolved::{CrossAxis, Drive, DriveKey, Given};
use crate::rules::{peak_rms_slip, values_disagree};
use crate::written::{Written, WrittenSection};
use quantity::Kind;
use std::f64::consts::TAU;

const KEYS: [(&str, DriveKey); 3] = [
    ("acceleration", DriveKey::Acceleration),
    ("velocity", DriveKey::Velocity),
    ("displacement", DriveKey::Displacement),
];

impl Resolver<'_> {
    pub(super) fn drive(&mut self) {
        let document = self.document;
        let Some(section) = document.section("drive") else {
            // A lost header, or a key that fell out of the section: not the same as no drive.
            self.setup.drive_unreadable =
                document.unreadable.iter().any(|place| place == "drive" || place.starts_with("drive."));
            return;
        };
        self.setup.drive_unreadable = true;
        let frequency = self.written(section, "frequency");
        if frequency.is_none() {
            self.missing_key(section, "frequency");
        }
        let lost = KEYS.iter().any(|(key, _)| self.lost(&section.place_of(key)));
        if !lost && KEYS.iter().all(|(key, _)| section.entry(key).is_none()) {
            self.missing_key(section, "acceleration");
        }
        let Some(frequency) = frequency else { return };
        let mut set: Option<Drive> = None;
        for (key, by) in KEYS {
            let unreadable = self.lost(&section.place_of(key));
            if set.is_none() && unreadable {
                // The first key in order is the set value; a later one must not take its place.
                return;
            }
            let Some(value) = self.written(section, key) else { continue };
            let acceleration = as_acceleration(value, by, frequency.value);
            match &set {
                None => {
                    let cross_axis = self.cross_axis(section);
                    let distortion = self.written_several(section, "distortion");
                    let frequency = frequency.clone();
                    set = Some(Drive { frequency, acceleration, set_by: by, cross_axis, distortion });
                }
                Some(set) => {
                    let finding = cross_check(section, set, key, &acceleration);
                    self.findings.extend(finding);
                }
            }
        }
        if section.entry("distortion").is_none() && !self.lost(&section.place_of("distortion")) {
            self.list_declared_default(section, "distortion");
        }
        self.setup.drive_unreadable = set.is_none();
        self.setup.drive = set;
    }

    /// Sideways motion by its ratio, or by ratio and phase.
    fn cross_axis(&mut self, section: &WrittenSection) -> Option<CrossAxis> {
        const KEY: &str = "cross-axis";
        if !matches!(section.value(KEY), Some(Written::Parts(_))) {
            let ratio = self.or_default(Some(section), "drive", "drive", KEY)?;
            return Some(CrossAxis { ratio, phase: None });
        }
        let part = |name: &str| {
            let place = format!("{}.{name}", section.place_of(KEY));
            section.part(KEY, name).map(|quantity| given(quantity, place, self.ambient_pressure()))
        };
        let (ratio, phase) = (part("ratio"), part("phase"));
        if ratio.is_none() {
            let place = format!("{}.ratio", section.place_of(KEY));
            let what = "`cross-axis` has a phase and no `ratio`.";
            let remedy = "Write for example `cross-axis = { ratio = \"5 %\", phase = \"0 deg\" }`.";
            self.missing(&place, section.span_of(KEY), what, remedy);
        }
        Some(CrossAxis { ratio: ratio?, phase })
    }
}

/// A peak velocity or displacement of a sine as its peak acceleration, m/s².
fn as_acceleration(value: Given<f64>, by: DriveKey, frequency: f64) -> Given<f64> {
    let angular = TAU * frequency;
    let factor = match by {
        DriveKey::Acceleration => 1.0,
        DriveKey::Velocity => angular,
        DriveKey::Displacement => angular * angular,
    };
    Given {
        value: value.value * factor,
        tolerance: value.tolerance.map(|tolerance| tolerance * factor),
        ..value
    }
}

fn cross_check(
    section: &WrittenSection,
    set: &Drive,
    key: &'static str,
    check: &Given<f64>,
) -> Option<Finding> {
    let (set_key, _) = KEYS.into_iter().find(|(_, by)| *by == set.set_by)?;
    let difference = (check.value - set.acceleration.value).abs();
    let tolerances = check.tolerance.unwrap_or(0.0) + set.acceleration.tolerance.unwrap_or(0.0);
    if difference <= values_disagree::ROUNDING * set.acceleration.value.abs() + tolerances {
        return None;
    }
    let ratio = check.value / set.acceleration.value;
    let span = section.span_of(key);
    let written = section.quantity(key)?;
    if let Some(amplitude) = written.amplitude.filter(|_| ratio.is_finite() && ratio > 0.0) {
        let slip = peak_rms_slip::Check {
            set_key,
            set_span: section.span_of(set_key),
            key,
            place: check.place.clone(),
            span: span.clone(),
            ratio,
            amplitude,
            text: bare_text(written),
        };
        if let Some(finding) = peak_rms_slip::finding(&slip) {
            return Some(finding);
        }
    }
    let printed = |value: f64| quantity::print_amplitude(value, Kind::VibrationAcceleration, 4);
    let what = format!(
        "`{set_key}` sets {}, while `{key}` stands for {} at {}.",
        printed(set.acceleration.value),
        printed(check.value),
        quantity::print(set.frequency.value, Kind::Frequency, 4)
    );
    Some(values_disagree::finding(&check.place, span, what, Some(section.span_of(set_key))))
}

/// The quantity as written without its amplitude word: number and unit.
fn bare_text(quantity: &quantity::Quantity) -> String {
    let text = quantity.rewritten(quantity.value, quantity.digits);
    let unit = quantity.unit_text();
    match text.find(unit) {
        Some(at) if !unit.is_empty() => text[..at + unit.len()].to_owned(),
        _ => text,
    }
}

#[cfg(test)]
mod tests {
    use crate::resolved::DriveKey;

    fn drive(lines: &str) -> crate::Understanding {
        crate::understand(&format!(
            "[drive]\n{lines}\n[cell]\ndiameter = \"80 mm\"\n[[layer]]\nfluid = \"water\"\nthickness = \"20 mm\"\n"
        ))
    }

    /// A sine of displacement d and frequency f has velocity d·2πf and acceleration d·(2πf)²: 1 mm peak at 50 Hz is
    /// 0.314159 m/s and 98.696 m/s² (π² × 10).
    #[test]
    fn displacement_and_velocity_become_acceleration() {
        for (line, by) in [
            ("displacement = \"1 mm peak\"", DriveKey::Displacement),
            ("displacement = \"2 mm peak-to-peak\"", DriveKey::Displacement),
            ("velocity = \"0.3141592654 m/s peak\"", DriveKey::Velocity),
            ("acceleration = \"98.6960440 m/s² peak\"", DriveKey::Acceleration),
            ("acceleration = \"69.7886419 m/s² rms\"", DriveKey::Acceleration),
        ] {
            let read = drive(&format!("frequency = \"50 Hz\"\n{line}"));
            let set = read.setup.drive.unwrap_or_else(|| panic!("{line}: {:?}", read.findings));
            assert!(
                (set.acceleration.value / 98.696_044_01 - 1.0).abs() < 1e-8,
                "{line}: {}",
                set.acceleration.value
            );
            assert_eq!(set.set_by, by);
        }
    }

    #[test]
    fn cross_axis_motion_is_a_ratio_or_a_ratio_with_its_phase() {
        let of = |line: &str| {
            let read = drive(&format!("frequency = \"50 Hz\"\nacceleration = \"10 g0 peak\"\n{line}"));
            let rules: Vec<_> = read.findings.iter().map(|found| (found.place.clone(), found.rule)).collect();
            let cross = read.setup.drive.and_then(|drive| drive.cross_axis);
            (cross.map(|cross| (cross.ratio.value, cross.phase.map(|phase| phase.value))), rules)
        };
        assert_eq!(of(""), (Some((0.0, None)), vec![]));
        assert_eq!(of("cross-axis = \"5 %\""), (Some((0.05, None)), vec![]));
        assert_eq!(of("cross-axis = 0.05"), (Some((0.05, None)), vec![]));
        let (found, rules) = of("cross-axis = { ratio = \"5 %\", phase = \"180 deg\" }");
        assert_eq!((found, rules), (Some((0.05, Some(std::f64::consts::PI))), vec![]));
        let lacks = vec![("drive.cross-axis.ratio".to_owned(), "value-missing")];
        assert_eq!(of("cross-axis = { phase = \"180 deg\" }"), (None, lacks));
        assert_eq!(of("cross-axis = \"5 mm\"").1, [("drive.cross-axis".to_owned(), "unit-of-wrong-kind")]);
        assert_eq!(of("cross-axis = \"150 %\"").1, [("drive.cross-axis".to_owned(), "value-out-of-range")]);
    }

    #[test]
    fn distortion_is_read_by_harmonic() {
        let read = |line: &str| {
            let read = drive(&format!("frequency = \"50 Hz\"\nacceleration = \"10 g0 peak\"\n{line}"));
            let distortion = read.setup.drive.expect("a drive").distortion;
            (distortion.iter().map(|given| given.value).collect::<Vec<_>>(), read.findings.len())
        };
        assert_eq!(read("distortion = [\"2 %\", \"1 %\"]"), (vec![0.02, 0.01], 0));
        // A total: all in the second harmonic.
        assert_eq!(read("distortion = \"3 %\""), (vec![0.03], 0));
        assert_eq!(read(""), (vec![], 0));
        let lost =
            drive("frequency = \"50 Hz\"\nacceleration = \"10 g0 peak\"\ndistortion = [\"2 %\", \"1 mm\"]");
        assert!(lost.setup.is_unreadable("drive.distortion") && lost.findings.len() == 1);
    }

    #[test]
    fn an_unreadable_set_value_is_not_replaced_by_its_cross_check() {
        let read = drive("frequency = \"50 Hz\"\nacceleration = \"10 g0\"\ndisplacement = \"1 mm peak\"");
        assert!(read.setup.drive.is_none() && read.setup.drive_unreadable);
        assert_eq!(read.findings.len(), 1, "{:?}", read.findings);
    }

    #[test]
    fn no_drive_is_a_cell_at_rest() {
        let read = crate::understand(
            "[cell]\ndiameter = \"80 mm\"\n[[layer]]\nfluid = \"water\"\nthickness = \"20 mm\"\n",
        );
        assert!(read.setup.drive.is_none() && !read.setup.drive_unreadable);
        assert!(read.findings.is_empty(), "{:?}", read.findings);
    }
}
