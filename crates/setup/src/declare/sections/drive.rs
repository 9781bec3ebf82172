//! `[drive]`, `[[injection]]` and `[[stage]]`: what moves the cell and how the run is started.

use super::{later, section, word, words};
use crate::declare::key::{Form, Holds, Key, NameOf, Section};
use crate::declare::ranges;
use quantity::Kind;

/// The long form of `cross-axis`.
const CROSS_AXIS: &[Key] = &[
    Key::new(
        "ratio",
        Holds::Quantity(Kind::Ratio, ranges::CROSS_AXIS),
        "\"5 %\"",
        "Sideways over vertical acceleration.",
    )
    .needed(),
    Key::new(
        "phase",
        Holds::Quantity(Kind::Angle, ranges::ANGLE),
        "\"0 deg\"",
        "Of the sideways motion relative to the vertical one; positive leads.",
    ),
];

pub(super) const DRIVE: Section = words(
    section(
        "drive",
        Form::Single,
        "The vertical drive, as motion of the cell. The first of `acceleration`, `velocity`, `displacement` that is written is the set value; every further one is a cross-check. No `[drive]`: the cell is at rest.",
        &[
            Key::new(
                "frequency",
                Holds::Quantity(Kind::Frequency, ranges::FREQUENCY),
                "\"50 Hz\"",
                "Frequency of the drive.",
            )
            .words(&["freq", "f", "hz", "drive-frequency", "rpm"])
            .needed(),
            Key::new(
                "acceleration",
                Holds::Quantity(Kind::VibrationAcceleration, ranges::DRIVE_ACCELERATION),
                "\"14 g0 peak\"",
                "Acceleration of the cell, with `peak`, `rms` or `peak-to-peak`.",
            )
            .words(&["accel", "amplitude", "a", "g", "level", "acc"])
            .sometimes(),
            Key::new(
                "velocity",
                Holds::Quantity(Kind::VibrationVelocity, ranges::DRIVE_VELOCITY),
                "\"0.44 m/s peak\"",
                "Velocity of the cell, with `peak`, `rms` or `peak-to-peak`.",
            )
            .words(&["speed", "v", "vel"])
            .sometimes(),
            Key::new(
                "displacement",
                Holds::Quantity(Kind::VibrationDisplacement, ranges::DRIVE_DISPLACEMENT),
                "\"2.8 mm peak-to-peak\"",
                "Displacement of the cell, with `peak`, `rms` or `peak-to-peak`.",
            )
            .words(&["amplitude", "stroke", "excursion", "x", "travel", "disp"])
            .sometimes(),
            Key::new(
                "control",
                Holds::Word(&[
                    word("cell", "the level is held at the cell"),
                    word("table", "the level is held at the table"),
                    word("open-loop", "the current is held"),
                ]),
                "\"cell\"",
                "Where the level is controlled.",
            )
            .words(&["controlled-at", "feedback"])
            .later("where the drive is controlled"),
            Key::new(
                "table",
                Holds::Reference(NameOf::VibrationTable),
                "\"little shaker\"",
                "Which `[table.NAME]` drives the cell.",
            )
            .words(&["shaker", "vibrator", "exciter"])
            .later("the vibration table"),
            Key::new(
                "distortion",
                Holds::Quantities(Kind::Ratio, ranges::RATIO),
                "[\"2 %\", \"1 %\"]",
                "Harmonic distortion of the drive: the second, third … harmonic of the cell's acceleration over its fundamental, in phase with it. A single value is a total: all of it is taken as second harmonic.",
            )
            .words(&["thd", "harmonics", "harmonic-distortion"])
            .default("0 %", "judgement: none is stated; small tables make 1 to 5 % at low frequency and high level"),
            Key::new(
                "cross-axis",
                Holds::QuantityOrTable(Kind::Ratio, ranges::CROSS_AXIS, CROSS_AXIS),
                "\"5 %\"",
                "Sideways over vertical acceleration of the cell at the drive's frequency: a ratio, or with its phase `{ ratio = \"5 %\", phase = \"0 deg\" }`. Without a phase the worst is taken.",
            )
            .words(&["transverse", "lateral", "sideways"])
            .default("0 %", "a stated assumption: measure it; ordinary vibration tables have 2 to 5 % and more"),
            Key::new(
                "hold-time",
                Holds::Quantity(Kind::Time, ranges::TIME),
                "\"30 min\"",
                "How long it is to be held.",
            )
            .words(&["duration", "time", "run-time"])
            .later("drift over the hold"),
            Key::new(
                "overshoot",
                Holds::Quantity(Kind::Ratio, ranges::RATIO),
                "\"10 %\"",
                "Overshoot of the level when it is raised.",
            )
            .words(&["peak-overshoot"])
            .later("overshoot of the drive"),
        ],
    ),
    &["drives", "shaker", "vibration", "excitation", "forcing", "motion"],
);

const START_UP: &str = "the start-up path";
const INJECTIONS: &str = "gas injection";

