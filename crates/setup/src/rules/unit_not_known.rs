//! unit-not-known
//!
//! A unit that is not known here.
//!
//! Why it matters: The number cannot be read, so nothing that depends on it is judged.
//!
//! What to do: Write an SI unit with its prefix, or one that the trade writes (°C, L, mL, bar, cSt, cP, g0).

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_and_points_at_the_unit() {
        let text = EXAMPLE.replacen("thickness = \"20 mm\"", "thickness = \"20 mn\"", 1);
        let found = only(&text, "unit-not-known");
        assert!(text[found.span.clone()].contains("mn"), "{:?}", &text[found.span.clone()]);
        mended_if_fixable(&text, "unit-not-known");
    }

    #[test]
    fn a_frequency_is_not_in_rpm() {
        let text = EXAMPLE.replace("\"50 Hz\"", "\"3000 rpm\"");
        only(&text, "unit-not-known");
    }
}
