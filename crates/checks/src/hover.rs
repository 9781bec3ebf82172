//! What an editor shows at a place: the declaration of a key, and what was computed for its layer or for the drive.

use crate::analysis::Analysis;
use crate::derived::{
    Bounce, Cushion, Derived, DriveIntervals, DriveState, DriveWindow, LayerState, Limits, Mode, Seat, SetBy,
    Slab,
};
use crate::rules::response_words;
use crate::words;
use quantity::vocabulary::Phase;
use setup::Spot;
use setup::finding::Span;

/// Text for a place.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct HoverText {
    /// Markdown.
    pub markdown: String,
    /// The bytes that it belongs to.
    pub span: Span,
}

/// The text for the innermost place at a byte offset; `None` where nothing is declared.
pub fn hover(analysis: &Analysis, byte_offset: usize) -> Option<HoverText> {
    let places = &analysis.understanding.places;
    let place = places.at(byte_offset)?;
    let spot = places.exact(place)?;
    let declared = setup::hover_text(place).map(|hover| hover.markdown);
    let computed = analysis.derived.as_ref().and_then(|derived| computed(derived, place, spot));
    let markdown = match (computed, declared) {
        // A layer's own numbers say more than what a layer is; a key of the drive needs both.
        (Some(computed), _) if place.starts_with("layer.") => computed,
        (Some(computed), Some(declared)) => format!("{computed}\n\n---\n\n{declared}"),
        (computed, declared) => computed.or(declared)?,
    };
    let span = match (&spot.key, &spot.value) {
        (Some(key), Some(value)) => key.start..value.end,
        _ => spot.header.clone(),
    };
    Some(HoverText { markdown, span })
}

fn computed(derived: &Derived, place: &str, spot: &Spot) -> Option<String> {
    if place == "drive" || place.starts_with("drive.") {
        return drive(derived);
    }
    // The header of a layer, or its name.
    let layer = place.strip_suffix(".name").unwrap_or(place);
    if spot.key.is_some() && layer == place {
        return None;
    }
    let index = derived.layers.iter().position(|state| state.place == layer)?;
    Some(self::layer(derived, index))
}

fn drive(derived: &Derived) -> Option<String> {
    let drive = derived.drive?;
    let mut lines = vec!["**Drive of the cell**".to_owned()];
    lines.extend(three_statements(&drive));
    if let Some(window) = &derived.window {
        let say = |value: Option<f64>| value.map_or_else(|| "none found".to_owned(), words::acceleration);
        lines.push(match window.exists {
            true => format!(
                "Window at the cell: holds from {}, waves from {}.",
                say(window.hold),
                say(window.wave)
            ),
            false => "No drive at this frequency holds everything.".to_owned(),
        });
        lines.extend(derived.drive_intervals.as_ref().and_then(others));
        let margin =
            |name: &str, margin: Option<f64>| margin.map(|m| format!("{name} margin {}", words::percent(m)));
        let margins: Vec<String> =
            [margin("hold", window.hold_margin()), margin("wave", window.wave_margin())]
                .into_iter()
                .flatten()
                .collect();
        if window.exists && !margins.is_empty() {
            lines.push(format!("{}.", sentence(&margins.join(", "))));
        }
    }
    Some(lines.join("\n\n"))
}

/// The other intervals of the drive in which everything holds, where there are several.
fn others(intervals: &DriveIntervals) -> Option<String> {
    let others = intervals.list.iter().enumerate().filter(|(index, _)| intervals.nearest != Some(*index));
    let texts: Vec<String> = others
        .map(|(_, interval)| {
            let low = words::acceleration(interval.low.acceleration);
            match interval.high {
                Some(high) => format!("from {low} to {}", words::acceleration(high.acceleration)),
                None => format!("from {low} on"),
            }
        })
        .collect();
    (!texts.is_empty()).then(|| format!("It holds again {}.", words::list(&texts)))
}

/// The three quantities, each peak, rms and peak-to-peak.
fn three_statements(drive: &DriveState) -> Vec<String> {
    let forms = |peak: f64, unit: &str, scale: f64| {
        let text = |value: f64| words::number(value / scale, 4);
        let rms = std::f64::consts::FRAC_1_SQRT_2;
        format!("{} {unit} | {} {unit} | {} {unit}", text(peak), text(peak * rms), text(peak * 2.0))
    };
    let table = [
        format!("At {}:", words::hertz(drive.frequency)),
        [
            "| | peak | rms | peak-to-peak |".to_owned(),
            "|---|---|---|---|".to_owned(),
            format!("| acceleration | {} |", forms(drive.acceleration, "g0", words::G0)),
            format!("| velocity | {} |", forms(drive.velocity, "m/s", 1.0)),
            format!("| displacement | {} |", forms(drive.displacement, "mm", 1e-3)),
        ]
        .join("\n"),
    ];
    table.to_vec()
}

