//! `[cell]`, its parts and `[fixture]`.

use super::{later, section, word, words};
use crate::declare::key::{Form, Holds, Key, NameOf, Section, Word};
use crate::declare::ranges;
use quantity::Kind;

const PARTS: &str = "stiffness and stress of floor, wall and lid";

pub(super) const CELL: Section = words(
    section(
        "cell",
        Form::Single,
        "The cell by its inner sizes.",
        &[
            Key::new(
                "shape",
                Holds::Word(&[word("rectangular", "`length` and `width`"), word("circular", "`diameter`")]),
                "\"rectangular\"",
                "Plan of the cell. Left out: told from the sizes that are given.",
            )
            .words(&["plan", "form", "type", "geometry"])
            .default(
                "told from the sizes given",
                "`diameter` makes it circular, `length` and `width` rectangular",
            ),
            Key::new(
                "length",
                Holds::Quantity(Kind::Length, ranges::CELL_SIZE),
                "\"180 mm\"",
                "Inner length of a rectangular cell.",
            )
            .words(&["l", "long", "x"])
            .sometimes(),
            Key::new(
                "width",
                Holds::Quantity(Kind::Length, ranges::CELL_SIZE),
                "\"30 mm\"",
                "Inner width of a rectangular cell.",
            )
            .words(&["w", "gap", "y", "breadth", "wide"])
            .sometimes(),
            Key::new(
                "diameter",
                Holds::Quantity(Kind::Length, ranges::CELL_SIZE),
                "\"100 mm\"",
                "Inner diameter of a circular cell.",
            )
            .words(&["dia", "bore", "d", "radius", "id", "inner-diameter"])
            .sometimes(),
            Key::new(
                "height",
                Holds::Quantity(Kind::Length, ranges::CELL_SIZE),
                "\"200 mm\"",
                "Inner height, floor to rim or lid.",
            )
            .words(&["h", "depth", "tall", "z"])
            .default("the sum of the layers", "a cell that is filled to the top"),
            Key::new(
                "top",
                Holds::Word(&[
                    word("open", "the first layer's upper face is at ambient pressure"),
                    word("sealed", "a rigid lid"),
                ]),
                "\"sealed\"",
                "Open to the room or shut by a rigid lid.",
            )
            .words(&["lid", "cover", "roof"])
            .default("open", "the common cell"),
            Key::new(
                "bottom",
                Holds::Word(&[
                    word("closed", "a floor"),
                    word("open", "an upside-down jar: the lowest face is at ambient pressure"),
                ]),
                "\"closed\"",
                "Closed by a floor, or open (an upside-down jar).",
            )
            .words(&["floor", "base"])
            .default("closed", "the common cell"),
            Key::new(
                "contact-line",
                Holds::Word(&[
                    word("free", "the line slides on the wall: natural modes of the cell"),
                    word("pinned", "the line is held by a brim or an edge"),
                ]),
                "\"free\"",
                "How the liquid's edge meets the wall.",
            )
            .words(&["meniscus", "contactline", "edge", "wetting"])
            .default("free", "the natural modes of the cell"),
            Key::new(
                "mass",
                Holds::Quantity(Kind::Mass, ranges::MASS),
                "\"1.2 kg\"",
                "Mass of the empty cell with its lid.",
            )
            .words(&["weight", "m"])
            .later("the load on the table"),
            Key::new(
                "tilt",
                Holds::Quantity(Kind::Angle, ranges::TILT),
                "\"0.1 deg\"",
                "How far the rig is off level, cell and axis of vibration together; a cell that leans alone on a level table adds 1.75 % of `cross-axis` for each degree.",
            )
            .words(&["level", "level-error", "slope", "inclination", "angle"])
            .default("0.1 deg", "practice: cells are levelled within 0.05 to 0.2 deg; 0.1 deg is 1.7 mm in 1 m"),
            Key::new(
                "like",
                Holds::Reference(NameOf::Library),
                "\"tall cell\"",
                "A library cell whose keys it takes.",
            )
            .words(&["as", "from", "copy"])
            .later("cells from a library"),
        ],
    ),
    &["container", "vessel", "tank", "jar", "box", "tube"],
);

const EDGES: &[Word] = &[
    word("clamped", "cannot turn at its edge"),
    word("supported", "can turn at its edge"),
    word("unknown", "both are computed"),
];

const MATERIAL: Key =
    Key::new("material", Holds::Text, "\"acrylic\"", "What it is made of.").words(&["made-of", "plastic"]);
