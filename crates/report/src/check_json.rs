//! `topheavy check --format json`: the contract that scripts rest on. Keys are SI with the unit in the name; a
//! rename is a new `format` number.

use crate::Checked;
use crate::line::word;
use crate::number::{json, put, put_or_null};
use checks::derived::{
    Bounce, BounceResponse, Cushion, Derived, DriveEnd, DriveInterval, FaceWedge, Limits, LostMotion,
    Mechanism, Mode, Response, SetBy, Sideways, Slab, Validity,
};
use serde_json::{Map, Value, json};
use setup::finding::{Edit, Finding, Fix, Span};
use setup::lines::{Encoding, LineIndex};

/// The number of this format.
pub const FORMAT: u32 = 1;

/// The whole document for the files of one run.
pub fn document(files: &[Checked], encoding: Encoding) -> Value {
    json!({
        "format": FORMAT,
        "tool": { "name": "topheavy", "version": env!("CARGO_PKG_VERSION") },
        "position_encoding": encoding_name(encoding),
        "files": files.iter().map(|checked| file(checked, encoding)).collect::<Vec<_>>(),
    })
}

/// The name of a position encoding, as on the command line.
pub fn encoding_name(encoding: Encoding) -> &'static str {
    match encoding {
        Encoding::Utf8 => "utf-8",
        Encoding::Utf16 => "utf-16",
        Encoding::Utf32 => "utf-32",
    }
}

fn file(checked: &Checked, encoding: Encoding) -> Value {
    let index = LineIndex::new(checked.text);
    let at = Positions { text: checked.text, index: &index, encoding, path: checked.path };
    let kind = if checked.path.ends_with(".lab.toml") { "library" } else { "setup" };
    let mut object = Map::new();
    object.insert("path".to_owned(), json!(checked.path));
    object.insert("kind".to_owned(), json!(kind));
    object.insert("verdict".to_owned(), json!(checked.analysis.verdict.word()));
    let findings: Vec<_> =
        checked.analysis.findings.iter().map(|finding| self::finding(finding, &at)).collect();
    object.insert("findings".to_owned(), Value::Array(findings));
    if let Some(derived) = &checked.analysis.derived {
        let setup = &checked.analysis.understanding.setup;
        let at_rest = setup.drive.is_none() && !setup.drive_unreadable;
        object.insert("results".to_owned(), results(derived, at_rest));
    }
    Value::Object(object)
}

struct Positions<'a> {
    text: &'a str,
    index: &'a LineIndex,
    encoding: Encoding,
    path: &'a str,
}

impl Positions<'_> {
    fn range(&self, span: &Span) -> Value {
        let position = |offset: usize| {
            let at = self.index.position(self.text, offset, self.encoding);
            json!({ "line": at.line, "character": at.character })
        };
        json!({ "start": position(span.start), "end": position(span.end) })
    }
}

fn finding(finding: &Finding, at: &Positions) -> Value {
    let values: Map<String, Value> =
        finding.values.iter().filter_map(|(name, value)| Some(((*name).to_owned(), json(*value)?))).collect();
    let mut object = Map::new();
    object.insert("id".to_owned(), json!(finding.rule));
    object.insert("severity".to_owned(), json!(word(finding.severity)));
    object.insert("place".to_owned(), json!(finding.place));
    object.insert("message".to_owned(), json!(finding.message.text()));
    object.insert("range".to_owned(), at.range(&finding.span));
    let related = |related: &setup::finding::Related| json!({ "path": at.path, "message": related.message, "range": at.range(&related.span) });
    object.insert("related".to_owned(), finding.related.iter().map(related).collect());
    object.insert("values".to_owned(), Value::Object(values));
    object.insert("fixable".to_owned(), json!(finding.fixable));
    // Absent where fixes were not searched for: `fixable` says whether there may be one.
    if !finding.fixes.is_empty() || !finding.fixable {
        object.insert("fixes".to_owned(), finding.fixes.iter().map(|fix| self::fix(fix, at)).collect());
    }
    object.insert("accepted".to_owned(), json!(finding.accepted));
    Value::Object(object)
}

fn fix(fix: &Fix, at: &Positions) -> Value {
    let edit =
        |edit: &Edit| json!({ "path": at.path, "range": at.range(&edit.span), "new_text": edit.new_text });
    json!({
        "title": fix.title,
        "keeps_meaning": fix.keeps_meaning,
        "edits": fix.edits.iter().map(edit).collect::<Vec<_>>(),
    })
}

