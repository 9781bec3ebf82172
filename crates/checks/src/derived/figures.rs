//! The figures of one layer at its temperature and pressure: what the layer says, else what its own fluid says,
//! else the built-in correlation. Tables are interpolated (a viscosity: log against 1/T) and never extrapolated.

use super::trouble::Trouble;
use physics::materials::{self, Material, NEWTONIAN_UP_TO, Property, Unavailable};
use quantity::vocabulary::{BuiltInFluid, Phase};
use setup::resolved::{Figure, Figures, Layer, LayerFluid, Setup, WrittenViscosity};

/// A single viscosity holds this far from the temperature it is stated for, K: about 4 % for a silicone oil, 15 %
/// for glycerol (judgement).
const VISCOSITY_REACH: f64 = 2.0;
/// Any other single figure, K: at most about 1 % (judgement).
const FIGURE_REACH: f64 = 10.0;

/// A diffusivity that nothing reads, m²/s (that of air).
const NOT_USED: f64 = 2.1e-5;

/// A value with where it comes from.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Sourced {
    pub value: f64,
    pub source: String,
}

/// The figures that the physics needs. `None`: missing or unusable, with the trouble noted or already reported.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct LayerFigures {
    pub density: Sourced,
    /// Pa s
    pub viscosity: Sourced,
    /// Liquids: against gas, where it is known.
    pub tension: Option<Sourced>,
    /// Why it is not known.
    pub why_no_tension: Vec<Trouble>,
    /// Gases: ratio of specific heats, thermal diffusivity.
    pub heat: Option<(Sourced, Sourced)>,
}

/// Reads the figures of one layer.
pub(super) struct Reader<'a> {
    pub setup: &'a Setup,
    pub layer: &'a Layer,
    /// K
    pub temperature: f64,
    /// Pa absolute
    pub pressure: f64,
    pub troubles: &'a mut Vec<Trouble>,
}

/// Gas or liquid; `None` when it is not known.
pub(super) fn phase(setup: &Setup, layer: &Layer) -> Option<Phase> {
    match layer.fluid.as_ref()? {
        LayerFluid::BuiltIn { fluid, .. } => Some(fluid.phase()),
        LayerFluid::Own(name) => setup.fluids.get(name).map(|fluid| fluid.phase),
        LayerFluid::Bare(phase) => Some(*phase),
    }
}

/// What a layer is made of, in words.
pub(super) fn made_of(layer: &Layer) -> String {
    match &layer.fluid {
        Some(LayerFluid::BuiltIn { fluid, mass_fraction, grade }) => {
            let mut words = fluid.name().to_owned();
            if let Some(fraction) = mass_fraction {
                words += &format!(", {} % by mass", crate::words::number(fraction.value * 100.0, 4));
            }
            if let Some(grade) = grade {
                words += &format!(", {} mm²/s at 25 °C", crate::words::number(grade.value * 1e6, 4));
            }
            words
        }
        Some(LayerFluid::Own(name)) => name.clone(),
        Some(LayerFluid::Bare(Phase::Gas)) => "gas by its figures".to_owned(),
        Some(LayerFluid::Bare(Phase::Liquid)) => "liquid by its figures".to_owned(),
        None => String::new(),
    }
}

/// What the text gives for a figure.
enum Text {
    Given(Sourced),
    Nothing,
    /// Written and unusable; said elsewhere or noted as trouble.
    Unusable,
}

