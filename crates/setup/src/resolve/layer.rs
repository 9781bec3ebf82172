//! `[[layer]]` and `[[interface]]`.

use super::Resolver;
use super::fluid::phase;
use crate::declare::nearest;
use crate::resolved::{Given, Interface, Layer, LayerFluid, Plan};
use crate::rules::{self, values_disagree};
use crate::written::WrittenSection;
use quantity::Kind;
use quantity::vocabulary::{BuiltInFluid, Phase};

/// What people call the tool's own fluids.
const FLUID_WORDS: [(BuiltInFluid, &[&str]); 6] = [
    (BuiltInFluid::Water, &["h2o", "distilled water", "deionised water", "di water"]),
    (
        BuiltInFluid::GlycerolWater,
        &["glycerol", "glycerine", "glycerin", "glycerol water", "water-glycerol", "glycerine-water"],
    ),
    (BuiltInFluid::EthanolWater, &["ethanol", "alcohol", "ethanol water", "water-ethanol"]),
    (BuiltInFluid::SiliconeOil, &["silicone", "silicon oil", "silicone-oil", "oil", "pdms", "siloxane"]),
    (BuiltInFluid::Air, &["dry air", "ambient"]),
    (BuiltInFluid::Nitrogen, &["n2"]),
];

impl Resolver<'_> {
    pub(super) fn layers(&mut self) {
        let document = self.document;
        let sections: Vec<&WrittenSection> = document.sections("layer").collect();
        if sections.is_empty() {
            self.missing(
                "layer",
                0..0,
                "The setup has no `[[layer]]`.",
                "Write one `[[layer]]` for each layer, the top one first.",
            );
            return;
        }
        for section in &sections {
            let layer = self.layer(section);
            self.setup.layers.push(layer);
        }
        for (index, section) in sections.iter().enumerate() {
            self.figures_needed(index, section, sections.len());
        }
    }

    fn layer(&mut self, section: &WrittenSection) -> Layer {
        let fluid = self.layer_fluid(section);
        let phase = fluid.as_ref().and_then(|fluid| self.phase_of(fluid));
        if let Some(phase) = phase {
            self.only_for(section, phase);
        }
        let vented = match phase {
            Some(Phase::Gas) => self.flag(section, "vented", "true"),
            // Not for liquids, so not listed as a default of theirs.
            _ => Given {
                value: false,
                place: section.place_of("vented"),
                origin: crate::resolved::Origin::Default("only a gas can be vented"),
                tolerance: None,
                digits: super::EXACT,
            },
        };
        let vented = match section.boolean("vented") {
            Some(value) => Given { value, ..vented },
            None => vented,
        };
        let layer = Layer {
            name: section.name.clone(),
            place: section.place.clone(),
            fluid,
            thickness: self.written(section, "thickness"),
            volume: self.written(section, "volume"),
            filled_volume: self.written(section, "filled-volume"),
            temperature: self.written(section, "temperature"),
            figures: self.figures(section),
            vented,
            pressure: self.layer_pressure(section),
            polytropic_exponent: self.written(section, "polytropic-exponent"),
        };
        self.size(section, &layer, phase);
        layer
    }

    /// How thick it is: one of three keys, and two that are comparable agree.
    fn size(&mut self, section: &WrittenSection, layer: &Layer, phase: Option<Phase>) {
        let keys = ["thickness", "volume", "filled-volume"];
        let lost = keys.iter().any(|key| self.lost(&section.place_of(key)));
        if keys.iter().all(|key| section.entry(key).is_none()) && !lost {
            let remedy = match phase {
                Some(Phase::Gas) => "Write `thickness`, `volume` or `filled-volume`.",
                _ => "Write `thickness = \"42 mm\"`, or its `volume`.",
            };
            let what = format!("Layer '{}' has no `thickness`.", section.name);
            self.missing(&section.place_of("thickness"), section.header.clone(), &what, remedy);
        }
        let area = self.setup.cell.as_ref().map(|cell| match &cell.plan {
            Plan::Rectangular { length, width } => length.value * width.value,
            Plan::Circular { diameter } => std::f64::consts::FRAC_PI_4 * diameter.value * diameter.value,
        });
        if let (Some(thickness), Some(volume), Some(area)) = (&layer.thickness, &layer.volume, area) {
            let by_volume = volume.value / area;
            let tolerances = thickness.tolerance.unwrap_or(0.0) + volume.tolerance.unwrap_or(0.0) / area;
            if (by_volume - thickness.value).abs() > values_disagree::ROUNDING * thickness.value + tolerances
            {
                let what = format!(
                    "`thickness` says {}, while `volume` over the cell's area makes {}.",
                    quantity::print(thickness.value, Kind::Length, 3),
                    quantity::print(by_volume, Kind::Length, 3)
                );
                let (span, other) = (section.span_of("volume"), Some(section.span_of("thickness")));
                self.findings.push(values_disagree::finding(&volume.place, span, what, other));
                self.lose(&volume.place);
            }
        }
    }

    fn layer_pressure(&mut self, section: &WrittenSection) -> Option<Given<f64>> {
        let pressure = self.written(section, "pressure")?;
        if pressure.value > 0.0 {
            return Some(pressure);
        }
        // A gauge pressure below the vacuum of this very room.
        let (span, ambient) = (section.span_of("pressure"), self.ambient_pressure());
        self.findings.push(rules::value_out_of_range::vacuum(&pressure.place, span, pressure.value, ambient));
        self.lose(&pressure.place);
        None
    }

    fn layer_fluid(&mut self, section: &WrittenSection) -> Option<LayerFluid> {
        let place = section.place_of("fluid");
        if section.entry("fluid").is_none() {
            if self.lost(&place) {
                return None;
            }
            if let Some(phase) = phase(section) {
                return Some(LayerFluid::Bare(phase));
            }
            if !self.lost(&section.place_of("phase")) {
                self.missing_key(section, "fluid");
            }
            return None;
        }
        let name = section.text("fluid")?;
        if let Some(fluid) = BuiltInFluid::ALL.into_iter().find(|fluid| fluid.name() == name) {
            return Some(self.built_in(section, fluid));
        }
        if self.setup.fluids.contains_key(name) {
            return Some(LayerFluid::Own(name.to_owned()));
        }
        if !self.lost(&format!("fluid.{name}")) && !self.uses_libraries() {
            self.fluid_not_found(section, &place, name);
        }
        self.lose(&place);
        None
    }

    fn fluid_not_found(&mut self, section: &WrittenSection, place: &str, name: &str) {
        let typed = name.to_lowercase();
        let known: Vec<&str> = BuiltInFluid::ALL
            .iter()
            .map(|fluid| fluid.name())
            .chain(self.setup.fluids.keys().map(String::as_str))
            .collect();
        let meant = FLUID_WORDS
            .iter()
            .find(|(fluid, words)| fluid.name() == typed || words.contains(&typed.as_str()));
        let near = match meant {
            Some((fluid, _)) => nearest::Near { names: vec![fluid.name()], clear: true },
            None => nearest::by_letters(name, known.iter().copied()),
        };
        let span = section.span_of("fluid");
        let finding =
            rules::name_not_found::finding(place, span.clone(), "a fluid", name, &near, &known, Some(span));
        self.findings.push(finding);
    }

    /// One of the tool's own fluids with its composition.
    fn built_in(&mut self, section: &WrittenSection, fluid: BuiltInFluid) -> LayerFluid {
        let mass_fraction = self.written(section, "mass-fraction");
        let grade = self.written(section, "grade");
        let mixture = matches!(fluid, BuiltInFluid::GlycerolWater | BuiltInFluid::EthanolWater);
        if mixture && mass_fraction.is_none() {
            self.missing_key(section, "mass-fraction");
        }
        let viscosity = section.entry("viscosity").is_some() || self.lost(&section.place_of("viscosity"));
        if fluid == BuiltInFluid::SiliconeOil && grade.is_none() && !viscosity {
            self.missing_key(section, "grade");
        }
        let strays = [("mass-fraction", mixture), ("grade", fluid == BuiltInFluid::SiliconeOil)];
        for (key, _) in strays.iter().filter(|(key, fits)| !fits && section.entry(key).is_some()) {
            // A gas has neither: said by the check of gas and liquid keys.
            if fluid.phase() == Phase::Liquid {
                let what = format!("`{key}` is no figure of {}.", fluid.name());
                let (place, span) = (section.place_of(key), section.span_of(key));
                self.findings.push(values_disagree::finding(
                    &place,
                    span,
                    what,
                    Some(section.span_of("fluid")),
                ));
            }
        }
        LayerFluid::BuiltIn { fluid, mass_fraction, grade }
    }

    fn phase_of(&self, fluid: &LayerFluid) -> Option<Phase> {
        match fluid {
            LayerFluid::BuiltIn { fluid, .. } => Some(fluid.phase()),
            LayerFluid::Own(name) => self.setup.fluids.get(name).map(|fluid| fluid.phase),
            LayerFluid::Bare(phase) => Some(*phase),
        }
    }

    /// Figures that a layer without a built-in fluid needs, said at the fluid or, without one, at the layer.
    fn figures_needed(&mut self, index: usize, section: &WrittenSection, count: usize) {
        let document = self.document;
        let Some(layer) = self.setup.layers.get(index).cloned() else { return };
        let Some(fluid) = &layer.fluid else { return };
        let home = match fluid {
            LayerFluid::BuiltIn { .. } => return,
            LayerFluid::Own(name) => document.sections("fluid").find(|own| own.name == *name),
            LayerFluid::Bare(_) => None,
        };
        let mut needed = vec!["density", "viscosity"];
        match self.phase_of(fluid) {
            Some(Phase::Gas)
                if layer.polytropic_exponent.is_none()
                    && !self.lost(&section.place_of("polytropic-exponent")) =>
            {
                needed.extend(["adiabatic-index", "thermal-diffusivity"]);
            }
            Some(Phase::Liquid) if self.meets_gas(index, count) => needed.push("surface-tension"),
            _ => {}
        }
        for key in needed {
            let here = section.entry(key).is_some() || self.lost(&section.place_of(key));
            let there = home.is_some_and(|home| home.entry(key).is_some() || self.lost(&home.place_of(key)));
            let said = |finding: &crate::finding::Finding| {
                home.is_some_and(|home| finding.place == home.place_of(key))
            };
            if !here && !there && !self.findings.iter().any(said) {
                self.missing_key(home.unwrap_or(section), key);
            }
        }
    }

    /// Whether a gas touches a layer whose tension no `[[interface]]` gives.
    fn meets_gas(&self, index: usize, count: usize) -> bool {
        let phase = |index: usize| {
            let layer = self.setup.layers.get(index)?;
            self.phase_of(layer.fluid.as_ref()?)
        };
        let covered = |other: usize| {
            let names =
                [index, other].map(|index| self.setup.layers.get(index).map(|layer| layer.name.as_str()));
            self.document.sections("interface").any(|interface| {
                let between: Vec<Option<&str>> = interface
                    .texts("between")
                    .unwrap_or_default()
                    .iter()
                    .map(|name| Some(name.as_str()))
                    .collect();
                names.iter().all(|name| between.contains(name))
            })
        };
        let gas = |other: usize| phase(other) == Some(Phase::Gas) && !covered(other);
        let cell = self.setup.cell.as_ref();
        let above = match index.checked_sub(1) {
            Some(above) => gas(above),
            None => cell.is_some_and(|cell| !cell.sealed_top.value),
        };
        let below =
            if index + 1 < count { gas(index + 1) } else { cell.is_some_and(|cell| cell.open_bottom.value) };
        above || below
    }

    pub(super) fn interfaces(&mut self) {
        let document = self.document;
        let stack_whole = !document.is_lost("layer");
        for section in document.sections("interface") {
            if section.entry("between").is_none() {
                self.missing_key(section, "between");
            }
            let tension = self.written(section, "tension");
            if tension.is_none() {
                self.missing_key(section, "tension");
            }
            let Some([first, second]) = section.texts("between") else { continue };
            let names = [first.clone(), second.clone()];
            let mut found = true;
            for (index, name) in names.iter().enumerate() {
                if !self.setup.layers.iter().any(|layer| layer.name == *name) {
                    found = false;
                    if document.knows_names("layer") {
                        self.layer_not_found(section, index, name);
                    }
                }
            }
            if !found {
                self.lose(&section.place);
                continue;
            }
            if stack_whole && !self.touch(&names) {
                let what =
                    format!("Layers '{first}' and '{second}' do not touch, so they have no interface.");
                let place = section.place_of("between");
                self.findings.push(values_disagree::finding(&place, section.span_of("between"), what, None));
            }
            let repeated = |interface: &Interface| {
                interface.between == names || interface.between == [names[1].clone(), names[0].clone()]
            };
            // Equal order is caught with the names of sections; here the same pair the other way round.
            let reversed = self
                .setup
                .interfaces
                .iter()
                .any(|interface| repeated(interface) && interface.between != names);
            if reversed {
                let name = format!("{first}|{second}");
                let finding = rules::name_given_twice::finding(
                    section.declaration,
                    &name,
                    &section.place,
                    section.span_of("between"),
                    None,
                );
                self.findings.push(finding);
                continue;
            }
            if let Some(tension) = tension {
                self.setup.interfaces.push(Interface { between: names, tension });
            }
        }
    }

    fn touch(&self, names: &[String; 2]) -> bool {
        self.setup.layers.windows(2).any(|pair| {
            let pair = [pair[0].name.as_str(), pair[1].name.as_str()];
            pair == [names[0].as_str(), names[1].as_str()] || pair == [names[1].as_str(), names[0].as_str()]
        })
    }

    fn layer_not_found(&mut self, section: &WrittenSection, index: usize, name: &str) {
        let known: Vec<&str> = self.setup.layers.iter().map(|layer| layer.name.as_str()).collect();
        let near = nearest::by_letters(name, known.iter().copied());
        let span = section.span_of("between");
        let other =
            section.texts("between").and_then(|names| names.get(1 - index)).cloned().unwrap_or_default();
        let place = section.place_of("between");
        let mut finding =
            rules::name_not_found::finding(&place, span.clone(), "a layer", name, &near, &known, None);
        for near in near.names.iter().filter(|near| **near != other) {
            let mut pair = [crate::written::quoted(near), crate::written::quoted(&other)];
            pair.rotate_left(index);
            let new_text = format!("[{}]", pair.join(", "));
            finding =
                finding.with_fix(rules::replace(format!("Use '{near}'"), false, span.clone(), new_text));
        }
        self.findings.push(finding);
    }
}

