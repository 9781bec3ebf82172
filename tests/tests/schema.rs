//! The JSON Schema of the setup file against a library that knows draft 07 (Python `jsonschema`).

#![allow(clippy::unwrap_used)] // also in the helpers of these tests

use serde_json::Value;
use std::path::{Path, PathBuf};
use topheavy_tests::references;

/// What the library says of the schema and of some texts, in the order of the texts; `None` without the library.
fn judged(name: &str, texts: &[String]) -> Option<(Value, Vec<Vec<String>>)> {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    std::fs::create_dir_all(&folder).unwrap();
    let schema = folder.join("schema.json");
    std::fs::write(&schema, setup::schema().to_string()).unwrap();
    let files: Vec<PathBuf> = (0..texts.len()).map(|i| folder.join(format!("{i}.toml"))).collect();
    files.iter().zip(texts).for_each(|(file, text)| std::fs::write(file, text).unwrap());
    let arguments: Vec<&str> =
        std::iter::once(&schema).chain(&files).map(|path| path.to_str().unwrap()).collect();
    let answer = references::run("schema.py", &arguments)?;
    let problems = files.iter().map(|file| answer["files"][file.to_str().unwrap()].as_array().unwrap());
    Some((
        answer["schema"].clone(),
        problems.map(|list| list.iter().map(Value::to_string).collect()).collect(),
    ))
}

fn samples() -> Vec<String> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../samples");
    let files = std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path());
    let is_setup = |path: &PathBuf| {
        let name = path.file_name().unwrap().to_str().unwrap();
        name.ends_with(".stack.toml") && name != "slips.stack.toml"
    };
    files.filter(is_setup).map(|path| std::fs::read_to_string(path).unwrap()).collect()
}

#[test]
fn the_samples_satisfy_it() {
    let samples = samples();
    assert!(samples.len() > 10);
    let Some((schema, problems)) = judged("schema-samples", &samples) else { return };
    assert_eq!(schema, Value::Null, "the schema itself is valid");
    assert!(problems.iter().all(Vec::is_empty), "{problems:#?}");
}

#[test]
fn slips_do_not() {
    let good = samples().into_iter().find(|text| text.contains("One slab of oil on one cushion")).unwrap();
    let slips = [
        good.replacen("thickness", "depth", 1),
        good.replacen("thickness = \"15 mm\"", "thickness = 15", 1),
        good.replacen("\"rectangular\"", "\"hexagonal\"", 1),
        good.replacen("[ambient]", "[ambience]", 1),
        good.replacen("format = 1", "format = 2", 1),
    ];
    assert!(slips.iter().all(|slip| *slip != good));
    let Some((_, problems)) = judged("schema-slips", &slips) else { return };
    assert!(problems.iter().all(|list| !list.is_empty()), "{problems:#?}");
}
