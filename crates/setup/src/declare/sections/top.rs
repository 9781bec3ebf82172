//! The top level, `[record]`, `[ambient]` and `[model]`.

use super::{people, section, words};
use crate::declare::key::{Form, Holds, Key, Section};
use crate::declare::ranges;
use quantity::Kind;

pub(super) const ROOT: Section = section(
    "",
    Form::Root,
    "One text file describes one setup. It reads as the cell looks from the side: the first `[[layer]]` is the top one.",
    &[
        Key::new("format", Holds::Integer(1, 1), "1", "Format of the file: this version reads format 1.")
            .default("1", "the only format there is")
            .words(&["version", "schema"]),
        Key::new(
            "title",
            Holds::Text,
            "\"Two layers on air\"",
            "Name of the setup, for people; shown in every report.",
        )
        .words(&["name", "heading", "experiment"])
        .people(),
        Key::new(
            "notes",
            Holds::Text,
            "\"Refilled after the spill.\"",
            "Anything worth keeping; may run over lines.",
        )
        .words(&["note", "comment", "comments", "remarks", "description"])
        .people(),
        Key::new(
            "use",
            Holds::Texts,
            "[\"bench.lab.toml\"]",
            "Library files with fluids, cells, tables and cameras.",
        )
        .words(&["include", "import", "library", "libraries"])
        .later("figures from library files"),
    ],
);

pub(super) const RECORD: Section = people(words(
    section(
        "record",
        Form::Single,
        "For people, shown in the report; nothing is computed from it.",
        &[
            Key::new("author", Holds::Text, "\"M. Quill\"", "Who wrote the setup.")
                .words(&["by", "user", "who"])
                .people(),
            Key::new("date", Holds::Date, "2026-03-14", "When it was written.")
                .words(&["day", "when"])
                .people(),
            Key::new("rig", Holds::Text, "\"bench 2\"", "Which rig it is for.")
                .words(&["bench", "lab", "setup"])
                .people(),
            Key::new(
                "purpose",
                Holds::Text,
                "\"hold 30 min for filming\"",
                "What the experiment is to show.",
            )
            .words(&["aim", "goal", "why"])
            .people(),
            Key::new("batch", Holds::Text, "\"oil 2026-02\"", "Batch of the liquids.")
                .words(&["lot", "bottle"])
                .people(),
            Key::new("revision", Holds::Text, "\"C\"", "Revision of the setup.")
                .words(&["rev", "version"])
                .people(),
        ],
    ),
    &["meta", "metadata", "about", "info"],
));

pub(super) const AMBIENT: Section = words(
    section(
        "ambient",
        Form::Single,
        "The room: what an open top stands under and what a gauge pressure is counted from.",
        &[
            Key::new("temperature", Holds::Quantity(Kind::Temperature, ranges::TEMPERATURE), "\"21 °C\"",
                "Temperature of the room and, unless a layer says otherwise, of every layer. Viscosity and gas density follow it.")
                .words(&["temp", "t", "room-temperature"])
                .default("20 °C", "ISO 1, standard reference temperature"),
            Key::new("pressure", Holds::Quantity(Kind::AbsolutePressure, ranges::AMBIENT_PRESSURE), "\"1008 mbar\"",
                "Absolute station pressure: what a barometer in the room reads, not reduced to sea level. The stiffness of every cushion is proportional to the pressure in it.")
                .words(&["barometer", "air-pressure", "p", "atmospheric-pressure"])
                .default("101325 Pa", "ISO 2533, standard atmosphere at sea level"),
            Key::new("altitude", Holds::Quantity(Kind::Length, ranges::ALTITUDE), "\"520 m\"",
                "Altitude of the lab, instead of `pressure`: the pressure is then that of the standard atmosphere (ISO 2533) at this height; the weather adds ± 3 %.")
                .words(&["elevation", "height", "sea-level", "asl"]),
            Key::new("gravity", Holds::Quantity(Kind::SteadyAcceleration, ranges::GRAVITY), "\"9.81 m/s²\"",
                "Gravity at the lab.")
                .words(&["g", "g0", "local-gravity"])
                .default("9.80665 m/s²", "standard gravity, 3rd CGPM 1901"),
        ],
    ),
    &["room", "environment", "air", "atmosphere", "lab"],
);

const BY_DEFAULT: &str = "every effect counts unless it is switched off";

const fn effect(name: &'static str, doc: &'static str, words: &'static [&'static str]) -> Key {
    Key::new(name, Holds::Boolean, "false", doc).words(words).default("true", BY_DEFAULT)
}

pub(super) const MODEL: Section = words(
    section(
        "model",
        Form::Single,
        "Effects that can be switched off to see what they do; all are on by default. A switched-off effect is always reported.",
        &[
            effect(
                "wall-drag",
                "Drag of the side walls on each slab, as oscillating duct flow.",
                &["drag", "walls"],
            ),
            effect(
                "gas-heat-loss",
                "Heat that the gas of a cushion gives to its faces: between isothermal and adiabatic, with loss.",
                &["heat-loss", "heat", "polytropic"],
            ),
            effect(
                "side-wall-friction",
                "Friction of the waves at the side walls of narrow cells.",
                &["friction", "wall-friction"],
            ),
            effect("gas-layers", "Inertia and viscosity of the gas beside a slab.", &["gas", "air-layers"]),
            effect(
                "cushion-harmonics",
                "Harmonics that the nonlinear gas spring makes.",
                &["harmonics", "nonlinear"],
            ),
            effect("body-damping", "Damping of floating bodies by the liquid.", &["damping"]),
        ],
    ),
    &["effects", "physics", "options", "settings"],
);
