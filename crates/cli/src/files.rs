//! The one door to the disk: which files are meant, and their text.

use std::io::Read;
use std::path::{Path, PathBuf};

/// Largest setup file that is read, bytes.
const LARGEST: u64 = setup::LARGEST_FILE as u64;
const SETUP: &str = ".stack.toml";

/// A file that was asked for.
#[derive(Debug)]
pub struct Asked {
    /// As given, `/` as separator; `-` for standard input.
    pub name: String,
    /// Its text, or why it could not be read.
    pub text: Result<String, String>,
}

/// Reads one file, or standard input for `-`.
pub fn read(name: &str) -> Asked {
    let text = if name == "-" { read_stdin() } else { read_file(Path::new(name)) };
    Asked { name: name.replace('\\', "/"), text }
}

fn read_stdin() -> Result<String, String> {
    let mut bytes = Vec::new();
    std::io::stdin()
        .lock()
        .take(LARGEST + 1)
        .read_to_end(&mut bytes)
        .map_err(|error| format!("standard input: {error}"))?;
    decode(bytes)
}

fn read_file(path: &Path) -> Result<String, String> {
    let meta = std::fs::metadata(path).map_err(|error| error.to_string())?;
    if !meta.is_file() {
        return Err("is not a regular file".to_owned());
    }
    if meta.len() > LARGEST {
        return Err(too_large(meta.len()));
    }
    let file = std::fs::File::open(path).map_err(|error| error.to_string())?;
    let mut bytes = Vec::new();
    file.take(LARGEST + 1).read_to_end(&mut bytes).map_err(|error| error.to_string())?;
    decode(bytes)
}

fn decode(bytes: Vec<u8>) -> Result<String, String> {
    if bytes.len() as u64 > LARGEST {
        return Err(too_large(bytes.len() as u64));
    }
    String::from_utf8(bytes).map_err(|error| {
        format!("is not UTF-8: byte {} cannot be read", error.utf8_error().valid_up_to() + 1)
    })
}

fn too_large(bytes: u64) -> String {
    format!("is larger than {} bytes ({bytes} or more), the most that a setup may have", LARGEST)
}

/// The files that the paths mean: a file is itself, a folder every setup below it in order of name, ignore files
/// honoured. Without paths: the root of the project around the current folder.
///
/// # Errors
/// A path that is neither, or a folder that cannot be walked, as a sentence.
pub fn meant(paths: &[String]) -> Result<Vec<String>, String> {
    let root;
    let paths = if paths.is_empty() {
        root = [shown(&project_root())];
        &root[..]
    } else {
        paths
    };
    let mut files = Vec::new();
    for path in paths {
        if path == "-" || !Path::new(path).is_dir() {
            files.push(path.clone());
        } else {
            files.extend(below(Path::new(path))?);
        }
    }
    // The same file named twice, in whatever spelling, is judged once.
    let mut seen = std::collections::HashSet::new();
    files.retain(|file| seen.insert(Path::new(file).canonicalize().unwrap_or_else(|_| PathBuf::from(file))));
    Ok(files)
}

fn below(folder: &Path) -> Result<Vec<String>, String> {
    let mut found = Vec::new();
    let walk = ignore::WalkBuilder::new(folder).sort_by_file_path(|a, b| a.cmp(b)).require_git(false).build();
    for entry in walk {
        let entry = entry.map_err(|error| error.to_string())?;
        let is_setup = entry.file_name().to_str().is_some_and(|name| name.ends_with(SETUP));
        if is_setup && entry.file_type().is_some_and(|kind| kind.is_file()) {
            found.push(shown(entry.path()));
        }
    }
    Ok(found)
}

/// The nearest folder at or above the current one with `topheavy.toml` or `.git`, else the current one.
fn project_root() -> PathBuf {
    let here = std::env::current_dir().unwrap_or_else(|_| PathBuf::from("."));
    let root =
        here.ancestors().find(|folder| folder.join("topheavy.toml").exists() || folder.join(".git").exists());
    match root {
        Some(root) if root != here => root.to_path_buf(),
        _ => PathBuf::from("."),
    }
}

fn shown(path: &Path) -> String {
    let text = path.to_string_lossy().replace('\\', "/");
    text.strip_prefix("./").map_or(text.clone(), str::to_owned)
}