impl Reader<'_> {
    /// Everything at once, so that every trouble of the layer is noted.
    pub(super) fn read(&mut self) -> Option<LayerFigures> {
        let phase = phase(self.setup, self.layer)?;
        let density = self.figure("density", |f| f.density.as_ref(), materials::density);
        let viscosity = self.viscosity(density.as_ref().map(|density| density.value));
        let mut figures = LayerFigures {
            tension: None,
            why_no_tension: Vec::new(),
            heat: None,
            density: density?,
            viscosity: viscosity?,
        };
        match phase {
            Phase::Liquid => {
                // Only a face against gas asks for it: its troubles wait until then.
                let noted = self.troubles.len();
                figures.tension = self.figure(
                    "surface-tension",
                    |f| f.surface_tension.as_ref(),
                    |m, t, _| materials::surface_tension(m, t),
                );
                figures.why_no_tension = self.troubles.split_off(noted);
            }
            Phase::Gas => figures.heat = Some(self.heat()?),
        }
        Some(figures)
    }

    /// Ratio of specific heats and thermal diffusivity. A prescribed polytropic exponent asks for neither: it stands
    /// for the ratio, and the diffusivity is not used.
    fn heat(&mut self) -> Option<(Sourced, Sourced)> {
        let noted = self.troubles.len();
        let index = self.figure(
            "adiabatic-index",
            |f| f.adiabatic_index.as_ref(),
            |m, t, _| materials::adiabatic_index(m, t),
        );
        let diffusivity = self.figure(
            "thermal-diffusivity",
            |f| f.thermal_diffusivity.as_ref(),
            materials::thermal_diffusivity,
        );
        let Some(exponent) = &self.layer.polytropic_exponent else { return index.zip(diffusivity) };
        self.troubles.truncate(noted);
        let stand_in = |value| Sourced { value, source: "the polytropic exponent is given".to_owned() };
        Some((
            index.unwrap_or_else(|| stand_in(exponent.value)),
            diffusivity.unwrap_or_else(|| stand_in(NOT_USED)),
        ))
    }

    fn figure(
        &mut self,
        key: &'static str,
        pick: fn(&Figures) -> Option<&Figure>,
        built_in: fn(&Material, f64, f64) -> Result<Property, Unavailable>,
    ) -> Option<Sourced> {
        match self.written(key, pick, false) {
            Text::Given(given) => Some(given),
            Text::Unusable => None,
            Text::Nothing => self.built_in(key, built_in),
        }
    }

    fn viscosity(&mut self, density: Option<f64>) -> Option<Sourced> {
        match self.written("viscosity", written_viscosity, true) {
            Text::Given(given) if self.is_kinematic() => {
                density.map(|density| Sourced { value: given.value * density, source: given.source })
            }
            Text::Given(given) => Some(given),
            Text::Unusable => None,
            Text::Nothing => self.built_in("viscosity", materials::viscosity),
        }
    }

    /// Whether the viscosity in force is a kinematic one: the layer's own wins over its fluid's.
    fn is_kinematic(&self) -> bool {
        let own = self.layer.figures.viscosity.as_ref();
        let of_fluid = || self.own_fluid().and_then(|fluid| fluid.figures.viscosity.as_ref());
        matches!(own.or_else(of_fluid), Some(WrittenViscosity::Kinematic(_)))
    }

    fn own_fluid(&self) -> Option<&setup::resolved::Fluid> {
        match self.layer.fluid.as_ref()? {
            LayerFluid::Own(name) => self.setup.fluids.get(name),
            _ => None,
        }
    }

    fn written(&mut self, key: &'static str, pick: fn(&Figures) -> Option<&Figure>, log: bool) -> Text {
        let place = format!("{}.{key}", self.layer.place);
        if self.setup.is_unreadable(&place) {
            return Text::Unusable;
        }
        if let Some(figure) = pick(&self.layer.figures) {
            return self.at_temperature(figure, place, key, log, "given for the layer".to_owned());
        }
        let Some(LayerFluid::Own(name)) = &self.layer.fluid else { return Text::Nothing };
        let Some(fluid) = self.setup.fluids.get(name) else { return Text::Unusable };
        let place = format!("fluid.{name}.{key}");
        if self.setup.is_unreadable(&place) {
            return Text::Unusable;
        }
        let Some(figure) = pick(&fluid.figures) else { return Text::Nothing };
        let reach = if log { VISCOSITY_REACH } else { FIGURE_REACH };
        if let (Figure::Value(_), Some(at)) = (figure, &fluid.at)
            && (at.value - self.temperature).abs() > reach + 1e-9
        {
            let detail = format!(
                "it is stated for {}, the layer \"{}\" is at {}, and a single figure is used within {reach} K",
                crate::words::celsius(at.value),
                self.layer.name,
                crate::words::celsius(self.temperature),
            );
            self.troubles.push(Trouble::OutsideRange { place, figure: key, detail });
            return Text::Unusable;
        }
        let source = fluid.source.clone().unwrap_or_else(|| format!("[fluid.{name}]"));
        self.at_temperature(figure, place, key, log, source)
    }

    fn at_temperature(
        &mut self,
        figure: &Figure,
        place: String,
        key: &'static str,
        log: bool,
        source: String,
    ) -> Text {
        match figure {
            Figure::Value(given) => Text::Given(Sourced { value: given.value, source }),
            Figure::Table { points, .. } => match interpolate(points, self.temperature, log) {
                Some(value) => Text::Given(Sourced { value, source }),
                None => {
                    let ends = points.first().zip(points.last());
                    let detail = ends.map_or_else(
                        || "its table is empty".to_owned(),
                        |(first, last)| {
                            format!(
                                "its table runs from {} to {}, the layer \"{}\" is at {}",
                                crate::words::celsius(first.0),
                                crate::words::celsius(last.0),
                                self.layer.name,
                                crate::words::celsius(self.temperature),
                            )
                        },
                    );
                    self.troubles.push(Trouble::OutsideRange { place, figure: key, detail });
                    Text::Unusable
                }
            },
        }
    }

    fn built_in(
        &mut self,
        key: &'static str,
        property: fn(&Material, f64, f64) -> Result<Property, Unavailable>,
    ) -> Option<Sourced> {
        let Some(material) = self.material() else {
            if !matches!(self.layer.fluid, None | Some(LayerFluid::BuiltIn { .. })) {
                let place = match &self.layer.fluid {
                    Some(LayerFluid::Own(name)) => format!("fluid.{name}.{key}"),
                    _ => format!("{}.{key}", self.layer.place),
                };
                self.troubles.push(Trouble::FigureMissing { place, figure: key });
            }
            return None;
        };
        match property(&material, self.temperature, self.pressure) {
            Ok(found) => Some(Sourced { value: found.value, source: found.source.to_owned() }),
            Err(unavailable) => {
                self.note(unavailable, key);
                None
            }
        }
    }

    fn note(&mut self, unavailable: Unavailable, key: &'static str) {
        let place = self.layer.place.clone();
        let trouble = match unavailable {
            Unavailable::MissingMassFraction => {
                Trouble::FigureMissing { place: format!("{place}.mass-fraction"), figure: "mass-fraction" }
            }
            Unavailable::MissingGrade => {
                Trouble::FigureMissing { place: format!("{place}.grade"), figure: "grade" }
            }
            Unavailable::NotForThisFluid => {
                Trouble::FigureMissing { place: format!("{place}.{key}"), figure: key }
            }
            other => Trouble::OutsideRange { place, figure: key, detail: other.to_string() },
        };
        self.troubles.push(trouble);
    }

    /// Why the viscosity of the layer depends on how fast it is sheared, where it does.
    pub(super) fn shear_dependent(&self) -> Option<String> {
        let material = self.material().filter(|material| material.fluid == BuiltInFluid::SiliconeOil)?;
        let grade = material.grade.filter(|grade| *grade > NEWTONIAN_UP_TO)?;
        Some(format!(
            "a silicone oil of {} mm²/s: above {} mm²/s its long chains thin under shear",
            crate::words::number(grade * 1e6, 3),
            NEWTONIAN_UP_TO * 1e6
        ))
    }

    /// The built-in fluid of the layer. A silicone oil without a grade takes its own kinematic viscosity for one:
    /// density and tension hardly depend on it.
    fn material(&self) -> Option<Material> {
        let Some(LayerFluid::BuiltIn { fluid, mass_fraction, grade }) = &self.layer.fluid else {
            return None;
        };
        let value = |given: &Option<setup::resolved::Given<f64>>| given.as_ref().map(|given| given.value);
        let mut grade = value(grade);
        if grade.is_none() && *fluid == BuiltInFluid::SiliconeOil {
            grade = match &self.layer.figures.viscosity {
                Some(WrittenViscosity::Kinematic(Figure::Value(given))) => Some(given.value),
                Some(WrittenViscosity::Dynamic(Figure::Value(given))) => Some(given.value / 970.0),
                _ => None,
            };
        }
        Some(Material { fluid: *fluid, mass_fraction: value(mass_fraction), grade })
    }
}

