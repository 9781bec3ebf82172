//! `topheavy why NAME`: the page of a rule.

use crate::arguments::Why;
use crate::{Outcome, output};

/// Runs the command.
pub fn run(options: &Why) -> Outcome {
    let rules = checks::all_rules();
    let Some(name) = &options.name else {
        let width = rules.iter().map(|rule| rule.id.len()).max().unwrap_or(0);
        let list: String = rules
            .iter()
            .map(|rule| {
                format!(
                    "{:width$}  {:11}  {}\n",
                    rule.id,
                    report::line::word(rule.severity),
                    rule.statement()
                )
            })
            .collect();
        return output::say(&list);
    };
    match checks::why(name) {
        Some(page) => output::say(&format!("{}\n", page.trim_end())),
        None => {
            let near = rules.iter().filter(|rule| rule.id.split('-').any(|word| name.contains(word)));
            let near: Vec<_> = near.map(|rule| rule.id).take(6).collect();
            let hint = if near.is_empty() {
                "`topheavy why` lists all".to_owned()
            } else {
                format!("near it: {}", near.join(", "))
            };
            output::refuse(&format!("no finding is named \"{name}\"; {hint}"))
        }
    }
}
