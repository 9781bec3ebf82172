//! key-under-wrong-heading
//!
//! A key that belongs to another section, most often a top-level key typed below a header.
//!
//! Why it matters: In this language a key belongs to the last header above it; here it would be ignored in silence.
//!
//! What to do: Move the line to where it belongs: top-level keys stand before the first header.

use crate::declare::{Form, Section};
use crate::finding::{Edit, Finding, Fix};
use crate::written::Misplaced;

/// A key with the sections it may belong to. `edits` move the line, when there is just one place for it.
pub(crate) fn finding(misplaced: &Misplaced, edits: Option<Vec<Edit>>) -> Finding {
    let homes: Vec<String> = misplaced.homes.iter().take(3).map(|home| said(home)).collect();
    let what = format!("`{}` does not belong here but to {}.", misplaced.key, homes.join(" or "));
    let finding =
        super::found("key-under-wrong-heading", &misplaced.place, misplaced.key_span.clone(), what, "");
    match edits {
        Some(edits) => finding.with_fix(Fix {
            title: format!("Move the line to {}", homes.first().map_or("its section", String::as_str)),
            keeps_meaning: true,
            edits,
        }),
        None => finding,
    }
}

fn said(home: &Section) -> String {
    match home.form {
        Form::Root => home.header(),
        _ => format!("`{}`", home.header()),
    }
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn a_title_below_a_header_moves_up_with_its_comment() {
        let text = EXAMPLE
            .replace("title = \"Example\"\n", "")
            .replace("[cell]\n", "[cell]\ntitle = \"Example\" # keep me\n");
        only(&text, "key-under-wrong-heading");
        let mended = mended(&text, "key-under-wrong-heading");
        let title = mended.find("title = \"Example\" # keep me\n").expect("moved whole");
        assert!(title < mended.find('[').expect("a header"), "above the first header:\n{mended}");
    }

    #[test]
    fn a_frequency_in_a_layer_moves_to_the_drive() {
        let text = EXAMPLE
            .replace("frequency = \"50 Hz\"\n", "")
            .replace("name = \"oil\"\n", "name = \"oil\"\nfrequency = \"50 Hz\"\n");
        only(&text, "key-under-wrong-heading");
        let mended = mended(&text, "key-under-wrong-heading");
        assert!(crate::understand(&mended).setup.drive.is_some());
    }

    #[test]
    fn line_ends_stay_as_they_are() {
        let text = EXAMPLE
            .replace("title = \"Example\"\n", "")
            .replace("[cell]\n", "[cell]\ntitle = \"Example\"\n")
            .replace('\n', "\r\n");
        let mended = mended(&text, "key-under-wrong-heading");
        assert_eq!(mended.matches('\n').count(), mended.matches("\r\n").count());
    }

    #[test]
    fn no_move_out_of_an_inline_table() {
        let text = "model = { wall-drag = true, title = \"Example\" }\n";
        assert!(first(text, "key-under-wrong-heading").fixes.is_empty());
    }

    #[test]
    fn no_move_onto_a_key_that_is_there() {
        let text = EXAMPLE.replace("[cell]\n", "[cell]\nfrequency = \"60 Hz\"\n");
        assert!(only(&text, "key-under-wrong-heading").fixes.is_empty());
    }
}
