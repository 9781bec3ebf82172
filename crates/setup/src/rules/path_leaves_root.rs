//! path-leaves-root
//!
//! The path of a file leads out of the project.
//!
//! Why it matters: Nothing outside the root is read, so the file would be missing; and on another machine, or in review, the path would lead elsewhere.
//!
//! What to do: Put the file beside the setups and write its path from this file, with `/` between folders.
//!
//! Criterion: a path that starts at the top of a disk, at a drive letter, at a network share or at a home folder. How far `..` may climb depends on where the root is; that is judged when the files themselves are read, which this version does not do yet.

use crate::finding::{Finding, Span};

/// Keys whose values are paths of files.
pub(crate) const PATH_KEYS: &[&str] = &["use", "mesh"];

/// Whether a path can only lead out of the root.
pub(crate) fn leaves(path: &str) -> bool {
    let path = path.trim();
    let drive =
        path.as_bytes().get(..2).is_some_and(|start| start[0].is_ascii_alphabetic() && start[1] == b':');
    path.starts_with(['/', '\\', '~']) || drive
}

pub(crate) fn finding(place: &str, span: Span, path: &str) -> Finding {
    super::found("path-leaves-root", place, span, format!("'{path}' is not a path inside the project."), "")
}

#[cfg(test)]
mod tests {
    use super::leaves;
    use crate::rules::testing::*;

    fn with(path: &str) -> String {
        EXAMPLE.replace("format = 1\n", &format!("format = 1\nuse = [\"bench.lab.toml\", '{path}']\n"))
    }

    #[test]
    fn fires_on_paths_from_the_top() {
        for path in [
            "/shelf/bench.lab.toml",
            "C:/shelf/bench.lab.toml",
            "\\\\store\\bench.lab.toml",
            "~/bench.lab.toml",
        ] {
            let finding = first(&with(path), "path-leaves-root");
            assert_eq!(finding.place, "use", "{path}");
        }
        let body = format!("{EXAMPLE}\n[[body]]\nname = \"hull\"\nmesh = \"/hull.stl\"\n");
        assert_eq!(first(&body, "path-leaves-root").place, "body.hull.mesh");
    }

    #[test]
    fn is_silent_on_paths_from_here() {
        silent(&with("shelf/more.lab.toml"));
        assert!(!leaves("../shelf/more.lab.toml") && !leaves("c.lab.toml") && !leaves(""));
    }

    #[test]
    fn titles_are_no_paths() {
        silent(&EXAMPLE.replace("title = \"", "title = \"/"));
    }
}