fn results(derived: &Derived, at_rest: bool) -> Value {
    let mut object = Map::new();
    object.insert("slabs".to_owned(), derived.slabs.iter().map(|one| slab(one, at_rest)).collect());
    object.insert("cushions".to_owned(), derived.cushions.iter().map(cushion).collect());
    object.insert(
        "natural_frequencies_hz".to_owned(),
        derived.natural_frequencies.iter().filter_map(|f| json(*f)).collect(),
    );
    if let Some(bounce) = &derived.bounce {
        object.insert("bounce".to_owned(), self::bounce(bounce));
    }
    if let Some(lost) = &derived.lost_motion {
        object.insert("lost_motion".to_owned(), lost_motion(lost));
    }
    if let Some(window) = &derived.window {
        let mut entry = Map::new();
        put_or_null(&mut entry, "hold_drive_m_per_s2", window.hold);
        put_or_null(&mut entry, "wave_drive_m_per_s2", window.wave);
        if window.set > 0.0 {
            put_or_null(&mut entry, "hold_drive_ratio", window.hold.map(|hold| hold / window.set));
            put_or_null(&mut entry, "wave_drive_ratio", window.wave.map(|wave| wave / window.set));
        }
        object.insert("window".to_owned(), Value::Object(entry));
    }
    if let Some(sideways) = &derived.sideways {
        object.insert("sideways".to_owned(), self::sideways(sideways));
    }
    object.insert("validity".to_owned(), derived.validity.iter().map(validity).collect());
    if let Some(intervals) = &derived.drive_intervals {
        let set = derived.drive.map_or(0.0, |drive| drive.acceleration);
        let one = |(index, interval): (usize, &DriveInterval)| {
            let mut entry = Map::new();
            put(&mut entry, "low_m_per_s2", interval.low.acceleration);
            put_or_null(&mut entry, "high_m_per_s2", interval.high.map(|high| high.acceleration));
            entry.insert("low_set_by".to_owned(), drive_end(&interval.low, derived));
            let high = interval.high.as_ref().map_or(Value::Null, |high| drive_end(high, derived));
            entry.insert("high_set_by".to_owned(), high);
            entry.insert("holds_set_drive".to_owned(), json!(interval.holds(set)));
            entry.insert("nearest".to_owned(), json!(intervals.nearest == Some(index)));
            Value::Object(entry)
        };
        let list = intervals.list.iter().enumerate().map(one).collect();
        object.insert("drive_intervals".to_owned(), list);
    }
    let defaults = derived.defaults.iter();
    object.insert(
        "defaults".to_owned(),
        defaults.map(|d| json!({ "place": d.place, "value": d.value, "source": d.source })).collect(),
    );
    let not_looked_at = derived.not_looked_at.iter();
    object.insert(
        "not_looked_at".to_owned(),
        not_looked_at.map(|n| json!({ "check": n.check, "needs": n.needs })).collect(),
    );
    object.insert(
        "effects_off".to_owned(),
        derived.effects_off.iter().map(|effect| json!(effect.name())).collect(),
    );
    Value::Object(object)
}

/// Which slab sets an end of an interval of the drive, by what, and in which mode where that is known.
fn drive_end(end: &DriveEnd, derived: &Derived) -> Value {
    let mut object = Map::new();
    if let Some(slab) = derived.slabs.get(end.slab) {
        object.insert("slab".to_owned(), json!(slab.name));
        if let Some(by) = &end.set_by {
            if let Value::Object(of_mode) = mode(by, slab) {
                object.extend(of_mode);
            }
            object.insert("response".to_owned(), json!(response(by.response)));
        }
    }
    object.insert("mechanism".to_owned(), json!(mechanism(end.mechanism)));
    Value::Object(object)
}