pub(super) const INJECTION: Section = later(
    words(
        section(
            "injection",
            Form::Repeated,
            "How the gas of a cushion gets there.",
            &[
                Key::new(
                    "fills",
                    Holds::Reference(NameOf::Layer),
                    "\"cushion\"",
                    "The cushion that it fills.",
                )
                .words(&["layer", "cushion"]),
                Key::new("into", Holds::Reference(NameOf::Layer), "\"oil\"", "The liquid at the outlet.")
                    .words(&["liquid"]),
                Key::new(
                    "height",
                    Holds::Quantity(Kind::Length, ranges::SIGNED_LENGTH),
                    "\"3 mm\"",
                    "Height of the outlet above the floor.",
                )
                .words(&["outlet-height"]),
                Key::new(
                    "depth",
                    Holds::Quantity(Kind::Length, ranges::SIGNED_LENGTH),
                    "\"30 mm\"",
                    "Depth of the outlet below that layer's upper face.",
                )
                .words(&["outlet-depth"]),
                Key::new("gas", Holds::Text, "\"air\"", "The gas.").words(&["fluid"]),
                Key::new(
                    "tube-diameter",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"1 mm\"",
                    "Bore of the tube.",
                )
                .words(&["bore", "dia"]),
                Key::new(
                    "tube-length",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"300 mm\"",
                    "Length of the tube.",
                )
                .words(&["length"]),
                Key::new(
                    "dead-volume",
                    Holds::Quantity(Kind::Volume, ranges::DEAD_VOLUME),
                    "\"2 mL\"",
                    "Gas volume of line and syringe.",
                )
                .words(&["line-volume"]),
                Key::new(
                    "closed-after",
                    Holds::Boolean,
                    "true",
                    "Whether the line is shut at the cell afterwards.",
                )
                .words(&["closed", "valve"]),
                Key::new(
                    "bubble-diameter",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"4 mm\"",
                    "Diameter of the bubbles.",
                )
                .words(&["bubble-size"]),
                Key::new(
                    "polytropic-exponent",
                    Holds::Quantity(Kind::Ratio, ranges::POLYTROPIC),
                    "1.2",
                    "Exponent of the gas in a bubble.",
                )
                .words(&["exponent"]),
                Key::new("rate", Holds::Quantity(Kind::VolumeFlow, ranges::FLOW), "\"5 mL/s\"", "Rate.")
                    .words(&["flow", "flow-rate"]),
                Key::new(
                    "volume",
                    Holds::Quantity(Kind::Volume, ranges::VOLUME),
                    "\"60 mL\"",
                    "Volume pushed, at ambient pressure.",
                )
                .words(&["amount"]),
                Key::new(
                    "supply-pressure",
                    Holds::Quantity(Kind::Pressure, ranges::SUPPLY_PRESSURE),
                    "\"0.2 bar gauge\"",
                    "Pressure of the supply.",
                )
                .words(&["pressure"]),
                Key::new(
                    "stage",
                    Holds::Reference(NameOf::Stage),
                    "\"fill\"",
                    "The stage in which it happens.",
                )
                .words(&["when"]),
            ],
        ),
        &["inject", "injections", "syringe", "gas-inlet", "bubbles"],
    ),
    INJECTIONS,
);

pub(super) const STAGE: Section = later(
    words(
        section(
            "stage",
            Form::Repeated,
            "A stage of the start-up. It changes what it names and keeps the rest; the setup itself is the last stage.",
            &[
                Key::new("name", Holds::Name, "\"fill\"", "Name of the stage.").words(&["label"]),
                Key::new(
                    "drive",
                    Holds::Anything,
                    "{ acceleration = \"60 %\" }",
                    "Drive at its end; a share of the set value such as `\"60 %\"` works.",
                )
                .words(&["level"]),
                Key::new(
                    "thickness",
                    Holds::Anything,
                    "{ \"cushion\" = \"5 mm\" }",
                    "Thicknesses at its end, by layer name.",
                )
                .words(&["layers", "depth"]),
                Key::new(
                    "how",
                    Holds::Word(&[
                        word("bubbles", "gas pushed in as bubbles that sink"),
                        word("plate", "a plate withdrawn"),
                        word("poured", "gas first, liquid poured over it"),
                    ]),
                    "\"bubbles\"",
                    "How cushions are filled.",
                )
                .words(&["method"]),
                Key::new(
                    "ramp",
                    Holds::Quantity(Kind::Time, ranges::TIME),
                    "\"10 s\"",
                    "Time of the ramp to this stage.",
                )
                .words(&["time", "duration"]),
                Key::new(
                    "done-when",
                    Holds::Text,
                    "\"the gas covers the floor\"",
                    "How one sees that it is done.",
                )
                .words(&["until", "done"])
                .people(),
            ],
        ),
        &["stages", "step", "steps", "start-up", "ramp"],
    ),
    START_UP,
);
