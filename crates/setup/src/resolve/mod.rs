//! From as-written values to the resolved setup: SI, peak, absolute pressures, defaults filled in and listed.
//!
//! What is missing is said once, at the place where it is missing; what is there but unreadable was said already.

mod ambient;
mod cell;
mod drive;
mod fluid;
mod layer;
mod names;
mod review;

use crate::declare::{self, Attention, Key, Need};
use crate::finding::{Finding, Span};
use crate::resolved::{DefaultInForce, Given, Origin, Setup};
use crate::rules;
use crate::written::{Document, WrittenSection};
use quantity::{PressureReference, Quantity};

/// Significant digits of a default: it is exact.
const EXACT: u8 = 17;

/// Resolves a document; what is wrong joins its findings.
pub(crate) fn resolve(text: &str, document: &Document) -> (Setup, Vec<Finding>) {
    let mut resolver = Resolver { document, setup: Setup::default(), findings: Vec::new() };
    resolver.title();
    resolver.ambient();
    resolver.cell();
    resolver.drive();
    resolver.fluids();
    resolver.layers();
    resolver.interfaces();
    resolver.model();
    resolver.limits();
    resolver.tolerances(text);
    resolver.accepts();
    resolver.references();
    resolver.finish()
}

struct Resolver<'a> {
    document: &'a Document,
    setup: Setup,
    findings: Vec<Finding>,
}

impl Resolver<'_> {
    fn title(&mut self) {
        self.setup.title = self.document.section("").and_then(|root| root.text("title")).map(str::to_owned);
    }

    fn finish(mut self) -> (Setup, Vec<Finding>) {
        self.setup.not_looked_at.extend(self.document.not_looked_at.iter().cloned());
        self.setup.open_values = self.document.open_values.clone();
        let looked = |place: &&String| {
            declare::declared(place).is_none_or(|(section, key)| {
                section.attention == Attention::Looked
                    && key.is_none_or(|key| matches!(key.attention, Attention::Looked))
            })
        };
        let lost = self.document.unreadable.iter().filter(looked).cloned();
        self.setup.unreadable_places.extend(lost);
        self.setup.unreadable_places.sort();
        self.setup.unreadable_places.dedup();
        (self.setup, self.findings)
    }

    /// Whether a value is written but unreadable; nobody then says that it is missing.
    fn lost(&self, place: &str) -> bool {
        self.document.is_lost(place) || self.setup.is_unreadable(place)
    }

    /// A value is there, but what is found about it keeps it from being used.
    fn lose(&mut self, place: &str) {
        self.setup.unreadable_places.push(place.to_owned());
    }

    /// The value of a key as written: SI, peak, absolute.
    fn written(&self, section: &WrittenSection, key: &str) -> Option<Given<f64>> {
        let quantity = section.quantity(key)?;
        Some(given(quantity, section.place_of(key), self.ambient_pressure()))
    }

    /// The values of a key that holds one or several; empty where it is not written or not readable.
    fn written_several(&self, section: &WrittenSection, key: &str) -> Vec<Given<f64>> {
        let several = section.quantities(key).iter();
        several.map(|quantity| given(quantity, section.place_of(key), self.ambient_pressure())).collect()
    }

    /// The value of a key as written, or its declared default, which is then listed.
    fn or_default(
        &mut self,
        section: Option<&WrittenSection>,
        path: &str,
        place: &str,
        key: &str,
    ) -> Option<Given<f64>> {
        if let Some(value) = section.and_then(|section| self.written(section, key)) {
            return Some(value);
        }
        let place = crate::written::join(place, key);
        if self.lost(&place) {
            return None;
        }
        let declared = declare::section(path)?.key(key)?;
        let (value, source) = default_of(declared)?;
        self.list_default(&place, declared);
        Some(Given { value, place, origin: Origin::Default(source), tolerance: None, digits: EXACT })
    }

    /// The flag of a key as written, or its default: `word` is the word (or `true`) that means `true`.
    fn flag(&mut self, section: &WrittenSection, key: &str, word: &str) -> Given<bool> {
        let place = section.place_of(key);
        let written = section.boolean(key).or_else(|| section.text(key).map(|text| text == word));
        if let Some(value) = written {
            return Given { value, place, origin: Origin::Written, tolerance: None, digits: EXACT };
        }
        let declared = section.declaration.key(key);
        let (default, source) = match declared.map(|key| key.need) {
            Some(Need::Default { value, source }) => (value, source),
            _ => ("", "none"),
        };
        if let Some(declared) = declared.filter(|_| !self.lost(&place)) {
            self.list_default(&place, declared);
        }
        Given {
            value: default == word,
            place,
            origin: Origin::Default(source),
            tolerance: None,
            digits: EXACT,
        }
    }

    /// Lists the declared default of a key that is not written.
    fn list_declared_default(&mut self, section: &WrittenSection, key: &str) {
        if let Some(declared) = section.declaration.key(key) {
            self.list_default(&section.place_of(key), declared);
        }
    }

    fn list_default(&mut self, place: &str, key: &Key) {
        if let Need::Default { value, source } = key.need {
            self.setup.defaults.push(DefaultInForce {
                place: place.to_owned(),
                value: value.to_owned(),
                source: source.to_owned(),
            });
        }
    }

    /// Says that a value is missing, unless it is there but unreadable.
    fn missing(&mut self, place: &str, header: Span, what: &str, remedy: &str) {
        if !self.lost(place) {
            self.findings.push(rules::value_missing::finding(place, header, what, remedy));
        }
    }

    /// Says that a declared key of a section is missing, with its example.
    fn missing_key(&mut self, section: &WrittenSection, key: &str) {
        if section.entry(key).is_some() {
            return;
        }
        let example = section.declaration.key(key).map_or("…", |key| key.example);
        let whose = if section.name.is_empty() || section.name.parse::<usize>().is_ok() {
            format!("`{}`", section.declaration.path)
        } else {
            format!("{} '{}'", section.declaration.path, section.name)
        };
        self.missing(
            &section.place_of(key),
            section.header.clone(),
            &format!("{} has no `{key}`.", rules::capitalised(&whose)),
            &format!("Write for example `{key} = {example}`."),
        );
    }

    /// Pa; the standard atmosphere while it is not known.
    fn ambient_pressure(&self) -> f64 {
        self.setup.ambient.pressure.as_ref().map_or(ambient::STANDARD_PRESSURE, |pressure| pressure.value)
    }
}