fn layer(derived: &Derived, index: usize) -> String {
    let state = &derived.layers[index];
    let mut lines = vec![format!("**{}**: {}", state.name, state.made_of), figures(state)];
    if let Some(cushion) = derived.cushions.iter().find(|cushion| cushion.index == index) {
        lines.extend(self::cushion(derived, cushion));
        lines.extend(wedged(derived, &cushion.layer));
    }
    if let Some(slab) = derived.slabs.iter().find(|slab| slab.range.contains(&index)) {
        lines.extend(self::slab(derived, slab));
    }
    lines.push(format!("Sources: {}.", state.sources.join("; ")));
    lines.join("\n\n")
}

fn figures(state: &LayerState) -> String {
    let mut parts = vec![
        format!("{} thick", words::millimetres(state.thickness)),
        format!("{} kg/m³", words::number(state.density, 4)),
    ];
    match state.phase {
        Phase::Liquid => parts.push(format!(
            "{} mPa s = {} mm²/s",
            words::number(state.viscosity * 1e3, 3),
            words::number(state.viscosity / state.density * 1e6, 3)
        )),
        Phase::Gas => parts.push(format!("{} µPa s", words::number(state.viscosity * 1e6, 3))),
    }
    if let Some(tension) = state.surface_tension {
        parts.push(format!("{} mN/m against gas", words::number(tension * 1e3, 3)));
    }
    parts.push(words::celsius(state.temperature));
    parts.push(format!("{} kPa abs", words::number(state.pressure * 1e-3, 4)));
    format!("{}.", parts.join(", "))
}

fn cushion(derived: &Derived, cushion: &Cushion) -> Vec<String> {
    let mut lines = vec![format!(
        "Cushion: {} kPa abs, polytropic exponent {} with loss factor {}.",
        words::number(cushion.pressure * 1e-3, 4),
        words::number(cushion.polytropic_re, 4),
        words::number(cushion.polytropic_im / cushion.polytropic_re, 2)
    )];
    if let Some(stroke) = cushion.stroke_ratio {
        lines.push(format!(
            "Stroke {} of its thickness (amplitude of the relative motion of its faces).",
            words::percent(stroke)
        ));
    }
    lines.extend(derived.bounce.as_ref().map(bounce));
    if let Some(drive) = derived.drive {
        let off = |f: &f64| (f / drive.frequency).ln().abs();
        if let Some(f0) = derived.natural_frequencies.iter().min_by(|a, b| off(a).total_cmp(&off(b))) {
            lines.push(format!(
                "Nearest natural frequency of slabs on cushions: {}, {} times the drive.",
                words::hertz(*f0),
                words::number(f0 / drive.frequency, 3)
            ));
        }
    }
    lines
}

/// The faces that lean into a cushion.
fn wedged(derived: &Derived, layer: &str) -> Vec<String> {
    let Some(sideways) = derived.sideways else { return Vec::new() };
    let mut lines = Vec::new();
    for slab in &derived.slabs {
        for wedge in &slab.wedges {
            let Some((_, share)) = wedge.into.as_ref().filter(|(gas, _)| gas == layer) else { continue };
            lines.push(format!(
                "Wedge: {} stands {} higher at one wall than at the other, {} of its thickness (level error {} deg{}, \
                 cross-axis motion {}; gains {} and {}).",
                slab.faces[wedge.face].words(),
                words::millimetres(2.0 * wedge.wall_height),
                words::percent(*share),
                words::number(sideways.tilt.to_degrees(), 3),
                if sideways.tilt_assumed { ", assumed" } else { "" },
                words::percent(sideways.cross_axis),
                words::number(wedge.tilt_gain, 3),
                words::number(wedge.cross_gain, 3),
            ));
        }
    }
    lines
}

/// What the swing of the stiffness does, with the rule of thumb beside it.
fn bounce(bounce: &Bounce) -> String {
    let estimate = bounce.estimated_stroke.map_or_else(String::new, |stroke| {
        format!(" (estimate on f = 2 f0: from a stroke of {} on)", words::percent(stroke))
    });
    match bounce.threshold_ratio {
        Some(ratio) => {
            format!("Bounces by itself from {} of the set drive on{estimate}.", words::percent(ratio))
        }
        None => format!(
            "Does not bounce by itself up to {} of the set drive{estimate}.",
            words::percent(bounce.searched_to)
        ),
    }
}

