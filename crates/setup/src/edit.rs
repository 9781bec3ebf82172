//! Edits applied to a text, byte for byte: what no edit touches stays as it is.

use crate::finding::Edit;

/// Two edits that touch the same bytes, or one that lies outside the text or inside a character.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Misfit {
    /// The edit that does not fit.
    pub edit: Edit,
}

/// The text with all edits made, in any order; edits at the same empty place are made in the order given.
///
/// # Errors
/// [`Misfit`]; nothing is changed then.
pub fn apply(text: &str, edits: &[Edit]) -> Result<String, Misfit> {
    let mut order: Vec<&Edit> = edits.iter().collect();
    order.sort_by_key(|edit| (edit.span.start, edit.span.end));
    let mut out = String::with_capacity(text.len() + 64);
    let mut done = 0;
    for edit in order {
        let kept =
            text.get(done..edit.span.start).filter(|_| text.is_char_boundary(edit.span.end.min(text.len())));
        let (Some(kept), true) = (kept, edit.span.start <= edit.span.end && edit.span.end <= text.len())
        else {
            return Err(Misfit { edit: edit.clone() });
        };
        out += kept;
        out += &edit.new_text;
        done = edit.span.end;
    }
    out += &text[done..];
    Ok(out)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn edit(span: std::ops::Range<usize>, new_text: &str) -> Edit {
        Edit { span, new_text: new_text.to_owned() }
    }

    #[test]
    fn edits_are_made_in_any_order_and_the_rest_stays() {
        let text = "\u{feff}a = 1 # x\r\nb = 2.50e-6\r\n";
        let two = text.find("2.50").unwrap();
        let made = apply(text, &[edit(two..two + 7, "3"), edit(3..4, "aa")]).unwrap();
        assert_eq!(made, "\u{feff}aa = 1 # x\r\nb = 3\r\n");
    }

    #[test]
    fn overlaps_and_places_outside_are_refused() {
        assert!(apply("abc", &[edit(0..2, ""), edit(1..3, "")]).is_err());
        assert!(apply("abc", &[edit(2..9, "")]).is_err());
        assert!(apply("é", &[edit(1..2, "")]).is_err());
        assert_eq!(apply("abc", &[edit(1..1, "x"), edit(1..1, "y")]).unwrap(), "axybc");
    }
}
