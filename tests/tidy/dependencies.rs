//! Few dependencies, each with its reason; one copy of the window library.

use super::{none, root};
use std::fs;

fn read(file: &str) -> String {
    fs::read_to_string(root().join(file)).unwrap_or_else(|e| panic!("{file}: {e}"))
}

#[test]
fn every_dependency_has_its_sentence() {
    let manifest = read("Cargo.toml");
    let developers = read("DEVELOPERS.md");
    let list = manifest.split("[workspace.dependencies]").nth(1).expect("the list of dependencies");
    let list = list.split("\n[").next().unwrap_or_default();
    let mut offences = Vec::new();
    for line in list.lines().filter(|l| l.contains('=') && !l.starts_with('#') && !l.starts_with("assize")) {
        let name = line.split(['=', '.']).next().unwrap_or_default().trim();
        if !developers.contains(&format!("`{name}`")) {
            offences.push(name.to_owned());
        }
    }
    none(&offences, "a dependency without a reason in DEVELOPERS.md");
}

#[test]
fn one_window_library() {
    let lock = read("Cargo.lock");
    for name in ["egui", "eframe", "nalgebra", "sha2"] {
        assert_eq!(lock.matches(&format!("name = \"{name}\"\n")).count(), 1, "{name} stands in the lock once");
    }
}

#[test]
fn lints_stay_on() {
    let manifest = read("Cargo.toml");
    for lint in ["unsafe_code = \"forbid\"", "missing_docs", "unwrap_used", "todo", "dbg_macro"] {
        assert!(manifest.contains(lint), "{lint}");
    }
}