fn slab(derived: &Derived, slab: &Slab) -> Vec<String> {
    let seat = match slab.seat {
        Seat::Floating => "on gas",
        Seat::OnFloor => "on the floor",
        Seat::UnderLid => "under the lid",
        Seat::Fill => "from floor to lid",
    };
    let mut lines =
        vec![format!("Slab \"{}\", {seat}, {} kg/m².", slab.name, words::number(slab.mass_per_area, 3))];
    if let Some(motion) = &slab.motion {
        lines.push(format!(
            "It moves with {}: {} times the cell, phase {} deg.",
            words::acceleration(motion.acceleration),
            words::number(motion.amplification, 3),
            words::number(motion.phase.to_degrees(), 3)
        ));
        if let (Some(second), Some(third)) = (slab.share(2), slab.share(3)) {
            lines.push(format!(
                "Harmonics of its acceleration: second {}, third {} of the first.",
                words::percent(second),
                words::percent(third)
            ));
        }
    }
    let Some(stability) = &slab.stability else {
        if !slab.faces.is_empty() {
            lines.push("Its stability is not known.".to_owned());
        }
        return lines;
    };
    lines.push(match stability.ring_down {
        Some(decay) => {
            format!("Nothing grows; the slowest interface mode decays at {} 1/s.", words::number(decay, 3))
        }
        None => format!(
            "Grows at {} 1/s on {}, {}.",
            words::number(stability.growth_rate, 3),
            slab.faces[stability.worst.face].words(),
            mode(&stability.worst)
        ),
    });
    if let (Some(limits), Some(motion)) = (&stability.limits, &slab.motion) {
        lines.extend(self::limits(slab, limits, motion.amplification));
    }
    lines.extend(derived.window.as_ref().and_then(room));
    lines
}

/// What the window leaves for the table.
fn room(window: &DriveWindow) -> Option<String> {
    if !window.exists {
        return None;
    }
    let way = |margin: f64, room: &str, lack: &str, before: &str, until: &str| match margin >= 0.0 {
        true => format!("can go {room} by {} before {before}", words::percent(margin)),
        false => format!("must go {lack} by {} until {until}", words::percent(-margin)),
    };
    let ways: Vec<String> = [
        window.hold_margin().map(|margin| way(margin, "down", "up", "something falls", "everything holds")),
        window.wave_margin().map(|margin| way(margin, "up", "down", "waves rise", "waves die")),
    ]
    .into_iter()
    .flatten()
    .collect();
    (!ways.is_empty()).then(|| format!("The drive {}.", words::list(&ways)))
}

fn limits(slab: &Slab, limits: &Limits, amplification: f64) -> Vec<String> {
    let one = |verb: &str, limit: Option<f64>, by: Option<String>| {
        let limit = limit?;
        let by = by.map_or_else(String::new, |by| format!("; set by {by}"));
        Some(format!(
            "{verb} {} of its own, {} at the cell{by}.",
            words::acceleration(limit),
            words::short_acceleration(limit / amplification)
        ))
    };
    let at = |by: &SetBy, mode: String| format!("{}, {mode}", slab.faces[by.face].words());
    let hold = match limits.hold {
        Some(0.0) => Some("Needs no drive to hold.".to_owned()),
        hold => one("Holds from", hold, limits.hold_set_by.map(|by| at(&by, shape(&by)))),
    };
    let wave =
        one("Waves from", limits.wave, limits.wave_set_by.map(|by| at(&by, mode(&by)))).or_else(|| {
            Some(format!("No waves found up to {} of its own.", words::acceleration(limits.searched_up_to)))
        });
    hold.into_iter().chain(wave).collect()
}

fn mode(by: &SetBy) -> String {
    format!("{}, {}", shape(by), response_words(by.response))
}

fn shape(by: &SetBy) -> String {
    let shape = match by.mode {
        Mode::Cell([m, n]) => format!("mode ({m},{n})"),
        Mode::Continuum => "one of many dense modes".to_owned(),
    };
    format!("{shape}, wavelength {}", words::wave(by.wavenumber))
}

fn sentence(text: &str) -> String {
    let mut letters = text.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().chain(letters).collect())
}
