//! The declarations themselves, one file per part of the setup.

mod body;
mod cell;
mod drive;
mod layer;
mod review;
mod rig;
mod top;

use super::key::{Attention, Form, Key, Section, Word};

/// Every section in the order of the guide.
pub(super) const ALL: &[&Section] = &[
    &top::ROOT,
    &top::RECORD,
    &top::AMBIENT,
    &cell::CELL,
    &cell::BASE,
    &cell::WALL,
    &cell::LID,
    &cell::FIXTURE,
    &drive::DRIVE,
    &layer::LAYER,
    &layer::INTERFACE,
    &layer::FLUID,
    &layer::TENSION,
    &top::MODEL,
    &body::BODY,
    &drive::INJECTION,
    &drive::STAGE,
    &rig::TABLE,
    &rig::IMAGING,
    &rig::CAMERA,
    &body::PENDULUM,
    &rig::PEOPLE,
    &rig::PROTECTION,
    &rig::SENSOR,
    &review::LIMITS,
    &review::TOLERANCES,
    &review::MEASURED,
    &review::ACCEPT,
];

const fn section(path: &'static str, form: Form, doc: &'static str, keys: &'static [Key]) -> Section {
    Section { path, form, doc, words: &[], attention: Attention::Looked, keys, free: false }
}

const fn words(section: Section, words: &'static [&'static str]) -> Section {
    Section { words, ..section }
}

const fn people(section: Section) -> Section {
    Section { attention: Attention::People, ..section }
}

const fn later(section: Section, check: &'static str) -> Section {
    Section { attention: Attention::NotLooked(check), ..section }
}

const fn word(word: &'static str, doc: &'static str) -> Word {
    Word { word, doc }
}
