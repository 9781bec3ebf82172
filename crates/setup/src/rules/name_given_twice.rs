//! name-given-twice
//!
//! Two things of one kind with the same name.
//!
//! Why it matters: Whatever is said about that name — a tension, a stage, a finding — may be about either of them.
//!
//! What to do: Give each its own name.
//!
//! Names are compared after trimming and folding spaces; case counts.

use crate::declare::Section;
use crate::finding::{Finding, Related, Span};

/// The second of two equal names. `first`: the header of the first.
pub(crate) fn finding(
    section: &Section,
    name: &str,
    place: &str,
    span: Span,
    first: Option<Span>,
) -> Finding {
    let what = format!("There are two {} named '{name}'.", plural(section.path));
    let mut finding = super::found("name-given-twice", place, span, what, "");
    finding.related.extend(first.map(|span| Related { span, message: "The first one.".to_owned() }));
    finding
}

/// An own fluid that has the name of one of the tool's.
pub(crate) fn built_in(name: &str, place: &str, span: Span) -> Finding {
    let what = format!("`fluid.{name}` has the name of one of the tool's own fluids.");
    super::found(
        "name-given-twice",
        place,
        span,
        what,
        "Give it another name, and use that one in the layers.",
    )
}

fn plural(path: &str) -> String {
    match path {
        "body" => "bodies".to_owned(),
        other => format!("{other}s"),
    }
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_on_two_layers_of_one_name() {
        let text = EXAMPLE
            .replace("name = \"air\"", "name = \" oil\"")
            .replace("\"oil\", \"air\"", "\"oil\", \"oil\"");
        assert!(rules(&text).contains(&"name-given-twice"), "{:?}", rules(&text));
    }

    #[test]
    fn case_makes_another_name() {
        assert!(!rules(&EXAMPLE.replace("name = \"air\"", "name = \"Oil\"")).contains(&"name-given-twice"));
    }

    #[test]
    fn a_built_in_name_is_taken() {
        let text = format!("{EXAMPLE}\n[fluid.water]\nphase = \"liquid\"\n");
        only(&text, "name-given-twice");
    }
}
