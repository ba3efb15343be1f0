//! The same word names the folder, the room and the heading; published figures carry their source.

use super::{none, root};
use assize::rooms::Room;
use std::fs;

#[test]
fn rooms_are_folders_and_headings() {
    let developers = fs::read_to_string(root().join("DEVELOPERS.md")).expect("DEVELOPERS.md");
    for room in Room::ALL {
        let name = room.name();
        let folder = root().join("app/src/rooms").join(name.to_lowercase());
        assert!(folder.join("mod.rs").is_file(), "{} has no folder", room.name());
        assert!(developers.contains(name), "DEVELOPERS.md does not speak of {name}");
    }
}

#[test]
fn published_figures_name_their_source() {
    let mut offences = Vec::new();
    for entry in fs::read_dir(root().join("tests/published")).expect("tests/published") {
        let path = entry.expect("a readable entry").path();
        if path.is_dir() && !path.join("SOURCE.md").is_file() {
            offences.push(path.display().to_string());
        }
    }
    none(&offences, "a folder of published figures without its source card SOURCE.md");
}

#[test]
fn the_top_level_holds_what_was_agreed() {
    const VISIBLE: [&str; 12] = [
        "Cargo.toml",
        "Cargo.lock",
        "README.md",
        "DEVELOPERS.md",
        "app",
        "core",
        "tests",
        "assets",
        "demo-projects",
        "rust-toolchain.toml",
        "clippy.toml",
        "rustfmt.toml",
    ];
    let mut offences = Vec::new();
    for entry in fs::read_dir(root()).expect("the root") {
        let name = entry.expect("a readable entry").file_name().to_string_lossy().into_owned();
        if !name.starts_with('.') && name != "target" && !VISIBLE.contains(&name.as_str()) {
            offences.push(name);
        }
    }
    none(&offences, "an entry at the top level that is not in the layout");
}
