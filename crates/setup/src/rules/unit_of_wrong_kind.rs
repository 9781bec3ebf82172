//! unit-of-wrong-kind
//!
//! A unit of another kind of quantity than the key holds.
//!
//! Why it matters: Either the unit is a slip or the value belongs to another key; both make another experiment.
//!
//! What to do: Write a unit of the right kind, or move the value to the key that it belongs to.

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_on_a_volume_as_thickness() {
        let text = EXAMPLE.replacen("thickness = \"20 mm\"", "thickness = \"20 mL\"", 1);
        assert_eq!(only(&text, "unit-of-wrong-kind").place, "layer.oil.thickness");
    }

    #[test]
    fn fires_on_a_dynamic_viscosity_as_grade() {
        let text = EXAMPLE.replace("grade = \"1000 mm²/s\"", "grade = \"1000 mPa s\"");
        only(&text, "unit-of-wrong-kind");
    }

    #[test]
    fn a_viscosity_may_be_either() {
        for viscosity in ["1000 mm²/s", "1 Pa s"] {
            silent(&EXAMPLE.replace(
                "grade = \"1000 mm²/s\"",
                &format!("grade = \"1000 mm²/s\"\nviscosity = \"{viscosity}\""),
            ));
        }
    }
}
