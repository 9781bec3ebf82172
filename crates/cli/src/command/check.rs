//! `topheavy check`: setup files in, findings out.

use crate::arguments::{Check, Format, Positions, Refuse};
use crate::{Outcome, files, output};
use checks::{Analysis, Engine, Verdict};
use rayon::prelude::*;
use report::Checked;
use setup::finding::Severity;
use setup::lines::Encoding;

/// One file with all that came of it.
struct Done {
    name: String,
    text: String,
    analysis: Analysis,
}

/// Runs the command.
pub fn run(options: &Check) -> Outcome {
    let files = match files::meant(&options.paths) {
        Ok(files) => files,
        Err(reason) => return output::refuse(&reason),
    };
    if files.is_empty() {
        return output::refuse("no file named *.stack.toml was found; name a file or a folder that has one");
    }
    let engine = Engine::new();
    let done: Vec<Done> = files.par_iter().map(|file| check(file, options, &engine)).collect();
    let printed = print(&done, options);
    if printed != Outcome::Clean {
        return printed;
    }
    match done.iter().any(|done| is_refused(&done.analysis, options)) {
        true => Outcome::Found,
        false => Outcome::Clean,
    }
}

fn check(file: &str, options: &Check, engine: &Engine) -> Done {
    let asked = files::read(file);
    let name = if file == "-" { options.name.clone() } else { asked.name };
    match asked.text {
        Ok(text) => {
            let mut analysis = checks::analyse(&text, engine, &|| false);
            if options.with_fixes {
                for i in 0..analysis.findings.len() {
                    if analysis.findings[i].fixable {
                        let fixes = checks::changes(&text, &analysis, engine, i, &|| false);
                        checks::offer(&mut analysis.findings[i], fixes);
                    }
                }
            }
            // JSON names standard input `-`, as given.
            let name = if file == "-" && options.format == Format::Json { file.to_owned() } else { name };
            Done { name, text, analysis }
        }
        Err(reason) => Done { name, text: String::new(), analysis: Analysis::unreadable(&reason) },
    }
}

fn print(done: &[Done], options: &Check) -> Outcome {
    let checked: Vec<Checked> = done
        .iter()
        .map(|done| Checked { path: &done.name, text: &done.text, analysis: &done.analysis })
        .collect();
    match options.format {
        Format::Json => {
            let encoding = match options.positions {
                Positions::Utf8 => Encoding::Utf8,
                Positions::Utf16 => Encoding::Utf16,
                Positions::Utf32 => Encoding::Utf32,
            };
            super::print_json(&report::check_json::document(&checked, encoding))
        }
        Format::Text => {
            let style = output::terminal();
            let mut text = String::new();
            for checked in &checked {
                match style {
                    Some(style) => text += &report::terminal::findings(checked, style),
                    None => text += &report::line::findings(checked),
                }
                text += &report::terminal::summary(checked);
            }
            output::say(&text)
        }
    }
}

fn is_refused(analysis: &Analysis, options: &Check) -> bool {
    let least = match options.refuse {
        Refuse::Error => Severity::Error,
        Refuse::Warning => Severity::Warning,
        Refuse::Information => Severity::Information,
    };
    let found = analysis.findings.iter().any(|finding| finding.severity >= least && !finding.accepted);
    found
        || analysis.verdict == Verdict::Unreadable
        || (analysis.verdict == Verdict::Incomplete && !options.allow_incomplete)
}
