//! `[model]`, `[limits]`, `[tolerances]`, `[[accept]]`.

use super::{EXACT, Resolver};
use crate::declare::nearest;
use crate::resolved::{Accept, Given, NotLookedAt, Origin, ToleranceMeaning};
use crate::rules;
use crate::written::WrittenSection;
use quantity::vocabulary::Effect;

const EFFECTS: [(&str, Effect); 6] = [
    ("wall-drag", Effect::WallDrag),
    ("gas-heat-loss", Effect::GasHeatLoss),
    ("side-wall-friction", Effect::SideWallFriction),
    ("gas-layers", Effect::GasLayers),
    ("cushion-harmonics", Effect::CushionHarmonics),
    ("body-damping", Effect::BodyDamping),
];

impl Resolver<'_> {
    pub(super) fn model(&mut self) {
        let Some(section) = self.document.section("model") else { return };
        for (key, effect) in EFFECTS {
            if section.boolean(key) == Some(false) {
                let place = section.place_of(key);
                let off =
                    Given { value: effect, place, origin: Origin::Written, tolerance: None, digits: EXACT };
                self.setup.effects_off.push(off);
            }
        }
    }

    pub(super) fn limits(&mut self) {
        let section = self.document.section("limits");
        // An unreadable limit keeps the value of the type's own default, and its place is unreadable.
        if let Some(margin) = self.or_default(section, "limits", "limits", "hold-margin") {
            self.setup.limits.hold_margin = margin;
        }
        if let Some(margin) = self.or_default(section, "limits", "limits", "wave-margin") {
            self.setup.limits.wave_margin = margin;
        }
    }

    pub(super) fn tolerances(&mut self, text: &str) {
        let document = self.document;
        let meaning = document.section("tolerances").and_then(|section| section.text("meaning"));
        self.setup.tolerance_meaning = match meaning {
            Some("limits") => ToleranceMeaning::Limits,
            Some("k=2") => ToleranceMeaning::Expanded,
            _ => ToleranceMeaning::Standard,
        };
        let Some(place) = &document.first_tolerance else { return };
        let span = document.places.span(place);
        if meaning.is_none() && !self.lost("tolerances.meaning") {
            let key = crate::declare::section("tolerances").and_then(|section| section.key("meaning"));
            if let Some(key) = key {
                self.list_default("tolerances.meaning", key);
            }
            let finding = rules::tolerance_meaning_unsaid::finding(text, document, place, span.clone());
            self.findings.push(finding);
        }
        // Read and kept, but not carried through the computation: said once a file.
        const CHECK: &str = "what the tolerances do to the margins";
        self.findings.push(rules::not_looked_at::finding(CHECK, place, span, "The tolerance"));
        self.setup.not_looked_at.push(NotLookedAt {
            check: CHECK.to_owned(),
            needs: rules::not_looked_at::NEEDS.to_owned(),
            place: place.clone(),
        });
    }

    pub(super) fn accepts(&mut self) {
        let document = self.document;
        for section in document.sections("accept") {
            for key in ["finding", "reason", "by"] {
                self.missing_key(section, key);
            }
            let text = |key: &str| section.text(key).map(str::to_owned);
            // An `at` that cannot be read must not widen to the whole file.
            if self.lost(&section.place_of("at")) {
                continue;
            }
            let at = text("at").unwrap_or_default();
            self.place_named(section, &at);
            if let (Some(finding), Some(reason), Some(by)) = (text("finding"), text("reason"), text("by")) {
                self.setup.accepts.push(Accept {
                    finding,
                    at,
                    reason,
                    by,
                    until: text("until"),
                    place: section.place.clone(),
                });
            }
        }
    }

    /// The layer, fluid or body that a place names must exist.
    fn place_named(&mut self, section: &WrittenSection, at: &str) {
        let mut segments = at.split('.');
        let (Some(first), Some(name)) = (segments.next(), segments.next()) else { return };
        let home = if first == "interface" { "layer" } else { first };
        let document = self.document;
        if !matches!(home, "layer" | "fluid" | "body") || !document.knows_names(home) {
            return;
        }
        let known: Vec<&str> = document.sections(home).map(|section| section.name.as_str()).collect();
        let place = section.place_of("at");
        for part in name.split('|') {
            let bare = part.split('[').next().unwrap_or(part).trim();
            if known.contains(&bare) {
                continue;
            }
            let near = nearest::by_letters(bare, known.iter().copied());
            let span = section.span_of("at");
            let thing = format!("a {home}");
            let mut finding =
                rules::name_not_found::finding(&place, span.clone(), &thing, bare, &near, &known, None);
            finding = finding.with_fixes(near.names.iter().map(|near| {
                let new_text = crate::written::quoted(&at.replacen(bare, near, 1));
                rules::replace(format!("Use '{near}'"), false, span.clone(), new_text)
            }));
            self.findings.push(finding);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::rules::testing::EXAMPLE;

    #[test]
    fn effects_limits_and_accepts_are_taken() {
        let text = EXAMPLE.replace("gas-layers = true", "gas-layers = false").replace("\"15 %\"", "\"20 %\"");
        let setup = crate::understand(&text).setup;
        assert_eq!(setup.effects_off.len(), 1);
        assert_eq!(
            (setup.effects_off[0].value, setup.effects_off[0].place.as_str()),
            (Effect::GasLayers, "model.gas-layers")
        );
        assert!((setup.limits.hold_margin.value - 0.2).abs() < 1e-12);
        assert_eq!(setup.accepts.len(), 1);
        assert_eq!(setup.accepts[0].until.as_deref(), Some("2026-12-31"));
        assert_eq!(setup.tolerance_meaning, ToleranceMeaning::Limits);
    }

    #[test]
    fn the_declared_limits_are_those_of_the_type() {
        assert_eq!(crate::understand("").setup.limits, crate::resolved::Limits::default());
    }

    #[test]
    fn an_unreadable_place_does_not_accept_everywhere() {
        let setup = crate::understand(&EXAMPLE.replace("at = \"layer.oil\"", "at = 3")).setup;
        assert!(setup.accepts.is_empty());
    }
}
