//! Places: the dotted path by names that findings, accepts and reports use, and where it stands in the text.
//!
//! | written | place |
//! | --- | --- |
//! | `title = …` | `title` |
//! | `[drive] frequency` | `drive.frequency` |
//! | `[[layer]] name = "oil"`, `thickness` | `layer.oil.thickness` |
//! | the second layer named `oil` | `layer.oil[2]` |
//! | a layer without a name, third from the top | `layer.layer 3` |
//! | `[[interface]] between = ["oil", "water"]` | `interface.oil|water` |
//! | `[fluid.mix]` | `fluid.mix` |
//! | the first `[[accept]]` | `accept.0` |

use crate::declare::{Key, Section};
use crate::finding::{Edit, Span};
use quantity::Quantity;
use std::collections::BTreeMap;

/// Where a place stands.
#[derive(Debug, Clone, PartialEq)]
pub struct Spot {
    /// The key; `None` for a section.
    pub key: Option<Span>,
    /// The value (a string with its quotes); `None` for a section.
    pub value: Option<Span>,
    /// The header of the section (an empty range at the start for the top level).
    pub header: Span,
    /// The whole statement with comment and line end; for a section its header.
    pub statement: Span,
    /// All that belongs to the place: for a section from its header to the next header.
    pub reach: Span,
    /// The quantity as written, where the value is one.
    pub quantity: Option<Quantity>,
    /// The declaration of the section.
    pub section: &'static Section,
    /// The declaration of the key; `None` for a section.
    pub declaration: Option<&'static Key>,
}

impl Spot {
    /// What a finding about this place underlines: the value, or the header.
    pub fn span(&self) -> Span {
        self.value.clone().unwrap_or_else(|| self.header.clone())
    }
}

/// Every place of one file.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Places {
    spots: BTreeMap<String, Spot>,
}

impl Places {
    pub(crate) fn insert(&mut self, place: String, spot: Spot) {
        self.spots.entry(place).or_insert(spot);
    }

    /// Where a place stands, if it is written.
    pub fn exact(&self, place: &str) -> Option<&Spot> {
        self.spots.get(place)
    }

    /// Where a place stands, or its nearest ancestor that is written: for a key the header of its section, for an
    /// interface that has no section of its own the first of its two layers. `None` when nothing of it is written.
    pub fn nearest(&self, place: &str) -> Option<&Spot> {
        let mut rest = place;
        loop {
            if let Some(spot) = self.spots.get(rest).or_else(|| self.pair(rest)) {
                return Some(spot);
            }
            rest = &rest[..rest.rfind('.')?];
        }
    }

    /// The bytes to underline for a place; `0..0` (the file as a whole) when nothing of it is written.
    pub fn span(&self, place: &str) -> Span {
        self.nearest(place).map(Spot::span).unwrap_or_default()
    }

    /// The innermost place at a byte offset: a key when the offset is on its key or value, else the section.
    /// Both ends belong to the place, so that a cursor behind the last character still finds it.
    pub fn at(&self, offset: usize) -> Option<&str> {
        let inside = |span: &Span| span.start <= offset && offset <= span.end;
        self.spots
            .iter()
            .filter(|(_, spot)| match (&spot.key, &spot.value) {
                (Some(key), Some(value)) => inside(key) || inside(value) || inside(&(key.start..value.end)),
                _ => inside(&spot.reach) && !spot.reach.is_empty(),
            })
            .min_by_key(|(_, spot)| (spot.key.is_none(), spot.reach.len()))
            .map(|(place, _)| place.as_str())
    }

    /// The quantity written at a place.
    pub fn quantity(&self, place: &str) -> Option<&Quantity> {
        self.spots.get(place)?.quantity.as_ref()
    }

    /// The edit that gives a place a new value in its own unit, amplitude word and style. `peak_si`: SI, peak, and
    /// for a pressure absolute with the ambient pressure it is counted from. `None` when no quantity is written
    /// there.
    pub fn rewritten(&self, place: &str, peak_si: f64, digits: u8, ambient_pressure: f64) -> Option<Edit> {
        let spot = self.spots.get(place)?;
        let quantity = spot.quantity.as_ref()?;
        let mut stated = peak_si;
        if let Some(amplitude) = quantity.amplitude {
            stated /= amplitude.to_peak();
        }
        if quantity.reference == Some(quantity::PressureReference::Gauge) {
            stated -= ambient_pressure;
        }
        let text = quantity.rewritten(stated, digits);
        Some(Edit { span: spot.value.clone()?, new_text: crate::written::quoted(&text) })
    }

    /// All places in the order of their names.
    pub fn iter(&self) -> impl Iterator<Item = (&str, &Spot)> {
        self.spots.iter().map(|(place, spot)| (place.as_str(), spot))
    }

    fn pair(&self, place: &str) -> Option<&Spot> {
        let (first, second) = place.strip_prefix("interface.")?.split_once('|')?;
        self.spots
            .get(&format!("interface.{second}|{first}"))
            .or_else(|| self.spots.get(&format!("layer.{first}")))
            .or_else(|| self.spots.get(&format!("layer.{second}")))
    }
}
