//! The rig round the cell: vibration table, imaging, people, protection, sensors.

use super::{later, section, word, words};
use crate::declare::key::{Form, Holds, Key, NameOf, Section};
use crate::declare::ranges;
use quantity::Kind;

pub(super) const TABLE: Section = later(
    words(
        section(
            "table",
            Form::Named,
            "A vibration table by its ratings, each with its amplitude word.",
            &[
                Key::new(
                    "force-rating",
                    Holds::Quantity(Kind::Force, ranges::FORCE),
                    "\"100 N\"",
                    "Rated sine force.",
                )
                .words(&["force", "rated-force"]),
                Key::new(
                    "stroke-rating",
                    Holds::Quantity(Kind::VibrationDisplacement, ranges::DRIVE_DISPLACEMENT),
                    "\"12.7 mm peak-to-peak\"",
                    "Rated stroke.",
                )
                .words(&["stroke", "displacement"]),
                Key::new(
                    "velocity-rating",
                    Holds::Quantity(Kind::VibrationVelocity, ranges::DRIVE_VELOCITY),
                    "\"1.5 m/s peak\"",
                    "Rated velocity.",
                )
                .words(&["velocity"]),
                Key::new(
                    "acceleration-rating",
                    Holds::Quantity(Kind::VibrationAcceleration, ranges::ANY_ACCELERATION),
                    "\"60 g0 peak\"",
                    "Rated acceleration of the bare table.",
                )
                .words(&["acceleration"]),
                Key::new(
                    "payload-rating",
                    Holds::Quantity(Kind::Mass, ranges::MASS),
                    "\"5 kg\"",
                    "Largest payload.",
                )
                .words(&["payload", "load"]),
                Key::new(
                    "moment-rating",
                    Holds::Quantity(Kind::Moment, ranges::MOMENT),
                    "\"5 N m\"",
                    "Largest overturning moment.",
                )
                .words(&["moment", "overturning-moment"]),
                Key::new(
                    "frequency-range",
                    Holds::Range(Kind::Frequency, ranges::FREQUENCY),
                    "\"5 Hz to 4 kHz\"",
                    "Frequency range.",
                )
                .words(&["frequency", "range", "bandwidth"]),
                Key::new(
                    "armature-mass",
                    Holds::Quantity(Kind::Mass, ranges::MASS),
                    "\"0.23 kg\"",
                    "Mass of the moving armature.",
                )
                .words(&["moving-mass", "coil-mass"]),
                Key::new(
                    "armature-mode",
                    Holds::Quantity(Kind::Frequency, ranges::FREQUENCY),
                    "\"6 kHz\"",
                    "First axial resonance of the armature.",
                )
                .words(&["resonance"]),
                Key::new(
                    "suspension-stiffness",
                    Holds::Quantity(Kind::Stiffness, ranges::STIFFNESS),
                    "\"16 N/mm\"",
                    "Axial stiffness of the suspension.",
                )
                .words(&["stiffness", "spring"]),
                Key::new(
                    "body-mass",
                    Holds::Quantity(Kind::Mass, ranges::MASS),
                    "\"15 kg\"",
                    "Mass of the table's body.",
                )
                .words(&["magnet-mass"]),
                Key::new(
                    "load-support",
                    Holds::Boolean,
                    "true",
                    "Whether the payload is lifted by a load support.",
                )
                .words(&["support", "air-spring"]),
                Key::new(
                    "cross-axis",
                    Holds::Quantity(Kind::Ratio, ranges::RATIO),
                    "\"10 %\"",
                    "Cross-axis motion.",
                )
                .words(&["transverse"]),
                Key::new(
                    "distortion",
                    Holds::Quantity(Kind::Ratio, ranges::RATIO),
                    "\"3 %\"",
                    "Harmonic distortion.",
                )
                .words(&["thd"]),
                Key::new("cooling", Holds::Text, "\"natural\"", "How it is cooled.")
                    .words(&["blower", "fan"]),
                Key::new(
                    "diameter",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"64 mm\"",
                    "Diameter of the mounting face.",
                )
                .words(&["dia"]),
            ],
        ),
        &["tables", "shaker", "vibrator", "exciter"],
    ),
    "the vibration table's ratings",
);

pub(super) const IMAGING: Section = later(
    words(
        section(
            "imaging",
            Form::Single,
            "How the run is filmed.",
            &[
                Key::new("camera", Holds::Reference(NameOf::Camera), "\"fast\"", "Which `[camera.NAME]`.")
                    .words(&["cam"]),
                Key::new(
                    "frame-rate",
                    Holds::Quantity(Kind::FrameRate, ranges::FRAME_RATE),
                    "\"1000 fps\"",
                    "Frame rate.",
                )
                .words(&["fps", "framerate"]),
                Key::new(
                    "exposure-time",
                    Holds::Quantity(Kind::Time, ranges::TIME),
                    "\"200 µs\"",
                    "Exposure time of a frame.",
                )
                .words(&["exposure", "shutter-time"]),
                Key::new(
                    "pixel-size",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"50 µm\"",
                    "Size of a pixel in the object plane.",
                )
                .words(&["resolution", "pixel"]),
                Key::new(
                    "duration",
                    Holds::Quantity(Kind::Time, ranges::TIME),
                    "\"5 s\"",
                    "How long is filmed.",
                )
                .words(&["length", "time"]),
                Key::new(
                    "lighting",
                    Holds::Word(&[
                        word("steady", "does not flicker"),
                        word("mains 50 Hz", "flickers at 100 Hz"),
                        word("mains 60 Hz", "flickers at 120 Hz"),
                        word("strobe", "flashes"),
                    ]),
                    "\"steady\"",
                    "How it is lit.",
                )
                .words(&["light", "lamp"]),
                Key::new(
                    "shows",
                    Holds::Word(&[
                        word("frozen", "one phase of the drive"),
                        word("slow motion", "an alias of the drive"),
                        word("waveform", "the motion within a period"),
                    ]),
                    "\"waveform\"",
                    "What the film is said to show.",
                )
                .words(&["claim", "purpose"]),
            ],
        ),
        &["filming", "video", "images", "film"],
    ),
    "imaging",
);