fn slab(slab: &Slab, at_rest: bool) -> Value {
    let mut object = Map::new();
    object.insert("name".to_owned(), json!(slab.name));
    object.insert("layers".to_owned(), json!(slab.layers));
    put(&mut object, "mass_kg_per_m2", slab.mass_per_area);
    if let Some(motion) = &slab.motion {
        put(&mut object, "acceleration_peak_m_per_s2", motion.acceleration);
        put(&mut object, "amplification", motion.amplification);
        put(&mut object, "phase_rad", motion.phase);
    } else if at_rest {
        // Without a drive nothing moves; an amplification does not exist.
        put(&mut object, "acceleration_peak_m_per_s2", 0.0);
    }
    overtones(&mut object, slab);
    if let Some(stability) = &slab.stability {
        object.insert("contact_line".to_owned(), json!(if slab.held_line { "pinned" } else { "free" }));
        put(&mut object, "growth_rate_per_s", stability.growth_rate);
        object.insert("worst".to_owned(), mode(&stability.worst, slab));
        object.insert("response".to_owned(), json!(response(stability.worst.response)));
        object.insert("mechanism".to_owned(), json!(mechanism(stability.mechanism)));
        if let Some(limits) = &stability.limits {
            self::limits(&mut object, limits, slab);
        }
        put_or_null(&mut object, "ring_down_per_s", stability.ring_down);
    }
    if !slab.wedges.is_empty() {
        object.insert("wedges".to_owned(), slab.wedges.iter().map(|found| wedge(found, slab)).collect());
    }
    Value::Object(object)
}

/// The level error and the cross-axis motion of the cell.
fn sideways(sideways: &Sideways) -> Value {
    let mut object = Map::new();
    put(&mut object, "level_error_rad", sideways.tilt);
    object.insert("level_error_assumed".to_owned(), json!(sideways.tilt_assumed));
    put(&mut object, "cross_axis_ratio", sideways.cross_axis);
    put_or_null(&mut object, "cross_axis_phase_rad", sideways.cross_phase);
    Value::Object(object)
}

/// How a face stands under them.
fn wedge(wedge: &FaceWedge, slab: &Slab) -> Value {
    let mut object = Map::new();
    if let Some(face) = slab.faces.get(wedge.face) {
        object.insert("interface".to_owned(), json!(face.name()));
    }
    object.insert("along".to_owned(), json!(wedge.along));
    put(&mut object, "mean_slope", wedge.mean_slope);
    put(&mut object, "oscillating_slope", wedge.oscillating_slope);
    put(&mut object, "wall_height_m", wedge.wall_height);
    put(&mut object, "tilt_gain", wedge.tilt_gain);
    put(&mut object, "cross_gain", wedge.cross_gain);
    let into = wedge.into.as_ref();
    object.insert("into".to_owned(), json!(into.map(|(gas, _)| gas)));
    put_or_null(&mut object, "into_ratio", into.map(|(_, share)| *share));
    object.insert("modes".to_owned(), json!(wedge.modes));
    object.insert("harmonics".to_owned(), json!(wedge.harmonics));
    put(&mut object, "harmonics_change", wedge.harmonics_change);
    put(&mut object, "modes_change", wedge.modes_change);
    Value::Object(object)
}

/// One assumption as a number, with the number at which it matters (`null`: never).
fn validity(validity: &Validity) -> Value {
    let mut object = Map::new();
    object.insert("name".to_owned(), json!(validity.name));
    object.insert("number".to_owned(), json!(validity.number));
    object.insert("place".to_owned(), json!(validity.place));
    put(&mut object, "value", validity.value);
    put_or_null(&mut object, "matters_at", validity.matters_at);
    object.insert("reached".to_owned(), json!(validity.is_reached()));
    object.insert("source".to_owned(), json!(validity.source));
    object.insert("rule".to_owned(), json!(validity.rule));
    Value::Object(object)
}

/// Harmonics of the slab's acceleration, time counted from a crest of its fundamental.
fn overtones(object: &mut Map<String, Value>, slab: &Slab) {
    if let Some(first) = slab.motion.as_ref().and_then(|motion| motion.nonlinear_acceleration) {
        put(object, "nonlinear_acceleration_peak_m_per_s2", first);
    }
    let Some(overtones) = &slab.overtones else { return };
    for (order, name) in [(2, "second_harmonic_ratio"), (3, "third_harmonic_ratio")] {
        put(object, name, slab.share(order).unwrap_or(0.0));
    }
    let one = |overtone: &checks::derived::Overtone| {
        let mut entry = Map::new();
        entry.insert("order".to_owned(), json!(overtone.order));
        put(&mut entry, "ratio", overtone.ratio);
        put(&mut entry, "phase_rad", overtone.phase);
        Value::Object(entry)
    };
    object.insert("overtones".to_owned(), overtones.iter().map(one).collect());
}

