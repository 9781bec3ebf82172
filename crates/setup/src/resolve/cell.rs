//! `[cell]`.

use super::Resolver;
use crate::resolved::{Cell, Plan};
use crate::rules;
use crate::written::WrittenSection;

impl Resolver<'_> {
    pub(super) fn cell(&mut self) {
        let document = self.document;
        let Some(section) = document.section("cell") else {
            self.missing(
                "cell",
                0..0,
                "The setup has no `[cell]`.",
                "Write `[cell]` with `length` and `width`, or `diameter`.",
            );
            return;
        };
        if section.entry("like").is_some() {
            // Its keys are in a library, which is said to be not looked at.
            for key in ["length", "width", "diameter", "shape"] {
                if section.entry(key).is_none() {
                    self.lose(&section.place_of(key));
                }
            }
        }
        let height = self.written(section, "height");
        let by_layers = height.is_none() && !self.lost("cell.height");
        if let Some(key) = section.declaration.key("height").filter(|_| by_layers) {
            self.list_default("cell.height", key);
        }
        let sealed_top = self.flag(section, "top", "sealed");
        let open_bottom = self.flag(section, "bottom", "open");
        let pinned_line = self.flag(section, "contact-line", "pinned");
        let tilt = self.or_default(Some(section), "cell", "cell", "tilt");
        if let Some(plan) = self.plan(section) {
            self.setup.cell = Some(Cell { plan, height, sealed_top, open_bottom, pinned_line, tilt });
        }
    }

    fn plan(&mut self, section: &WrittenSection) -> Option<Plan> {
        let has = |key: &str| section.entry(key).is_some() || self.document.is_lost(&section.place_of(key));
        let straight = ["length", "width"].into_iter().find(|key| section.entry(key).is_some());
        let circular = match section.text("shape") {
            Some(shape) => shape == "circular",
            None if self.lost("cell.shape") && !has("diameter") && straight.is_none() => return None,
            None => match (has("diameter"), has("length") || has("width")) {
                (true, true) if section.entry("diameter").is_some() && straight.is_some() => {
                    let what =
                        "The cell has a `diameter` and a `length` or `width`: its plan is open.".to_owned();
                    self.disagree(section, "diameter", what, straight);
                    return None;
                }
                (true, false) => true,
                (false, true) => false,
                (true, true) => straight.is_none(),
                (false, false) => {
                    self.missing(
                        "cell.shape",
                        section.header.clone(),
                        "The cell has no inner sizes.",
                        "Write `length` and `width`, or `diameter`.",
                    );
                    return None;
                }
            },
        };
        if circular {
            if let Some(key) = straight {
                let what = format!("A circular cell has a `diameter` and no `{key}`.");
                self.disagree(section, key, what, Some("shape"));
                return None;
            }
            let diameter = self.written(section, "diameter");
            if diameter.is_none() {
                self.missing_key(section, "diameter");
            }
            return Some(Plan::Circular { diameter: diameter? });
        }
        if section.entry("diameter").is_some() {
            let what = "A rectangular cell has a `length` and a `width` and no `diameter`.".to_owned();
            self.disagree(section, "diameter", what, Some("shape"));
            return None;
        }
        let (length, width) = (self.written(section, "length"), self.written(section, "width"));
        for (key, value) in [("length", &length), ("width", &width)] {
            if value.is_none() {
                self.missing_key(section, key);
            }
        }
        Some(Plan::Rectangular { length: length?, width: width? })
    }

    /// Two keys of the cell contradict each other: its plan is not known.
    fn disagree(&mut self, section: &WrittenSection, key: &str, what: String, other: Option<&str>) {
        let place = section.place_of(key);
        let other = other.map(|key| section.span_of(key));
        self.findings.push(rules::values_disagree::finding(&place, section.span_of(key), what, other));
        self.lose(&place);
    }
}

#[cfg(test)]
mod tests {
    use crate::resolved::Plan;

    fn cell(lines: &str) -> (Option<Plan>, Vec<(String, &'static str)>) {
        let text = format!("[cell]\n{lines}\n[[layer]]\nfluid = \"water\"\nthickness = \"20 mm\"\n");
        let read = crate::understand(&text);
        let findings = read.findings.into_iter().map(|found| (found.place, found.rule)).collect();
        (read.setup.cell.map(|cell| cell.plan), findings)
    }

    #[test]
    fn the_plan_is_told_from_the_sizes() {
        assert!(
            matches!(cell("diameter = \"80 mm\""), (Some(Plan::Circular { diameter }), found) if diameter.value == 0.08 && found.is_empty())
        );
        assert!(
            matches!(cell("length = \"80 mm\"\nwidth = \"30 mm\""), (Some(Plan::Rectangular { .. }), found) if found.is_empty())
        );
    }

    #[test]
    fn each_lack_is_said_once() {
        assert_eq!(cell("").1, [("cell.shape".to_owned(), "value-missing")]);
        assert_eq!(cell("shape = \"circular\"").1, [("cell.diameter".to_owned(), "value-missing")]);
        assert_eq!(cell("length = \"80 mm\"").1, [("cell.width".to_owned(), "value-missing")]);
        assert_eq!(
            cell("diameter = \"80 mm\"\nlength = \"80 mm\"").1,
            [("cell.diameter".to_owned(), "values-disagree")]
        );
        assert_eq!(cell("diameter = \"80\"").1, [("cell.diameter".to_owned(), "unit-missing")]);
    }
}