/// A quantity as a value of the setup.
fn given(quantity: &Quantity, place: String, ambient_pressure: f64) -> Given<f64> {
    let to_peak = quantity.amplitude.map_or(1.0, |amplitude| amplitude.to_peak());
    let gauge = quantity.reference == Some(PressureReference::Gauge);
    Given {
        value: quantity.value * to_peak + if gauge { ambient_pressure } else { 0.0 },
        place,
        origin: Origin::Written,
        tolerance: quantity.tolerance.as_ref().map(|tolerance| tolerance.half_width * to_peak),
        digits: quantity.digits,
    }
}

/// The declared default of a quantity in SI, with its source.
fn default_of(key: &Key) -> Option<(f64, &'static str)> {
    let Need::Default { value, source } = key.need else { return None };
    let quantity = quantity::parse(value, declare::kind(&key.holds)?).ok()?;
    Some((quantity.value, source))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::declare::Holds;

    #[test]
    fn every_declared_default_of_a_quantity_can_be_read() {
        for section in declare::declarations() {
            for key in section.keys {
                let quantity = matches!(key.holds, Holds::Quantity(..));
                // The height of a cell is the sum of its layers: that is for the physics.
                let derived = section.path == "cell" && key.name == "height";
                if quantity && !derived && matches!(key.need, Need::Default { .. }) {
                    assert!(default_of(key).is_some(), "{}.{}", section.path, key.name);
                }
            }
        }
    }
}
