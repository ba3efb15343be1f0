//! The command line as scripts and auditors call it: the program itself, started.

mod bad_input;
mod families;
mod looks;
mod main_job;
mod numbers;
mod published;

use serde_json::Value;
use std::{
    path::{Path, PathBuf},
    process::{Command, Output},
};
use tempfile::TempDir;

/// A folder of its own with the program at hand.
struct Bench {
    folder: TempDir,
}

impl Bench {
    fn new() -> Self {
        Self { folder: TempDir::new().expect("a temporary folder") }
    }

    fn path(&self, name: &str) -> PathBuf {
        self.folder.path().join(name)
    }

    /// Writes a file and returns its path as text.
    fn file(&self, name: &str, bytes: impl AsRef<[u8]>) -> String {
        let path = self.path(name);
        std::fs::write(&path, bytes).expect("a writable folder");
        path.display().to_string()
    }

    fn run(&self, args: &[&str]) -> Output {
        Command::new(env!("CARGO_BIN_EXE_assize-under-test"))
            .args(args)
            .current_dir(self.folder.path())
            .env("HOME", self.folder.path())
            .env_remove("DISPLAY")
            .env_remove("WAYLAND_DISPLAY")
            .output()
            .expect("the program starts")
    }

    /// Runs a verb that must end with 0 and print JSON.
    fn json(&self, args: &[&str]) -> Value {
        let out = self.run(args);
        assert_eq!(out.status.code(), Some(0), "{args:?}: {}", err(&out));
        serde_json::from_slice(&out.stdout).expect("one JSON document")
    }

    /// Runs a verb that must end with the status; what it said on stderr.
    fn fails(&self, status: i32, args: &[&str]) -> String {
        let out = self.run(args);
        let said = err(&out);
        assert_eq!(out.status.code(), Some(status), "{args:?}: {said}");
        assert!(!said.contains("panicked"), "{said}");
        said
    }
}

fn err(out: &Output) -> String {
    String::from_utf8_lossy(&out.stderr).into_owned()
}

/// A file of the repository.
fn shipped(name: &str) -> String {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("..").join(name).display().to_string()
}
