//! file-not-readable
//!
//! A file that cannot be read as text: missing, not permitted, too large, or not UTF-8.
//!
//! Why it matters: Nothing in it could be judged.
//!
//! What to do: Check the path and the permissions; save the file as UTF-8; a setup file has at most 1 MB.

use crate::finding::Finding;

/// The largest file that is read, bytes.
pub const LARGEST_FILE: usize = 1_000_000;

/// Why a file could not be read.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Cause {
    /// The system says why.
    System(String),
    /// More than [`LARGEST_FILE`].
    TooLarge {
        /// Bytes.
        size: u64,
    },
    /// Not UTF-8; offset of the first byte that is none.
    NotUtf8 {
        /// Bytes before it.
        valid_up_to: usize,
    },
}

/// The finding for a file as a whole.
pub fn file_not_readable(cause: &Cause) -> Finding {
    let (what, remedy) = match cause {
        Cause::System(reason) => (
            format!("The file cannot be read: {}", super::sentence(reason)),
            "Check the path and the permissions.",
        ),
        Cause::TooLarge { size } => (
            format!("The file has {size} bytes; at most {LARGEST_FILE} are read."),
            "A setup is a page or two: take out what is no setup.",
        ),
        Cause::NotUtf8 { valid_up_to } => (
            format!("The file is not UTF-8: byte {valid_up_to} is part of no character."),
            "Save it as UTF-8 in the editor.",
        ),
    };
    super::found("file-not-readable", "", 0..0, what, remedy)
}

/// The text of a file from its bytes, or why it has none. A byte order mark is left in: it has a place in the text.
pub fn text_of(bytes: &[u8]) -> Result<&str, Cause> {
    if bytes.len() > LARGEST_FILE {
        return Err(Cause::TooLarge { size: bytes.len() as u64 });
    }
    std::str::from_utf8(bytes).map_err(|error| Cause::NotUtf8 { valid_up_to: error.valid_up_to() })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_largest_file_is_a_megabyte() {
        assert!(text_of(&vec![b'#'; LARGEST_FILE]).is_ok());
        assert_eq!(text_of(&vec![b'#'; LARGEST_FILE + 1]), Err(Cause::TooLarge { size: 1_000_001 }));
    }

    #[test]
    fn bad_bytes_are_told_by_their_offset() {
        let cause = text_of(b"a = \xff").unwrap_err();
        assert_eq!(cause, Cause::NotUtf8 { valid_up_to: 4 });
        assert!(file_not_readable(&cause).message.what.contains("byte 4"));
    }
}
