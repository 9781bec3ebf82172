//! Brackets, quotes and commas of a value that does not parse, as far as they can be followed.

/// What a scan over brackets and quotes finds.
#[derive(Debug, Default, PartialEq, Eq)]
pub(super) struct Scan {
    /// Brackets still open at the end.
    pub open: Vec<u8>,
    /// Where the first closing bracket without an opening one stands.
    pub stray: Option<usize>,
    /// A quote is still open at the end.
    pub in_quotes: bool,
    /// Places of the commas that stand in no bracket.
    pub commas: Vec<usize>,
    /// Place of the first `=` or `:` that stands in no bracket.
    pub equals: Option<usize>,
    pub colon: Option<usize>,
    /// A comment mark outside quotes.
    pub comment: bool,
}

/// Follows brackets and quotes over a text.
pub(super) fn scan(text: &str) -> Scan {
    let mut scan = Scan::default();
    let mut quote = None;
    let mut escaped = false;
    for (at, byte) in text.bytes().enumerate() {
        if let Some(open) = quote {
            match byte {
                _ if escaped => escaped = false,
                b'\\' if open == b'"' => escaped = true,
                _ if byte == open => quote = None,
                _ => {}
            }
            continue;
        }
        match byte {
            b'"' | b'\'' => quote = Some(byte),
            b'[' | b'{' => scan.open.push(byte),
            b']' | b'}' => {
                let opening = if byte == b']' { b'[' } else { b'{' };
                if scan.open.last() == Some(&opening) {
                    scan.open.pop();
                } else if scan.stray.is_none() {
                    scan.stray = Some(at);
                }
            }
            b',' if scan.open.is_empty() => scan.commas.push(at),
            b'=' if scan.open.is_empty() && scan.equals.is_none() => scan.equals = Some(at),
            b':' if scan.open.is_empty() && scan.colon.is_none() => scan.colon = Some(at),
            b'#' => scan.comment = true,
            _ => {}
        }
    }
    scan.in_quotes = quote.is_some();
    scan
}

/// The parts of a text between the commas that stand in no bracket.
pub(super) fn split(text: &str) -> Vec<&str> {
    let mut start = 0;
    let mut parts = Vec::new();
    for comma in scan(text).commas {
        parts.push(&text[start..comma]);
        start = comma + 1;
    }
    parts.push(&text[start..]);
    parts
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn commas_in_brackets_and_quotes_part_nothing() {
        assert_eq!(split("1, [2, 3], \"4, 5\", '6,', {a = 7, b = 8}").len(), 5);
        assert_eq!(scan("[1, {").open, b"[{");
        assert_eq!(scan("1]").stray, Some(1));
        assert!(scan("\"a\\\"").in_quotes);
    }
}