fn written_viscosity(figures: &Figures) -> Option<&Figure> {
    match figures.viscosity.as_ref()? {
        WrittenViscosity::Dynamic(figure) | WrittenViscosity::Kinematic(figure) => Some(figure),
    }
}

/// Between the neighbouring points of an ascending table; `None` outside of it. `log`: ln(value) against 1/T, as
/// the viscosity of a liquid goes (Andrade); else linear.
pub(super) fn interpolate(points: &[(f64, f64)], temperature: f64, log: bool) -> Option<f64> {
    if let [only] = points {
        return (only.0 == temperature).then_some(only.1);
    }
    let (low, high) = points
        .iter()
        .zip(points.iter().skip(1))
        .find(|(low, high)| low.0 <= temperature && temperature <= high.0)?;
    if log && low.1 > 0.0 && high.1 > 0.0 {
        let share = (1.0 / temperature - 1.0 / low.0) / (1.0 / high.0 - 1.0 / low.0);
        Some((low.1.ln() + share * (high.1.ln() - low.1.ln())).exp())
    } else {
        let share = (temperature - low.0) / (high.0 - low.0);
        Some(low.1 + share * (high.1 - low.1))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn tables_are_interpolated_and_never_extrapolated() {
        let table = [(293.15, 0.520), (298.15, 0.380)];
        assert_eq!(interpolate(&table, 293.15, true), Some(0.520));
        let middle = interpolate(&table, 295.65, true).unwrap_or_default();
        // By hand: 1/T halves at the harmonic mean 295.629 K, where the value is √(0.520·0.380) = 0.444522; 0.021 K
        // above it d ln µ/dT = −ln(0.52/0.38)/5 K ≈ −0.0627 1/K takes off 0.13 %.
        assert!((middle - 0.4439).abs() < 2e-4, "{middle}");
        assert!(middle < interpolate(&table, 295.65, false).unwrap_or_default(), "log lies below the chord");
        assert_eq!(interpolate(&table, 298.16, true), None);
        assert_eq!(interpolate(&table, 293.14, false), None);
    }
}
