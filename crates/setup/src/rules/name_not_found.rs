//! name-not-found
//!
//! A name that nothing in the file has.
//!
//! Why it matters: What it refers to is not known, so what depends on it is not judged.
//!
//! What to do: Use the name of something that is in the file, or add it.

use crate::declare::nearest::Near;
use crate::finding::{Finding, Span};
use crate::rules::{found, listed, replace};
use crate::written::quoted;

/// Most names that a message lists.
const MOST_SHOWN: usize = 8;

/// `thing`: what was looked for, with its article ('a layer'). `near`: names that may have been meant.
/// `value`: the value to replace; `None` when the name is only a part of it.
pub(crate) fn finding(
    place: &str,
    span: Span,
    thing: &str,
    name: &str,
    near: &Near,
    known: &[&str],
    value: Option<Span>,
) -> Finding {
    let what = format!("There is no '{name}' ({thing}).");
    let remedy = match (near.names.as_slice(), known) {
        ([], []) => String::new(),
        ([], known) => {
            let shown: Vec<String> = known.iter().take(MOST_SHOWN).map(|name| format!("'{name}'")).collect();
            let more = if known.len() > MOST_SHOWN { ", …" } else { "" };
            format!("There are: {}{more}.", shown.join(", "))
        }
        (near, _) => format!("Did you mean {}?", listed(near)),
    };
    let finding = found("name-not-found", place, span, what, &remedy);
    match value {
        Some(value) => finding.with_fixes(
            near.names
                .iter()
                .map(|name| replace(format!("Use '{name}'"), false, value.clone(), quoted(name))),
        ),
        None => finding,
    }
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_on_an_interface_of_an_unknown_layer_and_the_fix_clears_it() {
        let text = EXAMPLE.replace("between = [\"oil\"", "between = [\"oyl\"");
        only(&text, "name-not-found");
        mended(&text, "name-not-found");
    }

    #[test]
    fn fires_on_an_unknown_fluid_with_the_meant_one() {
        let text = EXAMPLE.replace("fluid = \"silicone oil\"", "fluid = \"silicon oil\"");
        only(&text, "name-not-found");
        mended(&text, "name-not-found");
    }

    #[test]
    fn fires_on_a_place_of_an_accept() {
        let text = EXAMPLE.replace("at = \"layer.oil\"", "at = \"layer.oli\"");
        let found = only(&text, "name-not-found");
        assert_eq!(found.place, "accept.0.at");
    }
}