/// The gas springs as a parametric drive of the slabs.
fn bounce(bounce: &Bounce) -> Value {
    let numbers = |values: &[f64]| values.iter().filter_map(|value| json(*value)).collect::<Value>();
    let word = |response: BounceResponse| match response {
        BounceResponse::Half => "half",
        BounceResponse::Same => "same",
        BounceResponse::Pair => "pair",
    };
    let mut object = Map::new();
    put(&mut object, "growth_rate_per_s", bounce.growth_rate);
    object.insert("frequencies_hz".to_owned(), numbers(&bounce.frequencies));
    object.insert("response".to_owned(), json!(word(bounce.response)));
    put_or_null(&mut object, "threshold_drive_ratio", bounce.threshold_ratio);
    let strokes = bounce.threshold_strokes.as_deref().map_or(Value::Null, numbers);
    object.insert("threshold_stroke_ratios".to_owned(), strokes);
    put(&mut object, "searched_up_to_drive_ratio", bounce.searched_to);
    if let Some(stroke) = bounce.estimated_stroke {
        put(&mut object, "estimated_threshold_stroke_ratio", stroke);
    }
    if let Some(ratio) = bounce.damping_ratio {
        put(&mut object, "damping_ratio", ratio);
    }
    Value::Object(object)
}

fn lost_motion(lost: &LostMotion) -> Value {
    let mut object = Map::new();
    put(&mut object, "reached_drive_ratio", lost.reached);
    put(&mut object, "stroke_ratio", lost.stroke_ratio);
    Value::Object(object)
}

fn limits(object: &mut Map<String, Value>, limits: &Limits, slab: &Slab) {
    let window = |(low, high): &(f64, Option<f64>)| json!([json(*low), high.and_then(json)]);
    object.insert("windows_m_per_s2".to_owned(), limits.windows.iter().map(window).collect());
    put_or_null(object, "hold_limit_m_per_s2", limits.hold);
    put_or_null(object, "wave_limit_m_per_s2", limits.wave);
    let set_by = |by: &Option<SetBy>| match by {
        Some(by) => {
            let mut entry = mode(by, slab);
            entry["response"] = json!(response(by.response));
            entry
        }
        None => Value::Null,
    };
    object.insert("hold_set_by".to_owned(), set_by(&limits.hold_set_by));
    object.insert("wave_set_by".to_owned(), set_by(&limits.wave_set_by));
}

/// Which disturbance: wavenumber, shape in the cell, interface by the layers on either side.
fn mode(by: &SetBy, slab: &Slab) -> Value {
    let mut object = Map::new();
    put(&mut object, "wavenumber_per_m", by.wavenumber);
    let shape = match by.mode {
        Mode::Cell([m, n]) => json!([m, n]),
        Mode::Continuum => json!("continuum"),
    };
    object.insert("mode".to_owned(), shape);
    if let Some(face) = slab.faces.get(by.face) {
        object.insert("interface".to_owned(), json!(face.name()));
    }
    Value::Object(object)
}

fn cushion(cushion: &Cushion) -> Value {
    let mut object = Map::new();
    object.insert("layer".to_owned(), json!(cushion.layer));
    put(&mut object, "pressure_abs_pa", cushion.pressure);
    put(&mut object, "polytropic_re", cushion.polytropic_re);
    put(&mut object, "polytropic_im", cushion.polytropic_im);
    if let Some(stroke) = cushion.stroke_ratio {
        put(&mut object, "stroke_ratio", stroke);
    }
    if let Some(strokes) = &cushion.stroke_harmonics {
        let strokes = strokes.iter().filter_map(|stroke| json(*stroke)).collect();
        object.insert("stroke_ratio_by_harmonic".to_owned(), strokes);
    }
    if let Some(shift) = cushion.mean_shift {
        put(&mut object, "mean_shift_ratio", shift);
    }
    Value::Object(object)
}

/// The class of a response as a word.
pub(crate) fn response(response: Response) -> &'static str {
    match response {
        Response::Harmonic => "harmonic",
        Response::Subharmonic => "subharmonic",
        Response::Other => "other",
        Response::None => "none",
    }
}

fn mechanism(mechanism: Mechanism) -> &'static str {
    match mechanism {
        Mechanism::Falls => "falls",
        Mechanism::Waves => "waves",
        Mechanism::None => "none",
    }
}
