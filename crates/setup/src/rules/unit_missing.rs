//! unit-missing
//!
//! A quantity without its unit.
//!
//! Why it matters: A number without its unit may be millimetres or metres, and nothing is guessed.
//!
//! What to do: Write the unit behind the number, inside the quotes.

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_without_a_unit_and_each_fix_clears_it() {
        let text = EXAMPLE.replacen("thickness = \"20 mm\"", "thickness = \"20\"", 1);
        let found = only(&text, "unit-missing");
        assert_eq!(found.place, "layer.oil.thickness");
        assert!(found.fixes.iter().all(|fix| !fix.keeps_meaning), "a unit is a choice");
        mended_if_fixable(&text, "unit-missing");
    }

    #[test]
    fn silent_on_a_ratio() {
        silent(&EXAMPLE.replace("hold-margin = \"15 %\"", "hold-margin = \"0.15\""));
    }
}
