//! The stack: `[[layer]]`, `[[interface]]`, `[fluid.NAME]`, `[[tension]]`.

use super::{later, section, word, words};
use crate::declare::key::{Form, Holds, Key, NameOf, Section, Word};
use crate::declare::ranges;
use quantity::Kind;

const PHASES: &[Word] =
    &[word("gas", "compressible: a cushion is a spring"), word("liquid", "incompressible: a slab is a mass")];

const DENSITY: Key = Key::new(
    "density",
    Holds::Figure(Kind::Density, ranges::DENSITY),
    "\"965 kg/m³\"",
    "Density at operating temperature (and, for a gas, at operating pressure). Overrides the fluid's own.",
)
.words(&["rho", "mass-density", "specific-gravity"]);
const VISCOSITY: Key = Key::new("viscosity", Holds::Figure(Kind::Viscosity, ranges::VISCOSITY), "\"500 mm²/s\"",
    "Viscosity at the layer's own temperature, dynamic (Pa s, cP) or kinematic (mm²/s, cSt) by its unit. Overrides the fluid's own.")
    .words(&["nu", "mu", "eta", "dynamic-viscosity", "kinematic-viscosity", "cst", "visc"]);
const SURFACE_TENSION: Key = Key::new(
    "surface-tension",
    Holds::Figure(Kind::SurfaceTension, ranges::TENSION),
    "\"21 mN/m\"",
    "Surface tension against gas. Between two liquids it is `tension` of the `[[interface]]`.",
)
.words(&["sigma", "gamma", "tension", "surface-energy"]);
const ADIABATIC_INDEX: Key = Key::new(
    "adiabatic-index",
    Holds::Figure(Kind::Ratio, ranges::ADIABATIC_INDEX),
    "1.4",
    "Gas: ratio of the specific heats.",
)
.words(&["kappa", "heat-capacity-ratio", "specific-heat-ratio", "cp-cv"]);
const THERMAL_DIFFUSIVITY: Key = Key::new(
    "thermal-diffusivity",
    Holds::Figure(Kind::ThermalDiffusivity, ranges::DIFFUSIVITY),
    "\"21 mm²/s\"",
    "Gas: thermal diffusivity; decides how much heat the gas of a cushion loses in a period.",
)
.words(&["diffusivity", "heat-diffusivity", "alpha"]);

pub(super) const LAYER: Section = words(
    section(
        "layer",
        Form::Repeated,
        "One layer of the stack. The first is the top one: the file reads as the cell looks from the side.",
        &[
            Key::new("name", Holds::Name, "\"oil\"", "Name of the layer, by which interfaces, findings and reports call it. Left out: 'layer 2' by its position.")
                .words(&["label", "id"]),
            Key::new("fluid", Holds::Reference(NameOf::Fluid), "\"silicone oil\"",
                "What it is made of: one of the tool's own fluids or a `[fluid.NAME]`. Left out: `phase` and all figures stand in the layer.")
                .words(&["material", "liquid", "gas", "medium", "substance", "made-of"]).sometimes(),
            Key::new("thickness", Holds::Quantity(Kind::Length, ranges::LAYER_THICKNESS), "\"42 mm\"",
                "Thickness at operating pressure. One of `thickness`, `volume` and (gas) `filled-volume` is needed.")
                .words(&["depth", "height", "h", "thick", "level"]).sometimes(),
            Key::new("volume", Holds::Quantity(Kind::Volume, ranges::VOLUME), "\"250 mL\"",
                "Volume at operating pressure, instead of a thickness: divided by the cell's area.")
                .words(&["amount", "vol", "fill", "quantity"]),
            Key::new("filled-volume", Holds::Quantity(Kind::Volume, ranges::VOLUME), "\"60 mL\"",
                "Gas: volume at ambient pressure, as drawn into a syringe. Under the weight of the layers above it shrinks.")
                .words(&["syringe-volume", "injected-volume", "gas-volume"]),
            Key::new("mass-fraction", Holds::Quantity(Kind::Ratio, ranges::SHARE), "\"80 %\"",
                "Mass fraction of the named solute of a mixture: glycerol in `glycerol-water`, ethanol in `ethanol-water`.")
                .words(&["concentration", "composition", "fraction", "percent", "share", "content"]).sometimes(),
            Key::new("grade", Holds::Quantity(Kind::KinematicViscosity, ranges::GRADE), "\"500 mm²/s\"",
                "Silicone oil: the maker's kinematic viscosity at 25 °C, as on the bottle; the viscosity at the layer's temperature follows from it.")
                .words(&["viscosity-grade", "oil-grade", "type", "label-viscosity"]).sometimes(),
            VISCOSITY,
            DENSITY,
            SURFACE_TENSION,
            Key::new("temperature", Holds::Quantity(Kind::Temperature, ranges::TEMPERATURE), "\"23 °C\"",
                "Temperature of this layer; left out: ambient.")
                .words(&["temp", "t"]),
            Key::new("phase", Holds::Word(PHASES), "\"liquid\"", "Gas or liquid; needed only without `fluid`.")
                .words(&["state", "kind", "type"]).sometimes(),
            ADIABATIC_INDEX,
            THERMAL_DIFFUSIVITY,
            Key::new("vented", Holds::Boolean, "true", "Gas: open to the room, so no cushion: it cannot carry a slab.")
                .words(&["open", "vent", "leaky"])
                .default("false", "a gas layer is taken as shut in"),
            Key::new("pressure", Holds::Quantity(Kind::Pressure, ranges::PRESSURE), "\"1100 mbar abs\"",
                "Gas: its static pressure; the pressures of the stack start from it.")
                .words(&["p", "gas-pressure", "fill-pressure"]),
            Key::new("polytropic-exponent", Holds::Quantity(Kind::Ratio, ranges::POLYTROPIC), "1.2",
                "Gas: exponent n of p Vⁿ = const; left out: computed from the gas, its thickness and the frequency.")
                .words(&["polytropic", "exponent", "n", "kappa"]),
        ],
    ),
    &["layers", "slab", "stratum", "liquid", "gas", "cushion", "stack"],
);

