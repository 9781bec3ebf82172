//! Names in sections that are not looked at: they lead somewhere or they do not, whatever is computed.

use super::Resolver;
use crate::declare::{Holds, NameOf, nearest, referred};
use crate::rules;

impl Resolver<'_> {
    pub(super) fn references(&mut self) {
        let document = self.document;
        for section in &document.sections {
            for entry in &section.entries {
                let Holds::Reference(of) = entry.key.holds else { continue };
                let (Some(path), Some(name)) = (home(of), section.text(entry.key.name)) else { continue };
                let in_library = matches!(of, NameOf::VibrationTable | NameOf::Camera | NameOf::Body);
                let known: Vec<&str> = document.sections(path).map(|section| section.name.as_str()).collect();
                if known.contains(&name) || !document.knows_names(path) || in_library && self.uses_libraries()
                {
                    continue;
                }
                let near = nearest::by_letters(name, known.iter().copied());
                let span = entry.span.clone();
                let finding = rules::name_not_found::finding(
                    &entry.place,
                    span.clone(),
                    referred(of),
                    name,
                    &near,
                    &known,
                    Some(span),
                );
                self.findings.push(finding);
            }
        }
    }

    /// Whether library files may hold what this file does not; they are not read.
    pub(super) fn uses_libraries(&self) -> bool {
        self.document.section("").is_some_and(|root| root.entry("use").is_some())
    }
}

/// The section that things of this kind stand in; fluids are looked up with their layer, libraries not at all.
fn home(of: NameOf) -> Option<&'static str> {
    match of {
        NameOf::Layer => Some("layer"),
        NameOf::Body => Some("body"),
        NameOf::VibrationTable => Some("table"),
        NameOf::Camera => Some("camera"),
        NameOf::Stage => Some("stage"),
        NameOf::Fluid | NameOf::Library => None,
    }
}
