//! amplitude-kind-unsaid
//!
//! An oscillating quantity that does not say whether it is peak, rms or peak-to-peak.
//!
//! Why it matters: The three meanings differ by up to a factor 2.8, which is the difference between a layer that holds and one that sprays.
//!
//! What to do: Say which: `peak`, `rms` or `peak-to-peak`, behind the unit.

#[cfg(test)]
mod tests {
    use crate::rules::testing::*;

    #[test]
    fn fires_with_one_fix_per_meaning() {
        let text = EXAMPLE.replace("\"14 g0 peak\"", "\"14 g0\"");
        let found = only(&text, "amplitude-kind-unsaid");
        assert_eq!(found.fixes.len(), 3, "{:?}", found.fixes);
        assert!(found.fixes.iter().all(|fix| !fix.keeps_meaning), "each chooses");
        mended(&text, "amplitude-kind-unsaid");
    }

    #[test]
    fn an_unsaid_amplitude_is_not_no_drive() {
        let read = crate::understand(&EXAMPLE.replace("\"14 g0 peak\"", "\"14 g0\""));
        assert!(read.setup.drive.is_none() && read.setup.drive_unreadable);
    }

    #[test]
    fn silent_with_each_word() {
        for word in ["peak", "rms", "peak-to-peak", "pk", "p-p"] {
            silent(&EXAMPLE.replace("\"14 g0 peak\"", &format!("\"14 g0 {word}\"")));
        }
    }
}
