//! line-unreadable
//!
//! A line that is no statement of the file's language (TOML): its value is lost.
//!
//! Why it matters: What the line would have set is not known, so nothing that depends on it is judged; the rest of the file is.
//!
//! What to do: Write the line as `key = value`, with text and quantities in quotes, or as a `[header]`.

use crate::finding::{Finding, Related};
use crate::tree::Slip;

/// The finding of a broken statement.
pub(crate) fn finding(text: &str, slip: &Slip, place: &str) -> Finding {
    let span = if slip.span.end <= text.len() { slip.span.clone() } else { slip.statement.clone() };
    let mut finding = super::found("line-unreadable", place, span, super::sentence(&slip.message), "");
    if let Some(related) = &slip.related {
        finding.related.push(Related { span: related.clone(), message: "Involved in it.".to_owned() });
    }
    if let Some((title, new_text)) = &slip.mend {
        finding =
            finding.with_fix(super::replace(title.clone(), true, slip.statement.clone(), new_text.clone()));
    }
    finding
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_on_a_line_without_a_value_and_nothing_else_complains() {
        let found = only(&EXAMPLE.replace("thickness = \"20 mm\"", "thickness = "), "line-unreadable");
        assert!(!found.message.what.is_empty());
    }

    #[test]
    fn a_broken_drive_is_not_no_drive() {
        for broken in ["frequency = 50 Hz\"", "frequency = ", "= \"50 Hz\"", "frequency \"50 Hz\""] {
            let text = EXAMPLE.replace("frequency = \"50 Hz\"", broken);
            let read = crate::understand(&text);
            assert!(
                read.setup.drive.is_none() && read.setup.drive_unreadable,
                "{broken}: {:?}",
                read.setup.drive
            );
            only(&text, "line-unreadable");
        }
        let text = EXAMPLE.replace("[drive]", "[drive");
        assert!(crate::understand(&text).setup.drive_unreadable);
        only(&text, "line-unreadable");
    }

    #[test]
    fn silent_on_the_example() {
        silent(EXAMPLE);
    }
}