#[cfg(test)]
mod tests {
    use crate::resolved::LayerFluid;
    use crate::rules::testing::*;
    use quantity::vocabulary::Phase;

    fn stack(layers: &str) -> crate::Understanding {
        crate::understand(&format!("[cell]\ndiameter = \"80 mm\"\n{layers}"))
    }

    fn found(read: &crate::Understanding) -> Vec<(&str, &str)> {
        read.findings.iter().map(|found| (found.place.as_str(), found.rule)).collect()
    }

    #[test]
    fn a_layer_without_a_name_is_called_by_its_position() {
        let read = stack(
            "[[layer]]\nfluid = \"water\"\nthickness = \"5 mm\"\n[[layer]]\nfluid = \"air\"\nthickness = \"5 mm\"\n",
        );
        assert_eq!(read.setup.layers[1].name, "layer 2");
        assert_eq!(read.setup.layers[1].place, "layer.layer 2");
        assert!(read.findings.is_empty(), "{:?}", read.findings);
    }

    #[test]
    fn a_bare_layer_asks_for_its_figures() {
        let read = stack("[[layer]]\nname = \"a\"\nphase = \"gas\"\nthickness = \"5 mm\"\n");
        assert_eq!(read.setup.layers[0].fluid, Some(LayerFluid::Bare(Phase::Gas)));
        let expected = ["density", "viscosity", "adiabatic-index", "thermal-diffusivity"]
            .map(|key| format!("layer.a.{key}"));
        assert_eq!(
            found(&read),
            expected.iter().map(|place| (place.as_str(), "value-missing")).collect::<Vec<_>>()
        );
        let read = stack(
            "[[layer]]\nname = \"a\"\nphase = \"liquid\"\nthickness = \"5 mm\"\ndensity = \"1 g/cm³\"\nviscosity = \"1 mPa s\"\n",
        );
        assert_eq!(
            found(&read),
            [("layer.a.surface-tension", "value-missing")],
            "its top is open to the room"
        );
    }