pub(super) const CAMERA: Section = later(
    words(
        section(
            "camera",
            Form::Named,
            "A camera.",
            &[
                Key::new(
                    "shutter",
                    Holds::Word(&[word("global", "all rows at once"), word("rolling", "row after row")]),
                    "\"global\"",
                    "Its shutter.",
                )
                .words(&["shutter-type"]),
                Key::new(
                    "readout",
                    Holds::Quantity(Kind::Time, ranges::TIME),
                    "\"10 ms\"",
                    "Time from the first to the last row.",
                )
                .words(&["readout-time"]),
                Key::new("pixels", Holds::Anything, "[1280, 1024]", "Pixels across and down.")
                    .words(&["resolution", "size"]),
                Key::new("bit-depth", Holds::Integer(1, 64), "8", "Bits per pixel.")
                    .words(&["bits", "depth"]),
                Key::new(
                    "frame-rate-range",
                    Holds::Range(Kind::FrameRate, ranges::FRAME_RATE),
                    "\"1 fps to 5000 fps\"",
                    "Frame rates it can do.",
                )
                .words(&["frame-rate", "fps"]),
            ],
        ),
        &["cameras", "cam"],
    ),
    "imaging",
);

pub(super) const PEOPLE: Section = later(
    words(
        section(
            "people",
            Form::Single,
            "Who is near, for planning estimates; local rules decide.",
            &[
                Key::new(
                    "distance",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"1.5 m\"",
                    "Distance to the table.",
                )
                .words(&["how-far"]),
                Key::new(
                    "time-near",
                    Holds::Quantity(Kind::Time, ranges::TIME),
                    "\"2 h\"",
                    "Time near it a day.",
                )
                .words(&["time", "exposure-time", "duration"]),
                Key::new(
                    "hearing-protection",
                    Holds::QuantityOrWord(Kind::Level, ranges::LEVEL, &[word("none", "no protection")]),
                    "\"none\"",
                    "What the hearing protection takes off, or `none`.",
                )
                .words(&["ear-protection", "earplugs"]),
                Key::new("noise-rule", Holds::Text, "\"EU 2003/10\"", "Which rule of noise dose.")
                    .words(&["rule", "noise"]),
            ],
        ),
        &["persons", "person", "staff", "noise"],
    ),
    "what people are exposed to",
);

pub(super) const PROTECTION: Section = later(
    words(
        section(
            "protection",
            Form::Single,
            "What stands between a mishap and the rig.",
            &[
                Key::new("tray", Holds::Boolean, "true", "A tray that holds all the liquid.")
                    .words(&["drip-tray"]),
                Key::new("coil-guard", Holds::Boolean, "true", "A guard over the gap of the coil.")
                    .words(&["guard"]),
                Key::new(
                    "residual-current-device",
                    Holds::Boolean,
                    "true",
                    "A residual-current device in the supply.",
                )
                .words(&["rcd", "gfci"]),
                Key::new(
                    "relief-pressure",
                    Holds::Quantity(Kind::Pressure, ranges::SUPPLY_PRESSURE),
                    "\"0.5 bar gauge\"",
                    "Pressure at which a relief valve opens.",
                )
                .words(&["relief-valve"]),
                Key::new("extraction", Holds::Boolean, "false", "Extraction of mist and vapour.")
                    .words(&["fume-hood", "hood"]),
                Key::new("lid", Holds::Boolean, "true", "A lid or a splash guard.")
                    .words(&["cover", "splash-guard"]),
                Key::new("loose-parts", Holds::Boolean, "true", "Loose parts are secured or taken away.")
                    .words(&["loose"]),
            ],
        ),
        &["guards", "hazards", "precautions"],
    ),
    "protection",
);

pub(super) const SENSOR: Section = later(
    words(
        section(
            "sensor",
            Form::Repeated,
            "An accelerometer or another sensor.",
            &[
                Key::new("name", Holds::Name, "\"rim\"", "Name of the sensor.").words(&["label"]),
                Key::new(
                    "range",
                    Holds::Quantity(Kind::VibrationAcceleration, ranges::ANY_ACCELERATION),
                    "\"50 g0 peak\"",
                    "Range.",
                )
                .words(&["full-scale"]),
                Key::new("mass", Holds::Quantity(Kind::Mass, ranges::MASS), "\"4 g\"", "Mass.")
                    .words(&["weight"]),
                Key::new("place", Holds::Text, "\"rim of the cell\"", "Where it sits.")
                    .words(&["position", "at", "where"]),
                Key::new("mount", Holds::Text, "\"wax\"", "How it is mounted.")
                    .words(&["mounting", "fixing"]),
                Key::new("calibration-date", Holds::Date, "2026-01-10", "Last calibration.")
                    .words(&["calibrated", "calibration"]),
            ],
        ),
        &["sensors", "accelerometer", "probe"],
    ),
    "sensors",
);
