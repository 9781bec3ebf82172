//! Positions in lines and characters. Outside reference: the text buffer `ropey`, told to end lines as the Language
//! Server Protocol does (`\n`, `\r\n`, a lone `\r`).

use proptest::prelude::*;
use ropey::Rope;
use topheavy_setup::lines::{Encoding, LineIndex, Position};

const ENCODINGS: [Encoding; 3] = [Encoding::Utf8, Encoding::Utf16, Encoding::Utf32];

fn text() -> impl Strategy<Value = String> {
    let piece = prop_oneof![
        Just("\n"),
        Just("\r\n"),
        Just("\r"),
        Just("a"),
        Just("= \"12 mm\""),
        Just("é"),
        Just("°"),
        Just("𝛼"),
        Just("👩‍🔬"),
        Just("\u{2028}"),
        Just("\u{85}"),
        Just("\u{c}"),
        Just("\u{feff}"),
    ];
    proptest::collection::vec(piece, 0..24).prop_map(|pieces| pieces.concat())
}

/// Units of an encoding in the first `bytes` of a line, by the buffer.
fn units(rope: &Rope, line: usize, byte: usize, encoding: Encoding) -> usize {
    let (from, to) = (rope.line_to_char(line), rope.byte_to_char(byte));
    match encoding {
        Encoding::Utf8 => byte - rope.char_to_byte(from),
        Encoding::Utf16 => rope.char_to_utf16_cu(to) - rope.char_to_utf16_cu(from),
        Encoding::Utf32 => to - from,
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(2000))]

    #[test]
    fn positions_are_those_of_a_text_buffer(text in text()) {
        let rope = Rope::from_str(&text);
        let index = LineIndex::new(&text);
        prop_assert_eq!(index.len(), rope.len_lines());
        for byte in (0..=text.len()).filter(|byte| text.is_char_boundary(*byte)) {
            let line = rope.char_to_line(rope.byte_to_char(byte));
            for encoding in ENCODINGS {
                let position = index.position(&text, byte, encoding);
                let expected = (line, units(&rope, line, byte, encoding));
                prop_assert_eq!((position.line as usize, position.character as usize), expected);
                // Back again; what lies behind the end of a line, inside `\r\n`, is pulled to the end of the line.
                let end = index.line(&text, position.line).end;
                prop_assert_eq!(index.offset(&text, position, encoding), byte.min(end));
            }
        }
    }

    /// Whatever a client sends: an offset in the text, at a character, on the line that was asked for.
    #[test]
    fn any_position_leads_into_the_text(text in text(), line in 0u32..30, character in any::<u32>(), small in 0u32..30) {
        let index = LineIndex::new(&text);
        for encoding in ENCODINGS {
            for character in [character, small] {
                let offset = index.offset(&text, Position { line, character }, encoding);
                prop_assert!(text.is_char_boundary(offset));
                if (line as usize) < index.len() {
                    let back = index.position(&text, offset, encoding);
                    prop_assert_eq!(back.line, line);
                    prop_assert!(back.character <= character);
                } else {
                    prop_assert_eq!(offset, text.len());
                }
            }
        }
    }

    /// Offsets inside a character and past the end are pulled in.
    #[test]
    fn any_offset_has_a_position(text in text(), offset in 0usize..200) {
        let index = LineIndex::new(&text);
        let within = (0..=offset.min(text.len())).rev().find(|at| text.is_char_boundary(*at)).unwrap_or(0);
        for encoding in ENCODINGS {
            prop_assert_eq!(index.position(&text, offset, encoding), index.position(&text, within, encoding));
        }
    }
}
