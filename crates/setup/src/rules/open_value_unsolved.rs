//! open-value-unsolved
//!
//! An open value (`"?"`): the file asks for it, and this version does not search for it.
//!
//! Why it matters: Without it the setup is not complete, and what depends on it is not judged.
//!
//! What to do: Put a value in its place and check again. At most two values may be open in a file.

use crate::declare::Key;
use crate::finding::{Finding, Span};

/// Most open values in a file.
const MOST: usize = 2;

/// `count`: how many open values there are so far, this one counted.
pub(crate) fn finding(key: &Key, place: &str, span: Span, count: usize) -> Finding {
    let mut what = format!("`{}` is open, and this version does not search for it.", key.name);
    if count > MOST {
        what.push_str(&format!(" It is open value number {count}; at most {MOST} are allowed."));
    }
    super::found("open-value-unsolved", place, span, what, "")
}

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_and_nothing_is_called_missing() {
        for open in ["?", "? 5 mm to 20 mm"] {
            let text = EXAMPLE.replacen("thickness = \"20 mm\"", &format!("thickness = \"{open}\""), 1);
            only(&text, "open-value-unsolved");
            let setup = crate::understand(&text).setup;
            assert_eq!(setup.open_values.len(), 1);
            assert!(setup.is_unreadable("layer.oil.thickness"));
            assert_eq!(setup.open_values[0].bounds, (open.len() > 1).then_some((0.005, 0.02)));
        }
    }
}
