//! `[[body]]` and `[[pendulum]]`.

use super::{later, section, word, words};
use crate::declare::key::{Bounds, Form, Holds, Key, NameOf, Section, Word};
use crate::declare::ranges;
use quantity::Kind;

// An added mass may be nil, and a section may have no area where a keel begins.
const AREA_OR_NONE: Bounds = or_none(ranges::AREA, "0 to 10 000 m²");
const MASS_OR_NONE: Bounds = or_none(ranges::MASS, "0 to 1000 t");
const INERTIA_OR_NONE: Bounds = or_none(ranges::INERTIA, "0 to 1e6 kg m²");

const fn or_none(bounds: Bounds, said: &'static str) -> Bounds {
    Bounds::from(0.0, bounds.most, said, bounds.why)
}

const APEX: &[Word] =
    &[word("up", "the point is up in the lab"), word("down", "the point is down in the lab")];

const fn size(name: &'static str, doc: &'static str, words: &'static [&'static str]) -> Key {
    Key::new(name, Holds::Quantity(Kind::Length, ranges::LENGTH), "\"20 mm\"", doc).words(words)
}

pub(super) const BODY: Section = later(
    words(
        section(
            "body",
            Form::Repeated,
            "A floating body, on an upper or a lower face of a liquid layer.",
            &[
                Key::new("name", Holds::Name, "\"boat\"", "Name of the body.").words(&["label"]),
                Key::new("shape", Holds::Word(&[
                        word("box", "`length`, `width`, `height`"),
                        word("upright-cylinder", "`diameter`, `height`"),
                        word("lying-cylinder", "`diameter`, `length`"),
                        word("sphere", "`diameter`"),
                        word("cone", "`diameter`, `height`, `apex`"),
                        word("frustum", "`lower-diameter`, `upper-diameter`, `height`"),
                        word("triangular-prism", "`length`, `width`, `height`, `apex`"),
                    ]), "\"box\"", "Its shape.").words(&["form", "type"]),
                size("length", "Length.", &["l"]),
                size("width", "Width.", &["w", "beam"]),
                size("height", "Height.", &["h", "depth"]),
                size("diameter", "Diameter.", &["dia", "d", "bore", "radius"]),
                size("lower-diameter", "Lower diameter of a frustum.", &["bottom-diameter"]),
                size("upper-diameter", "Upper diameter of a frustum.", &["top-diameter"]),
                Key::new("apex", Holds::Word(APEX), "\"down\"", "Where the point of a cone or the edge of a prism is.").words(&["point", "tip"]),
                Key::new("mesh", Holds::Text, "\"hull.stl\"", "A closed mesh instead of a shape.").words(&["stl", "file"]),
                Key::new("mesh-unit", Holds::Text, "\"mm\"", "Unit of the mesh.").words(&["unit", "scale"]),
                Key::new("sections", Holds::Tables(&[
                        Key::new("height", Holds::Quantity(Kind::Length, ranges::SIGNED_LENGTH), "\"0 mm\"", "Height above the lowest point.").words(&["z"]),
                        Key::new("area", Holds::Quantity(Kind::Area, AREA_OR_NONE), "\"4 cm²\"", "Area at this height.").words(&["a"]),
                        Key::new("second-moments", Holds::Quantities(Kind::SecondMomentOfArea, ranges::SECOND_MOMENT), "[\"4 cm^4\", \"2 cm^4\"]",
                            "Second moments of area about length and width.").words(&["moments", "i"]),
                    ]), "[{ height = \"0 mm\", area = \"4 cm²\", second-moments = [\"4 cm^4\", \"2 cm^4\"] }]",
                    "Sections from the lowest point up, instead of a shape.").words(&["section-table"]),
                Key::new("mass", Holds::Quantity(Kind::Mass, ranges::MASS), "\"12 g\"", "Mass.").words(&["weight", "m"]),
                Key::new("density", Holds::Quantity(Kind::Density, ranges::DENSITY), "\"700 kg/m³\"", "Mean density, instead of a mass.").words(&["rho"]),
                Key::new("centre-of-mass", Holds::Quantities(Kind::Length, ranges::SIGNED_LENGTH), "\"8 mm\"",
                    "Height above the lowest point as it sits in the lab, or `[x, y, z]` in the body's own coordinates.").words(&["center-of-mass", "cog", "com", "cg"]),
                Key::new("moment-of-inertia", Holds::Quantities(Kind::MomentOfInertia, ranges::INERTIA), "\"2e-6 kg m²\"",
                    "About the centre of mass, one or three.").words(&["inertia"]),
                Key::new("on", Holds::Reference(NameOf::Layer), "\"oil\"", "The liquid layer that it floats on.").words(&["layer", "in", "floats-on"]),
                Key::new("face", Holds::Word(&[
                        word("upper", "on the upper face of the layer"),
                        word("lower", "upside down on the lower face"),
                    ]), "\"lower\"", "Which face of that layer.").words(&["side", "surface"]),
                Key::new("position", Holds::Quantities(Kind::Length, ranges::SIGNED_LENGTH), "[\"0 mm\", \"0 mm\"]", "Position in the plan.").words(&["at", "place", "xy"]),
                Key::new("heading", Holds::Quantity(Kind::Angle, ranges::ANGLE), "\"0 deg\"", "Heading in the plan.").words(&["direction", "angle", "yaw"]),
                Key::new("added-mass", Holds::Quantity(Kind::Mass, MASS_OR_NONE), "\"6 g\"", "Added mass in heave.").words(&["hydrodynamic-mass"]),
                Key::new("added-inertia", Holds::Quantities(Kind::MomentOfInertia, INERTIA_OR_NONE), "[\"1e-6 kg m²\", \"1e-6 kg m²\"]",
                    "Added moment of inertia about length, width.").words(&["hydrodynamic-inertia"]),
                Key::new("damping", Holds::Quantity(Kind::Damping, ranges::DAMPING), "\"0.05 kg/s\"", "Damping in heave.").words(&["drag"]),
                Key::new("tilt-damping", Holds::Quantities(Kind::TiltDamping, ranges::TILT_DAMPING), "\"1e-6 kg m²/s\"", "Damping in tilt.").words(&["roll-damping"]),
                Key::new("like", Holds::Reference(NameOf::Body), "\"boat\"", "Another body whose keys it takes.").words(&["as", "copy"]),
                Key::new("count", Holds::Integer(1, 10000), "3", "How many of them.").words(&["number", "n"]),
                Key::new("spacing", Holds::Quantity(Kind::Length, ranges::LENGTH), "\"40 mm\"", "Distance between their centres.").words(&["pitch", "distance"]),
            ],
        ),
        &["bodies", "float", "floater", "boat", "object", "floating-body"],
    ),
    "floating bodies",
);

