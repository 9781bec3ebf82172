//! pressure-reference-unsaid
//!
//! A pressure that does not say whether it is absolute or gauge.
//!
//! Why it matters: The two differ by one atmosphere, and the stiffness of a cushion is proportional to its absolute pressure.
//!
//! What to do: Say which: `abs` or `gauge`, behind the unit.

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    fn with_pressure(pressure: &str) -> String {
        EXAMPLE.replace("fluid = \"air\"\n", &format!("fluid = \"air\"\npressure = \"{pressure}\"\n"))
    }

    #[test]
    fn fires_with_one_fix_per_meaning() {
        let text = with_pressure("1200 mbar");
        let found = only(&text, "pressure-reference-unsaid");
        assert_eq!(found.fixes.len(), 2, "{:?}", found.fixes);
        mended(&text, "pressure-reference-unsaid");
    }

    #[test]
    fn silent_when_said_and_for_the_ambient_pressure() {
        silent(&with_pressure("1200 mbar abs"));
        silent(&with_pressure("200 mbar gauge"));
        silent(EXAMPLE);
    }
}
