//! Near misses: what a person meant by a name that is not known. By meaning first (the words of each declaration),
//! then by letters.

use super::key::{Form, Key, Section};

/// Names that may have been meant, best first.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Near<'a> {
    /// The names.
    pub names: Vec<&'a str>,
    /// `true` when the first is the only sensible one.
    pub clear: bool,
}

/// Least similarity (normalised Damerau–Levenshtein) of two names that may be a slip of each other. Judgement: one
/// slip in three letters, two in five.
const SIMILAR: f64 = 0.6;
/// The first is clear when the second is this much less similar.
const LEAD: f64 = 0.1;

/// The key of a section that was meant by a name it does not have. A key that is `taken` already is meant only when
/// no other is.
pub fn key(section: &[Key], typed: &str, taken: impl Fn(&str) -> bool) -> Near<'static> {
    let typed = normal(typed);
    if let Some(key) = section.iter().find(|key| key.name == typed) {
        return Near { names: vec![key.name], clear: true };
    }
    let meant = |key: &&Key| key.words.contains(&typed.as_str());
    let mut names: Vec<&str> = section.iter().filter(meant).map(|key| key.name).collect();
    if names.is_empty() {
        return by_letters(&typed, section.iter().map(|key| key.name));
    }
    if !names.iter().all(|name| taken(name)) {
        names.retain(|name| !taken(name));
    }
    let clear = names.len() == 1;
    Near { names, clear }
}

/// The header that was meant by one that is not known.
pub fn header(sections: &[&'static Section], typed: &str) -> Near<'static> {
    let typed = normal(typed);
    let named = |section: &&&'static Section| section.form != Form::Root;
    let last = |section: &'static Section| section.path.rsplit('.').next().unwrap_or(section.path);
    if let Some(section) = sections.iter().filter(named).find(|section| last(section) == typed) {
        return Near { names: vec![section.path], clear: true };
    }
    let meant: Vec<&str> = sections
        .iter()
        .filter(named)
        .filter(|section| section.words.contains(&typed.as_str()))
        .map(|section| section.path)
        .collect();
    if !meant.is_empty() {
        let clear = meant.len() == 1;
        return Near { names: meant, clear };
    }
    by_letters(&typed, sections.iter().filter(named).map(|section| section.path))
}

/// The names that look like a name, best first.
pub fn by_letters<'a>(typed: &str, known: impl IntoIterator<Item = &'a str>) -> Near<'a> {
    let typed = typed.to_lowercase();
    let mut ranked: Vec<(f64, &str)> = known
        .into_iter()
        .map(|name| (strsim::normalized_damerau_levenshtein(&typed, &name.to_lowercase()), name))
        .filter(|(similarity, _)| *similarity >= SIMILAR)
        .collect();
    ranked.sort_by(|a, b| b.0.total_cmp(&a.0).then_with(|| a.1.cmp(b.1)));
    ranked.dedup_by(|a, b| a.1 == b.1);
    let clear = match ranked.as_slice() {
        [] => false,
        [_] => true,
        [first, second, ..] => first.0 - second.0 >= LEAD,
    };
    Near { names: ranked.into_iter().take(3).map(|(_, name)| name).collect(), clear }
}

fn normal(typed: &str) -> String {
    typed.trim().to_lowercase().replace([' ', '_'], "-")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::declare::section;

    fn meant(path: &str, typed: &str) -> Near<'static> {
        key(section(path).unwrap().keys, typed, |_| false)
    }

    #[test]
    fn meaning_comes_before_letters() {
        for (path, typed, name) in [
            ("layer", "depth", "thickness"),
            ("layer", "height", "thickness"),
            ("layer", "material", "fluid"),
            ("layer", "liquid", "fluid"),
            ("layer", "temp", "temperature"),
            ("cell", "dia", "diameter"),
            ("cell", "bore", "diameter"),
            ("drive", "freq", "frequency"),
            ("drive", "accel", "acceleration"),
            ("layer", "Surface_Tension", "surface-tension"),
            ("layer", "thicknes", "thickness"),
            ("layer", "thikcness", "thickness"),
        ] {
            let near = meant(path, typed);
            assert_eq!(near.names.first(), Some(&name), "{typed} in {path}: {near:?}");
            assert!(near.clear, "{typed} in {path}");
        }
    }

    #[test]
    fn amplitude_may_mean_two_keys_of_the_drive() {
        let near = meant("drive", "amplitude");
        assert_eq!(near.names, ["acceleration", "displacement"]);
        assert!(!near.clear, "an amplitude may be of acceleration or of displacement");
    }

    #[test]
    fn a_key_that_is_there_is_not_meant_again() {
        let keys = section("drive").unwrap().keys;
        let near = key(keys, "amplitude", |name| name == "acceleration");
        assert_eq!(near, Near { names: vec!["displacement"], clear: true });
    }

    #[test]
    fn a_floater_is_a_body() {
        assert_eq!(header(crate::declare::declarations(), "float").names, ["body"]);
    }

    #[test]
    fn nonsense_is_near_nothing() {
        assert_eq!(meant("drive", "zzzzqqq"), Near::default());
    }
}