pub(super) const PENDULUM: Section = later(
    words(
        section(
            "pendulum",
            Form::Repeated,
            "An inverted rod, or a chain of linked rods, on the same table, as a proof piece.",
            &[
                Key::new("name", Holds::Name, "\"rod\"", "Name of the pendulum.").words(&["label"]),
                Key::new(
                    "links",
                    Holds::Tables(&[
                        Key::new(
                            "length",
                            Holds::Quantity(Kind::Length, ranges::LENGTH),
                            "\"100 mm\"",
                            "Length.",
                        )
                        .words(&["l"]),
                        Key::new("mass", Holds::Quantity(Kind::Mass, ranges::MASS), "\"5 g\"", "Mass.")
                            .words(&["m"]),
                        Key::new(
                            "kind",
                            Holds::Word(&[
                                word("rod", "the mass is spread along the link"),
                                word("point", "the mass sits at its end"),
                            ]),
                            "\"rod\"",
                            "Where the mass is.",
                        )
                        .words(&["type"]),
                    ]),
                    "[{ length = \"100 mm\", mass = \"5 g\", kind = \"rod\" }]",
                    "Links from the pivot outwards.",
                )
                .words(&["rods", "chain"]),
            ],
        ),
        &["pendula", "pendulums", "rod", "inverted-pendulum"],
    ),
    "inverted pendulums",
);