    #[test]
    fn a_layer_of_nothing_asks_for_a_fluid_once() {
        let read = stack("[[layer]]\nname = \"a\"\nthickness = \"5 mm\"\n");
        assert_eq!(found(&read), [("layer.a.fluid", "value-missing")]);
    }

    #[test]
    fn a_library_may_have_the_fluid() {
        let text = "use = [\"bench.lab.toml\"]\n[cell]\ndiameter = \"80 mm\"\n[[layer]]\nfluid = \"bench oil\"\nthickness = \"5 mm\"\n";
        assert_eq!(rules(text), ["not-looked-at"]);
        assert!(crate::understand(text).setup.is_unreadable("layer.layer 1.fluid"));
    }

    #[test]
    fn gauge_pressure_is_counted_from_the_room() {
        let read = crate::understand(
            "[ambient]\npressure = \"900 mbar\"\n[cell]\ndiameter = \"80 mm\"\n[[layer]]\nfluid = \"air\"\nthickness = \"5 mm\"\npressure = \"100 mbar gauge\"\n",
        );
        assert!(read.findings.is_empty(), "{:?}", read.findings);
        let pressure = read.setup.layers[0].pressure.as_ref().unwrap().value;
        assert!((pressure - 100_000.0).abs() < 1e-6, "{pressure}");
    }

    #[test]
    fn layers_that_do_not_touch_have_no_interface() {
        let text = EXAMPLE.replace("between = [\"oil\", \"air\"]", "between = [\"oil\", \"brew\"]");
        assert_eq!(only(&text, "values-disagree").place, "interface.oil|brew.between");
    }
}