pub(super) const INTERFACE: Section = words(
    section(
        "interface",
        Form::Repeated,
        "The interface of two layers that touch.",
        &[
            Key::new("between", Holds::LayerPair, "[\"oil\", \"water\"]", "Names of the two layers.")
                .words(&["layers", "of", "names", "from-to"]).needed(),
            Key::new("tension", Holds::Quantity(Kind::SurfaceTension, ranges::TENSION), "\"35 mN/m\"",
                "Interfacial tension. Needed where two different liquids touch (it is never invented), an override elsewhere.")
                .words(&["surface-tension", "interfacial-tension", "sigma", "gamma"]).needed(),
        ],
    ),
    &["interfaces", "boundary", "surface", "face"],
);

const LATER_FIGURES: &str = "vapour, flash point and sound speed of own fluids";

pub(super) const FLUID: Section = words(
    section(
        "fluid",
        Form::Named,
        "A fluid of your own, with figures from a data sheet or measured. A figure may be a table against temperature: interpolated, never extrapolated.",
        &[
            Key::new("phase", Holds::Word(PHASES), "\"liquid\"", "Gas or liquid.")
                .words(&["state", "kind", "type"])
                .needed(),
            DENSITY,
            VISCOSITY,
            SURFACE_TENSION,
            ADIABATIC_INDEX,
            THERMAL_DIFFUSIVITY,
            Key::new(
                "at",
                Holds::Quantity(Kind::Temperature, ranges::TEMPERATURE),
                "\"25 °C\"",
                "Temperature that the single figures hold for.",
            )
            .words(&["temperature", "temp", "reference-temperature", "measured-at"]),
            Key::new(
                "source",
                Holds::Text,
                "\"data sheet 2026-01\"",
                "Where the figures come from; shown with every result.",
            )
            .words(&["reference", "from", "data-sheet", "citation"])
            .people(),
            Key::new(
                "flash-point",
                Holds::Quantity(Kind::Temperature, ranges::TEMPERATURE),
                "\"101 °C\"",
                "Flash point.",
            )
            .words(&["flashpoint"])
            .later(LATER_FIGURES),
            Key::new(
                "vapour-pressure",
                Holds::Figure(Kind::AbsolutePressure, ranges::VAPOUR_PRESSURE),
                "\"2.3 kPa\"",
                "Vapour pressure.",
            )
            .words(&["vapor-pressure", "pv"])
            .later(LATER_FIGURES),
            Key::new(
                "sound-speed",
                Holds::Figure(Kind::Speed, ranges::SPEED),
                "\"980 m/s\"",
                "Speed of sound.",
            )
            .words(&["speed-of-sound", "c"])
            .later(LATER_FIGURES),
        ],
    ),
    &["fluids", "liquid", "material", "oil"],
);

pub(super) const TENSION: Section = later(
    words(
        section(
            "tension",
            Form::Repeated,
            "Interfacial tension of two fluids, for every place where they touch.",
            &[
                Key::new("fluids", Holds::Texts, "[\"water\", \"silicone oil\"]", "Names of the two fluids.")
                    .words(&["between", "of"])
                    .needed(),
                Key::new(
                    "value",
                    Holds::Quantity(Kind::SurfaceTension, ranges::TENSION),
                    "\"40 mN/m\"",
                    "The tension.",
                )
                .words(&["tension", "sigma"])
                .needed(),
                Key::new(
                    "at",
                    Holds::Quantity(Kind::Temperature, ranges::TEMPERATURE),
                    "\"25 °C\"",
                    "Temperature it holds for.",
                )
                .words(&["temperature"]),
                Key::new("source", Holds::Text, "\"pendant drop, 2026-02\"", "Where it comes from.")
                    .words(&["reference", "from"])
                    .people(),
            ],
        ),
        &["tensions", "interfacial-tension"],
    ),
    "tensions by pairs of fluids",
);
