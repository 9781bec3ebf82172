//! Lines and characters of a text, as editors and outputs count them.
//!
//! Lines end at `\n`, `\r\n` and a lone `\r` (Language Server Protocol 3.17, text documents); lines and characters
//! count from 0; what lies outside is pulled in.

/// In which units the characters of a line are counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Encoding {
    /// Bytes.
    Utf8,
    /// Two-byte units.
    Utf16,
    /// Code points.
    Utf32,
}

/// A place in a text.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Position {
    /// From 0.
    pub line: u32,
    /// From 0, in the units of the encoding.
    pub character: u32,
}

/// Where the lines of a text start.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct LineIndex {
    starts: Vec<usize>,
}

impl Encoding {
    fn width(self, c: char) -> usize {
        match self {
            Encoding::Utf8 => c.len_utf8(),
            Encoding::Utf16 => c.len_utf16(),
            Encoding::Utf32 => 1,
        }
    }
}

impl LineIndex {
    /// The lines of a text.
    pub fn new(text: &str) -> LineIndex {
        let bytes = text.as_bytes();
        let mut starts = vec![0];
        for (i, byte) in bytes.iter().enumerate() {
            match byte {
                b'\n' => starts.push(i + 1),
                b'\r' if bytes.get(i + 1) != Some(&b'\n') => starts.push(i + 1),
                _ => {}
            }
        }
        LineIndex { starts }
    }

    /// Number of lines (at least one).
    pub fn len(&self) -> usize {
        self.starts.len()
    }

    /// Never: a text has a line.
    pub fn is_empty(&self) -> bool {
        false
    }

    /// The bytes of a line without its end.
    pub fn line(&self, text: &str, line: u32) -> std::ops::Range<usize> {
        let line = (line as usize).min(self.starts.len() - 1);
        let start = self.starts[line];
        let next = self.starts.get(line + 1).copied().unwrap_or(text.len());
        start..start + text[start..next].trim_end_matches(['\n', '\r']).len()
    }

    /// The position of a byte offset of the same text; an offset inside a character counts as its start, one past
    /// the end as the end.
    pub fn position(&self, text: &str, offset: usize, encoding: Encoding) -> Position {
        let mut offset = offset.min(text.len());
        while !text.is_char_boundary(offset) {
            offset -= 1;
        }
        let line = self.starts.partition_point(|start| *start <= offset) - 1;
        let character = text[self.starts[line]..offset].chars().map(|c| encoding.width(c)).sum::<usize>();
        Position { line: line as u32, character: character as u32 }
    }

    /// The byte offset of a position; one past the end of its line is the end of the line (before its line end), a
    /// line past the last is the end of the text, a position inside a character its start.
    pub fn offset(&self, text: &str, position: Position, encoding: Encoding) -> usize {
        if position.line as usize >= self.starts.len() {
            return text.len();
        }
        let line = self.line(text, position.line);
        let mut left = position.character as usize;
        for (i, c) in text[line.clone()].char_indices() {
            let width = encoding.width(c);
            if left < width {
                return line.start + i;
            }
            left -= width;
        }
        line.end
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn line_ends_of_every_kind() {
        let text = "a\r\nb\nc\rd";
        let index = LineIndex::new(text);
        assert_eq!(index.len(), 4);
        let lines: Vec<_> = (0..4).map(|i| &text[index.line(text, i)]).collect();
        assert_eq!(lines, ["a", "b", "c", "d"]);
        // U+2028 and U+0085 end no line.
        assert_eq!(LineIndex::new("a\u{2028}b\u{85}c").len(), 1);
    }

    #[test]
    fn characters_in_each_encoding() {
        let text = "é𝛼x\n§";
        let index = LineIndex::new(text);
        let x = text.find('x').unwrap();
        for (encoding, character) in [(Encoding::Utf8, 6), (Encoding::Utf16, 3), (Encoding::Utf32, 2)] {
            assert_eq!(index.position(text, x, encoding), Position { line: 0, character });
            assert_eq!(index.offset(text, Position { line: 0, character }, encoding), x);
            // Past the end of the line, and past the last line.
            assert_eq!(index.offset(text, Position { line: 0, character: 99 }, encoding), 7);
            assert_eq!(index.offset(text, Position { line: 9, character: 0 }, encoding), text.len());
        }
        // Inside the surrogate pair of 𝛼.
        assert_eq!(index.offset(text, Position { line: 0, character: 2 }, Encoding::Utf16), 2);
    }

    #[test]
    fn every_offset_returns() {
        let text = "title = \"Schüttler\"\r\n# 𝛼 ≤ β\r[drive]\n\n";
        let index = LineIndex::new(text);
        for (offset, _) in text.char_indices() {
            // The line feed of \r\n belongs to the end of its line.
            if text[..offset].ends_with('\r') && text[offset..].starts_with('\n') {
                continue;
            }
            for encoding in [Encoding::Utf8, Encoding::Utf16, Encoding::Utf32] {
                let position = index.position(text, offset, encoding);
                assert_eq!(index.offset(text, position, encoding), offset, "{encoding:?}");
            }
        }
    }
}
