//! House rules as tests, so that nobody has to remember them.

mod colours;
mod dependencies;
mod layers;
mod names;
mod sets;
mod sizes;

use std::{
    fs,
    path::{Path, PathBuf},
};

/// Root of the repository.
fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).parent().expect("the tests lie one folder below the root").to_owned()
}

/// All Rust files below the given folder of the repository, path and text, in order of path.
fn sources(folder: &str) -> Vec<(PathBuf, String)> {
    let mut found = Vec::new();
    walk(&root().join(folder), &mut found);
    assert!(!found.is_empty(), "no sources in {folder}");
    found.sort();
    found
}

fn walk(folder: &Path, found: &mut Vec<(PathBuf, String)>) {
    for entry in fs::read_dir(folder).unwrap_or_else(|e| panic!("{}: {e}", folder.display())) {
        let path = entry.expect("a readable entry").path();
        if path.is_dir() {
            if path.file_name().is_some_and(|n| n != "target") {
                walk(&path, found);
            }
        } else if path.extension().is_some_and(|e| e == "rs") {
            let text = fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
            found.push((path, text));
        }
    }
}

/// Path below the root, for messages.
fn short(path: &Path) -> String {
    path.strip_prefix(root()).unwrap_or(path).display().to_string()
}

/// Fails with every offence, one a line.
fn none(offences: &[String], rule: &str) {
    assert!(offences.is_empty(), "{rule}:\n{}", offences.join("\n"));
}
