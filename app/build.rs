//! Lists the practice projects beside the sources, so that they become part of the program.

use std::{env, fs, io, path::Path};

fn main() -> io::Result<()> {
    let folder = Path::new(&env::var("CARGO_MANIFEST_DIR").unwrap_or_default()).join("../demo-projects");
    println!("cargo::rerun-if-changed={}", folder.display());
    let mut files = Vec::new();
    // A checkout without practice projects builds as well; the list is then empty.
    if let Ok(entries) = fs::read_dir(&folder) {
        for entry in entries {
            let path = entry?.path().canonicalize()?;
            if path.extension().is_some_and(|ending| ending == "assize") {
                files.push(path);
            }
        }
    }
    files.sort();
    let lines: String = files
        .iter()
        .map(|path| {
            let name = path.file_name().unwrap_or_default();
            format!("    Demo {{ file: {name:?}, bytes: include_bytes!({path:?}) }},\n")
        })
        .collect();
    let text = format!("/// All of them, by file name.\npub const DEMOS: &[Demo] = &[\n{lines}];\n");
    fs::write(Path::new(&env::var("OUT_DIR").unwrap_or_default()).join("demos.rs"), text)
}
