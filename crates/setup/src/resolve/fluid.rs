//! `[fluid.NAME]`, and figures wherever they stand.

use super::{Resolver, given};
use crate::resolved::{Figure, Figures, Fluid, WrittenViscosity};
use crate::rules;
use crate::written::{Written, WrittenSection};
use quantity::Kind;
use quantity::vocabulary::{BuiltInFluid, Phase};

impl Resolver<'_> {
    pub(super) fn fluids(&mut self) {
        let document = self.document;
        for section in document.sections("fluid") {
            if BuiltInFluid::ALL.iter().any(|fluid| fluid.name() == section.name) {
                let finding =
                    rules::name_given_twice::built_in(&section.name, &section.place, section.header.clone());
                self.findings.push(finding);
                self.lose(&section.place);
                continue;
            }
            let Some(phase) = phase(section) else {
                self.missing_key(section, "phase");
                self.lose(&section.place);
                continue;
            };
            self.only_for(section, phase);
            let fluid = Fluid {
                phase,
                figures: self.figures(section),
                at: self.written(section, "at"),
                source: section.text("source").map(str::to_owned),
            };
            self.setup.fluids.entry(section.name.clone()).or_insert(fluid);
        }
    }

    /// The figures of a layer or a fluid.
    pub(super) fn figures(&self, section: &WrittenSection) -> Figures {
        Figures {
            density: self.figure(section, "density"),
            viscosity: self.figure(section, "viscosity").map(|figure| match viscosity_kind(section) {
                Some(Kind::KinematicViscosity) => WrittenViscosity::Kinematic(figure),
                _ => WrittenViscosity::Dynamic(figure),
            }),
            surface_tension: self.figure(section, "surface-tension"),
            adiabatic_index: self.figure(section, "adiabatic-index"),
            thermal_diffusivity: self.figure(section, "thermal-diffusivity"),
        }
    }

    fn figure(&self, section: &WrittenSection, key: &str) -> Option<Figure> {
        let place = section.place_of(key);
        match section.value(key)? {
            Written::Quantity(quantity) => {
                Some(Figure::Value(given(quantity, place, self.ambient_pressure())))
            }
            Written::Figure(points) => Some(Figure::Table {
                place,
                points: points.iter().map(|(temperature, value)| (temperature.value, value.value)).collect(),
            }),
            _ => None,
        }
    }

    /// Keys that only a gas or only a liquid has, in the other.
    pub(super) fn only_for(&mut self, section: &WrittenSection, phase: Phase) {
        let (keys, other): (&[&str], &str) = match phase {
            Phase::Liquid => (
                &[
                    "filled-volume",
                    "vented",
                    "pressure",
                    "polytropic-exponent",
                    "adiabatic-index",
                    "thermal-diffusivity",
                ],
                "gas",
            ),
            Phase::Gas => (&["surface-tension", "mass-fraction", "grade"], "liquid"),
        };
        for key in keys.iter().filter(|key| section.entry(key).is_some()) {
            let this = if other == "gas" { "liquid" } else { "gas" };
            let what = format!("`{key}` is for a {other}, and '{}' is a {this}.", section.name);
            let (place, span) = (section.place_of(key), section.span_of(key));
            self.findings.push(rules::values_disagree::finding(&place, span, what, None));
        }
    }
}

/// The phase that a section says.
pub(super) fn phase(section: &WrittenSection) -> Option<Phase> {
    match section.text("phase")? {
        "gas" => Some(Phase::Gas),
        _ => Some(Phase::Liquid),
    }
}

fn viscosity_kind(section: &WrittenSection) -> Option<Kind> {
    match section.value("viscosity")? {
        Written::Quantity(quantity) => Some(quantity.kind),
        Written::Figure(points) => points.first().map(|(_, value)| value.kind),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fluid(lines: &str) -> crate::Understanding {
        crate::understand(&format!(
            "[cell]\ndiameter = \"80 mm\"\n[[layer]]\nfluid = \"brew\"\nthickness = \"20 mm\"\n[fluid.brew]\nphase = \"liquid\"\n{lines}"
        ))
    }

    const WHOLE: &str = "density = \"1040 kg/m³\"\nviscosity = [[\"25 °C\", \"380 mPa s\"], [\"20 °C\", \"520 mPa s\"]]\nsurface-tension = \"30 mN/m\"\n";

    #[test]
    fn tables_are_sorted_by_temperature() {
        let read = fluid(WHOLE);
        assert!(read.findings.is_empty(), "{:?}", read.findings);
        let Some(WrittenViscosity::Dynamic(Figure::Table { points, place })) =
            &read.setup.fluids["brew"].figures.viscosity
        else {
            panic!("a table of dynamic viscosities")
        };
        assert_eq!(place, "fluid.brew.viscosity");
        assert_eq!(points.len(), 2);
        assert!((points[0].0 - 293.15).abs() < 1e-9 && (points[0].1 - 0.52).abs() < 1e-12, "{points:?}");
    }

    #[test]
    fn bad_tables_are_told() {
        for (table, rule) in [
            ("[[\"20 °C\", \"520 mPa s\"]]", "value-of-wrong-type"),
            ("[[\"20 °C\", \"520 mPa s\"], [\"20 °C\", \"500 mPa s\"]]", "values-disagree"),
            ("[[\"20 °C\", \"520 mPa s\"], [\"25 °C\", \"500 mm²/s\"]]", "values-disagree"),
            ("[[\"20 °C\", \"520 mPa s\"], \"25 °C\"]", "value-of-wrong-type"),
            ("[[\"20 °C\", \"520\"], [\"25 °C\", \"500 mPa s\"]]", "unit-missing"),
        ] {
            let read = fluid(&format!(
                "density = \"1040 kg/m³\"\nviscosity = {table}\nsurface-tension = \"30 mN/m\"\n"
            ));
            let rules: Vec<&str> = read.findings.iter().map(|found| found.rule).collect();
            assert_eq!(rules, [rule], "{table}");
        }
    }

    #[test]
    fn what_a_used_fluid_lacks_is_said_at_the_fluid() {
        let read = fluid("viscosity = \"1 Pa s\"\nsurface-tension = \"30 mN/m\"\n");
        assert_eq!(read.findings.len(), 1);
        assert_eq!(read.findings[0].place, "fluid.brew.density");
    }
}