const MODULUS: Key = Key::new(
    "youngs-modulus",
    Holds::Quantity(Kind::Stress, ranges::STRESS),
    "\"3.2 GPa\"",
    "Young's modulus.",
)
.words(&["modulus", "e", "stiffness"]);
const POISSON: Key =
    Key::new("poissons-ratio", Holds::Quantity(Kind::Ratio, ranges::POISSON), "0.37", "Poisson's ratio.")
        .words(&["poisson", "nu"]);
const SOLID_DENSITY: Key =
    Key::new("density", Holds::Quantity(Kind::Density, ranges::DENSITY), "\"1190 kg/m³\"", "Density.")
        .words(&["rho"]);
const STRENGTH: Key =
    Key::new("strength", Holds::Quantity(Kind::Stress, ranges::STRESS), "\"70 MPa\"", "Strength.")
        .words(&["yield", "tensile-strength"]);
const PART_THICKNESS: Key =
    Key::new("thickness", Holds::Quantity(Kind::Length, ranges::LENGTH), "\"10 mm\"", "Thickness.")
        .words(&["thick", "t", "height"]);
const EDGE: Key = Key::new("edge", Holds::Word(EDGES), "\"clamped\"", "How its edge is held.")
    .words(&["support", "mount", "fixing"]);

pub(super) const BASE: Section = later(
    words(
        section(
            "cell.base",
            Form::Single,
            "The floor of the cell.",
            &[MATERIAL, MODULUS, POISSON, SOLID_DENSITY, STRENGTH, PART_THICKNESS, EDGE],
        ),
        &["floor", "bottom"],
    ),
    PARTS,
);

pub(super) const WALL: Section = later(
    words(
        section(
            "cell.wall",
            Form::Single,
            "The side walls of the cell.",
            &[
                MATERIAL,
                MODULUS,
                POISSON,
                SOLID_DENSITY,
                STRENGTH,
                PART_THICKNESS,
                EDGE,
                Key::new(
                    "rim",
                    Holds::Word(&[
                        word("framed", "a stiff frame holds the rim"),
                        word("open", "the rim is free"),
                    ]),
                    "\"framed\"",
                    "How the upper rim is held.",
                )
                .words(&["top-edge"]),
            ],
        ),
        &["walls", "side"],
    ),
    PARTS,
);

pub(super) const LID: Section = later(
    words(
        section(
            "cell.lid",
            Form::Single,
            "The lid of the cell.",
            &[
                MATERIAL,
                MODULUS,
                POISSON,
                SOLID_DENSITY,
                STRENGTH,
                PART_THICKNESS,
                EDGE,
                Key::new("bolts", Holds::Integer(0, 1000), "8", "Number of bolts.")
                    .words(&["screws", "bolt-count"]),
                Key::new(
                    "seal-diameter",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"112 mm\"",
                    "Diameter of the seal.",
                )
                .words(&["o-ring", "seal"]),
                Key::new(
                    "preload",
                    Holds::Quantity(Kind::Force, ranges::FORCE),
                    "\"1.5 kN\"",
                    "Preload of each bolt.",
                )
                .words(&["bolt-force", "clamp-force"]),
            ],
        ),
        &["cover", "top"],
    ),
    PARTS,
);

pub(super) const FIXTURE: Section = later(
    words(
        section(
            "fixture",
            Form::Single,
            "What the cell stands on, between it and the table.",
            &[
                Key::new("mass", Holds::Quantity(Kind::Mass, ranges::MASS), "\"0.8 kg\"", "Mass.")
                    .words(&["weight"]),
                Key::new(
                    "screws",
                    Holds::Table(&[
                        Key::new("count", Holds::Integer(1, 1000), "4", "How many.").words(&["number", "n"]),
                        Key::new("size", Holds::Text, "\"M6\"", "Thread.").words(&["thread", "diameter"]),
                        Key::new(
                            "preload",
                            Holds::Quantity(Kind::Force, ranges::FORCE),
                            "\"6 kN\"",
                            "Preload of each.",
                        )
                        .words(&["force"]),
                    ]),
                    "{ count = 4, size = \"M6\", preload = \"6 kN\" }",
                    "The screws to the table.",
                )
                .words(&["bolts"]),
                Key::new(
                    "height",
                    Holds::Quantity(Kind::Length, ranges::LENGTH),
                    "\"20 mm\"",
                    "Height above the table.",
                )
                .words(&["h", "thickness"]),
                Key::new(
                    "offset",
                    Holds::Quantity(Kind::Length, ranges::SIGNED_LENGTH),
                    "\"2 mm\"",
                    "Distance of the centre of mass from the table's axis.",
                )
                .words(&["eccentricity"]),
            ],
        ),
        &["mount", "adapter", "plate"],
    ),
    "the load on the table and its screws",
);
