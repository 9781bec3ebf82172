//! What the lab asks for and accepts: `[limits]`, `[tolerances]`, `[measured]`, `[[accept]]`.

use super::{later, section, word, words};
use crate::declare::key::{Form, Holds, Key, Section};
use crate::declare::ranges;
use quantity::Kind;

const RATINGS: &str = "use of the vibration table's ratings";

pub(super) const LIMITS: Section = words(
    section(
        "limits",
        Form::Single,
        "What this lab asks of a setup.",
        &[
            Key::new(
                "hold-margin",
                Holds::Quantity(Kind::Ratio, ranges::SHARE),
                "\"15 %\"",
                "Least hold margin: 1 − (lowest drive that holds)/(set drive).",
            )
            .words(&["hold", "margin", "holding-margin", "lower-margin"])
            .default("15 %", "judgement: near the hold limit a level error is amplified by 1/(V − 1)"),
            Key::new(
                "wave-margin",
                Holds::Quantity(Kind::Ratio, ranges::MARGIN),
                "\"10 %\"",
                "Least wave margin: (lowest drive that raises waves)/(set drive) − 1.",
            )
            .words(&["wave", "waves", "upper-margin", "wave-limit"])
            .default("10 %", "judgement: twice the usual uncertainty of an accelerometer chain"),
            Key::new(
                "hold-probability",
                Holds::Quantity(Kind::Ratio, ranges::SHARE),
                "\"95 %\"",
                "Least probability that everything holds, tolerances considered.",
            )
            .words(&["probability", "confidence"])
            .later("probability that everything holds"),
            Key::new(
                "force-use",
                Holds::Quantity(Kind::Ratio, ranges::MARGIN),
                "\"80 %\"",
                "Largest share of the table's force rating.",
            )
            .words(&["force", "use-of-force"])
            .later(RATINGS),
            Key::new(
                "stroke-use",
                Holds::Quantity(Kind::Ratio, ranges::MARGIN),
                "\"80 %\"",
                "Largest share of the table's stroke.",
            )
            .words(&["stroke", "use-of-stroke"])
            .later(RATINGS),
            Key::new(
                "velocity-use",
                Holds::Quantity(Kind::Ratio, ranges::MARGIN),
                "\"80 %\"",
                "Largest share of the table's velocity rating.",
            )
            .words(&["velocity", "use-of-velocity"])
            .later(RATINGS),
            Key::new(
                "acceleration-use",
                Holds::Quantity(Kind::Ratio, ranges::MARGIN),
                "\"80 %\"",
                "Largest share of the table's acceleration rating.",
            )
            .words(&["acceleration", "use-of-acceleration"])
            .later(RATINGS),
            Key::new(
                "stress-use",
                Holds::Quantity(Kind::Ratio, ranges::MARGIN),
                "\"25 %\"",
                "Largest share of the strength of the cell's material.",
            )
            .words(&["stress", "strength"])
            .later("stress in floor, wall and lid"),
            Key::new(
                "free-board",
                Holds::Quantity(Kind::Length, ranges::LENGTH),
                "\"20 mm\"",
                "Least height from the uppermost liquid to the rim.",
            )
            .words(&["freeboard", "headspace"])
            .later("freeboard"),
        ],
    ),
    &["limit", "margins", "margin", "requirements", "criteria"],
);

const DEFAULT_TOLERANCES: &str = "default tolerances";

const fn tolerance(name: &'static str, example: &'static str, doc: &'static str) -> Key {
    Key::new(name, Holds::Anything, example, doc).later(DEFAULT_TOLERANCES)
}

pub(super) const TOLERANCES: Section = words(
    section(
        "tolerances",
        Form::Single,
        "What ± means in this file, said once, and tolerances of values that carry none.",
        &[
            Key::new(
                "meaning",
                Holds::Word(&[
                    word("standard", "± is one standard uncertainty (JCGM 100)"),
                    word("limits", "the value lies between the limits, any of them as likely (rectangular)"),
                    word("k=2", "± is an expanded uncertainty with coverage factor 2"),
                ]),
                "\"limits\"",
                "What ± means in this file.",
            )
            .words(&["means", "kind", "type", "coverage"])
            .default("standard", "JCGM 100: the plain statement of an uncertainty is the standard one"),
            tolerance("length", "\"± 0.2 mm\"", "Lengths without a tolerance of their own."),
            tolerance("volume", "\"± 1 %\"", "Volumes without a tolerance of their own."),
            tolerance("acceleration", "\"± 2 %\"", "Accelerations without a tolerance of their own."),
            tolerance("frequency", "\"± 0.1 %\"", "Frequencies without a tolerance of their own."),
            tolerance("temperature", "\"± 2 K\"", "Temperatures without a tolerance of their own."),
            tolerance("pressure", "\"± 1 %\"", "Pressures without a tolerance of their own."),
            tolerance("density", "\"± 0.5 %\"", "Densities without a tolerance of their own."),
            tolerance("viscosity", "\"± 5 %\"", "Viscosities without a tolerance of their own."),
            tolerance("surface-tension", "\"± 3 %\"", "Surface tensions without a tolerance of their own."),
        ],
    ),
    &["tolerance", "uncertainty", "uncertainties", "errors"],
);

pub(super) const MEASURED: Section = Section {
    free: true,
    ..later(
        words(
            section(
                "measured",
                Form::Single,
                "As-run values under the same keys, so that one file carries the plan and the run.",
                &[],
            ),
            &["measurement", "as-run", "actual", "run"],
        ),
        "measured values against the plan",
    )
};

pub(super) const ACCEPT: Section = words(
    section(
        "accept",
        Form::Repeated,
        "A finding that the team accepts, with its reason. It is still shown, as accepted.",
        &[
            Key::new("finding", Holds::Text, "\"hold-margin-short\"", "Name of the finding.")
                .words(&["rule", "id", "name", "what"])
                .needed(),
            Key::new(
                "at",
                Holds::Text,
                "\"layer.oil\"",
                "Place of the finding as the report shows it; left out: anywhere in the file.",
            )
            .words(&["place", "where", "path", "location"]),
            Key::new("reason", Holds::Text, "\"held like this in March\"", "Why the team accepts it.")
                .words(&["why", "because", "note", "comment"])
                .needed(),
            Key::new("by", Holds::Text, "\"M. Quill\"", "Who accepts it.")
                .words(&["who", "author", "name", "signed"])
                .needed(),
            Key::new("until", Holds::Date, "2026-12-31", "Last day on which it is accepted.")
                .words(&["expires", "date", "expiry", "valid"]),
        ],
    ),
    &["accepted", "allow", "ignore", "waive", "waiver", "suppress"],
);
