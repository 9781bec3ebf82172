//! What a rule reads, and how it makes a finding.

use super::RULES;
use crate::derived::{Cushion, Derived, Face, Outcome, Slab, Stability};
use setup::Places;
use setup::finding::{Finding, Message, Related, Severity, Span};
use setup::resolved::{DriveKey, Setup};

/// Everything a rule may read.
pub(crate) struct Context<'a> {
    pub setup: &'a Setup,
    places: &'a Places,
    /// Findings about the text.
    pub said: &'a [Finding],
    pub outcome: &'a Outcome,
    /// The same setup with every effect on, where the file switches some off.
    pub complete: Option<&'a Outcome>,
}

impl<'a> Context<'a> {
    pub(crate) fn new(
        setup: &'a Setup,
        places: &'a Places,
        said: &'a [Finding],
        outcome: &'a Outcome,
        complete: Option<&'a Outcome>,
    ) -> Context<'a> {
        Context { setup, places, said, outcome, complete }
    }

    pub(crate) fn derived(&self) -> &'a Derived {
        &self.outcome.derived
    }

    /// The bytes of a place or of its nearest ancestor that is written.
    pub(crate) fn span(&self, place: &str) -> Span {
        self.places.span(place)
    }

    /// The name of a layer where it is written, else its header.
    pub(crate) fn layer_span(&self, name: &str) -> Span {
        self.span(&format!("{}.name", self.layer_place(name)))
    }

    /// The place of a layer by its name.
    pub(crate) fn layer_place(&self, name: &str) -> String {
        let layer = self.setup.layers.iter().find(|layer| layer.name == name);
        layer.map_or_else(|| format!("layer.{name}"), |layer| layer.place.clone())
    }

    /// An interface shows at its own section, else at the layer below it, which the file has right there.
    pub(crate) fn face_span(&self, face: &Face) -> Span {
        let own = match (&face.above, &face.below) {
            (Some(above), Some(below)) => self
                .places
                .exact(&format!("interface.{above}|{below}"))
                .or_else(|| self.places.exact(&format!("interface.{below}|{above}"))),
            _ => None,
        };
        let beside = face.below.as_ref().or(face.above.as_ref());
        match (own, beside) {
            (Some(own), _) => own.span(),
            (None, Some(layer)) => self.layer_span(layer),
            (None, None) => 0..0,
        }
    }

    /// Where the set value of the drive stands.
    pub(crate) fn drive_place(&self) -> String {
        let key = match self.setup.drive.as_ref().map(|drive| drive.set_by) {
            Some(DriveKey::Acceleration) => "drive.acceleration",
            Some(DriveKey::Velocity) => "drive.velocity",
            Some(DriveKey::Displacement) => "drive.displacement",
            None => "drive",
        };
        key.to_owned()
    }

    /// A related line at a place.
    pub(crate) fn related(&self, place: &str, message: String) -> Related {
        Related { span: self.span(place), message }
    }

    /// The drive as a related line; none when there is no drive.
    pub(crate) fn related_drive(&self) -> Option<Related> {
        let drive = self.derived().drive?;
        let message = format!(
            "The drive: {} at {}.",
            crate::words::acceleration(drive.acceleration),
            crate::words::hertz(drive.frequency)
        );
        Some(self.related(&self.drive_place(), message))
    }

    /// Slabs that are judged, with their results.
    pub(crate) fn judged(&self) -> impl Iterator<Item = (&'a Slab, &'a Stability)> {
        self.derived().slabs.iter().filter_map(|slab| Some((slab, slab.stability.as_ref()?)))
    }

    /// The cushion that the motion of a slab goes through: the one right below, else right above.
    pub(crate) fn cushion_of(&self, slab: &Slab) -> Option<&'a Cushion> {
        let at = |index: usize| self.derived().cushions.iter().find(|cushion| cushion.index == index);
        at(slab.range.end).or_else(|| at(slab.range.start.checked_sub(1)?))
    }
}

/// A finding of a rule of this crate with the rule's own severity; an empty `remedy` takes that of its page.
pub(super) fn found(rule: &'static str, place: &str, span: Span, what: String, remedy: String) -> Finding {
    let info = RULES.iter().map(|rule| rule.info).chain(setup::RULES.iter().copied()).find(|i| i.id == rule);
    let why = info.map(|info| info.why()).unwrap_or_default();
    let remedy = if remedy.is_empty() { info.map(|info| info.remedy()).unwrap_or_default() } else { remedy };
    Finding {
        rule,
        severity: info.map_or(Severity::Error, |info| info.severity),
        place: place.to_owned(),
        span,
        message: Message { what, why, remedy },
        values: Vec::new(),
        related: Vec::new(),
        fixes: Vec::new(),
        fixable: false,
        accepted: false,
    }
}
